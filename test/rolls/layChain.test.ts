// Wide pieces one behind the other: against chains worked by hand, their forecast against exact slides, and flaws in their way.
import { describe, expect, it } from "vitest";
import type { NestPiece, StockRoll } from "../../src/core/records/roll.ts";
import { offsetBehind, openOffsets } from "../../src/core/rolls/chainOffsets.ts";
import { buildShape } from "../../src/core/rolls/nestShape.ts";
import { runRolls } from "../../src/core/rolls/runRolls.ts";
import { slideRoom } from "../../src/core/rolls/slideRoom.ts";

const OPTIONS = { steps: 4, seconds: null, seed: 1, gap: 10, turn: true, bite: null, pins: [] };
const ROLL: StockRoll = {
  id: "A",
  fabric: "f",
  batch: null,
  width: 1450,
  selvedge: 0,
  length: 1e6,
  start: 0,
  flaws: [],
  assumed: false,
};

/** A gore from `wide` to `tip` across, its wide end cut aslant by `lean` along the roll. */
const gore = (length: number, wide: number, tip: number, lean = 0) =>
  Float64Array.from([0, -wide / 2, length, -tip / 2, length, tip / 2, lean, wide / 2]);
const many = (count: number, cut: (k: number) => Float64Array<ArrayBuffer>): NestPiece[] =>
  Array.from({ length: count }, (_, k) => ({ id: `p${k}`, fabric: "f", batch: null, cut: cut(k) }));

describe("wide gores", () => {
  it("lie tip past tip and wide end to wide end", () => {
    // 1200 to 80 over 8000, roll 1450, one at the lower edge and the next at the upper: past each other by s the tips are
    // 1450 − 1200 = 250 apart in the middle and 80 + 0.07·s high together: s = (250 − 80 − 10 / cos) / 0.07 = 2284.
    // Ten pairs of 16000 − 2284, wide ends 10 apart; single file they take 160 m.
    const { output, checks } = runRolls(
      many(20, () => gore(8000, 1200, 80)),
      [ROLL],
      OPTIONS,
    );
    expect(checks.filter((c) => !c.holds)).toEqual([]);
    expect(output[0].used).toBeGreaterThan(10 * (16_000 - 2284) + 90 - 30);
    expect(output[0].used).toBeLessThan(10 * (16_000 - 2284) + 90 + 100);
  });

  it("find the partner whose slanting end fits theirs, each of another length", () => {
    // Wide ends lean by 900 to either side; a half turn keeps the lean, so equal ones meet without loss and unlike ones waste 900
    // and more. Tips as above, the middle lines counted: 11 joints, six of them tips that save 2284.
    const lean = (k: number) => (k % 3 === 0 ? 900 : -900);
    const pieces = many(12, (k) => gore(7000 + 150 * k, 1200, 80, lean(k)));
    const middles = pieces.reduce((sum, _, k) => sum + 7000 + 150 * k - lean(k) / 2, 0);
    const { output, checks } = runRolls(pieces, [ROLL], OPTIONS);
    expect(checks.filter((c) => !c.holds)).toEqual([]);
    expect(output[0].used).toBeLessThan(middles - 6 * 2284 + 900);
  });

  it("go on behind a flaw that leaves them no room before it, and keep the trim", () => {
    const stock = { ...ROLL, start: 300, flaws: [{ x: 9000, y: 0, length: 500, width: 1450 }] };
    const { output, checks, findings } = runRolls(
      many(6, () => gore(8000, 1200, 80)),
      [stock],
      OPTIONS,
    );
    expect(findings).toEqual([]);
    expect(checks.filter((c) => !c.holds)).toEqual([]);
    // One before the flaw; behind it two pairs and one: 2·(16000 − 2284) + 8000 + 20.
    expect(output[0].used).toBeLessThan(9510 + 2 * 13_716 + 8020 + 100);
  });

  it("on two rolls, and where none may be turned", () => {
    const short = ["A", "B"].map((id) => ({ ...ROLL, id, length: 30_000 }));
    const two = runRolls(
      many(6, () => gore(8000, 1200, 80)),
      short,
      OPTIONS,
    );
    expect(two.findings).toEqual([]);
    expect(two.output.map((r) => r.placements.length).sort()).toEqual([2, 4]);
    const unturned = runRolls(
      many(4, () => gore(8000, 1200, 80)),
      [ROLL],
      { ...OPTIONS, turn: false },
    );
    expect(unturned.output[0].placements.every((p) => p.rotation === 0)).toBe(true);
    expect(unturned.checks.filter((c) => !c.holds)).toEqual([]);
  });
});

describe("the forecast", () => {
  it("is the exact slide, but for what falls between two lines", () => {
    const [a, b] = [0, 180].map((turn) => buildShape(gore(8000, 1200, 80, 350), turn, `g${turn}`));
    const offsets = openOffsets(1450, 10);
    for (const [front, behind] of [
      [a, b],
      [b, a],
      [a, a],
    ])
      for (const higher of [-30, -7, 0, 12, 33]) {
        const at = { shape: behind, x: 20_000, y: 2000 + higher * offsets.level };
        const exact = 20_000 - slideRoom(at, { shape: front, x: 0, y: 2000 }, 0, 10, 20_000);
        // A line's height at the slope of a long side: 0.07.
        expect(Math.abs(offsetBehind(offsets, front, behind, higher) - exact)).toBeLessThan(offsets.level / 0.06);
      }
  });
});
