// Small drawings kept as files: what a reader sees of a change in the writers is the difference of two short files, or two pictures.
import { existsSync, readFileSync, writeFileSync } from "node:fs";
import { expect, test } from "vitest";
import { writeDxfR12 } from "../../src/core/papers/cutFiles/dxfR12.ts";
import { writeSvg } from "../../src/core/papers/cutFiles/svg.ts";
import { withArcs } from "../../src/core/papers/drawing/arcs.ts";
import type { Drawing } from "../../src/core/papers/drawing/drawing.ts";
import { tableBites } from "../../src/core/papers/drawing/placedCloth.ts";
import { panelDrawing, rollDrawing } from "../../src/core/papers/drawing/rollDrawing.ts";
import { writePanelCards } from "../../src/core/papers/pdf/cloth/panelCards.ts";
import { writeIndexSheet } from "../../src/core/papers/pdf/indexSheet.ts";
import type { Facts, Vec2 } from "../../src/core/records/facts.ts";
import type { Placement } from "../../src/core/records/roll.ts";
import { fonts } from "./made/madePapers.ts";
import { HOSTILE, sampleFacts } from "./made/sampleFacts.ts";

/** One roll with what is given on it. */
function rollOf(facts: Facts, placements: Placement[]): Drawing {
  const roll = { ...facts.rolls![0]!, used: 900, flaws: [], placements };
  return rollDrawing(facts, roll);
}

/** One roll with two patches, the second turned round. */
function patches(): Drawing {
  const facts = sampleFacts({ stop: false });
  const patch = facts.pieces![0]!;
  facts.pieces = [patch, { ...patch, id: "C2", for: "A2" }];
  return rollOf(facts, [
    { panel: "C1", rotation: 0, x: 10, y: 10 },
    { panel: "C2", rotation: 180, x: 880, y: 440 },
  ]);
}

/** Pocket strips with where they lie, one turned round, under an open stop. */
function strips(): Drawing {
  const facts = sampleFacts();
  const cut: Vec2[] = [
    [0, 0],
    [860, 0],
    [860, 200],
    [0, 200],
  ];
  facts.pieces = [1, 2].map((n) => ({ ...facts.pieces![0]!, id: `E1-strip-${n}`, kind: "strip", for: "E1", cut }));
  facts.job.supersedes = "P1";
  return rollOf(facts, [
    { panel: "E1-strip-1", rotation: 0, x: 10, y: 10 },
    { panel: "E1-strip-2", rotation: 180, x: 880, y: 450 },
  ]);
}

/** A whole panel with its marks, its names such as nobody hopes for. */
function hostilePanel(): Drawing {
  const facts = sampleFacts({ names: HOSTILE, stop: false });
  return panelDrawing(facts, facts.panels![0]!);
}

/** A panel with arcs for curves. */
function arcs(): Drawing {
  const facts = sampleFacts({ stop: false });
  return withArcs(panelDrawing(facts, facts.panels![2]!));
}

/** The second length of a table that takes 1500 mm at once, two patches on it. */
function tableBite(): Drawing {
  const facts = sampleFacts({ stop: false });
  const patch = facts.pieces![0]!;
  facts.pieces = [1, 2, 3, 4].map((n) => ({ ...patch, id: `C${n}`, for: `A${n}` }));
  const placements = [0, 700, 1600, 2300].map((x, n) => ({
    panel: `C${n + 1}`,
    rotation: 0 as const,
    x,
    y: 10 + 90 * n,
  }));
  const roll = { ...facts.rolls![0]!, used: 2900, flaws: [], placements, bite: 1500, feeds: [0, 1600] };
  const [, second] = tableBites(facts, roll);
  return rollDrawing(facts, second!.roll, second!.words);
}

for (const [name, ending, write, make] of [
  ["patches", "dxf", writeDxfR12, patches],
  ["patches", "svg", writeSvg, patches],
  ["strips", "svg", writeSvg, strips],
  ["hostile-panel", "svg", writeSvg, hostilePanel],
  ["arcs", "svg", writeSvg, arcs],
  ["table-bite", "svg", writeSvg, tableBite],
] as const) {
  test(`the drawing of ${name} is written as test/golden/${name}.${ending} has it`, () => {
    const text = write(make());
    const kept = `test/golden/${name}.${ending}`;
    const golden = existsSync(kept) ? readFileSync(kept, "utf8") : "";
    // A changed drawing is laid beside the kept one to be looked at; it becomes the kept one by hand.
    if (text !== golden && !process.env.CI) writeFileSync(`test/golden/${name}-changed.${ending}`, text);
    expect(text === golden, `${kept} differs: compare it with ${name}-changed.${ending}`).toBe(true);
  });
}

/** A card of one panel with its marks, with what stands before it and the map behind it. */
function oneCard(): Promise<Uint8Array> {
  const facts = sampleFacts({ stop: false });
  return writePanelCards({ ...facts, panels: [facts.panels![0]!], seams: [facts.seams![0]!] }, fonts);
}

// Sheets with frame, title block, stamp and table, and with a figure; the changed one is opened beside the kept one.
for (const [name, write] of [
  [
    "index",
    () => {
      const paths = ["findings.pdf", "rolls/R1.dxf", "rolls/R1.svg", "panels/P1.dxf", "panel-cards.pdf", "panels.csv"];
      return writeIndexSheet(sampleFacts(), fonts, paths);
    },
  ],
  ["panel-card", oneCard],
] as const) {
  test(`the ${name} is written as test/golden/${name}.pdf has it`, async () => {
    const bytes = Buffer.from(await write());
    const kept = `test/golden/${name}.pdf`;
    const same = existsSync(kept) && readFileSync(kept).equals(bytes);
    if (!same && !process.env.CI) writeFileSync(`test/golden/${name}-changed.pdf`, bytes);
    expect(same, `${kept} differs: open it beside ${name}-changed.pdf`).toBe(true);
  });
}
