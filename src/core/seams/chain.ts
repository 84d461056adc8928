// Runs of a region's outline: where seams start, end, and what lies beside the first and last strip.
import { measureDistance, vertexAt } from "../surface/measures.ts";
import type { Surface, SurfacePoint, Vec3 } from "../surface/surface.ts";
import type { Outline } from "./region.ts";

/** A polyline of region vertices along an outline; one vertex is a point. A whole loop repeats its first vertex. */
export interface Chain {
  vertices: number[];
  /** Arc length at each vertex. */
  arc: Float64Array<ArrayBuffer>;
  /** Form edge (index) of each segment. */
  edge: number[];
  /** Arc lengths of the corners strictly inside the chain. */
  corners: number[];
  /** True where it runs against its outline. */
  reversed: boolean;
}

/** A place within this share of a side's end is the vertex there: 0.05 mm on a side of half a metre. */
export const AT_VERTEX = 1e-4;

/** Length of a chain, m. */
export function measureChain(chain: Chain): number {
  return chain.arc[chain.vertices.length - 1];
}

/**
 * The run of an outline from position `from` forward to position `to` (equal: a point, or the whole loop when `whole`),
 * turned round when `reverse`.
 */
export function buildChain(
  outline: Outline,
  from: number,
  to: number,
  options: { reverse?: boolean; whole?: boolean } = {},
): Chain {
  const n = outline.vertices.length;
  const steps = options.whole ? n : (to - from + n) % n;
  const vertices: number[] = [];
  const edge: number[] = [];
  const at: number[] = [];
  const corner = new Set(outline.corners);
  const corners: number[] = [];
  const total = outline.arc[n];
  for (let s = 0; s <= steps; s++) {
    const i = (from + s) % n;
    vertices.push(outline.vertices[i]);
    at.push(outline.arc[i] - outline.arc[from] + (from + s >= n ? total : 0));
    if (s > 0 && s < steps && corner.has(i)) corners.push(at[s]);
    if (s < steps) edge.push(outline.edge[i]);
  }
  if (!options.reverse) return { vertices, arc: Float64Array.from(at), edge, corners, reversed: false };
  const length = at[steps];
  return {
    vertices: vertices.reverse(),
    arc: Float64Array.from(at.map((_, k) => length - at[steps - k])),
    edge: edge.reverse(),
    corners: corners.map((c) => length - c).reverse(),
    reversed: true,
  };
}

/** The place at arc length s along a chain. */
export function placeOnChain(chain: Chain, s: number): SurfacePoint {
  const { vertices, arc } = chain;
  const last = vertices.length - 1;
  if (s <= 0 || last === 0) return { a: vertices[0], b: vertices[0], t: 0 };
  if (s >= arc[last]) return { a: vertices[last], b: vertices[last], t: 0 };
  let low = 0;
  let high = last;
  while (high - low > 1) {
    const mid = (low + high) >> 1;
    if (arc[mid] <= s) low = mid;
    else high = mid;
  }
  const t = (s - arc[low]) / (arc[high] - arc[low]);
  if (t < AT_VERTEX) return { a: vertices[low], b: vertices[low], t: 0 };
  if (t > 1 - AT_VERTEX) return { a: vertices[high], b: vertices[high], t: 0 };
  return { a: vertices[low], b: vertices[high], t };
}

/** Arc length of a region place on a chain, or -1 where it does not lie on it. */
export function findOnChain(chain: Chain, p: SurfacePoint): number {
  for (let i = 0; i < chain.vertices.length; i++) {
    const v = chain.vertices[i];
    if (p.t === 0 && v === p.a) return chain.arc[i];
    const w = chain.vertices[i + 1];
    if (p.t > 0 && w !== undefined) {
      const step = chain.arc[i + 1] - chain.arc[i];
      if (p.a === v && p.b === w) return chain.arc[i] + p.t * step;
      if (p.b === v && p.a === w) return chain.arc[i] + (1 - p.t) * step;
    }
  }
  return -1;
}

/** Arc length along a chain of its point nearest to a place in space. */
export function findNearestOnChain(surface: Surface, chain: Chain, to: Vec3): number {
  let best = Number.POSITIVE_INFINITY;
  let at = 0;
  for (let i = 0; i + 1 < chain.vertices.length; i++) {
    const a = vertexAt(surface, chain.vertices[i]);
    const b = vertexAt(surface, chain.vertices[i + 1]);
    const d = [b[0] - a[0], b[1] - a[1], b[2] - a[2]];
    const along = (to[0] - a[0]) * d[0] + (to[1] - a[1]) * d[1] + (to[2] - a[2]) * d[2];
    const t = Math.min(1, Math.max(0, along / (d[0] ** 2 + d[1] ** 2 + d[2] ** 2)));
    const gap = measureDistance(to, [a[0] + t * d[0], a[1] + t * d[1], a[2] + t * d[2]]);
    if (gap < best - 1e-12) {
      best = gap;
      at = chain.arc[i] + t * (chain.arc[i + 1] - chain.arc[i]);
    }
  }
  return at;
}

/** The places in space of a chain's vertices. */
export function listChainPoints(surface: Surface, chain: Chain): Vec3[] {
  return chain.vertices.map((v) => vertexAt(surface, v));
}
