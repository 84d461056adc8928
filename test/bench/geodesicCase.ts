// `bench geodesic MESH.obj PAIRS.txt`: geodesic lengths of vertex pairs and the time they take together, warm.
import { buildAdjacency } from "../../src/core/surface/adjacency.ts";
import { createGeodesicSolver, traceGeodesic } from "../../src/core/surface/geodesic.ts";
import type { Surface } from "../../src/core/surface/surface.ts";
import { vertexPoint } from "../../src/core/surface/surfacePoint.ts";

/** Shortest time spent on warming up, ms. */
const WARM_MS = 300;

/** Lengths in m, and ms for all pairs together (least of five warm runs), the surface's own preparation left out. */
export function benchGeodesic(
  surface: Surface,
  pairs: [number, number][],
): { lengths: number[]; ms: number; prepareMs: number } {
  const adjacency = buildAdjacency(surface);
  const begin = performance.now();
  const solver = createGeodesicSolver(surface, adjacency);
  const prepareMs = performance.now() - begin;
  const run = () =>
    pairs.map(([from, to]) => traceGeodesic(surface, adjacency, vertexPoint(from), vertexPoint(to), { solver }).length);
  const warmFrom = performance.now();
  let lengths = run();
  while (performance.now() - warmFrom < WARM_MS) lengths = run();
  let ms = Number.POSITIVE_INFINITY;
  for (let i = 0; i < 5; i++) {
    const start = performance.now();
    lengths = run();
    ms = Math.min(ms, performance.now() - start);
  }
  return { lengths, ms, prepareMs };
}
