// Which of two strips lies uphill of their seam, so that it laps over the lower one and water runs off.
import { nextHalfedge, previousHalfedge } from "../surface/adjacency.ts";
import { measureDistance, vertexAt } from "../surface/measures.ts";
import type { CutForm } from "./cutStrips.ts";

/** Slope across a seam below which it counts as level. own: half a per cent does not steer water. */
export const LEVEL_SLOPE = 0.005;

/** Mean rise per metre from a seam into the cloth on the left of its way, over its half-edges, weighted by length. */
function measureRise(cut: CutForm, vertices: readonly number[]): number {
  const { tri } = cut.surface;
  const { fan, fanStart } = cut.adjacency;
  let sum = 0;
  let total = 0;
  for (let i = 1; i < vertices.length; i++) {
    const v = vertices[i - 1];
    for (let k = fanStart[v]; k < fanStart[v + 1]; k++) {
      const h = fan[k];
      if (tri[nextHalfedge(h)] !== vertices[i]) continue;
      const a = vertexAt(cut.surface, v);
      const b = vertexAt(cut.surface, vertices[i]);
      const c = vertexAt(cut.surface, tri[previousHalfedge(h)]);
      const length = measureDistance(a, b);
      const along = [0, 1, 2].reduce((s, m) => s + (c[m] - a[m]) * (b[m] - a[m]), 0) / (length * length);
      const foot = [0, 1, 2].map((m) => a[m] + along * (b[m] - a[m]));
      const across = measureDistance(c, [foot[0], foot[1], foot[2]]);
      if (across > 1e-9 * length) sum += (length * (c[2] - foot[2])) / across;
      total += length;
    }
  }
  return total > 0 ? sum / total : 0;
}

/** True where the strip whose outline these vertices are lies over its neighbour there: it is not the lower one. */
export function laysOver(cut: CutForm, vertices: readonly number[]): boolean {
  return measureSlope(cut, vertices) > -2 * LEVEL_SLOPE;
}

/** Rise across a seam from one strip's outline: positive where that strip is the upper one; within twice LEVEL_SLOPE it is level. */
export function measureSlope(cut: CutForm, vertices: readonly number[]): number {
  return measureRise(cut, vertices) - measureRise(cut, [...vertices].reverse());
}
