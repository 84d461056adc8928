// What is said about single seams: ends that leave an edge at a few degrees, seams that run close beside an edge, and seams that
// could as well go another way. Source: own.
import type { Finding } from "../problem.ts";
import { measureDistance, pointAt, vertexAt } from "../surface/measures.ts";
import type { SurfacePoint, Vec3 } from "../surface/surface.ts";
import { NARROW } from "./noteSeams.ts";
import type { Region } from "./region.ts";
import { measureClearance } from "./seamLine.ts";
import type { SeamPath } from "./seamPath.ts";

/** A seam that leaves an edge at less than this is flagged, degrees. own: at 5° the weld's 40 mm run out over half a metre. */
const SHALLOW = 5;

function angleBetween(at: Vec3, p: Vec3, q: Vec3): number {
  const a = measureDistance(at, p);
  const b = measureDistance(at, q);
  const c = measureDistance(p, q);
  if (a === 0 || b === 0) return Number.POSITIVE_INFINITY;
  return (Math.acos(Math.min(1, Math.max(-1, (a * a + b * b - c * c) / (2 * a * b)))) * 180) / Math.PI;
}

/** Boundary neighbours of a place on a region's outline. */
function listNeighbours(region: Region, p: SurfacePoint): number[] {
  for (const { vertices } of region.outlines) {
    const n = vertices.length;
    if (p.a === p.b) {
      const i = vertices.indexOf(p.a);
      if (i >= 0) return [vertices[(i + 1) % n], vertices[(i + n - 1) % n]];
    } else {
      const i = vertices.findIndex((v, k) => {
        const w = vertices[(k + 1) % n];
        return (v === p.a && w === p.b) || (v === p.b && w === p.a);
      });
      if (i >= 0) return [p.a, p.b];
    }
  }
  return [];
}

/** Angle at which a seam leaves the outline at its first place, degrees; infinite where it starts inside. */
function measureEndAngle(region: Region, points: readonly SurfacePoint[]): number {
  const at = pointAt(region.surface, points[0]);
  const next = pointAt(region.surface, points[1]);
  const angles = listNeighbours(region, points[0]).map((v) => angleBetween(at, vertexAt(region.surface, v), next));
  return Math.min(Number.POSITIVE_INFINITY, ...angles);
}

/** Least distance of a seam's middle two thirds from the outlines of its region, m. */
function measureGap(region: Region, path: SeamPath): number {
  return Math.min(
    ...region.outlines.map(({ vertices }) =>
      measureClearance(
        path.line.curve,
        [...vertices, vertices[0]].map((v) => vertexAt(region.surface, v)),
      ),
    ),
  );
}

/** Findings on seams as traced, before cutting; `given`: they were given one by one. */
export function noteSeamEnds(regions: readonly Region[], paths: readonly SeamPath[], given: boolean): Finding[] {
  const findings: Finding[] = [];
  const say = (
    code: string,
    path: SeamPath,
    value: number | null,
    limit: number | null,
    text: string,
    remedy: string,
  ) =>
    findings.push({
      code,
      level: "caution",
      station: "seams",
      where: path.weld,
      value,
      limit,
      text,
      remedy,
      basis: "own argument",
    });
  for (const path of paths) {
    const region = regions[path.region];
    const { points } = path.line;
    const angle = Math.min(measureEndAngle(region, points), measureEndAngle(region, [...points].reverse()));
    if (angle < SHALLOW)
      say(
        "seam-shallow",
        path,
        angle,
        SHALLOW,
        `The seam of ${path.weld} leaves an edge at ${angle.toFixed(1)}°: the cloth between runs out in a point that holds no weld; ${SHALLOW}° is wanted.`,
        "Move that end along the edge, or lead the seam to another edge.",
      );
    if (!given) continue;
    const gap = measureGap(region, path);
    if (gap < NARROW)
      say(
        "seam-near-edge",
        path,
        gap,
        NARROW,
        `The seam of ${path.weld} runs within ${(1000 * gap).toFixed(0)} mm of an edge; ${1000 * NARROW} mm leave room for its weld and the edge's own.`,
        "Move its ends away from that edge.",
      );
    if (!path.line.unique)
      say(
        "seam-two-ways",
        path,
        null,
        null,
        `The seam of ${path.weld} is as short round the other side of an opening: which of the two ways it takes is chance.`,
        "Move one end a little, or give a place that it runs through.",
      );
  }
  return findings;
}
