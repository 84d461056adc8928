import { expect, test } from "vitest";
import { placedInOrder, tableBites } from "../../../src/core/papers/drawing/placedCloth.ts";
import { rollDrawing } from "../../../src/core/papers/drawing/rollDrawing.ts";
import type { Facts, Vec2 } from "../../../src/core/records/facts.ts";
import { cutOrder } from "../../../src/core/rolls/cutOrder.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

const square: Vec2[] = [
  [0, 0],
  [1000, 0],
  [1000, 500],
  [0, 500],
];

/** A roll of squares at the given places along it. */
function facts(starts: number[], bite: number | null): Facts {
  const sample = sampleFacts({ stop: false });
  const pieces = starts.map((_, i) => ({ ...sample.pieces![0]!, id: `C${i + 1}`, cut: square }));
  const placements = starts.map((x, i) => ({
    panel: `C${i + 1}`,
    rotation: 0 as const,
    x,
    y: 600 * (i % 2),
    order: 0,
  }));
  const flaws = [{ x: 2900, y: 0, length: 300, width: 50 }];
  const { order, feeds } = cutOrder(
    placements.map((p) => ({ id: p.panel, x0: p.x, x1: p.x + 1000, y0: p.y })),
    bite,
  );
  for (const p of placements) p.order = order.indexOf(p.panel) + 1;
  return {
    ...sample,
    pieces,
    rolls: [{ ...sample.rolls![0]!, used: Math.max(...starts) + 1000, placements, flaws, bite, feeds }],
  };
}

test("every piece is cut in just one table length, whole, in the order of the roll", () => {
  const f = facts([20, 500, 1100, 1700, 2200, 3000], 2000);
  const roll = f.rolls![0]!;
  const bites = tableBites(f, roll);
  const named = bites.map((b) => b.roll.placements.map((p) => p.panel));
  expect(named).toEqual([
    ["C1", "C2"],
    ["C3", "C4"],
    ["C5", "C6"],
  ]);
  for (const b of bites) {
    for (const c of placedInOrder(f, b.roll)) {
      expect(c.start).toBeGreaterThanOrEqual(0);
      expect(c.end).toBeLessThanOrEqual(2000);
    }
  }
  // The second begins at its first piece; the flaw from 2900 to 3200 lies 1800 mm on.
  expect(bites[1]!.words[0]).toContain("TABLE LENGTH 2 OF 3: X = 0 IS 1100 MM");
  expect(bites[1]!.roll.flaws[0]!.x).toBeCloseTo(1800, 9);
  const drawn = rollDrawing(f, bites[1]!.roll, bites[1]!.words);
  expect(drawn.strokes.filter((s) => s.layer === "cut")).toHaveLength(2);
  expect(drawn.labels.some((l) => l.text.startsWith("TABLE LENGTH 2"))).toBe(true);
});

test("no bite, or one the roll fits in, needs no table lengths; a piece too long gets one of its own", () => {
  expect(tableBites(facts([0, 1100], null), facts([0, 1100], null).rolls![0]!)).toEqual([]);
  expect(tableBites(facts([0, 1100], 5000), facts([0, 1100], 5000).rolls![0]!)).toEqual([]);
  const f = facts([0, 1700], 800);
  expect(tableBites(f, f.rolls![0]!).map((b) => b.roll.placements.length)).toEqual([1, 1]);
});

test("table lengths, their starts and the order within them are those of the roll's record, in the cut file too", () => {
  const starts = [20, 700, 350, 1100, 1900, 2300, 3000, 2600];
  for (const bite of [1200, 2000, 900]) {
    const f = facts(starts, bite);
    const roll = f.rolls![0]!;
    const order = [...roll.placements].sort((a, b) => a.order! - b.order!).map((p) => p.panel);
    const feeds = roll.feeds!;
    expect(placedInOrder(f, roll).map((c) => c.p.panel)).toEqual(order);
    const bites = tableBites(f, roll);
    expect(bites.flatMap((b) => placedInOrder(f, b.roll).map((c) => c.p.panel))).toEqual(order);
    // A piece longer than the table is fed on within one file.
    if (bite >= 1000) expect(bites.map((b) => b.from)).toEqual(feeds);
    else for (const b of bites) expect(feeds).toContain(b.from);
    const names = rollDrawing(f, roll)
      .labels.filter((l) => l.layer === "text")
      .map((l) => l.text.split(" ")[0]);
    expect(names).toEqual(order);
  }
});

test("beside a piece longer than the table the cloth is fed forward only; what lies whole on the table is cut there", () => {
  // bug: the long piece was fed to its end first, then the cloth back to the squares beside it
  const f = facts([0, 1100, 2300, 3400], 1500);
  const roll = f.rolls![0]!;
  const long: Vec2[] = square.map(([x, y]) => [5 * x, y]);
  f.pieces!.push({ ...f.pieces![0]!, id: "L", cut: long });
  roll.placements.push({ panel: "L", rotation: 0, x: 0, y: 1200 });
  roll.used = 5000;
  const laid = roll.placements.map((p) => ({
    id: p.panel,
    x0: p.x,
    x1: p.x + (p.panel === "L" ? 5000 : 1000),
    y0: p.y,
  }));
  const { order, feeds } = cutOrder(laid, 1500);
  for (const p of roll.placements) p.order = order.indexOf(p.panel) + 1;
  roll.feeds = feeds;
  // by hand: each square begins a feed; from 3400 the table reaches 4900, 100 mm short of the long piece's end
  expect(feeds).toEqual([0, 1100, 2300, 3400, 4900]);
  expect(order).toEqual(["C1", "C2", "C3", "C4", "L"]);
  const bites = tableBites(f, roll);
  expect(bites).toHaveLength(1);
  expect(bites[0]!.roll.feeds).toEqual([1100, 2300, 3400, 4900]);
  expect(bites[0]!.words[1]).toContain("UP TO THE NEXT FEED MARK");
});
