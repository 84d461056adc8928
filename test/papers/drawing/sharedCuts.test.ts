// Shared edges are cut once: tilings whose lines are known, curves that fit into each other, and pieces that only touch.
import fc from "fast-check";
import { expect, test } from "vitest";
import { addStrokeInPlace, type Drawing, emptyDrawing, type Stroke } from "../../../src/core/papers/drawing/drawing.ts";
import { tableBites } from "../../../src/core/papers/drawing/placedCloth.ts";
import { rollDrawing } from "../../../src/core/papers/drawing/rollDrawing.ts";
import { withSharedCuts } from "../../../src/core/papers/drawing/sharedCuts.ts";
import type { Vec2 } from "../../../src/core/records/facts.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

function drawingOf(rings: Vec2[][]): Drawing {
  const drawing = emptyDrawing("made");
  for (const points of rings) addStrokeInPlace(drawing, { layer: "cut", points, closed: true });
  return drawing;
}

const box = (x0: number, y0: number, x1: number, y1: number): Vec2[] => [
  [x0, y0],
  [x1, y0],
  [x1, y1],
  [x0, y1],
];

function lengthOf({ points, closed }: Stroke): number {
  const ring = closed ? [...points, points[0]] : points;
  return ring.slice(1).reduce((sum, q, i) => sum + Math.hypot(q[0] - ring[i][0], q[1] - ring[i][1]), 0);
}
const cutLength = (drawing: Drawing) =>
  drawing.strokes.filter((s) => s.layer === "cut").reduce((sum, s) => sum + lengthOf(s), 0);

test("two boxes side by side, one longer: the later is an open run of three sides and a rest", () => {
  const { drawing, shared } = withSharedCuts(drawingOf([box(0, 0, 400, 100), box(100, 100, 700, 180)]));
  expect(shared).toBeCloseTo(300, 6);
  expect(drawing.strokes.map((s) => s.closed)).toEqual([true, false]);
  expect(drawing.strokes[1].points).toEqual([
    [400, 100],
    [700, 100],
    [700, 180],
    [100, 180],
    [100, 100],
  ]);
});

test("boxes on a grid: what is cut is just as long as the lines of the tiling, whatever the order", () => {
  // closed form: a wall of n by m cells has n (m + 1) sides across and m (n + 1) up
  fc.assert(
    fc.property(
      fc.integer({ min: 1, max: 5 }),
      fc.integer({ min: 1, max: 5 }),
      fc.infiniteStream(fc.nat()),
      (n, m, turns) => {
        const cells = Array.from({ length: n * m }, (_, k) => [k % n, Math.floor(k / n)]);
        for (let k = cells.length - 1; k > 0; k--) {
          const o = (turns.next().value as number) % (k + 1);
          [cells[k], cells[o]] = [cells[o], cells[k]];
        }
        const rings = cells.map(([i, j]) => box(300 * i, 120 * j, 300 * i + 300, 120 * j + 120));
        const { drawing } = withSharedCuts(drawingOf(rings));
        expect(cutLength(drawing)).toBeCloseTo(n * (m + 1) * 300 + m * (n + 1) * 120, 3);
      },
    ),
    { seed: 5, numRuns: 40 },
  );
});

test("curves that fit into each other are cut once, drawn the other way round, rounded or with further points on them", () => {
  const bow = (k: number): Vec2 => [100 * k, Math.round(1000 * 40 * Math.sin((Math.PI * k) / 10)) / 1000];
  const curve = Array.from({ length: 11 }, (_, k) => bow(k));
  const finer = curve.flatMap((p, k): Vec2[] =>
    k === 0 ? [p] : [[(p[0] + curve[k - 1][0]) / 2, (p[1] + curve[k - 1][1]) / 2 + 0.004], p],
  );
  const below: Vec2[] = [...[...curve].reverse(), [0, -300], [1000, -300]];
  const above: Vec2[] = [...finer, [1000, 300], [0, 300]];
  const { drawing, shared } = withSharedCuts(drawingOf([below, above]));
  const length = lengthOf({ layer: "cut", points: curve, closed: false });
  expect(shared).toBeCloseTo(length, 1);
  expect(drawing.strokes[1].points).toHaveLength(4);
});

test("pieces that touch in a point or lie a knife's width apart are cut whole", () => {
  const rings = [box(0, 0, 100, 100), box(100, 100, 200, 200), box(0, 101, 99, 200)];
  const { drawing, shared } = withSharedCuts(drawingOf(rings));
  expect(shared).toBe(0);
  expect(drawing.strokes.every((s) => s.closed)).toBe(true);
});

test("a roll whose edges may be shared draws no line twice and says so; with a gap every outline stays closed", () => {
  const sample = sampleFacts({ stop: false });
  const pieces = [0, 1, 2].map((k) => ({ ...sample.pieces![0]!, id: `C${k}`, cut: box(0, 0, 900, 200) }));
  const placements = pieces.map((p, k) => ({ panel: p.id, rotation: 0 as const, x: 0, y: 200 * k, order: k + 1 }));
  const drawn = (gap: number) => {
    const roll = { ...sample.rolls![0]!, used: 900, placements, gap };
    return rollDrawing({ ...sample, pieces, rolls: [roll] }, roll);
  };
  expect(cutLength(drawn(0))).toBeCloseTo(4 * 900 + 6 * 200, 6);
  expect(drawn(0).labels.some((l) => l.text.startsWith("SHARED EDGES, 1800 MM, ARE CUT ONCE"))).toBe(true);
  expect(
    drawn(10)
      .strokes.filter((s) => s.layer === "cut")
      .every((s) => s.closed),
  ).toBe(true);
});

test("an edge shared with a piece of an earlier table length is not cut again on the next", () => {
  const sample = sampleFacts({ stop: false });
  const pieces = [0, 1].map((k) => ({ ...sample.pieces![0]!, id: `C${k}`, cut: box(0, 0, 900, 200) }));
  const placements = pieces.map((p, k) => ({ panel: p.id, rotation: 0 as const, x: 900 * k, y: 0, order: k + 1 }));
  const roll = { ...sample.rolls![0]!, used: 1800, placements, gap: 0, bite: 1000, feeds: [0, 900] };
  const facts = { ...sample, pieces, rolls: [roll] };
  const lengths = tableBites(facts, roll).map((b) => cutLength(rollDrawing(facts, b.roll, b.words, b.before)));
  expect(lengths[0]).toBeCloseTo(2200, 6);
  expect(lengths[1]).toBeCloseTo(2000, 6);
});
