// Control lengths of panels whose measures can be read off.
import { expect, it } from "vitest";
import { measureControl } from "../../../src/core/panels/outline/controlLengths.ts";
import { outlinePanel } from "../../../src/core/panels/outline/outlinePanel.ts";
import type { Allowances } from "../../../src/core/records/job.ts";
import { type Part, panelFrom } from "../panelFrom.ts";

const ALLOW: Allowances = { seam: 40, seamOn: "both", pocket: 60, pocketStrip: false, cover: 0, clamp: 50, hem: 30 };
const cutOf = (parts: Part[], from: number[], to: number[]) => {
  const panel = panelFrom(parts);
  return outlinePanel({ ...panel, axis: { from, to, turn: 0 } }, { seams: [], anchors: [] }, ALLOW).output;
};

it("a trapezium: sides, diagonals and quarter widths by hand", () => {
  // Width 2000 at x = 0, 1200 at x = 8000; ends are sides 1 (right) and 3 (left).
  const { control } = cutOf(
    [
      { kind: "seam", id: "S1", points: [[0, -1000]] },
      { kind: "clamped", id: "E1", points: [[8000, -600]] },
      { kind: "seam", id: "S2", points: [[8000, 600]] },
      { kind: "clamped", id: "E2", points: [[0, 1000]] },
    ],
    [0, 3],
    [1, 2],
  );
  const long = Math.hypot(8000, 400);
  expect(control.sides.map((s) => s.net)).toEqual([long, 1200, long, 2000].map((v) => expect.closeTo(v, 6)));
  expect(control.sides.map((s) => s.chord)).toEqual([long, 1200, long, 2000].map((v) => expect.closeTo(v, 6)));
  // From the left end's corners 3 (where side 3 begins, top) and 0 to the right end's 1 and 2, crosswise.
  expect(control.diagonals).toEqual([
    { from: 3, to: 1, length: expect.closeTo(Math.hypot(8000, 1600), 6) },
    { from: 0, to: 2, length: expect.closeTo(Math.hypot(8000, 1600), 6) },
  ]);
  const lap = 20 * Math.sqrt(1 + 0.05 ** 2);
  expect(control.widths.map((w) => [w.share, w.at, w.net, w.cut])).toEqual(
    [
      [0.25, 2000, 1800],
      [0.5, 4000, 1600],
      [0.75, 6000, 1400],
    ].map(([share, at, net]) => [
      share,
      expect.closeTo(at, 6),
      expect.closeTo(net, 6),
      expect.closeTo(net + 2 * lap, 2),
    ]),
  );
});

it("a gore has no diagonals; its middle width is half its end's", () => {
  const { control } = cutOf(
    [
      { kind: "seam", id: "S1", points: [[0, 0]] },
      { kind: "clamped", id: "E1", points: [[6000, -900]] },
      { kind: "seam", id: "S2", points: [[6000, 900]] },
    ],
    [0],
    [1, 2],
  );
  expect(control.diagonals).toEqual([]);
  expect(control.widths.map((w) => w.net)).toEqual([450, 900, 1350].map((v) => expect.closeTo(v, 6)));
});

it("a bowed side is measured along its line and across its chord", () => {
  const R = 10_000;
  const bow = Array.from({ length: 41 }, (_, k): [number, number] => {
    const a = 0.4 * (k / 40 - 0.5);
    return [R * Math.sin(a), R * (Math.cos(0.2) - Math.cos(a))];
  });
  const panel = cutOf(
    [
      { kind: "seam", id: "S1", points: bow.slice(0, -1) },
      { kind: "clamped", id: "E1", points: [bow[40]] },
      { kind: "seam", id: "S2", points: [[bow[40][0], 1500]] },
      { kind: "clamped", id: "E2", points: [[bow[0][0], 1500]] },
    ],
    [0, 42],
    [40, 41],
  );
  const control = measureControl(panel);
  expect(Math.abs(control.sides[0].net - 0.4 * R)).toBeLessThan(0.2);
  expect(control.sides[0].chord).toBeCloseTo(2 * R * Math.sin(0.2), 6);
  expect(Math.abs(control.widths[1].net - (1500 + R * (1 - Math.cos(0.2))))).toBeLessThan(0.3);
});
