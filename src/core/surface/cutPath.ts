// A path made ready for cutting: crossings near an edge's end moved to the vertex there, doubled places, spikes and small loops
// round a vertex taken out. Where a place is moved depends on the edge alone, so that paths that share it keep sharing it.
import { PlanError } from "../problem.ts";
import type { Adjacency } from "./adjacency.ts";
import { measureDistance, vertexAt } from "./measures.ts";
import type { Surface, SurfacePoint } from "./surface.ts";
import { checkPoint, findHalfedge, findTrianglesAt, namePoint, normalizePoint } from "./surfacePoint.ts";

/** Inside the membrane a crossing is moved to a boundary vertex only within this part of the snap share: moved there it would part a strip. */
const BOUNDARY_PART = 0.1;

/** One triangle that holds both places, -1 where they lie along one mesh edge. @throws PlanError cut-path */
export function findCommonTriangle(surface: Surface, adjacency: Adjacency, p: SurfacePoint, q: SurfacePoint): number {
  const ends = [...new Set([p.a, p.b, q.a, q.b])];
  if (ends.length === 2 && findHalfedge(surface, adjacency, ends[0], ends[1]) >= 0) return -1;
  const there = findTrianglesAt(surface, adjacency, q).triangles;
  for (const t of findTrianglesAt(surface, adjacency, p).triangles) if (there.includes(t)) return t;
  throw new PlanError(
    "cut-path",
    `places ${namePoint(p)} and ${namePoint(q)} of a path follow each other but lie in no common triangle: give every crossing of the path`,
    [namePoint(p), namePoint(q)],
    { from: p.a, to: q.a },
  );
}

/** A crossing is moved to an edge's end within this share of the edge and within this reach, m. */
export interface Snap {
  share: number;
  reach: number;
}

function snapPoint(
  surface: Surface,
  adjacency: Adjacency,
  onBoundary: Uint8Array,
  p: SurfacePoint,
  snap: Snap,
): SurfacePoint {
  if (p.a === p.b) return p;
  const end = p.t < 0.5 ? p.a : p.b;
  const h = findHalfedge(surface, adjacency, p.a, p.b);
  const share = onBoundary[end] && adjacency.twin[h] >= 0 ? snap.share * BOUNDARY_PART : snap.share;
  const length = measureDistance(vertexAt(surface, p.a), vertexAt(surface, p.b));
  return normalizePoint(p, Math.min(share, snap.reach / length));
}

const isSame = (p: SurfacePoint, q: SurfacePoint) => p.a === q.a && p.b === q.b && p.t === q.t;

/** True where places i+1 … j-1 of the path all lie in triangles round vertex v. */
function staysAround(
  surface: Surface,
  star: readonly number[],
  points: readonly SurfacePoint[],
  i: number,
  j: number,
): boolean {
  const { tri } = surface;
  const inStar = (p: SurfacePoint) =>
    star.some((t) => {
      const holds = (v: number) => tri[3 * t] === v || tri[3 * t + 1] === v || tri[3 * t + 2] === v;
      return holds(p.a) && holds(p.b);
    });
  for (let k = i + 1; k < j; k++) if (!inStar(points[k])) return false;
  return true;
}

/**
 * Path in normal form, snapped and free of doubled places, spikes and loops round a vertex that snapping made.
 * @throws PlanError surface-point; cut-path: places without a common triangle; seam-point: nothing is left of the path
 */
export function preparePath(
  surface: Surface,
  adjacency: Adjacency,
  onBoundary: Uint8Array,
  path: readonly SurfacePoint[],
  snap: Snap,
): SurfacePoint[] {
  const raw = path.map((p) => checkPoint(surface, adjacency, p));
  for (let i = 1; i < raw.length; i++) findCommonTriangle(surface, adjacency, raw[i - 1], raw[i]);
  const points: SurfacePoint[] = [];
  for (const [n, r] of raw.entries()) {
    const p = snapPoint(surface, adjacency, onBoundary, r, snap);
    let seen = points.length - 1;
    while (seen >= 0 && !isSame(points[seen], p)) seen--;
    const closes = seen === 0 && n === raw.length - 1 && points.length > 2;
    if (seen >= 0 && !closes) {
      const spike = points.length - seen <= 2;
      if (
        spike ||
        staysAround(surface, findTrianglesAt(surface, adjacency, p).triangles, points, seen, points.length)
      ) {
        points.length = seen + 1;
        continue;
      }
    }
    points.push(p);
  }
  if (points.length < 2)
    throw new PlanError(
      "seam-point",
      `a path from ${raw.length ? namePoint(raw[0]) : "nowhere"} is shorter than the snap share ${snap.share} of its edge: choose ends farther apart`,
      raw.length ? namePoint(raw[0]) : [],
      { places: raw.length, snap: snap.share },
    );
  return points;
}
