// The judge of a nest must find every fault it is there for: layouts spoiled by hand.
import { describe, expect, it } from "vitest";
import type { NestedRoll, NestPiece } from "../../src/core/records/roll.ts";
import { checkComplete, checkRoll } from "../../src/core/rolls/checkRolls.ts";

const square = (id: string, batch: string | null = null): NestPiece => ({
  id,
  fabric: "f",
  batch,
  cut: Float64Array.from([0, 0, 100, 0, 100, 100, 0, 100]),
});
const pieces = [square("a"), square("b", "b2")];
const byId = new Map(pieces.map((p) => [p.id, p]));
const good: NestedRoll = {
  id: "R",
  fabric: "f",
  batch: "b2",
  width: 300,
  usableWidth: 280,
  length: 1000,
  used: 210,
  gap: 10,
  flaws: [{ x: 300, y: 0, length: 50, width: 50 }],
  placements: [
    { panel: "a", rotation: 0, x: 0, y: 0 },
    { panel: "b", rotation: 180, x: 210, y: 100 },
  ],
  utilisation: 20_000 / (210 * 300),
  lowerBound: 100,
};
const spoil = (more: Partial<NestedRoll>, start = 0) => {
  const { checks, findings } = checkRoll({ ...good, ...more }, start, byId);
  return { held: checks.map((c) => c.holds), codes: findings.map((f) => f.code), levels: findings.map((f) => f.level) };
};
const second = (x: number, y: number): Partial<NestedRoll> => ({
  placements: [good.placements[0], { panel: "b", rotation: 180, x, y }],
});

describe("checkRoll", () => {
  it("lets a good layout pass", () => {
    expect(spoil({})).toEqual({ held: [true, true, true], codes: [], levels: [] });
  });

  it("finds an overlap, a gap too small, and both at slanting corners", () => {
    expect(spoil(second(150, 100))).toEqual({ held: [false, true, true], codes: ["nest-gap"], levels: ["stop"] });
    expect(spoil(second(209.9, 100)).codes).toEqual(["nest-gap"]);
    expect(spoil(second(207, 207)).codes).toEqual(["nest-gap"]);
    expect(spoil(second(207.1, 207.1)).codes).toEqual([]);
  });

  it("finds pieces off the cloth, in the trim, on flaws and on another cloth", () => {
    expect(spoil(second(210, 281)).codes).toEqual(["nest-place"]);
    expect(spoil(second(1001, 100)).codes).toEqual(["nest-place"]);
    expect(spoil({}, 5).codes).toEqual(["nest-place"]);
    expect(spoil(second(310, 100)).codes).toEqual(["nest-place"]);
    expect(spoil({ batch: "b1" }).codes).toEqual(["nest-place"]);
    expect(spoil({ fabric: "g" }).codes).toEqual(["nest-place"]);
  });

  it("finds a bound that is passed", () => {
    expect(spoil({ lowerBound: 211 }).held).toEqual([true, true, false]);
  });

  it("counts pieces: missing or twice", () => {
    expect(checkComplete([good], pieces).holds).toBe(true);
    expect(checkComplete([good], [...pieces, square("c")]).holds).toBe(false);
    expect(checkComplete([{ ...good, placements: [good.placements[0], good.placements[0]] }], pieces).holds).toBe(
      false,
    );
  });
});
