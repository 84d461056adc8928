import { expect, test } from "vitest";
import { orderWelds } from "../../../src/core/papers/tables/weldOrder.ts";
import type { Facts } from "../../../src/core/records/facts.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

/** Strips of the given cut areas joined in a row, or in a ring. */
function row(areas: number[], ring = false): Facts {
  const facts = sampleFacts({ stop: false });
  const [panel, seam] = [facts.panels![0]!, facts.seams![0]!];
  facts.panels = areas.map((cut, i) => ({ ...panel, id: `P${i + 1}`, area: { ...panel.area, cut } }));
  const pairs = areas.map((_, i) => [i, (i + 1) % areas.length]).slice(0, ring ? undefined : -1);
  facts.seams = pairs.map(([a, b], i) => ({
    ...seam,
    id: `S${i + 1}`,
    weld: `S${i + 1}`,
    sides: [a, b].map((k) => ({ panel: `P${k! + 1}`, vertices: [] })),
  }));
  return facts;
}

test("the lightest joined piece comes next, and the last one is the whole roof", () => {
  const { steps, pieces } = orderWelds(row([10, 1, 2, 3, 10]));
  expect(steps.map((s) => s.weld)).toEqual(["S2", "S3", "S1", "S4"]);
  // 1.05 kg/m² of the sample's cloth.
  expect(steps.map((s) => Number((s.mass! / 1.05).toFixed(6)))).toEqual([3, 6, 16, 26]);
  expect(pieces.map((p) => p.panels.length)).toEqual([5]);
});

test("a ring is closed by its last weld; records of one weld are one step; what nothing joins stays a piece", () => {
  const closed = orderWelds(row([1, 1, 1], true)).steps;
  expect(closed.map((s) => s.closes)).toEqual([false, false, true]);
  const facts = row([1, 1, 1]);
  for (const s of facts.seams!) s.weld = "W1";
  expect(orderWelds(facts).steps).toMatchObject([{ weld: "W1", seams: ["S1", "S2"], joined: 3 }]);
  expect(orderWelds({ ...row([1, 1]), seams: [] }).pieces).toHaveLength(2);
});
