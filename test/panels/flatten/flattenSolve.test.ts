import { expect, test } from "vitest";
import type { FlattenProblem } from "../../../src/core/panels/flatten/flattenProblem.ts";
import { FLATTEN_TOLERANCE, solveFlatten } from "../../../src/core/panels/flatten/flattenSolve.ts";
import { buildErectedMetric, buildStiffness } from "../../../src/core/structure/cloth.ts";
import { CLOTH } from "../stripFixtures.ts";

/** One triangle of sides 3, 4, 5 m; vertex 0 held, side 0–1 kept along x. */
function triangle(): FlattenProblem {
  const xyz = Float64Array.from([0, 0, 0, 3, 0, 0, 0, 0, 4]);
  const tri = Uint32Array.from([0, 1, 2]);
  return {
    nV: 3,
    tri,
    metric: buildErectedMetric(xyz, tri),
    weight: Float64Array.from([6]),
    stiffness: buildStiffness(CLOTH),
    target: Float64Array.from([0.02, 0.01, 0]),
    shrink: new Float64Array(6).fill(1),
    tie: Int32Array.from([]),
    tieLength: Float64Array.from([]),
    axes: [{ dof: [1, 3], value: [-1, 1] }],
    pin: [0],
  };
}
const START = Float64Array.from([0, 0, 2.5, 0.4, 0.3, 3]);

// Closed form: E = ½(λ² − 1) gives flat lengths 3/√1.04 and 4/√1.02.
test("a triangle takes its intended strain from a start far off", () => {
  const { x, energy, converged } = solveFlatten(triangle(), START, FLATTEN_TOLERANCE, () => {});
  expect(converged).toBe(true);
  expect(energy).toBeLessThan(1e-18);
  expect(x[2]).toBeCloseTo(3 / Math.sqrt(1.04), 9);
  expect(x[5]).toBeCloseTo(4 / Math.sqrt(1.02), 9);
  expect(Math.abs(x[3]) + Math.abs(x[4])).toBeLessThan(1e-9);
});

test("a piece cut to a length is that long, and the other side gives way as elasticity says", () => {
  const problem = { ...triangle(), tie: Int32Array.from([0, 1, -1, -1]), tieLength: Float64Array.from([3]) };
  const { x, gap } = solveFlatten(problem, START, FLATTEN_TOLERANCE, () => {});
  expect(x[2]).toBeCloseTo(3, 9);
  expect(gap).toBeLessThan(1e-9);
  // E_ww is 0 in place of 0.02; no stress error along the weft: wf·(0 − 0.02) + ff·(E_ff − 0.01) = 0.
  const eff = 0.01 + (0.02 * problem.stiffness.wf) / problem.stiffness.ff;
  expect(x[5]).toBeCloseTo(4 / Math.sqrt(1 + 2 * eff), 8);
});

test("a start that is turned over is refused with the triangle", () => {
  const over = Float64Array.from([0, 0, 2.5, 0, 0.3, -3]);
  expect(() => solveFlatten(triangle(), over, FLATTEN_TOLERANCE, () => {})).toThrow(
    /flat triangle 0 of the first unfolding/,
  );
});

test("too few steps are owned up to", () => {
  const { converged, steps } = solveFlatten(triangle(), START, { ...FLATTEN_TOLERANCE, steps: 1 }, () => {});
  expect([converged, steps]).toEqual([false, 1]);
});
