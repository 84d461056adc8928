// Arcs by their two ends and their bulge, the tangent of a quarter of their angle, positive counter-clockwise.
import type { Vec2 } from "../../records/facts.ts";

/** Radius of an arc by its ends and bulge. */
export function arcRadius(a: Vec2, b: Vec2, bulge: number): number {
  return (Math.hypot(b[0] - a[0], b[1] - a[1]) * (1 + bulge * bulge)) / (4 * Math.abs(bulge));
}

/** Points of an arc that reach farthest left, right, down or up, its ends left out. */
export function arcReaches(a: Vec2, b: Vec2, bulge: number): Vec2[] {
  if (bulge === 0) return [];
  const radius = arcRadius(a, b, bulge);
  const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
  // The centre lies square off the middle of the chord: on its left while a counter-clockwise arc is less than a half turn.
  const off = (1 - bulge * bulge) / (4 * bulge);
  const centre: Vec2 = [(a[0] + b[0]) / 2 - off * dy, (a[1] + b[1]) / 2 + off * dx];
  const side = (p: readonly number[]) => dx * (p[1] - a[1]) - dy * (p[0] - a[0]);
  return [
    [1, 0],
    [-1, 0],
    [0, 1],
    [0, -1],
  ]
    .map(([x, y]): Vec2 => [centre[0] + radius * x, centre[1] + radius * y])
    .filter((p) => side(p) * bulge < 0);
}
