import { Matrix, solve as solveDense } from "ml-matrix";
import { expect, test } from "vitest";
import { analyseSymmetric, factorSymmetric, refactorInPlace, solveInPlace } from "../../src/core/numeric/factor.ts";
import { addElementInPlace, buildPattern, multiplySymmetric } from "../../src/core/numeric/pattern.ts";

test("first light: grid Laplacian against a dense solve", () => {
  const m = 9;
  const n = m * m;
  const pairs: number[] = [];
  for (let i = 0; i < m; i++)
    for (let j = 0; j < m; j++) {
      if (i + 1 < m) pairs.push(i * m + j, (i + 1) * m + j);
      if (j + 1 < m) pairs.push(i * m + j, i * m + j + 1);
    }
  pairs.push(0, -1);
  const where = buildPattern(
    n,
    Uint32Array.from({ length: pairs.length / 2 + 1 }, (_, k) => 2 * k),
    Int32Array.from(pairs),
  );
  const values = new Float64Array(where.pattern.rowIndex.length);
  for (let e = 0; e < pairs.length / 2; e++) addElementInPlace(values, where, e, Float64Array.of(1, -1, 1));
  const f = factorSymmetric(analyseSymmetric(where.pattern), values);
  const dense = new Matrix(n, n);
  for (let j = 0; j < n; j++)
    for (let p = where.pattern.colStart[j]; p < where.pattern.colStart[j + 1]; p++) {
      dense.set(where.pattern.rowIndex[p], j, values[p]);
      dense.set(j, where.pattern.rowIndex[p], values[p]);
    }
  const b = Float64Array.from({ length: 2 * n }, (_, i) => ((i * 37) % 11) - 5);
  const x = b.slice();
  solveInPlace(f, x, 2);
  for (let r = 0; r < 2; r++) {
    const want = solveDense(dense, Matrix.columnVector(Array.from(b.subarray(r * n, r * n + n)))).to1DArray();
    want.forEach((w, i) => {
      expect(x[r * n + i]).toBeCloseTo(w, 8);
    });
    expect(multiplySymmetric(where.pattern, values, x.slice(r * n, r * n + n))[3]).toBeCloseTo(b[r * n + 3], 9);
  }
  values[where.pattern.colStart[40]] = -1;
  expect(() => refactorInPlace(f, values)).toThrow(/not positive definite/);
});
