// Small drawings kept as files: what a reader sees of a change in the writers is the difference of two short files.
import { existsSync, readFileSync, writeFileSync } from "node:fs";
import { expect, test } from "vitest";
import { writeDxfR12 } from "../../src/core/papers/cutFiles/dxfR12.ts";
import { writeSvg } from "../../src/core/papers/cutFiles/svg.ts";
import { rollDrawing } from "../../src/core/papers/drawing/rollDrawing.ts";
import type { Facts } from "../../src/core/records/facts.ts";
import { sampleFacts } from "./made/sampleFacts.ts";

/** One roll with two patches, the second turned round. */
function smallFacts(): Facts {
  const facts = sampleFacts({ stop: false });
  const patch = facts.pieces![0]!;
  facts.pieces = [patch, { ...patch, id: "C2", for: "A2" }];
  facts.rolls = [
    {
      ...facts.rolls![0]!,
      used: 900,
      flaws: [],
      placements: [
        { panel: "C1", rotation: 0, x: 10, y: 10 },
        { panel: "C2", rotation: 180, x: 880, y: 440 },
      ],
    },
  ];
  return facts;
}

for (const [ending, write] of [
  ["dxf", writeDxfR12],
  ["svg", writeSvg],
] as const) {
  test(`the roll of two patches is written as test/golden/patches.${ending} has it`, () => {
    const facts = smallFacts();
    const text = write(rollDrawing(facts, facts.rolls![0]!));
    const kept = `test/golden/patches.${ending}`;
    const golden = existsSync(kept) ? readFileSync(kept, "utf8") : "";
    // A changed drawing is laid beside the kept one to be looked at; it becomes the kept one by hand.
    if (text !== golden && !process.env.CI) writeFileSync(`test/golden/patches-changed.${ending}`, text);
    expect(text === golden, `${kept} differs: compare it with patches-changed.${ending}`).toBe(true);
  });
}
