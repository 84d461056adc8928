import { expect, test } from "vitest";
import { measureMembraneForces } from "../../../src/core/form/balance/membraneForces.ts";
import { findStep, findStepMetres, measureRoundingReach } from "../../../src/core/form/balance/roundingReach.ts";
import { runForm } from "../../../src/core/form/runForm.ts";
import { buildRandom } from "../../../src/core/numeric/random.ts";
import { buildJob, placeMesh } from "../formJob.ts";
import { buildArcSail, mapPlaces } from "../formMeshes.ts";

test("step of coordinates", () => {
  expect(findStep([1, 2, -3])).toBe(1);
  expect(findStep([1, 2.5, -3.125])).toBe(0.001);
  expect(findStep([0.1 + 0.2, 16.38])).toBe(0.01);
  expect(findStep([1 / 3])).toBe(0);
  expect(
    findStepMetres(placeMesh({ ...buildArcSail(2, 5, 12), xyz: Float64Array.from([1, 2, 3]) }, { unit: "mm" })),
  ).toBe(0.001);
});

test("no move within half a step leaves more than the bound (seeded moves of a form in balance)", () => {
  const exact = buildArcSail(20, 5, 12);
  const form = runForm(placeMesh(exact), buildJob(), {}).output;
  const cloth = measureMembraneForces(form.surface, { warp: 2, weft: 2, direction: null });
  const free = [...form.fixed.keys()].filter((v) => !form.fixed[v]);
  const scale = free.reduce((sum, v) => sum + cloth.size[v], 0) / free.length;
  const step = 0.002;
  const bound = measureRoundingReach(form.surface, form.edges, 2, step);
  const random = buildRandom(7);
  const force = Object.fromEntries(form.edges.map((e) => [e.id, { force: e.force }]));
  for (let k = 0; k < 20; k++) {
    const moved = mapPlaces(exact, (...p) => p.map((x) => x + step * (random() - 0.5)));
    const { residual } = runForm(placeMesh(moved), buildJob({ edges: force }), {}).output;
    expect(residual.max).toBeGreaterThan(0.001);
    // form.residual is a share of this scale; that of the moved form differs from it by parts in a thousand
    expect(residual.max * scale).toBeLessThan(1.01 * Math.max(...bound));
  }
});
