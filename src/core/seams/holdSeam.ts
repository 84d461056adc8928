// The cloth on both sides of one seam as a piece of its own, all other seams cut: what moving that seam again and again starts from,
// so that a move costs what its two panels cost and not the roof.
import { PlanError } from "../problem.ts";
import type { Seam, Strip, StripLayout } from "../records/stripLayout.ts";
import { type Adjacency, buildAdjacency, nextHalfedge } from "../surface/adjacency.ts";
import { createGeodesicSolver, type GeodesicSolver } from "../surface/geodesic.ts";
import { measureAreas, measureDistance, vertexAt } from "../surface/measures.ts";
import { extractPiece } from "../surface/pieces.ts";
import type { Surface } from "../surface/surface.ts";
import { unfoldSurface } from "../surface/unfold.ts";
import { type BorderMark, type CutForm, cutStrips } from "./cutStrips.ts";
import { segmentKey } from "./region.ts";
import type { LaidSeams } from "./runSeams.ts";
import { listSides } from "./stripSides.ts";

/** A piece of the rim: what it lies on, whether another panel lies beyond it, and its ends in numbers of the base. */
export interface RimPiece {
  mark: BorderMark;
  outside: boolean;
  ends: [number, number];
}

/** A seam in hand: its two strips joined to one piece, in numbers of its own. */
export interface HeldSeam {
  /** The form with all other seams cut. */
  base: Surface;
  /** The piece; vertices on a slit in it stand once for each side. */
  surface: Surface;
  adjacency: Adjacency;
  solver: GeodesicSolver;
  /** Vertex of the base for each vertex of the piece. */
  baseVertex: Uint32Array<ArrayBuffer>;
  /** By undirected side of the piece's rim, in the rim's order. */
  rim: Map<number, RimPiece>;
  /** Vertices of the piece at which a side of its rim begins. */
  corners: Set<number>;
  /** The piece laid flat without a fold; null where it cannot be. @shape 2*n */
  flat: Float64Array<ArrayBuffer> | null;
  /** The seams of the whole layout in numbers of the base, -1 where a vertex is not there. */
  seams: Seam[];
  /** Vertex of the base for each vertex of the whole layout, -1 where it is not there. */
  number: Int32Array<ArrayBuffer>;
}

/** Key of an undirected side of a mesh with n vertices. */
export function sideKey(a: number, b: number, n: number): number {
  return segmentKey(Math.min(a, b), Math.max(a, b), n);
}

/** Area and its moments of a set of triangles: the same whatever way they are cut. */
export function measureMoments(surface: Surface, triangles: readonly number[]): number[] {
  const out = [0, 0, 0, 0];
  const own = new Uint32Array(3 * triangles.length);
  triangles.forEach((t, i) => {
    own.set(surface.tri.subarray(3 * t, 3 * t + 3), 3 * i);
  });
  measureAreas({ xyz: surface.xyz, tri: own }).forEach((area, i) => {
    out[0] += area;
    for (let k = 0; k < 3; k++) {
      const p = vertexAt(surface, own[3 * i + k]);
      for (let c = 0; c < 3; c++) out[c + 1] += (area * p[c]) / 3;
    }
  });
  return out;
}

/** How far two sets of triangles are from being one and the same, m2 and m3. */
export function compareMoments(a: readonly number[], b: readonly number[]): number {
  return a.reduce((sum, m, i) => sum + Math.abs(m - b[i]), 0);
}

/** Vertex of one surface for each vertex of another, by place; -1 where it is not there. */
function matchVertices(from: Surface, to: Surface): Int32Array<ArrayBuffer> {
  const at = new Map<string, number>();
  for (let v = 0; v < to.xyz.length / 3; v++) at.set(vertexAt(to, v).join(), v);
  return Int32Array.from({ length: from.xyz.length / 3 }, (_, v) => at.get(vertexAt(from, v).join()) ?? -1);
}

/** The strip of the base that both strips of the seam lie in. */
function findJoined(base: CutForm, whole: StripLayout, strips: readonly Strip[]): number {
  const both = strips
    .map((s) => measureMoments(whole.surface, s.triangles))
    .reduce((a, b) => a.map((m, i) => m + b[i]));
  const off = base.strips.map((s) => compareMoments(measureMoments(base.surface, s.triangles), both));
  return off.indexOf(Math.min(...off));
}

function unfold(surface: Surface): Float64Array<ArrayBuffer> | null {
  try {
    return unfoldSurface(surface.xyz, surface.tri);
  } catch (error) {
    if (error instanceof PlanError) return null;
    throw error;
  }
}

/**
 * Takes a seam in hand: cuts all others and joins its two strips. `path` is its place among the paths laid.
 * @throws PlanError those of cutting
 */
export function holdSeam(laid: LaidSeams, whole: StripLayout, path: number, strips: readonly Strip[]): HeldSeam {
  const { form, adjacency, labels, paths } = laid;
  // with a seam less the region has not its number of strips
  const plans = laid.plans.map((plan, r) => (r === paths[path].region ? { ...plan, strips: null } : plan));
  const base = cutStrips(
    form,
    adjacency,
    labels,
    plans,
    paths.filter((_, i) => i !== path),
  );
  const joined = findJoined(base, whole, strips);
  const { outline, triangles } = base.strips[joined];
  const { tri } = base.surface;
  const cuts = [...base.marks.keys()].map((h): [number, number] => [tri[h], tri[nextHalfedge(h)]]);
  const piece = extractPiece(base.surface, triangles, cuts, base.adjacency);
  const surface: Surface = { xyz: piece.xyz, tri: piece.tri };
  const n = piece.surfaceVertex.length;
  const [loop] = piece.outline;
  const starts = new Set(listSides(plans, base)[joined].map((side) => side.vertices[0]));
  const rim = new Map<number, RimPiece>();
  outline.forEach((h, i) => {
    const mark = base.marks.get(h) ?? { edge: -1, path: -1, end: 0 };
    rim.set(sideKey(loop[i], loop[(i + 1) % loop.length], n), {
      mark,
      outside: base.adjacency.twin[h] >= 0,
      ends: [tri[h], tri[nextHalfedge(h)]],
    });
  });
  const number = matchVertices(whole.surface, base.surface);
  const own = buildAdjacency(surface);
  return {
    base: base.surface,
    surface,
    adjacency: own,
    solver: createGeodesicSolver(surface, own),
    baseVertex: piece.surfaceVertex,
    rim,
    corners: new Set(loop.filter((v) => starts.has(piece.surfaceVertex[v]))),
    flat: unfold(surface),
    seams: whole.seams.map((seam) => ({ ...seam, vertices: seam.vertices.map((v) => number[v]) })),
    number,
  };
}

/** A place on the piece's rim along this form edge, or null where the edge does not run there; place in space, m. */
export function findOnRim(held: HeldSeam, edge: number, place: readonly [number, number, number], near: number) {
  const n = held.baseVertex.length;
  for (const [key, { mark }] of held.rim) {
    if (mark.edge !== edge) continue;
    const [a, b] = [Math.floor(key / n), key % n];
    const [p, q] = [vertexAt(held.surface, a), vertexAt(held.surface, b)];
    const length = measureDistance(p, q);
    const [from, to] = [measureDistance(p, [...place]), measureDistance([...place], q)];
    if (from + to > length * (1 + 1e-9)) continue;
    if (from < near * length) return { a, b: a, t: 0 };
    if (to < near * length) return { a: b, b, t: 0 };
    return { a, b, t: from / length };
  }
  return null;
}
