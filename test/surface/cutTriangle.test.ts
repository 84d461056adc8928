import fc from "fast-check";
import { expect, test } from "vitest";
import { crossChords, meetChords, partTriangle, type TriangleRim } from "../../src/core/surface/cutTriangle.ts";

/** Triangle (0,0) (6,0) (0,6) with n points on each side. */
function makeRim(n: readonly [number, number, number]): TriangleRim {
  const corner = [0, 0, 6, 0, 0, 6];
  const rim: TriangleRim = { vertex: [], x: [], y: [], sides: [] };
  for (let k = 0; k < 3; k++) {
    const m = (k + 1) % 3;
    for (let i = 0; i <= n[k]; i++) {
      const t = i / (n[k] + 1);
      rim.vertex.push(rim.vertex.length);
      rim.x.push(corner[2 * k] + t * (corner[2 * m] - corner[2 * k]));
      rim.y.push(corner[2 * k + 1] + t * (corner[2 * m + 1] - corner[2 * k + 1]));
      rim.sides.push(i === 0 ? (1 << k) | (1 << ((k + 2) % 3)) : 1 << k);
    }
  }
  return rim;
}
const doubled = (rim: TriangleRim, [i, j, k]: readonly [number, number, number]) =>
  (rim.x[j] - rim.x[i]) * (rim.y[k] - rim.y[i]) - (rim.y[j] - rim.y[i]) * (rim.x[k] - rim.x[i]);
const leastAngle = (rim: TriangleRim, t: readonly [number, number, number]) => {
  const at = (p: number, q: number, r: number) => {
    const [ux, uy, wx, wy] = [rim.x[q] - rim.x[p], rim.y[q] - rim.y[p], rim.x[r] - rim.x[p], rim.y[r] - rim.y[p]];
    return Math.atan2(Math.abs(ux * wy - uy * wx), ux * wx + uy * wy);
  };
  return Math.min(at(t[0], t[1], t[2]), at(t[1], t[2], t[0]), at(t[2], t[0], t[1]));
};

test("chords cross where their ends alternate, not where they share one", () => {
  expect(crossChords([0, 4], [2, 6])).toBe(true);
  expect(crossChords([6, 2], [4, 0])).toBe(true);
  expect(crossChords([0, 4], [4, 6])).toBe(false);
  expect(crossChords([0, 4], [1, 3])).toBe(false);
  const rim = makeRim([1, 1, 1]);
  // From (3,0) to (0,6) and from (0,0) to (3,3): x = 2, two thirds of the second.
  expect(meetChords(rim, [0, 3], [1, 4])).toBeCloseTo(2 / 3, 14);
});

test("any rim and chords: all area, no turned or flat triangle, chords kept, no better least angle among all fillings of one polygon", () => {
  fc.assert(
    fc.property(
      fc.tuple(fc.nat(3), fc.nat(3), fc.nat(3)),
      fc.array(fc.tuple(fc.nat(11), fc.nat(11)), { maxLength: 4 }),
      (n, draws) => {
        const rim = makeRim(n);
        const size = rim.vertex.length;
        const chords: [number, number][] = [];
        for (const [a, b] of draws) {
          const c: [number, number] = [a % size, b % size];
          if (c[0] === c[1] || (rim.sides[c[0]] & rim.sides[c[1]]) !== 0) continue;
          if (!chords.some((d) => crossChords(c, d))) chords.push(c);
        }
        const parts = partTriangle(rim, chords);
        expect(parts).toHaveLength(size - 2);
        let sum = 0;
        for (const t of parts) {
          expect(doubled(rim, t)).toBeGreaterThan(1e-9);
          sum += doubled(rim, t);
        }
        expect(sum).toBeCloseTo(36, 10);
        for (const c of chords) expect(parts.some((t) => t.includes(c[0]) && t.includes(c[1]))).toBe(true);
        if (chords.length > 0) return;
        // Brute force over all triangulations of the whole rim.
        const best = (list: number[]): number => {
          if (list.length < 3) return Number.POSITIVE_INFINITY;
          let most = Number.NEGATIVE_INFINITY;
          for (let k = 1; k + 1 < list.length; k++) {
            const t: [number, number, number] = [list[0], list[k], list[list.length - 1]];
            if (doubled(rim, t) < 1e-9) continue;
            most = Math.max(most, Math.min(leastAngle(rim, t), best(list.slice(0, k + 1)), best(list.slice(k))));
          }
          return most;
        };
        if (size > 9) return;
        expect(Math.min(...parts.map((t) => leastAngle(rim, t)))).toBeCloseTo(best(rim.vertex), 9);
      },
    ),
    { seed: 4, numRuns: 200 },
  );
});
