// Not enough cloth: what is told to be missing is enough, whether it comes as a roll of its own or at the end of one.
import { describe, expect, it } from "vitest";
import { buildRandom } from "../../src/core/numeric/random.ts";
import type { NestPiece, StockRoll } from "../../src/core/records/roll.ts";
import { runRolls } from "../../src/core/rolls/runRolls.ts";

const OPTIONS = { steps: 30, seconds: null, seed: 1, gap: 10, turn: true, bite: null, pins: [] };
const ROLL: StockRoll = {
  id: "A",
  fabric: "f",
  batch: null,
  width: 2000,
  selvedge: 0,
  length: 3000,
  start: 0,
  flaws: [],
  assumed: false,
};
const box = (id: string, length: number, width: number, batch: string | null = null): NestPiece => ({
  id,
  fabric: "f",
  batch,
  cut: Float64Array.from([0, 0, length, 0, length, width, 0, width]),
});
const missing = (pieces: NestPiece[], stock: StockRoll[]) =>
  runRolls(pieces, stock, OPTIONS).findings.find((f) => f.code === "roll-short");

describe("cloth that is missing", () => {
  it("counts the gap before and between, and the trim of a roll (bug: the first gap and the trim were left out)", () => {
    const pieces = ["a", "b", "c"].map((id) => box(id, 1500, 1800));
    // Two of 1500 and the gap are more than 3000: one lies, two are left; behind the first they take 2·(10 + 1500).
    const roll = { ...ROLL, length: 1500 };
    expect(missing(pieces, [roll])?.value).toBeCloseTo(3.02, 6);
    expect(missing(pieces, [{ ...roll, length: 4520 }])).toBeUndefined();
    expect(missing(pieces, [{ ...roll, start: 400, length: 1900 }])?.value).toBeCloseTo(0.4 + 3.01, 6);
    // Rounded up: 3.0 m would be too little.
    expect(missing(pieces, [roll])?.text).toContain("3.1 m");
  });

  it("is enough in random stocks, as a new roll and as a longer one", () => {
    let short = 0;
    for (let seed = 1; seed <= 12; seed++) {
      const draw = buildRandom(seed);
      const pieces = Array.from({ length: 9 }, (_, k) => box(`p${k}`, 600 + 1500 * draw(), 300 + 1500 * draw()));
      const stock = ["A", "B"].map((id) => ({ ...ROLL, id, start: 120, length: 2500 + 1200 * draw() }));
      const told = missing(pieces, stock);
      if (!told) continue;
      short++;
      const more = Math.ceil((told.value as number) * 10) * 100;
      expect(missing(pieces, [...stock, { ...stock[0], id: "C", length: more }]), `seed ${seed}`).toBeUndefined();
      expect(
        missing(pieces, [stock[0], { ...stock[1], length: stock[1].length + more }]),
        `seed ${seed}`,
      ).toBeUndefined();
    }
    expect(short).toBeGreaterThan(7);
  });
});

describe("cloth of named batches", () => {
  it("is kept for those that must have it (bug: a larger panel of no batch took it, and cloth was told to be missing)", () => {
    const stock = [
      { ...ROLL, id: "A", batch: "b1", length: 1600 },
      { ...ROLL, id: "B", batch: null, length: 1600 },
    ];
    const pieces = [box("open", 1600, 1900), box("bound", 1500, 1900, "b1")];
    const { output, findings } = runRolls(pieces, stock, { ...OPTIONS, steps: 1 });
    expect(findings).toEqual([]);
    expect(output.map((r) => r.placements.map((p) => p.panel))).toEqual([["bound"], ["open"]]);
  });
});
