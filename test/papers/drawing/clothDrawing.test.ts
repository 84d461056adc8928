import { expect, test } from "vitest";
import { addPanelInPlace } from "../../../src/core/papers/drawing/clothDrawing.ts";
import type { Drawing } from "../../../src/core/papers/drawing/drawing.ts";
import type { Vec2 } from "../../../src/core/records/facts.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

test("slits are the knife's, before the outline that they open into; every other mark is the pen's", () => {
  const [panel] = sampleFacts({ stop: false }).panels ?? [];
  const slit: Vec2[] = [
    [100, 10],
    [100, 0],
  ];
  const drawing: Drawing = { name: "P1", strokes: [], labels: [] };
  addPanelInPlace(
    drawing,
    {
      ...panel,
      marks: [
        { kind: "slit", points: slit },
        { kind: "fold-line", points: slit },
      ],
    },
    {
      rotation: 180,
      x: 500,
      y: 300,
    },
  );
  const drawn = drawing.strokes.map(({ layer, closed, points }) => [layer, closed, points.length]);
  expect(drawn).toEqual([
    ["cut", false, 2],
    ["mark", false, 2],
    ["cut", true, panel.cut.length],
  ]);
  expect(drawing.strokes[0].points).toEqual([
    [400, 290],
    [400, 300],
  ]);
});
