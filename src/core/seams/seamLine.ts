// One seam before cutting: a geodesic inside one region between two places of its outline, and whether it runs clear of the rim.

import { traceGeodesic } from "../surface/geodesic.ts";
import { measurePathLength, pointAt } from "../surface/measures.ts";
import type { SurfacePoint, Vec3 } from "../surface/surface.ts";
import { isSamePoint } from "../surface/surfacePoint.ts";
import type { Region } from "./region.ts";
import { BAYS, type Curve, sampleCurve } from "./stripWidth.ts";

/** A traced seam. */
export interface SeamLine {
  /** Places on the region's surface. */
  points: SurfacePoint[];
  curve: Curve;
  /** m */
  length: number;
  /** False where it runs along the outline or touches it between its ends. */
  clear: boolean;
  /** False where another way round a hole is as short. */
  unique: boolean;
}

/** The geodesic between two places of a region; two ends in one place give a line of no length that is not clear. */
export function traceSeam(
  region: Pick<Region, "surface" | "adjacency" | "solver">,
  from: SurfacePoint,
  to: SurfacePoint,
): SeamLine {
  if (isSamePoint(from, to))
    return {
      points: [from, to],
      curve: sampleCurve([pointAt(region.surface, from)]),
      length: 0,
      clear: false,
      unique: true,
    };
  const path = traceGeodesic(region.surface, region.adjacency, from, to, { solver: region.solver });
  const places = path.points.map((p) => pointAt(region.surface, p));
  return {
    points: path.points,
    curve: sampleCurve(places),
    length: measurePathLength(places),
    clear: !path.touchesBoundary,
    unique: path.unique,
  };
}

/** Distance from a place to the segment p → q, m. */
function measureToSegment(x: Vec3, p: Vec3, q: Vec3): number {
  const d = [q[0] - p[0], q[1] - p[1], q[2] - p[2]];
  const size = d[0] ** 2 + d[1] ** 2 + d[2] ** 2;
  const along = (x[0] - p[0]) * d[0] + (x[1] - p[1]) * d[1] + (x[2] - p[2]) * d[2];
  const t = size > 0 ? Math.min(1, Math.max(0, along / size)) : 0;
  return Math.sqrt((x[0] - p[0] - t * d[0]) ** 2 + (x[1] - p[1] - t * d[1]) ** 2 + (x[2] - p[2] - t * d[2]) ** 2);
}

/** Least distance of the middle two thirds of a seam from a polyline, m. */
export function measureClearance(curve: Curve, rim: readonly Vec3[]): number {
  let least = Number.POSITIVE_INFINITY;
  for (let k = Math.ceil(BAYS / 6); k <= Math.floor((5 * BAYS) / 6); k++) {
    const x: Vec3 = [curve[3 * k], curve[3 * k + 1], curve[3 * k + 2]];
    for (let i = 1; i < rim.length; i++) least = Math.min(least, measureToSegment(x, rim[i - 1], rim[i]));
  }
  return least;
}
