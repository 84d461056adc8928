// A strip on constant negative curvature: edge over centre length is cosh(sqrt(-K) h), about K w²/8. Values: check-values.md 4.2 and
// 10 (T11), status C: recomputed there from the closed form. Through the project's own seams and flattening stations.
import { expect, test } from "vitest";
import { flattenPanels } from "../../src/core/panels/flatten/flattenPanels.ts";
import type { FlatPanel } from "../../src/core/records/flatPanel.ts";
import { runSeams } from "../../src/core/seams/runSeams.ts";
import { makeForm, makeGrid, makeJob } from "../seams/madeForms.ts";

/** Strip of width w and length 40 m along the waist of the surface r = 10 cosh(s sqrt(-K)), which has curvature K throughout. */
function makeStrip(K: number, w: number, nx: number, ny: number) {
  const root = Math.sqrt(-K);
  const waist = 10;
  // height over the waist: dz = sqrt(1 - r'²) ds, by Simpson's rule
  const height = (s: number) => {
    const f = (t: number) => Math.sqrt(1 - (waist * root * Math.sinh(root * t)) ** 2);
    let sum = 0;
    for (let i = 0; i < 20; i++) {
      const [a, b] = [(s * i) / 20, (s * (i + 1)) / 20];
      sum += ((b - a) / 6) * (f(a) + 4 * f((a + b) / 2) + f(b));
    }
    return sum;
  };
  return makeForm(
    makeGrid(nx, ny, (u, v) => {
      const s = w * (v - 0.5);
      const r = waist * Math.cosh(root * s);
      return [r * Math.cos(4 * u), r * Math.sin(4 * u), height(s)];
    }),
  );
}

/** Erected over flat length, less 1, of the row of mesh sides at height index j, over the middle fifth of the strip. */
function measureRow(panel: FlatPanel, nx: number, j: number): number {
  const local = new Map(Array.from(panel.surfaceVertex, (v, i) => [v, i]));
  let erected = 0;
  let flat = 0;
  for (let i = Math.round(0.4 * nx); i < Math.round(0.6 * nx); i++) {
    const [a, b] = [local.get(j * (nx + 1) + i) ?? -1, local.get(j * (nx + 1) + i + 1) ?? -1];
    erected += Math.hypot(...[0, 1, 2].map((c) => panel.erected[3 * b + c] - panel.erected[3 * a + c]));
    flat += Math.hypot(...[0, 1].map((c) => panel.flat[2 * b + c] - panel.flat[2 * a + c])) / 1000;
  }
  return erected / flat - 1;
}

test.each([
  [-0.01, 1, 0.00125],
  [-0.01, 2, 0.005],
  [-0.01, 3, 0.01127],
  [-0.005, 2, 0.0025],
])("curvature %f, strip %f m wide: the edge is %f longer than the centre once flat", (K, w, mismatch) => {
  // long enough for the ends, whose pull fades over about 0.9 w in cloth this weak in shear, to be forgotten in the middle
  const [nx, ny] = [240, 16];
  const form = makeStrip(K, w, nx, ny);
  const job = makeJob({ layout: "bands", from: "E4", to: "E2", count: 1 });
  const { output } = runSeams(form, job, { usableWidth: 5, maxLength: null });
  expect(output.strips.length).toBe(1);
  const options = { ...job, prestress: { warp: 1e-6, weft: 1e-6 }, rings: [] };
  const [panel] = flattenPanels(output, options, {}).output;
  const centre = measureRow(panel, nx, ny / 2);
  for (const edge of [0, ny]) {
    const found = measureRow(panel, nx, edge) - centre;
    expect(Math.abs(found / mismatch - 1), `mismatch ${found}`).toBeLessThan(0.02);
  }
});
