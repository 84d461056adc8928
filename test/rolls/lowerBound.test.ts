// Lower bounds by hand and against layouts that are known.
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { boundLength } from "../../src/core/rolls/lowerBound.ts";

const box = (l: number, w: number) => Float64Array.from([0, 0, l, 0, l, w, 0, w]);

describe("lower bounds", () => {
  it("area, longest piece, chords past half, third and quarter of the width", () => {
    expect(boundLength([box(100, 50), box(100, 50)], 100, 0, 0)).toBeCloseTo(100, 9);
    expect(boundLength([box(700, 5)], 100, 0, 0)).toBe(700);
    // Three pieces of 51: no two share an x, whatever the area says (153 of 100 would be 1.53 lengths).
    expect(boundLength([box(100, 51), box(100, 51), box(100, 51)], 100, 0, 0)).toBeCloseTo(300, 9);
    // Five of 34: only two across, so 2.5 lengths.
    expect(
      boundLength(
        Array.from({ length: 5 }, () => box(100, 34)),
        100,
        0,
        0,
      ),
    ).toBeCloseTo(250, 9);
    // Seven of 26: only three across.
    expect(
      boundLength(
        Array.from({ length: 7 }, () => box(90, 26)),
        100,
        0,
        0,
      ),
    ).toBeCloseTo(210, 9);
    // One of 70 beside two of 40: the 40s do not fit beside the 70 but share.
    expect(boundLength([box(100, 70), box(100, 40), box(100, 40)], 100, 0, 0)).toBeCloseTo(200, 9);
  });

  it("counts the gap and the trim", () => {
    // Two of 49 fit into 100 with a gap of 2 and not with 3.
    expect(boundLength([box(100, 49), box(100, 49)], 100, 2, 0)).toBeCloseTo(100, 6);
    expect(boundLength([box(100, 49), box(100, 49)], 100, 3, 25)).toBeCloseTo(225, 6);
  });

  it("takes a slanting chord at its parts: two triangles that share a rectangle", () => {
    const triangle = Float64Array.from([0, 0, 100, 0, 0, 60]);
    const bound = boundLength([triangle, triangle], 60, 0, 0);
    expect(bound).toBeGreaterThanOrEqual(100);
    expect(bound).toBeLessThanOrEqual(100 + 1e-9);
  });

  it("never passes a layout that exists: guillotine cuts of a rectangle", () => {
    fc.assert(
      fc.property(
        fc.array(fc.array(fc.double({ min: 0.05, max: 1, noNaN: true }), { minLength: 1, maxLength: 5 }), {
          minLength: 1,
          maxLength: 5,
        }),
        fc.constantFrom(0, 0.5, 4),
        (stacks, gap) => {
          // Each stack fills the width of 100 with its gaps, the stacks stand 30 long, a gap apart.
          const rings = stacks.flatMap((stack) => {
            const total = stack.reduce((sum, v) => sum + v, 0);
            return stack.map((v) => box(30, (v / total) * (100 - gap * (stack.length - 1))));
          });
          const used = stacks.length * 30 + (stacks.length - 1) * gap;
          expect(boundLength(rings, 100, gap, 0)).toBeLessThanOrEqual(used + 1e-6);
        },
      ),
      { seed: 9, numRuns: 300 },
    );
  });
});
