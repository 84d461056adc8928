import fc from "fast-check";
import { expect, test } from "vitest";
import { CUT_START, fromCutStart } from "../../../src/core/papers/drawing/cutStart.ts";
import { panelDrawing, rollDrawing } from "../../../src/core/papers/drawing/rollDrawing.ts";
import type { Vec2 } from "../../../src/core/records/facts.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

/** A hoop of 100 mm whose leftmost part is smooth, cut off straight on its right: corners at 60° and −60°. */
const hoop = Array.from({ length: 49 }, (_, i): Vec2 => {
  const a = ((60 + (240 * i) / 48) * Math.PI) / 180;
  return [100 * Math.cos(a), 100 * Math.sin(a)];
});

test("a cut begins at the leftmost corner, not at the leftmost point of a smooth edge, and runs counter-clockwise", () => {
  const ring = fromCutStart(hoop);
  // Both corners lie as far left: the lower one.
  expect(ring[0]![0]).toBeCloseTo(50, 9);
  expect(ring[0]![1]).toBeCloseTo(-86.6025, 3);
  expect(fromCutStart([...hoop].reverse())).toEqual(ring);
  const smooth = Array.from({ length: 60 }, (_, i): Vec2 => [100 * Math.cos(i / 9.55), 100 * Math.sin(i / 9.55)]);
  expect(fromCutStart(smooth)[0]![0]).toBe(Math.min(...smooth.map((p) => p[0])));
});

test("whatever point a ring was listed from, and whichever way, it is the same ring and the same start", () => {
  const ring: Vec2[] = [
    [0, 10],
    [300, 0],
    [310, 200],
    [150, 230],
    [5, 190],
  ];
  fc.assert(
    fc.property(fc.nat(4), fc.boolean(), (k, back) => {
      const listed = [...ring.slice(k), ...ring.slice(0, k)];
      expect(fromCutStart(back ? listed.reverse() : listed)).toEqual(ring);
    }),
    { seed: 2 },
  );
});

test("every cut file says where its cuts begin", () => {
  const facts = sampleFacts();
  for (const d of [rollDrawing(facts, facts.rolls![0]!), panelDrawing(facts, facts.panels![0]!)])
    expect(d.labels.filter((l) => l.text === CUT_START).map((l) => l.layer)).toEqual(["bed"]);
});
