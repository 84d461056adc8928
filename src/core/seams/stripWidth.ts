// How wide a strip between two seams will be in the flat, before anything is cut: both seams are sampled at the same arc
// fractions and the ladder between them is unrolled (exact where the strip is developable). An estimate: the flattening
// of the panels station decides. Source: own, unrolling of a triangle strip by its edge lengths.
import type { Vec3 } from "../surface/surface.ts";

/** Rungs of a ladder less one. own: the banana of a strip is smooth, 16 bays hold its rise within half a percent. */
export const BAYS = 16;

/** A curve sampled at BAYS + 1 equal arc fractions. @shape 3*(BAYS+1) */
export type Curve = Float64Array<ArrayBuffer>;

/** Samples a polyline at equal arc fractions; one point repeats itself. */
export function sampleCurve(points: readonly Vec3[]): Curve {
  const out = new Float64Array(3 * (BAYS + 1));
  const arc = new Float64Array(points.length);
  for (let i = 1; i < points.length; i++) {
    const p = points[i - 1];
    const q = points[i];
    arc[i] = arc[i - 1] + Math.sqrt((q[0] - p[0]) ** 2 + (q[1] - p[1]) ** 2 + (q[2] - p[2]) ** 2);
  }
  const length = arc[points.length - 1];
  let i = 1;
  for (let k = 0; k <= BAYS; k++) {
    const s = (length * k) / BAYS;
    while (i < points.length - 1 && arc[i] < s) i++;
    const a = points[Math.max(0, i - 1)];
    const b = points[Math.min(i, points.length - 1)];
    const span = points.length > 1 ? arc[i] - arc[i - 1] : 0;
    const t = span > 0 ? Math.min(1, Math.max(0, (s - arc[i - 1]) / span)) : 0;
    for (let c = 0; c < 3; c++) out[3 * k + c] = a[c] + t * (b[c] - a[c]);
  }
  return out;
}

/** The curve between two sampled curves at share t. */
export function blendCurves(a: Curve, b: Curve, t: number): Curve {
  const out = new Float64Array(a.length);
  for (let i = 0; i < a.length; i++) out[i] = a[i] + t * (b[i] - a[i]);
  return out;
}

function gap(a: Curve, i: number, b: Curve, j: number): number {
  return Math.sqrt(
    (a[3 * i] - b[3 * j]) ** 2 + (a[3 * i + 1] - b[3 * j + 1]) ** 2 + (a[3 * i + 2] - b[3 * j + 2]) ** 2,
  );
}

/** Unrolls the ladder between two curves; both start on the flat y axis, left above right. */
function unrollLadder(left: Curve, right: Curve): [Float64Array, Float64Array] {
  const l = new Float64Array(2 * (BAYS + 1));
  const r = new Float64Array(2 * (BAYS + 1));
  // the rung that is unrolled next, from p on the left curve to q on the right one, and the third corner over it
  let px = 0;
  let py = gap(left, 0, right, 0);
  let qx = 0;
  let qy = 0;
  let x = 0;
  let y = 0;
  const raise = (fromP: number, fromQ: number) => {
    const dx = qx - px;
    const dy = qy - py;
    const d = Math.sqrt(dx * dx + dy * dy);
    const along = d < 1e-12 ? 0 : (fromP * fromP - fromQ * fromQ + d * d) / (2 * d);
    const up = Math.sqrt(Math.max(0, fromP * fromP - along * along));
    // seen along the rung from left to right, the strip's way lies on the left
    x = d < 1e-12 ? px + fromP : px + (along * dx - up * dy) / d;
    y = d < 1e-12 ? py : py + (along * dy + up * dx) / d;
  };
  l[1] = py;
  for (let i = 0; i < BAYS; i++) {
    raise(gap(left, i, left, i + 1), gap(right, i, left, i + 1));
    px = x;
    py = y;
    raise(gap(left, i + 1, right, i + 1), gap(right, i, right, i + 1));
    qx = x;
    qy = y;
    l[2 * i + 2] = px;
    l[2 * i + 3] = py;
    r[2 * i + 2] = qx;
    r[2 * i + 3] = qy;
  }
  return [l, r];
}

/** Moves b's flat points so that `from` (of b) lies best on `onto`. */
function joinInPlace(onto: Float64Array, from: Float64Array, moved: Float64Array) {
  const n = onto.length / 2;
  const c = [0, 0, 0, 0];
  for (let i = 0; i < n; i++) {
    c[0] += onto[2 * i] / n;
    c[1] += onto[2 * i + 1] / n;
    c[2] += from[2 * i] / n;
    c[3] += from[2 * i + 1] / n;
  }
  let dot = 0;
  let cross = 0;
  for (let i = 0; i < n; i++) {
    const ax = from[2 * i] - c[2];
    const ay = from[2 * i + 1] - c[3];
    const bx = onto[2 * i] - c[0];
    const by = onto[2 * i + 1] - c[1];
    dot += ax * bx + ay * by;
    cross += ax * by - ay * bx;
  }
  const size = Math.sqrt(dot * dot + cross * cross) || 1;
  const cos = dot / size || (cross === 0 ? 1 : 0);
  const sin = cross / size;
  for (let i = 0; i < moved.length / 2; i++) {
    const x = moved[2 * i] - c[2];
    const y = moved[2 * i + 1] - c[3];
    moved[2 * i] = c[0] + cos * x - sin * y;
    moved[2 * i + 1] = c[1] + sin * x + cos * y;
  }
}

/** Flat length along the strip's axis and width across it, m. */
export interface StripSize {
  length: number;
  width: number;
}

/** Size in the flat of the strip that runs over these curves from left to right, its axis from the mean of their starts to the mean of their ends. */
export function measureStripSize(curves: readonly Curve[]): StripSize {
  const flat: Float64Array[] = [];
  let last: Float64Array | null = null;
  for (let k = 1; k < curves.length; k++) {
    const [l, r] = unrollLadder(curves[k - 1], curves[k]);
    if (last) {
      const from = l.slice();
      joinInPlace(last, from, l);
      joinInPlace(last, from, r);
    } else flat.push(l);
    flat.push(r);
    last = r;
  }
  const axis = [0, 0];
  for (const c of flat) {
    axis[0] += c[2 * BAYS] - c[0];
    axis[1] += c[2 * BAYS + 1] - c[1];
  }
  const size = Math.sqrt(axis[0] ** 2 + axis[1] ** 2);
  const ux = size > 0 ? axis[0] / size : 1;
  const uy = size > 0 ? axis[1] / size : 0;
  let lowX = Number.POSITIVE_INFINITY;
  let highX = Number.NEGATIVE_INFINITY;
  let lowY = Number.POSITIVE_INFINITY;
  let highY = Number.NEGATIVE_INFINITY;
  for (const c of flat)
    for (let i = 0; i <= BAYS; i++) {
      const x = ux * c[2 * i] + uy * c[2 * i + 1];
      const y = -uy * c[2 * i] + ux * c[2 * i + 1];
      lowX = Math.min(lowX, x);
      highX = Math.max(highX, x);
      lowY = Math.min(lowY, y);
      highY = Math.max(highY, y);
    }
  return { length: highX - lowX, width: highY - lowY };
}
