// Measures of a closed ring of points in the plane: area, box, inside, simple. Any unit. No booleans (panels/polygonBooleans.ts).
// Source: textbook plane geometry (shoelace formula, even-odd rule); the sweep of isSimpleRing is own.

/** A closed ring, first point not repeated. @shape 2*n */
export type PlaneRing = Float64Array<ArrayBuffer>;

/** Box of a ring: least and greatest x and y. */
export interface RingBox {
  x0: number;
  y0: number;
  x1: number;
  y1: number;
}

/** Signed area, positive for a counter-clockwise ring. Taken about the first point, so that a far origin costs no digits. */
export function ringArea(ring: PlaneRing): number {
  const n = ring.length / 2;
  let twice = 0;
  for (let i = 1; i + 1 < n; i++) {
    const ax = ring[2 * i] - ring[0];
    const ay = ring[2 * i + 1] - ring[1];
    twice += ax * (ring[2 * i + 3] - ring[1]) - ay * (ring[2 * i + 2] - ring[0]);
  }
  return twice / 2;
}

/** Box round a ring. */
export function ringBox(ring: PlaneRing): RingBox {
  const box = { x0: Infinity, y0: Infinity, x1: -Infinity, y1: -Infinity };
  for (let i = 0; i < ring.length; i += 2) {
    box.x0 = Math.min(box.x0, ring[i]);
    box.x1 = Math.max(box.x1, ring[i]);
    box.y0 = Math.min(box.y0, ring[i + 1]);
    box.y1 = Math.max(box.y1, ring[i + 1]);
  }
  return box;
}

/** Whether a point lies inside a ring (even-odd rule; a point on the line may fall either way). */
export function ringHolds(ring: PlaneRing, x: number, y: number): boolean {
  let inside = false;
  for (let i = 0, j = ring.length - 2; i < ring.length; j = i, i += 2) {
    const yi = ring[i + 1];
    const yj = ring[j + 1];
    if (yi > y !== yj > y && x < ((ring[j] - ring[i]) * (y - yi)) / (yj - yi) + ring[i]) inside = !inside;
  }
  return inside;
}

/** Square of the distance from a point to the segment a–b. */
export function pointSegmentSquared(px: number, py: number, ax: number, ay: number, b: [number, number]): number {
  const ux = b[0] - ax;
  const uy = b[1] - ay;
  const length2 = ux * ux + uy * uy;
  const t = length2 > 0 ? Math.min(1, Math.max(0, ((px - ax) * ux + (py - ay) * uy) / length2)) : 0;
  const dx = px - ax - t * ux;
  const dy = py - ay - t * uy;
  return dx * dx + dy * dy;
}

/** Least distance from a point to a ring's line. */
export function ringDistance(ring: PlaneRing, x: number, y: number): number {
  let best = Infinity;
  for (let i = 0, j = ring.length - 2; i < ring.length; j = i, i += 2)
    best = Math.min(best, pointSegmentSquared(x, y, ring[j], ring[j + 1], [ring[i], ring[i + 1]]));
  return Math.sqrt(best);
}

/** Which side of a→b the point c lies on: positive left, negative right, 0 on the line. */
function turn(r: PlaneRing, a: number, b: number, c: number): number {
  return (r[b] - r[a]) * (r[c + 1] - r[a + 1]) - (r[b + 1] - r[a + 1]) * (r[c] - r[a]);
}

function between(r: PlaneRing, a: number, b: number, c: number): boolean {
  return (
    Math.min(r[a], r[b]) <= r[c] &&
    r[c] <= Math.max(r[a], r[b]) &&
    Math.min(r[a + 1], r[b + 1]) <= r[c + 1] &&
    r[c + 1] <= Math.max(r[a + 1], r[b + 1])
  );
}

function segmentsMeet(r: PlaneRing, a: number, b: number, c: number, d: number): boolean {
  const s1 = Math.sign(turn(r, a, b, c));
  const s2 = Math.sign(turn(r, a, b, d));
  const s3 = Math.sign(turn(r, c, d, a));
  const s4 = Math.sign(turn(r, c, d, b));
  if (s1 * s2 < 0 && s3 * s4 < 0) return true;
  return (
    (s1 === 0 && between(r, a, b, c)) ||
    (s2 === 0 && between(r, a, b, d)) ||
    (s3 === 0 && between(r, c, d, a)) ||
    (s4 === 0 && between(r, c, d, b))
  );
}

/** Whether neighbouring segments that share the point b double back on each other. */
function doublesBack(r: PlaneRing, a: number, b: number, c: number): boolean {
  return turn(r, a, b, c) === 0 && (r[b] - r[a]) * (r[c] - r[b]) + (r[b + 1] - r[a + 1]) * (r[c + 1] - r[b + 1]) <= 0;
}

/** Whether a ring has three points or more, none doubled, and its line meets itself nowhere. Sweep along x. */
export function isSimpleRing(ring: PlaneRing): boolean {
  const n = ring.length / 2;
  if (n < 3) return false;
  const end = (s: number) => (s + 2 < ring.length ? s + 2 : 0);
  for (let s = 0; s < ring.length; s += 2) {
    if (ring[s] === ring[end(s)] && ring[s + 1] === ring[end(s) + 1]) return false;
    if (doublesBack(ring, s, end(s), end(end(s)))) return false;
  }
  const low = (s: number) => Math.min(ring[s], ring[end(s)]);
  const order = Array.from({ length: n }, (_, k) => 2 * k).sort((a, b) => low(a) - low(b) || a - b);
  let active: number[] = [];
  for (const s of order) {
    const x = low(s);
    const e = end(s);
    const y0 = Math.min(ring[s + 1], ring[e + 1]);
    const y1 = Math.max(ring[s + 1], ring[e + 1]);
    let stale = 0;
    for (const o of active) {
      const f = end(o);
      if (Math.max(ring[o], ring[f]) < x) {
        stale++;
        continue;
      }
      if (f === s || e === o) continue;
      if (Math.min(ring[o + 1], ring[f + 1]) > y1 || Math.max(ring[o + 1], ring[f + 1]) < y0) continue;
      if (segmentsMeet(ring, s, e, o, f)) return false;
    }
    if (stale > 16 && stale * 2 > active.length) active = active.filter((o) => Math.max(ring[o], ring[end(o)]) >= x);
    active.push(s);
  }
  return true;
}
