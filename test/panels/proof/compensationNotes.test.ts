// What is printed of the compensation, and a roof patterned for a tested batch: 0.5 / 2 %.
import { expect, test } from "vitest";
import { noteCompensation } from "../../../src/core/panels/proof/compensationNotes.ts";
import { runPanels } from "../../../src/core/panels/runPanels.ts";
import { runSeams } from "../../../src/core/seams/runSeams.ts";
import { makeJob } from "../../madeJob.ts";
import { makeForm, makeGrid } from "../../seams/madeForms.ts";

const form = makeForm(makeGrid(16, 12, (u, v) => [8 * u, 6 * v, 1.5 * (u - 0.5) * (v - 0.5)]));

function plan(compensation: Record<string, { warp: number; weft: number }>, batches: Record<string, string> = {}) {
  const job = makeJob({ compensation });
  job.seams = { ...job.seams, layout: "bands", count: 3 };
  for (const [panel, batch] of Object.entries(batches)) job.panels[panel] = { batch };
  const layout = runSeams(form, job, { usableWidth: 5, maxLength: null }, {}).output;
  return runPanels(layout, form, job, {});
}

test("a test of 0.5 / 2 %: passes, the permanent part named apart, a per cent told by its millimetres", () => {
  const { output, findings, checks } = plan({ default: { warp: 0.005, weft: 0.02 } });
  expect(checks.filter((c) => !c.holds)).toEqual([]);
  expect(findings.filter((f) => f.level !== "note")).toEqual([]);
  const [note] = findings.filter((f) => f.code === "panel-compensated");
  const { permanent } = output[0];
  // 1000/1.005 and 1000/1.02, by hand.
  expect(note.text).toContain("are cut 995.02 mm");
  expect(note.text).toContain("are cut 980.39 mm");
  for (const way of ["warp", "weft"] as const) {
    expect(permanent[way]).toBeGreaterThan(0);
    expect(note.text).toContain(`${(100 * permanent[way]).toFixed(3)} % is permanent`);
  }
  expect(note.text).toContain("1 % takes 9.90 mm off a metre");
});

test("one note a batch: each panel is patterned for its own, the rest for the default", () => {
  const { output, findings } = plan(
    { default: { warp: 0.004, weft: 0.01 }, B7: { warp: 0.005, weft: 0.02 } },
    { P2: "B7" },
  );
  expect(output.map((p) => p.compensation.weft)).toEqual([0.01, 0.02, 0.01]);
  const notes = findings.filter((f) => f.code === "panel-compensated");
  expect(notes.map((f) => f.where)).toEqual([["P1", "P3"], ["P2"]]);
  expect(notes[1].text).toContain("panel P2 is patterned for batch B7");
});

test("without a test all of it is elastic", () => {
  const [note] = noteCompensation(plan({}).output);
  expect(note.text).toMatch(/warp 0\.\d{3} %, all of it elastic/);
});
