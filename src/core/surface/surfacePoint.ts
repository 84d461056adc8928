// Places on a mesh edge: one way of writing each, where they are in the mesh, which triangles hold them.
import { PlanError } from "../problem.ts";
import { type Adjacency, nextHalfedge, previousHalfedge } from "./adjacency.ts";
import type { Surface, SurfacePoint } from "./surface.ts";

/** Share of an edge within which a place is the edge's end. */
const END_SHARE = 1e-9;

/** The place at a vertex. */
export function vertexPoint(v: number): SurfacePoint {
  return { a: v, b: v, t: 0 };
}

/** True where the place is a vertex in normal form. */
export function isVertexPoint(p: SurfacePoint): boolean {
  return p.a === p.b;
}

/** The one way of writing a place: a vertex as { v, v, 0 } (also within `share` of an edge's end), else a < b. */
export function normalizePoint(p: SurfacePoint, share: number = END_SHARE): SurfacePoint {
  if (p.a === p.b || p.t <= share) return vertexPoint(p.a);
  if (p.t >= 1 - share) return vertexPoint(p.b);
  return p.a < p.b ? { a: p.a, b: p.b, t: p.t } : { a: p.b, b: p.a, t: 1 - p.t };
}

/** True where two places are one, within a share of the edge. */
export function isSamePoint(p: SurfacePoint, q: SurfacePoint, share: number = END_SHARE): boolean {
  const u = normalizePoint(p, share);
  const w = normalizePoint(q, share);
  return u.a === w.a && u.b === w.b && Math.abs(u.t - w.t) <= share;
}

/** A place in words, for messages. */
export function namePoint(p: SurfacePoint): string {
  const q = normalizePoint(p);
  return q.a === q.b ? `vertex ${q.a}` : `edge ${q.a}–${q.b} at ${q.t.toFixed(3)}`;
}

/** A half-edge that joins a and b in either direction (a → b where both exist), or -1. */
export function findHalfedge(surface: Surface, adjacency: Adjacency, a: number, b: number): number {
  const { fan, fanStart } = adjacency;
  for (let i = fanStart[a]; i < fanStart[a + 1]; i++) if (surface.tri[nextHalfedge(fan[i])] === b) return fan[i];
  for (let i = fanStart[b]; i < fanStart[b + 1]; i++) if (surface.tri[nextHalfedge(fan[i])] === a) return fan[i];
  return -1;
}

/**
 * A place in normal form, known to lie on the mesh.
 * @throws PlanError surface-point: vertex out of range, t outside 0…1, or a and b not joined by a triangle side
 */
export function checkPoint(surface: Surface, adjacency: Adjacency, p: SurfacePoint): SurfacePoint {
  const { nV, fanStart } = adjacency;
  const inRange = (v: number) => Number.isInteger(v) && v >= 0 && v < nV;
  if (!inRange(p.a) || !inRange(p.b) || !(p.t >= 0 && p.t <= 1))
    throw new PlanError(
      "surface-point",
      `a place on the mesh needs vertices from 0 to ${nV - 1} and a share from 0 to 1, not ${p.a}, ${p.b} and ${p.t}`,
      `vertex ${p.a}`,
      { a: p.a, b: p.b, t: p.t },
    );
  const q = normalizePoint(p);
  if (q.a === q.b && fanStart[q.a] === fanStart[q.a + 1])
    throw new PlanError(
      "surface-point",
      `vertex ${q.a} belongs to no triangle: choose a vertex of the membrane`,
      `vertex ${q.a}`,
      { a: q.a },
    );
  if (q.a !== q.b && findHalfedge(surface, adjacency, q.a, q.b) < 0)
    throw new PlanError(
      "surface-point",
      `vertices ${q.a} and ${q.b} are not joined by a triangle side: give a place on one side of a triangle`,
      [`vertex ${q.a}`, `vertex ${q.b}`],
      { a: q.a, b: q.b },
    );
  return q;
}

/**
 * Triangles that hold a place (in normal form), going round it, each with the crossing marks met on the way from the first.
 * @shape triangles n, marks n; marks are 0 where `crossing` is null
 */
export function findTrianglesAt(
  surface: Surface,
  adjacency: Adjacency,
  p: SurfacePoint,
  crossing: Uint32Array<ArrayBuffer> | null = null,
): { triangles: number[]; marks: number[] } {
  const { twin, fan, fanStart } = adjacency;
  const triangles: number[] = [];
  const marks: number[] = [];
  const add = (h: number, mark: number) => {
    triangles.push(Math.floor(h / 3));
    marks.push(mark);
  };
  if (p.a !== p.b) {
    const h = findHalfedge(surface, adjacency, p.a, p.b);
    add(h, 0);
    if (twin[h] >= 0) add(twin[h], crossing ? crossing[h] : 0);
    return { triangles, marks };
  }
  for (let i = fanStart[p.a]; i < fanStart[p.a + 1]; i++) {
    if (triangles.includes(Math.floor(fan[i] / 3))) continue;
    const start = fan[i];
    let mark = 0;
    let h = start;
    let open = false;
    for (;;) {
      add(h, mark);
      const side = previousHalfedge(h);
      if (crossing) mark ^= crossing[side];
      h = twin[side];
      open = h < 0;
      if (open || h === start) break;
    }
    mark = 0;
    for (h = start; open; ) {
      if (crossing) mark ^= crossing[h];
      h = twin[h];
      if (h < 0) break;
      h = nextHalfedge(h);
      add(h, mark);
    }
  }
  return { triangles, marks };
}
