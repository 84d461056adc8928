// A side of a panel as a line in the flat: arc length, places on it, bend. mm. Does not: offset, mark, judge.
import type { FlatPanel } from "../../records/flatPanel.ts";

/** A point of the flat, mm. */
export type Point = [number, number];

/** A line with arc lengths, mm; outside: +1 where the cloth's outside lies to the right of the line's run, −1 to the left. */
export interface SideLine {
  points: Point[];
  arc: number[];
  outside: number;
}

/** The flat points of these vertices, in their order. */
export function listPoints(panel: Pick<FlatPanel, "flat">, vertices: readonly number[]): Point[] {
  return vertices.map((v): Point => [panel.flat[2 * v], panel.flat[2 * v + 1]]);
}

/** Points with their arc lengths. */
export function buildSideLine(points: Point[], outside = 1): SideLine {
  const arc = [0];
  for (let i = 1; i < points.length; i++)
    arc.push(arc[i - 1] + Math.hypot(points[i][0] - points[i - 1][0], points[i][1] - points[i - 1][1]));
  return { points, arc, outside };
}

/** The point at arc length s of a line, and the unit normal to the outside there. */
export function atArc(line: SideLine, s: number): { point: Point; out: Point } {
  let i = 1;
  while (i < line.arc.length - 1 && line.arc[i] <= s) i++;
  const [a, b] = [line.points[i - 1], line.points[i]];
  const length = line.arc[i] - line.arc[i - 1] || 1;
  const t = (s - line.arc[i - 1]) / length;
  const u: Point = [(b[0] - a[0]) / length, (b[1] - a[1]) / length];
  return {
    point: [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])],
    out: [line.outside * u[1], -line.outside * u[0]],
  };
}

/** Points at equal steps of arc length over the middle 80 % of a line. */
export function middlePoints(line: SideLine, count: number): Point[] {
  const total = line.arc[line.arc.length - 1];
  return Array.from({ length: count }, (_, k) => atArc(line, total * (0.1 + (0.8 * k) / (count - 1))).point);
}

/**
 * Bend of a line at each of its points, 1/mm, from circles through points about `reach` away on both sides: positive where the
 * line turns left. Points nearer than half of that to an end take the bend of the nearest point that is not; 0 where none is.
 * @shape one for each point
 */
export function measureBends(points: readonly Point[], reach: number): Float64Array<ArrayBuffer> {
  const away = (i: number, j: number) => Math.hypot(points[j][0] - points[i][0], points[j][1] - points[i][1]);
  const last = points.length - 1;
  const bend = new Float64Array(points.length);
  let first = -1;
  let end = -1;
  for (let i = 1; i < last; i++) {
    let before = i - 1;
    let after = i + 1;
    while (before > 0 && away(before, i) < reach) before--;
    while (after < last && away(i, after) < reach) after++;
    if (Math.min(away(before, i), away(i, after)) < reach / 2) continue;
    const [a, b, c] = [points[before], points[i], points[after]];
    const double = (b[0] - a[0]) * (c[1] - b[1]) - (b[1] - a[1]) * (c[0] - b[0]);
    const scale = away(before, i) * away(i, after) * away(before, after);
    if (scale > 0) bend[i] = (2 * double) / scale;
    if (first < 0) first = i;
    end = i;
  }
  if (first >= 0) {
    bend.fill(bend[first], 0, first);
    bend.fill(bend[end], end + 1);
  }
  return bend;
}
