// Who touches whom on a triangle surface: twins of half-edges, triangles round a vertex, boundary loops.
// Takes an edge-manifold, consistently wound surface; repairs belong to the form station.
import { PlanError } from "../problem.ts";
import type { Surface } from "./surface.ts";

/**
 * Half-edge h = 3·t + k runs from corner k to corner k+1 of triangle t.
 * @shape twin 3*nT: the opposite half-edge, -1 on the boundary; fanStart nV+1, fan 3*nT: half-edges that leave vertex v at
 *   fan[fanStart[v] … fanStart[v+1])
 */
export interface Adjacency {
  nV: number;
  nT: number;
  twin: Int32Array<ArrayBuffer>;
  fanStart: Uint32Array<ArrayBuffer>;
  fan: Uint32Array<ArrayBuffer>;
}

/** The half-edge after h in its triangle. */
export function nextHalfedge(h: number): number {
  return h % 3 === 2 ? h - 2 : h + 1;
}

/** The half-edge before h in its triangle. */
export function previousHalfedge(h: number): number {
  return h % 3 === 0 ? h + 2 : h - 1;
}

/**
 * Adjacency of a surface in O(nT).
 * @throws PlanError surface-edge: the same directed side occurs twice (an edge of three triangles, or two wound differently)
 */
export function buildAdjacency(surface: Surface): Adjacency {
  const { tri } = surface;
  const nV = surface.xyz.length / 3;
  const nT = tri.length / 3;
  const fanStart = new Uint32Array(nV + 1);
  for (let h = 0; h < 3 * nT; h++) fanStart[tri[h] + 1]++;
  for (let v = 0; v < nV; v++) fanStart[v + 1] += fanStart[v];
  const fill = fanStart.slice(0, nV);
  const fan = new Uint32Array(3 * nT);
  for (let h = 0; h < 3 * nT; h++) fan[fill[tri[h]]++] = h;
  const twin = new Int32Array(3 * nT).fill(-1);
  const tip = new Uint32Array(3 * nT);
  for (let i = 0; i < 3 * nT; i++) tip[i] = tri[nextHalfedge(fan[i])];
  for (let a = 0; a < nV; a++) {
    for (let i = fanStart[a]; i < fanStart[a + 1]; i++) {
      const b = tip[i];
      for (let j = i + 1; j < fanStart[a + 1]; j++) {
        if (tip[j] !== b) continue;
        throw new PlanError(
          "surface-edge",
          `side ${a}–${b} occurs twice in the same direction: more than two triangles meet there, or two are wound differently; run the mesh checks of the form station first`,
          `vertex ${a}`,
          { a, b },
        );
      }
      if (b < a) continue;
      for (let j = fanStart[b]; j < fanStart[b + 1]; j++) {
        if (tip[j] !== a) continue;
        twin[fan[i]] = fan[j];
        twin[fan[j]] = fan[i];
      }
    }
  }
  return { nV, nT, twin, fanStart, fan };
}

/**
 * Boundary loops, each a list of vertices in the direction of the surface's own half-edges (the surface lies to the left
 * seen on its outer face), first vertex not repeated; in order of their smallest starting half-edge.
 * @throws PlanError surface-vertex: a vertex where two boundary runs touch
 */
export function findBoundaryLoops(surface: Surface, adjacency: Adjacency): number[][] {
  const { tri } = surface;
  const { twin, nT, nV } = adjacency;
  const out = new Int32Array(nV).fill(-1);
  for (let h = 0; h < 3 * nT; h++) {
    if (twin[h] >= 0) continue;
    const v = tri[h];
    if (out[v] >= 0)
      throw new PlanError(
        "surface-vertex",
        `two boundary runs touch at vertex ${v}: part the pieces there or join them along an edge`,
        `vertex ${v}`,
        { vertex: v },
      );
    out[v] = h;
  }
  const seen = new Uint8Array(3 * nT);
  const loops: number[][] = [];
  for (let h = 0; h < 3 * nT; h++) {
    if (twin[h] >= 0 || seen[h]) continue;
    const loop: number[] = [];
    let g = h;
    while (!seen[g]) {
      seen[g] = 1;
      loop.push(tri[g]);
      g = out[tri[nextHalfedge(g)]];
    }
    loops.push(loop);
  }
  return loops;
}
