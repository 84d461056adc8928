// The bound from lines along the roll: worked by hand, against strips cut up without loss, and against every layout found.
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { NestPiece } from "../../src/core/records/roll.ts";
import { boundByLevels } from "../../src/core/rolls/levelBound.ts";
import { boundLength } from "../../src/core/rolls/lowerBound.ts";
import { totalCloth } from "../../src/core/rolls/rollFigures.ts";
import { runRolls } from "../../src/core/rolls/runRolls.ts";
import { isSimpleRing, ringArea } from "../../src/core/surface/ring.ts";

const box = (l: number, w: number) => Float64Array.from([0, 0, l, 0, l, w, 0, w]);
const five = <T>(make: () => T): T[] => Array.from({ length: 5 }, make);

describe("lines along the roll", () => {
  it("tell gores that lie beside each other by their tips only", () => {
    // 800 across at the wide end, 5000 long, roll 1000: wherever one lies, the middle line runs through at least
    // 1 − (1000 − 800) / 800 of it. By area two of them are as good as one; by chords past half the roll 3 / 8 of each counts.
    const gore = Float64Array.from([0, 400, 5000, 0, 5000, 800]);
    const gores = five(() => gore);
    expect(boundByLevels(gores, 1000, 0)).toBeGreaterThan(0.97 * 5 * 3750);
    expect(boundByLevels(gores, 1000, 0)).toBeLessThanOrEqual(5 * 3750);
    expect(boundLength(gores, 1000, 0, 30)).toBeCloseTo(30 + boundByLevels(gores, 1000, 0), 9);
    // Turned or mirrored, it is the same.
    const turned = gores.map((g, k) => (k % 2 === 0 ? g : g.map((v, i) => (i % 2 === 0 ? 5000 : 800) - v)));
    expect(boundByLevels(turned, 1000, 0)).toBeCloseTo(boundByLevels(gores, 1000, 0), 6);
  });

  it("are area where all is narrow, and the sum of lengths where nothing fits beside another", () => {
    const narrow = Array.from({ length: 40 }, () => box(300, 300));
    expect(boundByLevels(narrow, 1400, 0)).toBeGreaterThan(0.9 * ((40 * 300 * 300) / 1400));
    expect(
      boundByLevels(
        five(() => box(300, 710)),
        1400,
        0,
      ),
    ).toBeCloseTo(1500, 6);
    // Exactly half the roll: two beside one another.
    expect(
      boundByLevels(
        five(() => box(300, 700)),
        1400,
        0,
      ),
    ).toBeLessThanOrEqual(750 + 1e-6);
  });

  it("count the gaps between pieces on one line, once less for each roll", () => {
    const wide = five(() => box(300, 710));
    expect(boundByLevels(wide, 1400, 10)).toBeCloseTo(1540, 6);
    expect(boundByLevels(wide, 1400, 10, 3)).toBeCloseTo(1520, 6);
    expect(boundByLevels(wide, 1400, 10, 9)).toBeCloseTo(1500, 6);
  });

  it("never pass a strip cut up without loss, whatever the cuts, turns and places its pieces are drawn at", () => {
    const share = fc.double({ min: -0.45, max: 0.45, noNaN: true });
    const cuts = fc.record({
      nx: fc.integer({ min: 1, max: 5 }),
      ny: fc.integer({ min: 1, max: 4 }),
      shifts: fc.array(share, { minLength: 60, maxLength: 60 }),
      turns: fc.array(fc.boolean(), { minLength: 20, maxLength: 20 }),
      length: fc.double({ min: 200, max: 9000, noNaN: true }),
    });
    let close = 0;
    fc.assert(
      fc.property(cuts, ({ nx, ny, shifts, turns, length }) => {
        const width = 1000;
        const node = (i: number, j: number) => {
          const k = 2 * (i * 5 + j);
          const dx = i === 0 || i === nx ? 0 : shifts[k % 60];
          const dy = j === 0 || j === ny ? 0 : shifts[(k + 1) % 60];
          return [((i + dx) * length) / nx, ((j + dy) * width) / ny];
        };
        const rings: Float64Array<ArrayBuffer>[] = [];
        for (let i = 0; i < nx; i++)
          for (let j = 0; j < ny; j++) {
            const ring = [node(i, j), node(i + 1, j), node(i + 1, j + 1), node(i, j + 1)].flat();
            const sign = turns[rings.length % 20] ? -1 : 1;
            rings.push(Float64Array.from(ring, (v) => sign * v + 17 * rings.length));
          }
        if (!rings.every(isSimpleRing)) return;
        const bound = boundLength(rings, width, 0, 0);
        expect(boundByLevels(rings, width, 0)).toBeLessThanOrEqual(length * (1 + 1e-6));
        expect(bound).toBeLessThanOrEqual(length * (1 + 1e-6));
        expect(bound).toBeGreaterThanOrEqual(rings.reduce((s, r) => s + Math.abs(ringArea(r)), 0) / width - 1e-6);
        if (boundByLevels(rings, width, 0) > 0.9 * length) close++;
      }),
      { seed: 12, numRuns: 200 },
    );
    // Not so weak that it could not be wrong.
    expect(close).toBeGreaterThan(50);
  });

  it("never pass a layout that was found: gores, bananas and blocks on one roll and on several", () => {
    const shape = fc.record({
      length: fc.double({ min: 300, max: 4000, noNaN: true }),
      width: fc.double({ min: 60, max: 900, noNaN: true }),
      bow: fc.double({ min: -0.15, max: 0.15, noNaN: true }),
      taper: fc.double({ min: 0.05, max: 1, noNaN: true }),
      skew: fc.double({ min: -400, max: 400, noNaN: true }),
      copies: fc.integer({ min: 1, max: 3 }),
    });
    const jobs = fc.record({
      shapes: fc.array(shape, { minLength: 1, maxLength: 4 }),
      gap: fc.constantFrom(0, 4, 15),
      start: fc.constantFrom(0, 60),
      length: fc.constantFrom(6000, 60_000),
      turn: fc.boolean(),
    });
    let decided = 0;
    fc.assert(
      fc.property(jobs, ({ shapes, gap, start, length, turn }) => {
        const outline = (s: (typeof shapes)[number]) => {
          const at = (t: number, side: number) => [
            t * s.length + side * s.skew * t,
            s.bow * s.length * 4 * t * (1 - t) + side * (s.width / 2) * (1 + (s.taper - 1) * t),
          ];
          const steps = [0, 0.2, 0.4, 0.6, 0.8, 1];
          return Float64Array.from([...steps.map((t) => at(t, -1)), ...steps.reverse().map((t) => at(t, 1))].flat());
        };
        const pieces = shapes
          .flatMap((s) => Array.from({ length: s.copies }, () => outline(s)))
          .map((cut, k): NestPiece => ({ id: `p${k}`, fabric: "f", batch: null, cut }))
          .filter((p) => isSimpleRing(p.cut));
        const roll = { fabric: "f", batch: null, width: 1080, selvedge: 40, length, start, flaws: [], assumed: false };
        const stock = ["A", "B", "C"].map((id) => ({ ...roll, id }));
        const options = { steps: 8, seconds: null, seed: 1, gap, turn, bite: null, pins: [] };
        const { output } = runRolls(pieces, stock, options);
        for (const r of output) {
          const cuts = r.placements.map((p) => pieces.find((q) => q.id === p.panel)!.cut);
          expect(boundLength(cuts, r.usableWidth, gap, start)).toBeLessThanOrEqual(r.used * (1 + 1e-6));
          if (boundLength(cuts, r.usableWidth, gap, start) > 0.97 * r.used) decided++;
        }
        const total = totalCloth(output, pieces, stock, gap);
        expect(total.bound).toBeLessThanOrEqual(total.used);
      }),
      { seed: 3, numRuns: 80 },
    );
    expect(decided).toBeGreaterThan(20);
  });
});
