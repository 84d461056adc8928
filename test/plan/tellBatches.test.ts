// Panels of no batch on cloth of one: said where the batch has a test of its own or the store holds several.
import { expect, it } from "vitest";
import { tellBatches } from "../../src/core/plan/tellBatches.ts";
import type { CutPanel } from "../../src/core/records/flatPanel.ts";
import type { Job } from "../../src/core/records/job.ts";
import type { NestedRoll } from "../../src/core/records/roll.ts";
import { makeJob } from "../madeJob.ts";

const panel = (id: string, batch: string | null) => ({ id, batch }) as CutPanel;
const roll = (id: string, batch: string | null, ids: string[]) =>
  ({ id, batch, placements: ids.map((p) => ({ panel: p, rotation: 0, x: 0, y: 0 })) }) as unknown as NestedRoll;
const job = (batches: (string | null)[], tests: string[]): Job => ({
  ...makeJob(),
  rolls: batches.map((batch, k) => ({ id: `R${k}`, batch })) as Job["rolls"],
  compensation: Object.fromEntries(tests.map((t) => [t, { warp: 0.01, weft: 0.02 }])),
});

it("names the panels and the batch, once a batch, whatever else lies there", () => {
  const panels = [panel("P1", null), panel("P2", null), panel("P3", "b2"), panel("P4", null)];
  const rolls = [
    roll("A", "b1", ["P1", "patch"]),
    roll("B", "b2", ["P3"]),
    roll("C", "b1", ["P2"]),
    roll("D", null, ["P4"]),
  ];
  const told = tellBatches(rolls, panels, job(["b1", "b2", "b1", null], ["b1"]));
  expect(told.map((f) => [f.code, f.level, f.where, f.value])).toEqual([["batch-open", "caution", ["P1", "P2"], "b1"]]);
  expect(told[0].text).toMatch(/^P1, P2: .* batch b1, which has a test of its own\.$/);
  expect(told[0].remedy).toContain('panels.NAME.batch to "b1"');
});

it("says nothing of a store of one batch without a test, and a word where that one has a test", () => {
  const laid = [roll("A", "b1", ["P1"])];
  expect(tellBatches(laid, [panel("P1", null)], job(["b1"], ["default"]))).toEqual([]);
  expect(tellBatches(laid, [panel("P1", null)], job(["b1"], ["b1"])).length).toBe(1);
  expect(tellBatches(laid, [panel("P1", "b1")], job(["b1"], ["b1"]))).toEqual([]);
});
