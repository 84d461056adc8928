// Pieces of a line that lie inside a ring, mm. Source: textbook plane geometry.
import type { Ring } from "../../records/flatPanel.ts";
import { ringHolds } from "../../surface/ring.ts";
import type { Point } from "../outline/sideLine.ts";

const along = (p: Point, u: Point, s: number): Point => [p[0] + s * u[0], p[1] + s * u[1]];

/** Shares of a segment from a along u at which it crosses the ring's line. */
function listCrossings(a: Point, u: Point, ring: Ring): number[] {
  const cuts: number[] = [];
  const [x0, x1] = [Math.min(a[0], a[0] + u[0]), Math.max(a[0], a[0] + u[0])];
  const [y0, y1] = [Math.min(a[1], a[1] + u[1]), Math.max(a[1], a[1] + u[1])];
  for (let k = 0, j = ring.length - 2; k < ring.length; j = k, k += 2) {
    const [px, py, qx, qy] = [ring[j], ring[j + 1], ring[k], ring[k + 1]];
    if ((px < x0 && qx < x0) || (px > x1 && qx > x1) || (py < y0 && qy < y0) || (py > y1 && qy > y1)) continue;
    const v: Point = [qx - px, qy - py];
    const det = u[0] * v[1] - u[1] * v[0];
    if (det === 0) continue;
    const w: Point = [px - a[0], py - a[1]];
    const s = (w[0] * v[1] - w[1] * v[0]) / det;
    const t = (w[0] * u[1] - w[1] * u[0]) / det;
    if (s > 0 && s < 1 && t >= 0 && t <= 1) cuts.push(s);
  }
  return cuts.sort((p, q) => p - q);
}

/** Pieces of a line that lie inside a ring, in the line's order. */
export function clipLine(points: Point[], ring: Ring): Point[][] {
  const pieces: Point[][] = [];
  let piece: Point[] = [];
  for (let i = 0; i + 1 < points.length; i++) {
    const a = points[i];
    const u: Point = [points[i + 1][0] - a[0], points[i + 1][1] - a[1]];
    const cuts = [0, ...listCrossings(a, u, ring), 1];
    for (let c = 0; c + 1 < cuts.length; c++) {
      if (cuts[c + 1] - cuts[c] < 1e-12) continue;
      const middle = along(a, u, (cuts[c] + cuts[c + 1]) / 2);
      if (!ringHolds(ring, middle[0], middle[1])) {
        if (piece.length > 1) pieces.push(piece);
        piece = [];
      } else {
        if (piece.length === 0) piece.push(along(a, u, cuts[c]));
        piece.push(along(a, u, cuts[c + 1]));
      }
    }
  }
  if (piece.length > 1) pieces.push(piece);
  return pieces;
}
