import { describe, expect, test } from "vitest";
import { measurePanel } from "../../../src/core/papers/drawing/panelMeasures.ts";
import type { FactsPanel, Vec2 } from "../../../src/core/records/facts.ts";
import { sampleFacts } from "../made/sampleFacts.ts";
import { withControl } from "../made/withControl.ts";

/** A four-sided panel with the given corners, ends left and right, cut 30 mm outside on all sides of a rectangle. */
function quad(corners: [Vec2, Vec2, Vec2, Vec2]): FactsPanel {
  const [a, b, c, d] = corners;
  const side = { kind: "free" as const, lengthErected: 1, lengthFlat: 1, allowance: 30 };
  return withControl({
    ...sampleFacts().panels![0]!,
    flat: corners,
    net: corners,
    cut: [
      [a[0] - 30, a[1] - 30],
      [b[0] + 30, b[1] - 30],
      [c[0] + 30, c[1] + 30],
      [d[0] - 30, d[1] + 30],
    ],
    axis: { from: [0, 3], to: [1, 2], turn: 0 },
    sides: [0, 1, 2, 3].map((k) => ({
      ...side,
      id: `E${k + 1}`,
      vertices: [k, (k + 1) % 4],
      netFrom: k,
      netTo: (k + 1) % 4,
    })),
  });
}

describe("measurePanel", () => {
  test("a rectangle 4000 × 3000: diagonals 5000, widths 3000 net and 3060 cut, measured from side 4", () => {
    const m = measurePanel(
      quad([
        [0, 0],
        [4000, 0],
        [4000, 3000],
        [0, 3000],
      ]),
    );
    expect(m.diagonals.map((d) => [d.from.name, d.to.name, d.length])).toEqual([
      ["C4", "C2", 5000],
      ["C1", "C3", 5000],
    ]);
    expect(m.widths.map((w) => w.station)).toEqual([1000, 2000, 3000]);
    for (const w of m.widths) {
      expect(w.netWidth).toBeCloseTo(3000, 9);
      expect(w.cutWidth).toBeCloseTo(3060, 9);
    }
    // Cut 30 mm outside all round: every side 60 mm longer on the cloth, the diagonal that of 4060 × 3060.
    expect(m.sides).toEqual([4060, 3060, 4060, 3060].map((l) => ({ edge: l, chord: l })));
    for (const d of m.diagonals) expect(d.cutLength).toBeCloseTo(Math.hypot(4060, 3060), 9);
    expect(m.start).toBe("side 4");
  });

  test("a trapezium and its turned and moved copy give the same figures", () => {
    const corners: [Vec2, Vec2, Vec2, Vec2] = [
      [0, 0],
      [4000, 500],
      [4000, 2500],
      [0, 3000],
    ];
    const turned = corners.map(([x, y]): Vec2 => [0.6 * x - 0.8 * y + 77, 0.8 * x + 0.6 * y - 5]) as typeof corners;
    const [m, t] = [measurePanel(quad(corners)), measurePanel(quad(turned))];
    // Widths of a trapezium run straight from 3000 to 2000.
    expect(m.widths.map((w) => Math.round(w.netWidth * 1e6) / 1e6)).toEqual([2750, 2500, 2250]);
    t.widths.forEach((w, i) => {
      expect(w.netWidth).toBeCloseTo(m.widths[i]!.netWidth, 6);
      expect(w.station).toBeCloseTo(m.widths[i]!.station, 6);
    });
    t.diagonals.forEach((d, i) => {
      expect(d.length).toBeCloseTo(Math.hypot(4000, 2500), 6);
      expect(d.length).toBeCloseTo(m.diagonals[i]!.length, 6);
    });
  });

  test("where the cut line has no corner near, nothing is measured along it; a bowed edge is longer than its chord", () => {
    const base = quad([
      [0, 0],
      [4000, 0],
      [4000, 3000],
      [0, 3000],
    ]);
    const bowed: Vec2[] = Array.from({ length: 41 }, (_, i): Vec2 => [100 * i, -30 - 200 * (1 - ((i - 20) / 20) ** 2)]);
    const m = measurePanel({ ...base, cut: [...bowed, [4000, 3000], [0, 3000]] });
    // Arc of a parabola with sag f over the span l: l (1 + 8/3 (f/l)²) to the order of (f/l)⁴ (textbook series).
    expect(m.sides[0]!.chord).toBeCloseTo(4000, 6);
    expect(m.sides[0]!.edge).toBeCloseTo(4000 * (1 + (8 / 3) * 0.05 ** 2), 0);
    const round: Vec2[] = Array.from({ length: 60 }, (_, i) => [
      2000 + 2500 * Math.cos((i * Math.PI) / 30),
      1500 + 2500 * Math.sin((i * Math.PI) / 30),
    ]);
    const none = measurePanel({ ...base, cut: round });
    expect(none.sides.every((s) => s.edge === null && s.chord === null)).toBe(true);
    expect(none.diagonals.every((d) => d.cutLength === null && d.length === 5000)).toBe(true);
  });

  test("a pointed panel has no diagonal and names the corner it is measured from", () => {
    const base = quad([
      [0, 0],
      [4000, -1000],
      [4000, 1000],
      [0, 0],
    ]);
    const triangle: FactsPanel = {
      ...base,
      net: base.net.slice(0, 3),
      cut: base.net.slice(0, 3),
      flat: base.flat.slice(0, 3),
      axis: { from: [0], to: [1, 2], turn: 0 },
      sides: base.sides.slice(0, 3).map((s, k) => ({ ...s, vertices: [k, (k + 1) % 3], netTo: (k + 1) % 3 })),
    };
    const m = measurePanel(withControl(triangle));
    expect(m.diagonals).toEqual([]);
    expect(m.start).toBe("corner C1");
    expect(m.widths.map((w) => Math.round(w.netWidth))).toEqual([500, 1000, 1500]);
  });

  test("facts without control lengths give no diagonal and no width, sides all the same", () => {
    const { control: _, ...bare } = sampleFacts().panels![0]!;
    const m = measurePanel(bare);
    expect([m.diagonals, m.widths, m.start]).toEqual([[], [], ""]);
    expect(m.sides).toEqual(measurePanel(sampleFacts().panels![0]!).sides);
  });
});
