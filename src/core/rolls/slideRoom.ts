// How far a shape may slide along an axis before it comes within the gap of another: exact, corner against side.
// Two rings that are apart and move on a straight line first meet at a corner of one of them. Source: own.
import type { PlaneRing } from "../surface/ring.ts";

/** A ring at a place; its box begins at 0, 0. */
export interface PlacedRing {
  shape: {
    ring: PlaneRing;
    /** Extents along x and y. */
    length: number;
    height: number;
    /** How far the true outline may lie outside the ring. */
    slack: number;
  };
  x: number;
  y: number;
}

/** The moving shape is drawn narrower by this share across its way, so that what it slides along does not stop it. */
const NARROW = 1e-8;
/** Scratch for cross coordinates of the moving shape, so that a slide allocates nothing. */
const SCRATCH = new Float64Array(512);
/** What lies behind by less than this share of the size counts as touched. */
const TOUCH = 1e-7;

/** Greatest coordinate along the way, at cross coordinate s, of the band of radius g round the side a–b; −Infinity outside. */
function farSide(s: number, am: number, as: number, bm: number, bs: number, g: number): number {
  let best = -Infinity;
  const da = Math.abs(s - as);
  if (da <= g) best = am + Math.sqrt(g * g - da * da);
  const db = Math.abs(s - bs);
  if (db <= g) best = Math.max(best, bm + Math.sqrt(g * g - db * db));
  const ds = bs - as;
  if (ds !== 0) {
    const dm = bm - am;
    const scale = g / Math.hypot(dm, ds);
    const nm = scale * Math.abs(ds);
    const ns = ds > 0 ? -scale * dm : scale * dm;
    const t = (s - as - ns) / ds;
    if (t >= 0 && t <= 1) best = Math.max(best, am + nm + t * dm);
  }
  return best;
}

/**
 * How far `moving` can go towards smaller x (axis 0) or smaller y (axis 1) before it is nearer than the gap to `fixed`.
 * @returns a distance from 0 to `limit`; shapes that are nearer than the gap already are not told apart from ones behind
 */
export function slideRoom(moving: PlacedRing, fixed: PlacedRing, axis: 0 | 1, gap: number, limit: number): number {
  const A = moving.shape;
  const B = fixed.shape;
  const g = gap + A.slack + B.slack;
  const cross = 1 - axis;
  const am = axis === 0 ? moving.x : moving.y;
  const as = axis === 0 ? moving.y : moving.x;
  const bm = axis === 0 ? fixed.x : fixed.y;
  const bs = axis === 0 ? fixed.y : fixed.x;
  const spanA = axis === 0 ? A.height : A.length;
  const spanB = axis === 0 ? B.height : B.length;
  if (as - g >= bs + spanB || as + spanA + g <= bs) return limit;
  const deepA = axis === 0 ? A.length : A.height;
  const deepB = axis === 0 ? B.length : B.height;
  if (am - (bm + deepB) - g >= limit || am + deepA + g < bm) return limit;
  const a = A.ring;
  const b = B.ring;
  const middle = as + spanA / 2;
  const touch = TOUCH * (spanA + deepA);
  const shrink = 1 - NARROW;
  let room = limit;
  const nA = a.length / 2;
  const sA = nA <= SCRATCH.length ? SCRATCH : new Float64Array(nA);
  for (let i = 0; i < nA; i++) sA[i] = middle + (as + a[2 * i + cross] - middle) * shrink;
  for (let k = 0, j = b.length - 2; k < b.length; j = k, k += 2) {
    const pm = b[j + axis] + bm;
    const ps = b[j + cross] + bs;
    const qm = b[k + axis] + bm;
    const qs = b[k + cross] + bs;
    const low = Math.min(ps, qs) - g;
    const high = Math.max(ps, qs) + g;
    if (high < as || low > as + spanA || am - Math.max(pm, qm) - g > room) continue;
    for (let i = 0; i < nA; i++) {
      const s = sA[i];
      if (s < low || s > high) continue;
      const t = am + a[2 * i + axis] - farSide(s, pm, ps, qm, qs, g);
      if (t < room && t >= -touch) room = Math.max(0, t);
    }
  }
  for (let i = 0, j = a.length - 2; i < a.length; j = i, i += 2) {
    const pm = a[j + axis] + am;
    const ps = sA[j >> 1];
    const qm = a[i + axis] + am;
    const qs = sA[i >> 1];
    const low = Math.min(ps, qs) - g;
    const high = Math.max(ps, qs) + g;
    if (high < bs || low > bs + spanB) continue;
    for (let k = 0; k < b.length; k += 2) {
      const s = b[k + cross] + bs;
      if (s < low || s > high) continue;
      const t = -farSide(s, -pm, ps, -qm, qs, g) - (b[k + axis] + bm);
      if (t < room && t >= -touch) room = Math.max(0, t);
    }
  }
  return room;
}
