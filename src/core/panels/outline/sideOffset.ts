// A side of a net outline on its way outward, and the few vector operations that takes. mm.
import type { Ring } from "../../records/flatPanel.ts";
import type { Point } from "./sideLine.ts";

/** A run of the net ring from point `from` on to point `to` (equal: all the way round) and how far its cut line lies outside. */
export interface SideOffset {
  from: number;
  to: number;
  /** mm, negative inward. */
  distance: number;
  /** True for a flap that is folded back along the net line. */
  fold: boolean;
}

/** p moved by s along u. */
export const add = (p: Point, u: Point, s: number): Point => [p[0] + s * u[0], p[1] + s * u[1]];
/** Scalar product. */
export const dot = (u: Point, v: Point) => u[0] * v[0] + u[1] * v[1];
/** Signed area of the parallelogram, positive where v lies left of u. */
export const cross = (u: Point, v: Point) => u[0] * v[1] - u[1] * v[0];
/** Distance of two points. */
export const gap = (p: Point, q: Point) => Math.hypot(q[0] - p[0], q[1] - p[1]);
/** Unit vector from p to q. */
export function unit(p: Point, q: Point): Point {
  const length = gap(p, q) || 1;
  return [(q[0] - p[0]) / length, (q[1] - p[1]) / length];
}

/** Net points of a side, both ends included. */
export function sidePoints(net: Ring, side: SideOffset): Point[] {
  const n = net.length / 2;
  const count = ((side.to - side.from + n - 1) % n) + 1;
  return Array.from({ length: count + 1 }, (_, k): Point => {
    const i = (side.from + k) % n;
    return [net[2 * i], net[2 * i + 1]];
  });
}
