// SVG cut files as another program draws them: the pixels of a renderer lie where the outlines of the facts lie, and nowhere else.
import { expect, test } from "vitest";
import { writeSvg } from "../../../src/core/papers/cutFiles/svg.ts";
import { withArcs } from "../../../src/core/papers/drawing/arcs.ts";
import { panelDrawing, rollDrawing } from "../../../src/core/papers/drawing/rollDrawing.ts";
import { sampleFacts } from "../made/sampleFacts.ts";
import { placedCuts } from "./readDxf.ts";
import { hasRaster, rasterReason, redFaults } from "./redPixels.ts";

test.skipIf(!hasRaster)(
  `what is drawn red is the cut outline of the facts, all of it and nothing else${rasterReason}`,
  () => {
    const facts = sampleFacts({ stop: false });
    const panel = facts.panels![0]!;
    const roll = rollDrawing(facts, facts.rolls![1]!);
    expect(redFaults(writeSvg(roll), roll, placedCuts(facts, 1))).toEqual([]);
    const arcs = withArcs(panelDrawing(facts, panel));
    expect(redFaults(writeSvg(arcs), arcs, [panel.cut])).toEqual([]);
    // A measure that finds nothing finds a wrong outline.
    const moved = panel.cut.map(([x, y]): [number, number] => [x + 20, y]);
    expect(redFaults(writeSvg(arcs), arcs, [moved]).length).toBeGreaterThan(10);
  },
);
