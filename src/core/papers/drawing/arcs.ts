// Curves of a drawing as true arcs, for tables that run smoother on them: runs of points give way to one arc where it stays near enough
// both to the points and to the straight pieces between them. The fewest arcs a greedy walk finds; corners stay corners.
import type { Vec2 } from "../../records/facts.ts";
import type { Drawing, Stroke } from "./drawing.ts";

/** Farthest an arc may lie from what it stands for, mm; a tenth less is used, for the rounding of the files. */
export const ARC_TOLERANCE = 0.1;
const HELD = 0.9 * ARC_TOLERANCE;
/** An arc stands for three pieces at least, and turns by less than a third of a turn: readers differ beyond a half. */
const LEAST_PIECES = 3;
/** Beyond this an arc is a straight line to any reader, mm. */
const GREATEST_RADIUS = 1e6;

interface Circle {
  centre: Vec2;
  radius: number;
}

function circleThrough(a: Vec2, b: Vec2, c: Vec2): Circle | null {
  const [bx, by, cx, cy] = [b[0] - a[0], b[1] - a[1], c[0] - a[0], c[1] - a[1]];
  const d = 2 * (bx * cy - by * cx);
  if (d === 0) return null;
  const [bb, cc] = [bx * bx + by * by, cx * cx + cy * cy];
  const [x, y] = [(cy * bb - by * cc) / d, (bx * cc - cx * bb) / d];
  const radius = Math.hypot(x, y);
  return radius < GREATEST_RADIUS ? { centre: [a[0] + x, a[1] + y], radius } : null;
}

/** Bulge of the arc that stands for the run, tan of a quarter of its angle, positive counter-clockwise; null where none holds. */
function bulgeOf(run: readonly Vec2[]): number | null {
  const last = run.length - 1;
  const circle = circleThrough(run[0], run[last >> 1], run[last]);
  if (!circle) return null;
  const { centre, radius } = circle;
  const off = (x: number, y: number) => Math.abs(Math.hypot(x - centre[0], y - centre[1]) - radius);
  let sweep = 0;
  for (let i = 0; i < last; i++) {
    const [p, q] = [run[i], run[i + 1]];
    if (off(q[0], q[1]) > HELD || off((p[0] + q[0]) / 2, (p[1] + q[1]) / 2) > HELD) return null;
    const [u, v] = [
      [p[0] - centre[0], p[1] - centre[1]],
      [q[0] - centre[0], q[1] - centre[1]],
    ];
    const step = Math.atan2(u[0] * v[1] - u[1] * v[0], u[0] * v[0] + u[1] * v[1]);
    // Runs back and forth along a circle are no arc.
    if (i > 0 && step * sweep <= 0) return null;
    sweep += step;
  }
  return Math.abs(sweep) < (2 * Math.PI) / 3 ? Math.tan(sweep / 4) : null;
}

function strokeWithArcs(stroke: Stroke): Stroke {
  const ring = stroke.closed ? [...stroke.points, stroke.points[0]] : stroke.points;
  const points: Vec2[] = [];
  const bulges: number[] = [];
  for (let i = 0; i < ring.length - 1; ) {
    let best: { end: number; bulge: number } | null = null;
    for (let end = i + LEAST_PIECES; end < ring.length; end++) {
      const bulge = bulgeOf(ring.slice(i, end + 1));
      if (bulge === null) break;
      best = { end, bulge };
    }
    points.push(ring[i]);
    bulges.push(best?.bulge ?? 0);
    i = best?.end ?? i + 1;
  }
  if (bulges.every((b) => b === 0)) return stroke;
  if (!stroke.closed) {
    points.push(ring[ring.length - 1]);
    bulges.push(0);
  }
  // A closed stroke of two arcs is sound to a table, but not to every reader.
  return points.length < 3 ? stroke : { ...stroke, points, bulges };
}

/** The drawing with arcs in its cut and mark lines, nowhere farther than 0.1 mm from it. */
export function withArcs(drawing: Drawing): Drawing {
  const strokes = drawing.strokes.map((s) => (s.layer === "bed" ? s : strokeWithArcs(s)));
  return { ...drawing, strokes };
}
