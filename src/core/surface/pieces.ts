// Pieces of a surface between cut edges: which triangles hang together, their outline, and a piece as a mesh of its own.
import { PlanError } from "../problem.ts";
import { type Adjacency, buildAdjacency, nextHalfedge, previousHalfedge } from "./adjacency.ts";
import type { Surface } from "./surface.ts";

/** Two vertices joined by a mesh edge that is cut; both directions are meant. */
export type CutEdge = readonly [number, number];

/** Marks half-edges on cut edges. @shape 3*nT @throws PlanError cut-edge */
export function markCuts(
  surface: Surface,
  adjacency: Adjacency,
  cutEdges: readonly CutEdge[],
): Uint8Array<ArrayBuffer> {
  const { fan, fanStart } = adjacency;
  const cut = new Uint8Array(surface.tri.length);
  for (const [a, b] of cutEdges) {
    let found = false;
    for (const [v, w] of [
      [a, b],
      [b, a],
    ])
      for (let i = fanStart[v]; i < fanStart[v + 1]; i++) {
        if (surface.tri[nextHalfedge(fan[i])] !== w) continue;
        cut[fan[i]] = 1;
        found = true;
      }
    if (!found)
      throw new PlanError(
        "cut-edge",
        `vertices ${a} and ${b} of a cut are not joined by a triangle side: cut the surface along the path first`,
        [`vertex ${a}`, `vertex ${b}`],
        { a, b },
      );
  }
  return cut;
}

/**
 * Piece of each triangle: triangles that hang together over sides that are not cut; pieces numbered by their first triangle.
 * @shape nT
 * @throws PlanError cut-edge: a cut that is no mesh edge
 */
export function partSurface(
  surface: Surface,
  cutEdges: readonly CutEdge[],
  adjacency: Adjacency = buildAdjacency(surface),
): Int32Array<ArrayBuffer> {
  const { nT, twin } = adjacency;
  const cut = markCuts(surface, adjacency, cutEdges);
  const piece = new Int32Array(nT).fill(-1);
  let count = 0;
  const stack: number[] = [];
  for (let t = 0; t < nT; t++) {
    if (piece[t] >= 0) continue;
    piece[t] = count;
    stack.push(t);
    for (let s = stack.pop(); s !== undefined; s = stack.pop())
      for (let h = 3 * s; h < 3 * s + 3; h++) {
        if (twin[h] < 0 || cut[h]) continue;
        const o = Math.floor(twin[h] / 3);
        if (piece[o] >= 0) continue;
        piece[o] = count;
        stack.push(o);
      }
    count++;
  }
  return piece;
}

/** Half-edges of a piece that no triangle of the piece continues (boundary, other piece, cut). */
function markBorder(surface: Surface, adjacency: Adjacency, triangles: readonly number[], cut: Uint8Array): Uint8Array {
  const inside = new Uint8Array(adjacency.nT);
  for (const t of triangles) inside[t] = 1;
  const border = new Uint8Array(surface.tri.length);
  for (const t of triangles)
    for (let h = 3 * t; h < 3 * t + 3; h++) {
      const o = adjacency.twin[h];
      if (o < 0 || cut[h] || !inside[Math.floor(o / 3)]) border[h] = 1;
    }
  return border;
}

/** The border half-edge that follows border half-edge h, turning inside the piece. */
function followBorder(adjacency: Adjacency, border: Uint8Array, h: number): number {
  let g = nextHalfedge(h);
  while (!border[g]) g = nextHalfedge(adjacency.twin[g]);
  return g;
}

/**
 * Outline of a set of triangles: loops of half-edges, counter-clockwise seen on the outer face (the piece to the left), each from
 * its smallest half-edge, loops in that order. Where the piece touches itself the loop turns so that it stays in the piece.
 * Cuts are edges, or marks of half-edges (markCuts) where many pieces are traced.
 * @throws PlanError cut-edge
 */
export function traceOutlineSides(
  surface: Surface,
  triangles: readonly number[],
  cutEdges: readonly CutEdge[] | Uint8Array = [],
  adjacency: Adjacency = buildAdjacency(surface),
): number[][] {
  const cut = cutEdges instanceof Uint8Array ? cutEdges : markCuts(surface, adjacency, cutEdges);
  const border = markBorder(surface, adjacency, triangles, cut);
  const seen = new Uint8Array(border.length);
  const loops: number[][] = [];
  for (const t of [...triangles].sort((a, b) => a - b))
    for (let h = 3 * t; h < 3 * t + 3; h++) {
      if (!border[h] || seen[h]) continue;
      const loop: number[] = [];
      for (let g = h; !seen[g]; g = followBorder(adjacency, border, g)) {
        seen[g] = 1;
        loop.push(g);
      }
      loops.push(loop);
    }
  return loops;
}

/**
 * Outline of a set of triangles as vertices of the surface, first not repeated: see traceOutlineSides. A cut inside the piece is
 * run along on both sides.
 * @throws PlanError cut-edge
 */
export function tracePieceOutline(
  surface: Surface,
  triangles: readonly number[],
  cutEdges: readonly CutEdge[] = [],
  adjacency: Adjacency = buildAdjacency(surface),
): number[][] {
  return traceOutlineSides(surface, triangles, cutEdges, adjacency).map((loop) => loop.map((h) => surface.tri[h]));
}

/** A piece as a mesh of its own. */
export interface PieceMesh {
  /** Surface vertex of each local vertex; a vertex on a cut inside the piece, or where it touches itself, stands once for each side. */
  surfaceVertex: Uint32Array<ArrayBuffer>;
  /** @shape 3*n */
  xyz: Float64Array<ArrayBuffer>;
  /** Local, in the order of the triangles given. @shape 3*nT */
  tri: Uint32Array<ArrayBuffer>;
  /** Outline loops in local vertices, as traceOutlineSides. */
  outline: number[][];
}

/**
 * Takes a piece out of the surface and opens it along cut edges and where it touches itself, so that every outline is simple.
 * Local vertices in order of surface vertex, then of half-edge.
 * @throws PlanError cut-edge
 */
export function extractPiece(
  surface: Surface,
  triangles: readonly number[],
  cutEdges: readonly CutEdge[] = [],
  adjacency: Adjacency = buildAdjacency(surface),
): PieceMesh {
  const { tri, xyz } = surface;
  const { twin, fan, fanStart, nV } = adjacency;
  const border = markBorder(surface, adjacency, triangles, markCuts(surface, adjacency, cutEdges));
  const inside = new Uint8Array(adjacency.nT);
  for (const t of triangles) inside[t] = 1;
  const local = new Int32Array(tri.length).fill(-1);
  const surfaceVertex: number[] = [];
  for (let v = 0; v < nV; v++)
    for (let i = fanStart[v]; i < fanStart[v + 1]; i++) {
      const start = fan[i];
      if (!inside[Math.floor(start / 3)] || local[start] >= 0) continue;
      const n = surfaceVertex.push(v) - 1;
      // All corners round v that hang together: one way to a border or full circle, then the other way.
      let h = start;
      do {
        local[h] = n;
        h = border[previousHalfedge(h)] ? -1 : twin[previousHalfedge(h)];
      } while (h >= 0 && h !== start);
      for (let g = start; h < 0 && !border[g]; ) {
        g = nextHalfedge(twin[g]);
        local[g] = n;
      }
    }
  const out = new Float64Array(3 * surfaceVertex.length);
  surfaceVertex.forEach((v, n) => {
    for (let k = 0; k < 3; k++) out[3 * n + k] = xyz[3 * v + k];
  });
  const outTri = new Uint32Array(3 * triangles.length);
  triangles.forEach((t, n) => {
    for (let k = 0; k < 3; k++) outTri[3 * n + k] = local[3 * t + k];
  });
  const outline = traceOutlineSides(surface, triangles, cutEdges, adjacency).map((loop) => loop.map((h) => local[h]));
  return { surfaceVertex: new Uint32Array(surfaceVertex), xyz: out, tri: outTri, outline };
}
