import fc from "fast-check";
import { expect, test } from "vitest";
import { addElementInPlace, buildPattern, multiplySymmetric } from "../../src/core/numeric/pattern.ts";

/** Full matrix by plain double loops over the elements: the second method. */
function addDense(n: number, elements: number[][], entries: number[][]): number[][] {
  const a = Array.from({ length: n }, () => new Array<number>(n).fill(0));
  elements.forEach((dof, e) => {
    for (let p = 0; p < dof.length; p++)
      for (let q = 0; q < dof.length; q++) {
        if (dof[p] < 0 || dof[q] < 0) continue;
        const [hi, lo] = p > q ? [p, q] : [q, p];
        a[dof[p]][dof[q]] += entries[e][(hi * (hi + 1)) / 2 + lo];
      }
  });
  return a;
}

function flatten(elements: number[][]) {
  const start = new Uint32Array(elements.length + 1);
  elements.forEach((e, k) => {
    start[k + 1] = start[k] + e.length;
  });
  return { start, dof: Int32Array.from(elements.flat()) };
}

test("pattern and places agree with a dense double loop, held and repeated unknowns included (seed 11)", () => {
  const element = fc.array(fc.integer({ min: -1, max: 11 }), { minLength: 0, maxLength: 5 });
  fc.assert(
    fc.property(fc.array(element, { maxLength: 12 }), (elements) => {
      const n = 12;
      const { start, dof } = flatten(elements);
      const where = buildPattern(n, start, dof);
      const { colStart, rowIndex } = where.pattern;
      const values = new Float64Array(rowIndex.length);
      const entries = elements.map((e, k) =>
        Array.from({ length: (e.length * (e.length + 1)) / 2 }, (_, i) => 1 + i + 100 * k),
      );
      entries.forEach((list, e) => {
        addElementInPlace(values, where, e, Float64Array.from(list));
      });
      const dense = addDense(n, elements, entries);
      const found = Array.from({ length: n }, () => new Array<number>(n).fill(0));
      for (let j = 0; j < n; j++) {
        expect(rowIndex[colStart[j]]).toBe(j);
        for (let p = colStart[j]; p < colStart[j + 1]; p++) {
          if (p > colStart[j]) expect(rowIndex[p]).toBeGreaterThan(rowIndex[p - 1]);
          found[rowIndex[p]][j] = values[p];
          found[j][rowIndex[p]] = values[p];
        }
      }
      expect(found).toEqual(dense);
      const x = Float64Array.from({ length: n }, (_, i) => i - 4);
      const y = dense.map((row) => row.reduce((s, a, j) => s + a * x[j], 0));
      expect(Array.from(multiplySymmetric(where.pattern, values, x))).toEqual(y);
    }),
    { seed: 11, numRuns: 200 },
  );
});

test("an unknown out of range is named", () => {
  expect(() => buildPattern(3, Uint32Array.of(0, 2), Int32Array.of(0, 3))).toThrow(/element 0 names unknown 3/);
  expect(() => buildPattern(3, Uint32Array.of(0, 2), Int32Array.of(0, -2))).toThrow(/names unknown -2/);
});

test("no unknowns, no elements", () => {
  const { pattern } = buildPattern(0, Uint32Array.of(0), new Int32Array(0));
  expect(pattern.colStart).toEqual(Int32Array.of(0));
  expect(buildPattern(2, Uint32Array.of(0), new Int32Array(0)).pattern.rowIndex).toEqual(Int32Array.of(0, 1));
});
