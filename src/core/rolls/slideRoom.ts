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
    /** Points in rising order of x, and of y. */
    rising: [Uint32Array<ArrayBuffer>, Uint32Array<ArrayBuffer>];
  };
  x: number;
  y: number;
}

/** The moving shape is drawn narrower by this share across its way, so that what it slides along does not stop it. */
const NARROW = 1e-8;
/** Scratch for cross coordinates, so that a slide allocates nothing. */
const SCRATCH = new Float64Array(512);
/** What lies behind by less than this share of the size counts as touched. */
const TOUCH = 1e-7;

function scratchOf(n: number): Float64Array {
  return n <= SCRATCH.length ? SCRATCH : new Float64Array(n);
}

/** First of n rising numbers that is not below a limit. */
function firstFrom(rising: Float64Array, n: number, limit: number): number {
  let lo = 0;
  let hi = n;
  while (lo < hi) {
    const mid = (lo + hi) >> 1;
    if (rising[mid] < limit) lo = mid + 1;
    else hi = mid;
  }
  return lo;
}

/** Points of a ring in rising order of x and of y. */
export function risingOrders(ring: PlaneRing): [Uint32Array<ArrayBuffer>, Uint32Array<ArrayBuffer>] {
  const along = (axis: number) =>
    Uint32Array.from({ length: ring.length / 2 }, (_, i) => i).sort(
      (p, q) => ring[2 * p + axis] - ring[2 * q + axis] || p - q,
    );
  return [along(0), along(1)];
}

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
  const orderA = A.rising[cross];
  const sA = scratchOf(nA);
  for (let i = 0; i < nA; i++) sA[i] = middle + (as + a[2 * orderA[i] + cross] - middle) * shrink;
  for (let k = 0, j = b.length - 2; k < b.length; j = k, k += 2) {
    const pm = b[j + axis] + bm;
    const ps = b[j + cross] + bs;
    const qm = b[k + axis] + bm;
    const qs = b[k + cross] + bs;
    const low = Math.min(ps, qs) - g;
    const high = Math.max(ps, qs) + g;
    if (high < as || low > as + spanA || am - Math.max(pm, qm) - g > room) continue;
    for (let i = firstFrom(sA, nA, low); i < nA && sA[i] <= high; i++) {
      const t = am + a[2 * orderA[i] + axis] - farSide(sA[i], pm, ps, qm, qs, g);
      if (t < room && t >= -touch) room = Math.max(0, t);
    }
  }
  return sidesOnPoints(moving, fixed, axis, g, room);
}

/** The other half: sides of the moving shape against points of the fixed one. */
function sidesOnPoints(moving: PlacedRing, fixed: PlacedRing, axis: 0 | 1, g: number, limit: number): number {
  const A = moving.shape;
  const B = fixed.shape;
  const cross = 1 - axis;
  const am = axis === 0 ? moving.x : moving.y;
  const as = axis === 0 ? moving.y : moving.x;
  const bm = axis === 0 ? fixed.x : fixed.y;
  const bs = axis === 0 ? fixed.y : fixed.x;
  const spanA = axis === 0 ? A.height : A.length;
  const spanB = axis === 0 ? B.height : B.length;
  const deepB = axis === 0 ? B.length : B.height;
  const touch = TOUCH * (spanA + (axis === 0 ? A.length : A.height));
  const middle = as + spanA / 2;
  const shrink = 1 - NARROW;
  const a = A.ring;
  const b = B.ring;
  const nB = b.length / 2;
  const orderB = B.rising[cross];
  const sB = scratchOf(nB);
  for (let i = 0; i < nB; i++) sB[i] = bs + b[2 * orderB[i] + cross];
  let room = limit;
  for (let i = 0, j = a.length - 2; i < a.length; j = i, i += 2) {
    const pm = a[j + axis] + am;
    const ps = middle + (as + a[j + cross] - middle) * shrink;
    const qm = a[i + axis] + am;
    const qs = middle + (as + a[i + cross] - middle) * shrink;
    const low = Math.min(ps, qs) - g;
    const high = Math.max(ps, qs) + g;
    if (high < bs || low > bs + spanB || Math.min(pm, qm) - g - bm - deepB > room) continue;
    for (let k = firstFrom(sB, nB, low); k < nB && sB[k] <= high; k++) {
      const t = -farSide(sB[k], -pm, ps, -qm, qs, g) - (b[2 * orderB[k] + axis] + bm);
      if (t < room && t >= -touch) room = Math.max(0, t);
    }
  }
  return room;
}
