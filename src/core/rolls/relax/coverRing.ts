// A ring of fewer points that covers a given one: hollows bridged and rounded corners squared where that adds little. Does not:
// move any point inward. Source: own (least triangle first, after M. Visvalingam and J. D. Whyatt, 1993), outward only.
import { isSimpleRing, type PlaneRing, ringArea } from "../../surface/ring.ts";

type Point = [number, number];

const turnOf = (a: Point, b: Point, c: Point) => (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]);
const span = (a: Point, b: Point) => Math.hypot(b[0] - a[0], b[1] - a[1]) || 1;

/** How much leaving out corner k adds at most, Infinity where it is no hollow. */
function bridgeHeight(points: Point[], k: number): number {
  const n = points.length;
  const [a, b, c] = [points[(k + n - 1) % n], points[k], points[(k + 1) % n]];
  const t = turnOf(a, b, c);
  return t > 0 ? Infinity : -t / span(a, c);
}

/** Where the sides before and after side k meet, and how far outside of it; null where they do not, or a hollow is near. */
function squareCorner(points: Point[], k: number): { at: Point; height: number } | null {
  const n = points.length;
  const [a, b, c, d] = [points[(k + n - 1) % n], points[k], points[(k + 1) % n], points[(k + 2) % n]];
  if (turnOf(a, b, c) <= 0 || turnOf(b, c, d) <= 0) return null;
  const [ux, uy] = [b[0] - a[0], b[1] - a[1]];
  const [vx, vy] = [c[0] - d[0], c[1] - d[1]];
  const det = ux * vy - uy * vx;
  const t = ((c[0] - b[0]) * vy - (c[1] - b[1]) * vx) / det;
  if (!(t > 0) || !Number.isFinite(t)) return null;
  const at: Point = [b[0] + t * ux, b[1] + t * uy];
  // Beyond side k, or the sides run apart.
  return turnOf(b, c, at) < 0 ? { at, height: -turnOf(b, c, at) / span(b, c) } : null;
}

/** Bridges the hollow that adds least, until none adds as little as `within`. */
function bridgeInPlace(points: Point[], within: number): number {
  let most = 0;
  for (;;) {
    let best = -1;
    let least = within;
    for (let k = 0; k < points.length && points.length > 3; k++) {
      const h = bridgeHeight(points, k);
      if (h <= least) {
        least = h;
        best = k;
      }
    }
    if (best < 0) return most;
    points.splice(best, 1);
    most = Math.max(most, least);
  }
}

function squareInPlace(points: Point[], within: number, few: number): number {
  let most = 0;
  while (points.length > few) {
    let best = -1;
    let at: Point = [0, 0];
    let least = within;
    for (let k = 0; k < points.length; k++) {
      const square = squareCorner(points, k);
      if (!square || square.height > least) continue;
      least = square.height;
      at = square.at;
      best = k;
    }
    if (best < 0) return most;
    const next = (best + 1) % points.length;
    points[best] = at;
    points.splice(next, 1);
    most = Math.max(most, least);
  }
  return most;
}

/**
 * A ring that covers the given one, nowhere further out than `over`.
 * @param within added at one corner at most, each way
 * @shape 2*n -> 2*m, m at most n, counter-clockwise
 */
export function coverRing(ring: PlaneRing, within: number, few: number): { ring: PlaneRing; over: number } {
  const points: Point[] = Array.from({ length: ring.length / 2 }, (_, i) => [ring[2 * i], ring[2 * i + 1]]);
  if (ringArea(ring) < 0) points.reverse();
  bridgeInPlace(points, within);
  const squared = squareInPlace(points, within, few);
  const cover = Float64Array.from(points.flat());
  // Bridging twice at one place only ever spans hollows; what sticks out of the ring's box was squared.
  return isSimpleRing(cover) ? { ring: cover, over: 2 * squared } : { ring, over: 0 };
}
