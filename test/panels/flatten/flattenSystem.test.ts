import { expect, test } from "vitest";
import { multiplySymmetric } from "../../../src/core/numeric/pattern.ts";
import { buildAxisCondition, type FlattenProblem } from "../../../src/core/panels/flatten/flattenProblem.ts";
import {
  assembleFlattenInPlace,
  buildFlattenSystem,
  measureFlattenState,
  measureGaps,
} from "../../../src/core/panels/flatten/flattenSystem.ts";
import { buildErectedMetric, buildStiffness } from "../../../src/core/structure/cloth.ts";
import { measureAreas } from "../../../src/core/surface/measures.ts";
import { CLOTH, gridSurface } from "../stripFixtures.ts";

/** A saddle grid of 4 × 3 cells with one tie of two pieces, one of a fixed length, and an axis turned by 20 degrees. */
function saddle(): { problem: FlattenProblem; x: Float64Array<ArrayBuffer> } {
  const surface = gridSurface(4, 3, (i, j) => [0.5 * i, 0.4 * j, 0.1 * i * j - 0.05 * i * i]);
  const nV = surface.xyz.length / 3;
  const x = new Float64Array(2 * nV);
  for (let v = 0; v < nV; v++) {
    x[2 * v] = surface.xyz[3 * v] + 0.02 * Math.sin(3 * v);
    x[2 * v + 1] = surface.xyz[3 * v + 1] + 0.02 * Math.cos(5 * v);
  }
  const shrink = new Float64Array(2 * nV).map((_, i) => (i % 2 === 0 ? 0.99 : 0.97));
  const problem: FlattenProblem = {
    nV,
    tri: surface.tri,
    metric: buildErectedMetric(surface.xyz, surface.tri),
    weight: measureAreas(surface),
    stiffness: buildStiffness(CLOTH),
    target: new Float64Array(surface.tri.length).map((_, i) => [0.003, 0.004, 0.001][i % 3]),
    shrink,
    tie: Int32Array.from([0, 1, 15, 16, 4, 9, -1, -1]),
    tieLength: Float64Array.from([0, 0.37]),
    axes: [buildAxisCondition([0, 1, 2, 3, 4], [15, 16, 17, 18, 19], -Math.sin(0.35), Math.cos(0.35))],
    pin: [],
  };
  return { problem, x };
}

test("the gradient is that of the merit, by central differences", () => {
  const { problem, x } = saddle();
  const system = { ...buildFlattenSystem(problem), stiff: 700 };
  system.multiplier.set([1.5, -2, 0.7]);
  assembleFlattenInPlace(system, x);
  const h = 1e-6;
  let scale = 0;
  for (const g of system.gradient) scale = Math.max(scale, Math.abs(g));
  for (let i = 0; i < x.length; i++) {
    const up = x.slice();
    const down = x.slice();
    up[i] += h;
    down[i] -= h;
    const slope = (measureFlattenState(system, up).merit - measureFlattenState(system, down).merit) / (2 * h);
    expect(Math.abs(slope - system.gradient[i]), `unknown ${i}: ${slope}`).toBeLessThan(1e-6 * scale);
  }
});

test("where the strain is as intended, the Gauss–Newton matrix is the second derivative of the merit", () => {
  const { problem, x } = saddle();
  // Intended strain = strain at x, and the conditions met at x: the residual is nought, so no second-order term is left out.
  const probe = { ...buildFlattenSystem(problem), stiff: 700 };
  const flat = { ...problem, target: strainsAt(problem, x), tie: problem.tie.slice(4), tieLength: new Float64Array(1) };
  flat.tieLength[0] = measureGaps({ ...flat, axes: [] }, x)[0];
  flat.axes = [];
  const system = { ...buildFlattenSystem(flat), stiff: 700 };
  assembleFlattenInPlace(system, x);
  const values = system.values.slice();
  expect(measureFlattenState(system, x).merit).toBeLessThan(1e-20 * measureFlattenState(probe, x).merit);
  const way = x.map((_, i) => Math.sin(2 * i + 1));
  const product = multiplySymmetric(system.where.pattern, values, way);
  const h = 1e-6;
  const at = (s: number) => {
    assembleFlattenInPlace(
      system,
      x.map((v, i) => v + s * way[i]),
    );
    return system.gradient.slice();
  };
  const [up, down] = [at(h), at(-h)];
  const scale = Math.max(...product.map(Math.abs));
  product.forEach((p, i) => {
    expect(Math.abs(p - (up[i] - down[i]) / (2 * h)), `row ${i}`).toBeLessThan(1e-6 * scale);
  });
});

/** Strain by the definition, F = x·X⁻¹ with 3-D sides: a second method beside measureTriangleStrain. */
function strainsAt(problem: FlattenProblem, xy: Float64Array<ArrayBuffer>): Float64Array<ArrayBuffer> {
  const out = new Float64Array(problem.tri.length);
  for (let t = 0; t < out.length; t += 3) {
    const [a, b, c] = [0, 1, 2].map((k) => 2 * problem.tri[t + k]);
    const [ux, uy, vx, vy] = [xy[b] - xy[a], xy[b + 1] - xy[a + 1], xy[c] - xy[a], xy[c + 1] - xy[a + 1]];
    const det = ux * vy - uy * vx;
    const inv = [
      [vy / det, -vx / det],
      [-uy / det, ux / det],
    ];
    const m = [
      [problem.metric[t], problem.metric[t + 1]],
      [problem.metric[t + 1], problem.metric[t + 2]],
    ];
    const cauchy = (i: number, j: number) => {
      let s = 0;
      for (let k = 0; k < 2; k++) for (let l = 0; l < 2; l++) s += inv[k][i] * m[k][l] * inv[l][j];
      return s;
    };
    out.set([(cauchy(0, 0) - 1) / 2, (cauchy(1, 1) - 1) / 2, cauchy(0, 1)], t);
  }
  return out;
}

test("a held vertex has no gradient and leaves the matrix positive", () => {
  const { problem, x } = saddle();
  const system = { ...buildFlattenSystem({ ...problem, pin: [7] }), stiff: 700 };
  assembleFlattenInPlace(system, x);
  expect(system.gradient[14]).toBe(0);
  expect(system.gradient[15]).toBe(0);
  expect(system.values[system.where.pattern.colStart[14]]).toBe(1);
});
