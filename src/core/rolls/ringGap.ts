// The exact distance of two placed outlines, 0 where they overlap: the judge of every layout. Own segment code, boxes first.
import { type PlaneRing, pointSegmentSquared, ringBox, ringDistance, ringHolds } from "../surface/ring.ts";

/** Corners of a ring at a place. */
function placedPoints(ring: PlaneRing, x: number, y: number): PlaneRing {
  const out = new Float64Array(ring.length);
  for (let i = 0; i < ring.length; i += 2) {
    out[i] = ring[i] + x;
    out[i + 1] = ring[i + 1] + y;
  }
  return out;
}

/** Sides of a ring that come within `reach` of a box. */
function sidesNear(r: PlaneRing, box: [number, number, number, number], reach: number): number[] {
  const near: number[] = [];
  for (let i = 0, j = r.length - 2; i < r.length; j = i, i += 2)
    if (
      Math.min(r[i], r[j]) <= box[2] + reach &&
      Math.max(r[i], r[j]) >= box[0] - reach &&
      Math.min(r[i + 1], r[j + 1]) <= box[3] + reach &&
      Math.max(r[i + 1], r[j + 1]) >= box[1] - reach
    )
      near.push(j);
  return near;
}

function boxOf(r: PlaneRing): [number, number, number, number] {
  const { x0, y0, x1, y1 } = ringBox(r);
  return [x0, y0, x1, y1];
}

/** How far points p and q lie on either side of the line a–b: the lesser of the two, 0 where both are on one side. */
function straddle(r: PlaneRing, a: number, b: number, o: PlaneRing, p: number, q: number): number {
  const ux = r[b] - r[a];
  const uy = r[b + 1] - r[a + 1];
  const length = Math.hypot(ux, uy) || 1;
  const s = (ux * (o[p + 1] - r[a + 1]) - uy * (o[p] - r[a])) / length;
  const t = (ux * (o[q + 1] - r[a + 1]) - uy * (o[q] - r[a])) / length;
  return s * t < 0 ? Math.min(Math.abs(s), Math.abs(t)) : 0;
}

/** A few points well inside a ring: middles of chords across it. */
function innerPoints(r: PlaneRing): [number, number][] {
  const box = boxOf(r);
  const points: [number, number][] = [];
  for (const share of [0.137, 0.4213, 0.7129, 0.911]) {
    const x = box[0] + share * (box[2] - box[0]);
    const ys: number[] = [];
    for (let i = 0, j = r.length - 2; i < r.length; j = i, i += 2)
      if (r[i] > x !== r[j] > x) ys.push(r[j + 1] + ((x - r[j]) / (r[i] - r[j])) * (r[i + 1] - r[j + 1]));
    ys.sort((p, q) => p - q);
    for (let k = 0; k + 1 < ys.length; k += 2) points.push([x, (ys[k] + ys[k + 1]) / 2]);
  }
  return points;
}

function deepInside(r: PlaneRing, x: number, y: number, touch: number): boolean {
  return ringHolds(r, x, y) && ringDistance(r, x, y) > touch;
}

/** Shares of the side i–i2 of b at which it meets the line of a, with 0 and 1, rising. */
function meetingShares(b: PlaneRing, i: number, i2: number, a: PlaneRing, near: number[]): number[] {
  const shares = [0, 1];
  const ux = b[i2] - b[i];
  const uy = b[i2 + 1] - b[i + 1];
  const [x0, x1] = [Math.min(b[i], b[i2]), Math.max(b[i], b[i2])];
  for (const k of near) {
    const k2 = k + 2 < a.length ? k + 2 : 0;
    if (Math.max(a[k], a[k2]) < x0 || Math.min(a[k], a[k2]) > x1) continue;
    const vx = a[k2] - a[k];
    const vy = a[k2 + 1] - a[k + 1];
    const det = ux * vy - uy * vx;
    if (det === 0) continue;
    const wx = a[k] - b[i];
    const wy = a[k + 1] - b[i + 1];
    const t = (wx * uy - wy * ux) / det;
    const s = (wx * vy - wy * vx) / det;
    if (t >= -1e-9 && t <= 1 + 1e-9 && s > 0 && s < 1) shares.push(s);
  }
  return shares.sort((p, q) => p - q);
}

/** Whether any part of the line of `inner` lies deeper than `touch` inside `outer`: corners, and middles between meetings. */
function holdsDeep(outer: PlaneRing, inner: PlaneRing, touch: number): boolean {
  const box = boxOf(outer);
  const within = (x: number, y: number) => x > box[0] && x < box[2] && y > box[1] && y < box[3];
  const near = sidesNear(outer, boxOf(inner), 0);
  for (const i of sidesNear(inner, box, 0)) {
    const i2 = i + 2 < inner.length ? i + 2 : 0;
    const [x, y] = [inner[i], inner[i + 1]];
    if (within(x, y) && deepInside(outer, x, y, touch)) return true;
    const shares = meetingShares(inner, i, i2, outer, near);
    for (let k = 0; k + 1 < shares.length; k++) {
      const s = (shares[k] + shares[k + 1]) / 2;
      const [px, py] = [x + s * (inner[i2] - x), y + s * (inner[i2 + 1] - y)];
      if (within(px, py) && deepInside(outer, px, py, touch)) return true;
    }
  }
  return innerPoints(inner).some(([x, y]) => deepInside(outer, x, y, touch));
}

/**
 * Distance of two placed rings; −1 where they overlap deeper than `touch`; Infinity where it is more than `reach`.
 * @units as the rings
 */
export function ringGap(
  a: { ring: PlaneRing; x: number; y: number },
  b: { ring: PlaneRing; x: number; y: number },
  reach: number,
  touch: number,
): number {
  const pa = placedPoints(a.ring, a.x, a.y);
  const pb = placedPoints(b.ring, b.x, b.y);
  const [ba, bb] = [boxOf(pa), boxOf(pb)];
  if (ba[0] - reach > bb[2] || bb[0] - reach > ba[2] || ba[1] - reach > bb[3] || bb[1] - reach > ba[3]) return Infinity;
  const apart = ba[2] - bb[0] <= touch || bb[2] - ba[0] <= touch || ba[3] - bb[1] <= touch || bb[3] - ba[1] <= touch;
  if (!apart && (holdsDeep(pa, pb, touch) || holdsDeep(pb, pa, touch))) return -1;
  const sa = sidesNear(pa, bb, reach);
  const sb = sidesNear(pb, ba, reach);
  let best = reach * reach;
  let found = false;
  for (const i of sa) {
    const i2 = i + 2 < pa.length ? i + 2 : 0;
    const far = Math.sqrt(best);
    const [x0, x1] = [Math.min(pa[i], pa[i2]) - far, Math.max(pa[i], pa[i2]) + far];
    const [y0, y1] = [Math.min(pa[i + 1], pa[i2 + 1]) - far, Math.max(pa[i + 1], pa[i2 + 1]) + far];
    for (const j of sb) {
      const j2 = j + 2 < pb.length ? j + 2 : 0;
      if (Math.max(pb[j], pb[j2]) < x0 || Math.min(pb[j], pb[j2]) > x1) continue;
      if (Math.max(pb[j + 1], pb[j2 + 1]) < y0 || Math.min(pb[j + 1], pb[j2 + 1]) > y1) continue;
      const depth = Math.min(straddle(pa, i, i2, pb, j, j2), straddle(pb, j, j2, pa, i, i2));
      if (depth > touch) return -1;
      const d =
        depth > 0
          ? 0
          : Math.min(
              pointSegmentSquared(pa[i], pa[i + 1], pb[j], pb[j + 1], [pb[j2], pb[j2 + 1]]),
              pointSegmentSquared(pa[i2], pa[i2 + 1], pb[j], pb[j + 1], [pb[j2], pb[j2 + 1]]),
              pointSegmentSquared(pb[j], pb[j + 1], pa[i], pa[i + 1], [pa[i2], pa[i2 + 1]]),
              pointSegmentSquared(pb[j2], pb[j2 + 1], pa[i], pa[i + 1], [pa[i2], pa[i2 + 1]]),
            );
      if (d <= best) {
        best = d;
        found = true;
      }
    }
  }
  return found ? Math.sqrt(best) : Infinity;
}
