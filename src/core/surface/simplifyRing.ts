// A closed ring with fewer points. Does not promise that the result is simple: whoever needs that, asks isSimpleRing.
// Source: Douglas and Peucker, Algorithms for the reduction of the number of points, 1973, on the two halves of the ring.
import type { PlaneRing } from "./ring.ts";

/** Two points that are true corners of a ring: the leftmost (lowest of them) and the one furthest from it. */
function twoCorners(ring: PlaneRing): [number, number] {
  const n = ring.length / 2;
  let first = 0;
  for (let i = 1; i < n; i++)
    if (ring[2 * i] < ring[2 * first] || (ring[2 * i] === ring[2 * first] && ring[2 * i + 1] < ring[2 * first + 1]))
      first = i;
  const away = (i: number) => Math.hypot(ring[2 * i] - ring[2 * first], ring[2 * i + 1] - ring[2 * first + 1]);
  let far = first === 0 ? 1 : 0;
  for (let i = 0; i < n; i++) if (away(i) > away(far)) far = i;
  return [first, far];
}

/** Fewer points, none of those left out further than `within` from the new line (Douglas and Peucker 1973, on two halves). */
export function simplifyRing(ring: PlaneRing, within: number): PlaneRing {
  const n = ring.length / 2;
  if (n <= 4) return ring;
  const [first, far] = twoCorners(ring);
  const keep = new Uint8Array(n);
  keep[first] = 1;
  keep[far] = 1;
  const stack = [
    [first, far > first ? far : far + n],
    [far, first > far ? first : first + n],
  ];
  while (stack.length > 0) {
    const [a, b] = stack.pop() as number[];
    const px = ring[2 * (a % n)];
    const py = ring[2 * (a % n) + 1];
    const dx = ring[2 * (b % n)] - px;
    const dy = ring[2 * (b % n) + 1] - py;
    const length = Math.hypot(dx, dy);
    const ux = length > 0 ? dx / length : 0;
    const uy = length > 0 ? dy / length : 0;
    let worst = within * within;
    let split = -1;
    for (let i = a + 1; i < b; i++) {
      const wx = ring[2 * (i % n)] - px;
      const wy = ring[2 * (i % n) + 1] - py;
      const s = Math.max(0, Math.min(length, wx * ux + wy * uy));
      const off = (wx - s * ux) ** 2 + (wy - s * uy) ** 2;
      if (off > worst) {
        worst = off;
        split = i;
      }
    }
    if (split >= 0) {
      keep[split % n] = 1;
      stack.push([a, split], [split, b]);
    }
  }
  return ring.filter((_, i) => keep[i >> 1] === 1);
}
