// The table of compared layouts: one row each, in the units of the job's sheets.
import { expect, test } from "vitest";
import { layoutHeads, layoutRows } from "../../../src/core/papers/tables/layoutRows.ts";
import type { LayoutRow } from "../../../src/core/records/stripLayout.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

const row: LayoutRow = {
  region: "region 1",
  layout: "bands",
  from: "north",
  to: "south",
  strips: 6,
  panels: 8,
  seams: 30.48,
  cloth: 92.90304,
  least: 1.524,
  greatest: 2.1336,
  stressError: 0.1234,
  measured: true,
  taken: true,
};

test("a layout's figures, taken or not, measured or estimated", () => {
  const facts = { ...sampleFacts(), compared: [row, { ...row, to: "east", measured: false, taken: false }] };
  const rows = layoutRows(facts);
  expect(rows[0]).toEqual([
    "region 1",
    "bands, north to south",
    "6",
    "8",
    "30.480",
    "92.90",
    "1.524",
    "2.134",
    "12.3",
    "flat cloth",
    "yes",
  ]);
  expect(rows[1].slice(-2)).toEqual(["estimate", ""]);
  for (const cells of rows) expect(cells).toHaveLength(layoutHeads(facts).length);
});

test("imperial sheets: 30.48 m are 100 feet, 92.90304 m2 are 1000 square feet", () => {
  const facts = sampleFacts();
  const [cells] = layoutRows({ ...facts, job: { ...facts.job, units: "imperial" }, compared: [row] });
  expect(cells[4]).toMatch(/^100'/);
  expect(cells[5]).toMatch(/^1000/);
});

test("no layouts, no rows", () => {
  expect(layoutRows(sampleFacts())).toEqual([]);
});
