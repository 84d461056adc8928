// Long strips in stacks against the best patterns worked by hand: spoons, half-turn pairs, a stagger.
import { describe, expect, it } from "vitest";
import type { NestPiece } from "../../src/core/records/roll.ts";
import { runRolls } from "../../src/core/rolls/runRolls.ts";

const OPTIONS = { steps: 12, seconds: null, seed: 1, gap: 10, turn: true, bite: null, pins: [] };
const ROLL = { id: "A", fabric: "f", batch: null, selvedge: 0, length: 1e6, start: 0, flaws: [], assumed: false };

/** A strip of given lower and upper line, t from 0 to 1 along it. */
function strip(length: number, low: (t: number) => number, high: (t: number) => number, n = 16): number[] {
  const at = Array.from({ length: n + 1 }, (_, i) => i / n);
  const run = (line: (t: number) => number) => at.map((t) => [t * length, line(t)]);
  return [...run(low), ...run(high).reverse()].flat();
}

/** m of roll for 20 equal strips. */
function used(cut: number[], width: number): number {
  const pieces = Array.from(
    { length: 20 },
    (_, k): NestPiece => ({ id: `p${k}`, fabric: "f", batch: null, cut: Float64Array.from(cut) }),
  );
  const { output, checks } = runRolls(pieces, [{ ...ROLL, width }], OPTIONS);
  expect(checks.filter((c) => !c.holds)).toEqual([]);
  return output[0].used / 1000;
}

const arch = (t: number) => 4 * t * (1 - t);

describe("20 equal strips", () => {
  it("bananas lie like spoons: 3 across where their boxes lie 2 across", () => {
    // 600 wide, sagitta 300, roll 2500: boxes of 900 lie 2 across, 10 lanes of 6010. Spoons: 900 + 2·(600 + 10) = 2120, 7 lanes.
    const banana = strip(
      6000,
      (t) => 300 - 300 * arch(t),
      (t) => 900 - 300 * arch(t),
    );
    expect(used(banana, 2500)).toBeLessThan(7 * 6.01);
  });

  it("tapered gores lie by half-turn pairs", () => {
    // 900 to 150 over 5000, roll 1500: a pair is 450 + 525 + 10.1 + 450 = 1435 high, two unturned ones 1810: 10 lanes of 5010.
    const gore = strip(
      5000,
      (t) => -450 + 375 * t,
      (t) => 450 - 375 * t,
      1,
    );
    expect(used(gore, 1500)).toBeLessThan(10 * 5.01);
  });

  it("petals, bowed and tapered, lie three across by half turns", () => {
    // 1000 to 80 over 6000, bowed by 90 a side, roll 2500: 500 + 2·(720 + 10) + 500 = 2460 at most: 7 lanes of 6010.
    const half = (t: number) => 500 - 460 * t + 90 * arch(t);
    const petal = strip(6000, (t) => -half(t), half, 12);
    expect(used(petal, 2500)).toBeLessThan(7 * 6.01);
  });

  it("blunt gores that just do not fit beside each other lie a little apart along the roll", () => {
    // 1490 to 470 over 2700, roll 2450: end to end a turned pair is 745 + 980 + 10 + 745 = 2480 high. Moved on by p they are
    // 980 − 510·p/2700 apart in the middle: p = 159, so pairs of 2859, wide end to wide end: 10·2869 m, single file 54.2 m.
    const gore = strip(
      2700,
      (t) => -745 + 510 * t,
      (t) => 745 - 510 * t,
      1,
    );
    expect(used(gore, 2450)).toBeLessThan(10 * 2.93);
  });

  it("lenses lie staggered, tips between waists", () => {
    // 900 at the waist, 40 at the tips, roll 1500: none two across. Beside one another by p = 0.6 of the length they are
    // 590 apart: 19·3603 + 6000 = 74.45 m.
    const half = (t: number) => 20 + 430 * arch(t);
    expect(
      used(
        strip(6000, (t) => -half(t), half),
        1500,
      ),
    ).toBeLessThan(74.45);
  });
});
