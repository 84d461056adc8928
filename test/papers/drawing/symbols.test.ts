import { expect, test } from "vitest";
import { emptyDrawing } from "../../../src/core/papers/drawing/drawing.ts";
import { addSymbolInPlace, cross, scaleBar } from "../../../src/core/papers/drawing/symbols.ts";

test("the bar is one frame 1000 long and nine ticks that stand where tenths are, also when moved", () => {
  const drawing = emptyDrawing("bar");
  addSymbolInPlace(drawing, scaleBar(1000), "bed", [300, -40], 0);
  const frames = drawing.strokes.filter((s) => s.closed);
  expect(frames).toHaveLength(1);
  const xs = frames[0]!.points.map((p) => p[0]);
  expect([Math.min(...xs), Math.max(...xs)]).toEqual([300, 1300]);
  const ticks = drawing.strokes.filter((s) => !s.closed);
  expect(ticks.map((t) => t.points[0]![0]).sort((a, b) => a - b)).toEqual([
    400, 500, 600, 700, 800, 900, 1000, 1100, 1200,
  ]);
  for (const t of ticks) {
    expect(t.points).toHaveLength(2);
    expect(t.points[0]![0]).toBe(t.points[1]![0]);
    expect(Math.min(t.points[0]![1], t.points[1]![1])).toBe(-40);
  }
});

test("a cross turned by 90 degrees is the same cross: two lines through its place", () => {
  for (const turn of [0, 90]) {
    const drawing = emptyDrawing("cross");
    addSymbolInPlace(drawing, cross(10), "mark", [5, 7], turn);
    const lines = drawing.strokes
      .map((s) =>
        s.points
          .map((p) => p.join())
          .sort()
          .join(" "),
      )
      .sort();
    expect(lines).toEqual(["0,7 10,7", "5,12 5,2"]);
  }
});
