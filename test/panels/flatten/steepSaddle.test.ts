// Steep saddles in strips from edge to edge over the corners: every strip lies flat near its lengths and the flattening settles.
// Bug: a hinge between two places that curvature had shifted turned the rest of a strip anyhow (side strain 0.8, outline crossing).
import { expect, test } from "vitest";
import { buildLocalStrip } from "../../../src/core/panels/flatten/localStrip.ts";
import { runPanels } from "../../../src/core/panels/runPanels.ts";
import { runSeams } from "../../../src/core/seams/runSeams.ts";
import { measureStrain, unfoldSurface } from "../../../src/core/surface/unfold.ts";
import { buildUnfolding } from "../../../src/core/surface/unfolding.ts";
import { makeJob } from "../../madeJob.ts";
import { makeForm, makeGrid } from "../../seams/madeForms.ts";

/** The saddle z = rise·(u − ½)(v − ½) on 14 m square, in this many bands. */
function laySaddle(rise: number, count: number) {
  const form = makeForm(makeGrid(36, 36, (u, v) => [14 * (u - 0.5), 14 * (v - 0.5), rise * (u - 0.5) * (v - 0.5)]));
  const job = makeJob();
  job.seams = { ...job.seams, layout: "bands", count };
  return { form, job, layout: runSeams(form, job, { usableWidth: 9, maxLength: null }, {}).output };
}

test.each([
  [18, 8],
  [18, 9],
  [24, 6],
  [24, 10],
])("rise %i m, %i strips: unfolded, a side is off by no more than the saddle's curvature asks", (rise, count) => {
  const { layout } = laySaddle(rise, count);
  expect(layout.strips).toHaveLength(count);
  for (const strip of layout.strips) {
    const { erected, tri } = buildLocalStrip(layout, strip);
    const flat = unfoldSurface(erected, tri);
    // Gauss curvature is at most (rise/14²)², half strips are at most 19.8/count/2 m wide: ½·K·h², half of it paid on each side.
    const most = (rise / 196) ** 2 * (19.8 / count) ** 2 * 0.25;
    expect(measureStrain(tri, buildUnfolding({ xyz: erected, tri }), flat), strip.id).toBeLessThan(most);
  }
});

test.each([
  [18, 8],
  [24, 9],
])("rise %i m, %i strips: settled, no outline crosses, mirrored panels carry mirrored stress", (rise, count) => {
  const { form, job, layout } = laySaddle(rise, count);
  const { output, findings, checks } = runPanels(layout, form, job, {});
  expect(findings.map((f) => f.code)).not.toContain("flatten-unfinished");
  expect(checks.filter((c) => !c.holds)).toEqual([]);
  for (let k = 0; k < count / 2; k++) {
    const [a, b] = [output[k].stress.warp, output[count - 1 - k].stress.warp];
    expect(Math.abs(a.rmsError - b.rmsError), output[k].id).toBeLessThan(0.15 * a.rmsError + 0.01);
  }
});
