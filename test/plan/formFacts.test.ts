// What the form station says beyond the contract of facts.md, and that the findings sheet is drawn with it.
import { expect, test } from "vitest";
import { runForm } from "../../src/core/form/runForm.ts";
import { buildFormFacts } from "../../src/core/plan/buildFacts.ts";
import { runPlan } from "../../src/core/plan/runPlan.ts";
import type { Job } from "../../src/core/records/job.ts";
import { buildJob, placeMesh } from "../form/formJob.ts";
import { buildArcSail, buildGrid, listSides, mapPlaces } from "../form/formMeshes.ts";
import { makeJob } from "../madeJob.ts";

test("facts of the form: residual parted, spread of forces, curvature, strip width and slope of a hypar in closed form", () => {
  const c = 0.1;
  const n = 40;
  const parts = buildGrid(n, n, (u, v) => {
    const [x, y] = [4 * u - 2, 4 * v - 2];
    return [x, y, c * x * y + 0.2 * x];
  });
  parts.points = [{ name: "rim", vertices: [...new Set(listSides(n, n).flat())] }];
  const form = buildFormFacts(runForm(placeMesh(parts), buildJob(), {}).output);
  const { max, normalMax, tangentialMax } = form.residual;
  expect(Math.max(normalMax, tangentialMax ?? Number.NaN)).toBeLessThanOrEqual(max);
  expect(Math.hypot(normalMax, tangentialMax ?? Number.NaN)).toBeGreaterThanOrEqual(max);
  // K = -c²/(1 + p² + q²)², p and q the slopes: least where c·y + 0.2 = 0 and x = 0; one side from there lies the vertex found
  const relief = form.relief;
  if (!relief?.curvature || relief.stripWidth === null) throw new Error("no curvature");
  expect(Math.abs(relief.curvature.least / -(c ** 2) - 1)).toBeLessThan(0.02);
  // check-values.md 4.2: edge against middle |K|·w²/8
  expect((Math.abs(relief.curvature.least) * relief.stripWidth ** 2) / 8).toBeCloseTo(0.005, 12);
  expect(relief.slope.least).toBeLessThan(1);
  expect(relief.slope.leastAt).toBeLessThan(form.vertices.length);
  expect(JSON.parse(JSON.stringify(form))).toEqual(form);
});

test("spread: none to speak of on an exact sail, some where coordinates are rounded to 2 cm; flat cloth has no strip width", () => {
  const sail = buildArcSail(16, 5, 12);
  const facts = (parts: typeof sail) => buildFormFacts(runForm(placeMesh(parts), buildJob(), {}).output);
  const exact = facts(sail);
  for (const e of exact.edges) expect(e.spread).toBeLessThan(1e-9);
  expect(exact.relief?.stripWidth).toBeNull();
  const rough = facts(mapPlaces(sail, (...p) => p.map((x) => Math.round(50 * x) / 50)));
  for (const e of rough.edges) expect(e.spread).toBeGreaterThan(1e-3);
});

test("stress asked of the form (prestress.from): panels are those of a job that gives it as numbers, facts carry it", () => {
  const n = 12;
  const parts = buildGrid(n, n, (u, v) => [6 * u, 6 * v, 2 * (u + v - 2 * u * v)]);
  parts.points = [{ name: "rim", vertices: [...new Set(listSides(n, n).flat())] }];
  const warp: [number, number, number] = [1, 1, 0];
  const settled = runForm(placeMesh(parts), buildJob({ settle: true, prestress: { warp: 3, weft: 1 }, warp }), {});
  const source = placeMesh({ ...parts, xyz: settled.output.surface.xyz });
  const plan = (prestress: Job["prestress"]) =>
    runPlan(makeJob({ prestress, warp }), source, { until: "panels", revision: "r" }, {});
  const asked = plan({ warp: 2, weft: 2, from: "balance" });
  const stress = asked.form?.stress ?? { warp: 0, weft: 0 };
  expect(stress.warp).toBeCloseTo(3, 1);
  expect(asked.form?.stressSpread?.weft).toBeGreaterThan(0);
  const given = plan(stress);
  expect(asked.panels?.length).toBeGreaterThan(0);
  expect(asked.panels).toEqual(given.panels);
  expect(asked.panels).not.toEqual(plan({ warp: 2, weft: 2 }).panels);
});
