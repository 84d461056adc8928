// What a piece on a roll is called in the drawing: never in letters too small to read, never outside its piece.
import { expect, it } from "vitest";
import { pieceLabel } from "../../src/page/flat/pieceLabel.ts";

it("a piece with room has its name, no larger than need be, whatever the scale", () => {
  for (const scale of [0.01, 0.05, 0.2]) {
    const label = pieceLabel("P2", 3, { length: 600 / scale, across: 200 / scale, scale });
    expect(label?.words).toBe("P2");
    expect(label!.height * scale).toBeCloseTo(24, 9);
  }
});

it("a pocket strip too low or too short for its name has its number in the order of cutting", () => {
  const strip = { length: 1000, across: 200, scale: 0.06 };
  const label = pieceLabel("north-strip-8", 17, strip);
  expect(label?.words).toBe("17");
  expect(label!.height * strip.scale).toBeGreaterThanOrEqual(11);
  // as high as its cloth at most by what a line is higher than its digits
  expect(label!.height).toBeLessThanOrEqual(1.25 * strip.across);
  expect(pieceLabel("north-strip-8", 17, { ...strip, across: 900, length: 5000 })?.words).toBe("north-strip-8");
});

it("no letters at all where none could be read: a piece too small, no number, a drawing not laid out yet", () => {
  expect(pieceLabel("north-strip-8", 17, { length: 1000, across: 100, scale: 0.06 })).toBeNull();
  expect(pieceLabel("north-strip-8", 117, { length: 300, across: 800, scale: 0.06 })).toBeNull();
  expect(pieceLabel("north-strip-8", undefined, { length: 1000, across: 200, scale: 0.06 })).toBeNull();
  expect(pieceLabel("P1", 1, { length: 1000, across: 200, scale: 0 })).toBeNull();
});
