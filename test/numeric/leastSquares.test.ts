import fc from "fast-check";
import { Matrix, SingularValueDecomposition } from "ml-matrix";
import { expect, test } from "vitest";
import { solveNonNegative } from "../../src/core/numeric/leastSquares.ts";
import { buildRandom } from "../../src/core/numeric/random.ts";

function drawSystem(seed: number, m: number, n: number) {
  const random = buildRandom(seed);
  return {
    a: Array.from({ length: m }, () => Array.from({ length: n }, () => random() - 0.4)),
    b: Array.from({ length: m }, () => random() - 0.5),
  };
}

/** Slope of half the squared misfit along every unknown. */
function measureSlope(a: number[][], misfit: ArrayLike<number>): number[] {
  return a[0].map((_, j) => a.reduce((s, row, i) => s + row[j] * misfit[i], 0));
}

test("optimality conditions hold on random systems, free unknowns included (seed 5)", () => {
  const shape = fc.record({
    seed: fc.integer({ min: 0, max: 1e6 }),
    m: fc.integer({ min: 1, max: 30 }),
    n: fc.integer({ min: 1, max: 12 }),
    free: fc.uniqueArray(fc.integer({ min: 0, max: 11 }), { maxLength: 4 }),
    unit: fc.constantFrom(1e-6, 1, 1e6),
  });
  fc.assert(
    fc.property(shape, ({ seed, m, n, free, unit }) => {
      const { a, b } = drawSystem(seed, m, n);
      for (const row of a) row[0] *= unit;
      const held = free.filter((j) => j < n);
      const { x, misfit, residual } = solveNonNegative(a, b, { free: held });
      const slope = measureSlope(a, misfit);
      expect(residual).toBeCloseTo(Math.sqrt(Array.from(misfit).reduce((s, v) => s + v * v, 0)), 12);
      for (let j = 0; j < n; j++) {
        const size = Math.sqrt(a.reduce((s, row) => s + row[j] ** 2, 0)) * Math.sqrt(b.reduce((s, v) => s + v * v, 0));
        if (held.includes(j)) expect(Math.abs(slope[j])).toBeLessThan(1e-10 * size);
        else {
          expect(x[j]).toBeGreaterThanOrEqual(0);
          expect(slope[j]).toBeGreaterThan(-1e-10 * size);
          if (x[j] > 0) expect(Math.abs(slope[j])).toBeLessThan(1e-10 * size);
        }
      }
    }),
    { seed: 5, numRuns: 400 },
  );
});

test("best of all active sets by brute force (seeds 0 … 29)", () => {
  for (let seed = 0; seed < 30; seed++) {
    const { a, b } = drawSystem(seed, 8, 5);
    let best = Number.POSITIVE_INFINITY;
    for (let set = 0; set < 32; set++) {
      const columns = [0, 1, 2, 3, 4].filter((j) => (set >> j) & 1);
      let misfit = b.map((v) => -v);
      if (columns.length > 0) {
        const part = new Matrix(a.map((row) => columns.map((j) => row[j])));
        const y = new SingularValueDecomposition(part).solve(Matrix.columnVector(b)).to1DArray();
        if (y.some((v) => v < 0)) continue;
        misfit = a.map((row, i) => columns.reduce((s, j, k) => s + row[j] * y[k], -b[i]));
      }
      best = Math.min(best, Math.sqrt(misfit.reduce((s, v) => s + v * v, 0)));
    }
    expect(solveNonNegative(a, b).residual).toBeCloseTo(best, 12);
  }
});

test("a thousand consistent rows give the unknowns back, rows flat or listed alike", () => {
  const { a } = drawSystem(3, 1000, 60);
  const want = Array.from({ length: 60 }, (_, j) => (j % 3 === 0 ? 0 : j / 7));
  const b = a.map((row) => row.reduce((s, v, j) => s + v * want[j], 0));
  const listed = solveNonNegative(a, b);
  want.forEach((w, j) => {
    expect(Math.abs(listed.x[j] - w)).toBeLessThan(1e-11);
  });
  expect(listed.undetermined).toEqual([]);
  const flat = solveNonNegative(Float64Array.from(a.flat()), Float64Array.from(b));
  expect(flat.x).toEqual(listed.x);
});

test("condition: the two singular values of a sheared pair", () => {
  // columns (1, 0) and (cos, sin) at 60°: singular values of unit columns are √(1 ± cos 60°) (closed form)
  const { condition } = solveNonNegative(
    [
      [7, 0.5],
      [0, Math.sqrt(0.75)],
    ],
    [1, 1],
  );
  expect(condition).toBeCloseTo(Math.sqrt(1.5 / 0.5), 12);
});

test("unknowns that are not determined are named", () => {
  const a = [
    [1, 2, 0, 0, 3],
    [0, 0, 1, 0, 0],
    [1, 2, 0, 0, 3],
    [0, 0, 0, 0, 1],
  ];
  const { undetermined, x, residual } = solveNonNegative(a, [2, 3, 2, 0]);
  expect(undetermined).toEqual([0, 1, 3]);
  expect(residual).toBeLessThan(1e-14);
  expect(x[0] + 2 * x[1]).toBeCloseTo(2, 13);
  expect(x[3]).toBe(0);
  const free = solveNonNegative(a, [-2, 3, -2, 0], { free: [0, 1] });
  expect(free.x[0] + 2 * free.x[1]).toBeCloseTo(-2, 13);
});

test("fewer rows than unknowns, no unknowns, wrong shapes", () => {
  expect(solveNonNegative([[1, 1, 1]], [3]).undetermined).toEqual([0, 1, 2]);
  expect(solveNonNegative([[], []], [3, 4]).residual).toBe(5);
  expect(() => solveNonNegative([[1], [1, 2]], [1, 2])).toThrow(/row 1 has 2 entries, row 0 has 1/);
  expect(() => solveNonNegative([[1]], [1, 2])).toThrow(/2 right-hand values/);
  expect(() => solveNonNegative([[Number.NaN]], [1])).toThrow(/row 0 .* not finite/);
});
