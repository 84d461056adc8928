// A simple ring as a few convex parts that together cover exactly its inside. Does not: approximate.
// Source: ear clipping (G. H. Meisters, Polygons have ears, 1975); parts merged across diagonals that are not needed
// (S. Hertel and K. Mehlhorn, Fast triangulation of simple polygons, 1983: at most four times the fewest).
import { type PlaneRing, ringArea } from "../../surface/ring.ts";
import { hullRing } from "../nestShape.ts";

/** Corners that turn by less than this share of a right angle's area count as straight. */
const STRAIGHT = 1e-12;

type Corner = (i: number, j: number, k: number) => number;

/** Corner numbers of a ring without those that lie on a straight line, counter-clockwise. */
function trueCorners(ring: PlaneRing, turn: Corner): number[] {
  const order = Array.from({ length: ring.length / 2 }, (_, i) => i);
  if (ringArea(ring) < 0) order.reverse();
  for (let k = 0, checked = 0; order.length > 3 && checked < order.length; ) {
    const n = order.length;
    if (turn(order[(k + n - 1) % n], order[k % n], order[(k + 1) % n]) === 0) {
      order.splice(k % n, 1);
      checked = 0;
      k = (k % n) + order.length - 1;
    } else {
      k++;
      checked++;
    }
  }
  return order;
}

function holdsCorner(turn: Corner, ear: [number, number, number], p: number): boolean {
  const [a, b, c] = ear;
  return turn(a, b, p) >= 0 && turn(b, c, p) >= 0 && turn(c, a, p) >= 0;
}

/** Triangles of a simple polygon, or null where no ear is left (it is not simple). */
function clipEars(corners: number[], turn: Corner, same: (a: number, b: number) => boolean): number[][] | null {
  const left = [...corners];
  const triangles: number[][] = [];
  while (left.length > 3) {
    const n = left.length;
    let best = -1;
    for (let k = 0; k < n && best < 0; k++) {
      const ear: [number, number, number] = [left[(k + n - 1) % n], left[k], left[(k + 1) % n]];
      const t = turn(...ear);
      if (t < 0) continue;
      const blocked = left.some(
        (p) => !ear.includes(p) && !same(p, ear[0]) && !same(p, ear[2]) && holdsCorner(turn, ear, p),
      );
      if (!blocked) best = k;
    }
    if (best < 0) return null;
    const ear = [left[(best + n - 1) % n], left[best], left[(best + 1) % n]];
    if (turn(ear[0], ear[1], ear[2]) > 0) triangles.push(ear);
    left.splice(best, 1);
  }
  if (turn(left[0], left[1], left[2]) > 0) triangles.push(left);
  return triangles;
}

/** Joins two parts along the side a→b of the first, or null where that would not be convex. */
function joinParts(p: number[], q: number[], a: number, b: number, turn: Corner): number[] | null {
  const from = (part: number[], start: number) => {
    const k = part.indexOf(start);
    return [...part.slice(k), ...part.slice(0, k)];
  };
  // p from b round to a, then q from a round to b, ends left out.
  const joined = [...from(p, b), ...from(q, a).slice(1, -1)];
  const n = joined.length;
  for (let k = 0; k < n; k++) if (turn(joined[k], joined[(k + 1) % n], joined[(k + 2) % n]) < 0) return null;
  return joined;
}

function mergeParts(triangles: number[][], turn: Corner, size: (a: number, b: number) => number): number[][] {
  const owner = new Map<string, number>();
  const parts: (number[] | null)[] = [...triangles];
  const sides: [number, number][] = [];
  const claim = (part: number[], id: number) => {
    part.forEach((a, k) => {
      owner.set(`${a},${part[(k + 1) % part.length]}`, id);
    });
  };
  triangles.forEach((t, id) => {
    claim(t, id);
    t.forEach((a, k) => {
      sides.push([a, t[(k + 1) % 3]]);
    });
  });
  sides.sort((s, t) => size(...t) - size(...s) || s[0] - t[0] || s[1] - t[1]);
  for (const [a, b] of sides) {
    const i = owner.get(`${a},${b}`);
    const j = owner.get(`${b},${a}`);
    if (i === undefined || j === undefined || i === j) continue;
    const joined = joinParts(parts[i] as number[], parts[j] as number[], a, b, turn);
    if (!joined) continue;
    owner.delete(`${a},${b}`);
    owner.delete(`${b},${a}`);
    parts[i] = joined;
    parts[j] = null;
    claim(joined, i);
  }
  return parts.filter((p) => p !== null);
}

/**
 * Convex parts of a simple ring; the hull alone where the ring turns out not to be simple.
 * @shape rings 2*n, counter-clockwise
 */
export function convexParts(ring: PlaneRing): PlaneRing[] {
  const area = Math.abs(ringArea(ring));
  const turn: Corner = (i, j, k) => {
    const t =
      (ring[2 * j] - ring[2 * i]) * (ring[2 * k + 1] - ring[2 * i + 1]) -
      (ring[2 * j + 1] - ring[2 * i + 1]) * (ring[2 * k] - ring[2 * i]);
    return Math.abs(t) <= STRAIGHT * area ? 0 : t;
  };
  const same = (a: number, b: number) => ring[2 * a] === ring[2 * b] && ring[2 * a + 1] === ring[2 * b + 1];
  const size = (a: number, b: number) => Math.hypot(ring[2 * a] - ring[2 * b], ring[2 * a + 1] - ring[2 * b + 1]);
  const triangles = clipEars(trueCorners(ring, turn), turn, same);
  if (!triangles) return [hullRing(ring)];
  return mergeParts(triangles, turn, size).map((part) =>
    Float64Array.from(part.flatMap((i) => [ring[2 * i], ring[2 * i + 1]])),
  );
}
