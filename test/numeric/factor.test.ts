import fc from "fast-check";
import { CholeskyDecomposition, Matrix } from "ml-matrix";
import { describe, expect, test } from "vitest";
import {
  analyseSymmetric,
  factorSymmetric,
  refactorInPlace,
  solveInPlace,
  tryRefactorInPlace,
} from "../../src/core/numeric/factor.ts";
import {
  addElementInPlace,
  buildPattern,
  multiplySymmetric,
  type SymmetricPattern,
} from "../../src/core/numeric/pattern.ts";
import { buildRandom, drawInteger, type Random } from "../../src/core/numeric/random.ts";
import { PlanError } from "../../src/core/problem.ts";

interface System {
  pattern: SymmetricPattern;
  values: Float64Array<ArrayBuffer>;
}

/** Sum of elements G·Gᵀ with random G, plus a small diagonal: positive definite whatever the cliques. */
function assemble(n: number, elements: readonly (readonly number[])[], random: Random, diagonal = 0.1): System {
  const start = new Uint32Array(elements.length + 1);
  elements.forEach((e, k) => {
    start[k + 1] = start[k] + e.length;
  });
  const where = buildPattern(n, start, Int32Array.from(elements.flat()));
  const values = new Float64Array(where.pattern.rowIndex.length);
  elements.forEach((e, k) => {
    const g = e.map(() => [random() - 0.5, random() - 0.5, random() - 0.5]);
    const packed: number[] = [];
    for (let i = 0; i < e.length; i++)
      for (let j = 0; j <= i; j++) packed.push(g[i][0] * g[j][0] + g[i][1] * g[j][1] + g[i][2] * g[j][2]);
    addElementInPlace(values, where, k, Float64Array.from(packed));
  });
  for (let j = 0; j < n; j++) values[where.pattern.colStart[j]] += diagonal;
  return { pattern: where.pattern, values };
}

/** Triangles of a grid of points, each point given `dofs` unknowns. */
function buildGridElements(nx: number, ny: number, dofs: number, rename: (v: number) => number = (v) => v): number[][] {
  const elements: number[][] = [];
  const unknowns = (...v: number[]) => v.flatMap((p) => Array.from({ length: dofs }, (_, c) => rename(p) * dofs + c));
  for (let j = 0; j + 1 < ny; j++)
    for (let i = 0; i + 1 < nx; i++) {
      const v = j * nx + i;
      elements.push(unknowns(v, v + 1, v + nx + 1), unknowns(v, v + nx + 1, v + nx));
    }
  return elements;
}

function shuffle(n: number, random: Random): number[] {
  const p = Array.from({ length: n }, (_, i) => i);
  for (let i = n - 1; i > 0; i--) {
    const j = drawInteger(random, i + 1);
    [p[i], p[j]] = [p[j], p[i]];
  }
  return p;
}

/** |A x - b| / (|A|·|x| + |b|), largest norms. */
function measureResidual(
  { pattern, values }: System,
  x: Float64Array<ArrayBuffer>,
  b: Float64Array<ArrayBuffer>,
): number {
  const max = (a: Float64Array<ArrayBuffer>) => a.reduce((m, v) => Math.max(m, Math.abs(v)), 0);
  const size = multiplySymmetric(pattern, values.map(Math.abs), new Float64Array(pattern.n).fill(1));
  const ax = multiplySymmetric(pattern, values, x);
  return max(ax.map((v, i) => v - b[i])) / (max(size) * max(x) + max(b) || 1);
}

function checkSolves(system: System, seed: number, limit = 2e-15): void {
  const n = system.pattern.n;
  const factor = factorSymmetric(analyseSymmetric(system.pattern), system.values);
  const random = buildRandom(seed);
  for (const nRhs of [1, 3, 5]) {
    const b = Float64Array.from({ length: n * nRhs }, () => random() - 0.5);
    const x = b.slice();
    solveInPlace(factor, x, nRhs);
    for (let r = 0; r < nRhs; r++)
      expect(
        measureResidual(system, x.slice(r * n, (r + 1) * n), b.slice(r * n, (r + 1) * n)),
        `${nRhs} right-hand sides, seed ${seed}`,
      ).toBeLessThan(limit);
  }
}

function toDense({ pattern, values }: System): Matrix {
  const a = Matrix.zeros(pattern.n, pattern.n);
  for (let j = 0; j < pattern.n; j++)
    for (let p = pattern.colStart[j]; p < pattern.colStart[j + 1]; p++) {
      a.set(pattern.rowIndex[p], j, values[p]);
      a.set(j, pattern.rowIndex[p], values[p]);
    }
  return a;
}

test("random cliques against a dense Cholesky solve (fast-check seed 21)", () => {
  const shape = fc.record({
    seed: fc.integer({ min: 0, max: 1e6 }),
    n: fc.integer({ min: 1, max: 45 }),
    elements: fc.integer({ min: 0, max: 60 }),
    size: fc.integer({ min: 1, max: 6 }),
  });
  fc.assert(
    fc.property(shape, ({ seed, n, elements, size }) => {
      const random = buildRandom(seed);
      const cliques = Array.from({ length: elements }, () => [
        ...new Set(Array.from({ length: 1 + drawInteger(random, size) }, () => drawInteger(random, n + 1) - 1)),
      ]);
      const system = assemble(n, cliques, random);
      checkSolves(system, seed);
      const factor = factorSymmetric(analyseSymmetric(system.pattern), system.values);
      const b = Array.from({ length: n }, () => random() - 0.5);
      const x = Float64Array.from(b);
      solveInPlace(factor, x);
      const want = new CholeskyDecomposition(toDense(system)).solve(Matrix.columnVector(b)).to1DArray();
      const size1 = Math.max(...want.map(Math.abs));
      want.forEach((w, i) => {
        expect(Math.abs(x[i] - w)).toBeLessThan(1e-11 * size1);
      });
    }),
    { seed: 21, numRuns: 300 },
  );
});

describe("scale-free residual on the meshes this is for", () => {
  const random = buildRandom(4);
  const cases: [string, () => System][] = [
    ["one unknown a vertex, 40 × 33", () => assemble(1320, buildGridElements(40, 33, 1), random)],
    ["two unknowns a vertex, 25 × 30", () => assemble(1500, buildGridElements(25, 30, 2), random)],
    ["three unknowns a vertex, 17 × 60", () => assemble(3060, buildGridElements(17, 60, 3), random)],
    [
      "renumbered at random",
      () => {
        const p = shuffle(1600, random);
        return assemble(
          1600,
          buildGridElements(40, 40, 1, (v) => p[v]),
          random,
        );
      },
    ],
    [
      "strips tied by dense cliques of 40, 120 and 200",
      () => {
        const n = 2400;
        const cliques = [40, 120, 200].map((size) => shuffle(n, random).slice(0, size));
        return assemble(n, [...buildGridElements(20, 60, 2), ...cliques], random);
      },
    ],
    [
      "disconnected pieces and lone unknowns",
      () => {
        const shift = buildGridElements(12, 12, 1).map((e) => e.map((v) => v + 200));
        return assemble(400, [...buildGridElements(12, 12, 1), ...shift], random);
      },
    ],
    [
      "a hub that touches all",
      () =>
        assemble(3001, [...buildGridElements(60, 50, 1), ...Array.from({ length: 3000 }, (_, i) => [i, 3000])], random),
    ],
    [
      "a long chain",
      () =>
        assemble(
          20_000,
          Array.from({ length: 19_999 }, (_, i) => [i, i + 1]),
          random,
        ),
    ],
    [
      "a star",
      () =>
        assemble(
          5000,
          Array.from({ length: 4999 }, (_, i) => [0, i + 1]),
          random,
        ),
    ],
    ["one dense block", () => assemble(150, [Array.from({ length: 150 }, (_, i) => i)], random)],
    ["no coupling at all", () => assemble(50, [], random)],
  ];
  test.each(cases)("%s", (_, build) => checkSolves(build(), 8));
});

test("the answer does not depend on the numbering", () => {
  const random = buildRandom(12);
  const elements = buildGridElements(15, 18, 1);
  const n = 270;
  const solveWith = (p: readonly number[]) => {
    const system = assemble(
      n,
      elements.map((e) => e.map((v) => p[v])),
      buildRandom(5),
    );
    const factor = factorSymmetric(analyseSymmetric(system.pattern), system.values);
    const b = new Float64Array(n);
    p.forEach((to, v) => {
      b[to] = Math.sin(v);
    });
    solveInPlace(factor, b);
    return p.map((to) => b[to]);
  };
  const plain = solveWith(Array.from({ length: n }, (_, i) => i));
  const moved = solveWith(shuffle(n, random));
  const size = Math.max(...plain.map(Math.abs));
  moved.forEach((v, i) => {
    expect(Math.abs(v - plain[i])).toBeLessThan(1e-12 * size);
  });
});

test("the same input gives the same bits, refactored or anew, after other values too", () => {
  const system = assemble(1200, buildGridElements(20, 30, 2), buildRandom(2));
  const symbolic = analyseSymmetric(system.pattern);
  const first = factorSymmetric(symbolic, system.values);
  const b = Float64Array.from({ length: 1200 }, (_, i) => Math.cos(i));
  const x = b.slice();
  solveInPlace(first, x);
  refactorInPlace(
    first,
    system.values.map((v) => 3 * v),
  );
  refactorInPlace(first, system.values);
  const y = b.slice();
  solveInPlace(first, y);
  expect(y).toEqual(x);
  const z = b.slice();
  solveInPlace(factorSymmetric(analyseSymmetric(system.pattern), system.values), z);
  expect(z).toEqual(x);
});

test("none and one unknown", () => {
  const none = assemble(0, [], buildRandom(1));
  const b0 = new Float64Array(0);
  solveInPlace(factorSymmetric(analyseSymmetric(none.pattern), none.values), b0, 3);
  const one = assemble(1, [], buildRandom(1), 4);
  const b = Float64Array.of(8);
  solveInPlace(factorSymmetric(analyseSymmetric(one.pattern), one.values), b);
  expect(b[0]).toBe(2);
});

describe("a matrix that is not positive definite", () => {
  test("names the unknown at fault in the caller's numbering", () => {
    const system = assemble(900, buildGridElements(30, 30, 1), buildRandom(6));
    for (const bad of [0, 449, 899]) {
      const values = system.values.slice();
      values[system.pattern.colStart[bad]] = -1;
      const symbolic = analyseSymmetric(system.pattern);
      // a negative diagonal fails at its own pivot or, once a neighbour was scaled by it, never elsewhere
      let caught: unknown;
      try {
        factorSymmetric(symbolic, values);
      } catch (error) {
        caught = error;
      }
      expect(caught).toBeInstanceOf(PlanError);
      const { code, facts } = caught as PlanError;
      expect(code).toBe("not-positive-definite");
      expect(facts.row).toBe(bad);
      expect(Number(facts.pivot)).toBeLessThan(0);
    }
  });

  test("a piece that floats free is refused, in that piece, and held again after a shift", () => {
    // graph Laplacian of two grids, the first held at one corner, the second nowhere
    const grid = buildGridElements(10, 10, 1).flatMap(([a, b, c]) => [
      [a, b],
      [b, c],
      [c, a],
    ]);
    const links = [...grid, ...grid.map((e) => e.map((v) => v + 100)), [0, -1]];
    const start = Uint32Array.from({ length: links.length + 1 }, (_, k) => 2 * k);
    const where = buildPattern(200, start, Int32Array.from(links.flat()));
    const values = new Float64Array(where.pattern.rowIndex.length);
    for (let e = 0; e < links.length; e++) addElementInPlace(values, where, e, Float64Array.of(1, -1, 1));
    const symbolic = analyseSymmetric(where.pattern);
    expect(() => factorSymmetric(symbolic, values)).toThrow(/unknown 1\d\d /);
    const shifted = values.slice();
    for (let j = 0; j < 200; j++) shifted[where.pattern.colStart[j]] += 1e-6;
    const factor = factorSymmetric(symbolic, shifted);
    expect(tryRefactorInPlace(factor, values)).toBeGreaterThanOrEqual(100);
    expect(() => solveInPlace(factor, new Float64Array(200))).toThrow(/factorisation failed/);
    expect(tryRefactorInPlace(factor, shifted)).toBe(-1);
    const b = new Float64Array(200).fill(1);
    solveInPlace(factor, b);
    // a free piece under a load of 1 on each vertex rests on the shift alone
    expect(b[150]).toBeCloseTo(1e6, 3);
  });

  test("the floor of the pivots is the caller's to set", () => {
    // 2 × 2 with second pivot 1e-9 of its diagonal
    const { pattern } = buildPattern(2, Uint32Array.of(0, 2), Int32Array.of(0, 1));
    const values = Float64Array.of(1, 1, 1 + 1e-9);
    expect(factorSymmetric(analyseSymmetric(pattern), values).ready).toBe(true);
    expect(() => factorSymmetric(analyseSymmetric(pattern, { pivotFloor: 1e-8 }), values)).toThrow(/must exceed 1\.0/);
  });

  test("values that are not numbers are refused", () => {
    const system = assemble(30, buildGridElements(5, 6, 1), buildRandom(6));
    system.values[7] = Number.NaN;
    expect(() => factorSymmetric(analyseSymmetric(system.pattern), system.values)).toThrow(/not positive definite/);
  });
});

test("wrong lengths and patterns are refused at the door", () => {
  const system = assemble(30, buildGridElements(5, 6, 1), buildRandom(6));
  const factor = factorSymmetric(analyseSymmetric(system.pattern), system.values);
  expect(() => refactorInPlace(factor, new Float64Array(3))).toThrow(/3 values for a pattern of/);
  expect(() => solveInPlace(factor, new Float64Array(31))).toThrow(/31 values for 30 unknowns/);
  const rowIndex = system.pattern.rowIndex.slice();
  [rowIndex[1], rowIndex[2]] = [rowIndex[2], rowIndex[1]];
  expect(() => analyseSymmetric({ ...system.pattern, rowIndex })).toThrow(/column 0/);
});

test("little fill: entries of the factor on a 100 × 100 grid", () => {
  // 5-point Laplacian; a minimum degree code from outside the project (SuperLU's MMD) leaves 4.8 million at 400 × 400
  const pairs: number[][] = [];
  for (let v = 0; v < 10_000; v++) {
    if (v % 100 < 99) pairs.push([v, v + 1]);
    if (v < 9900) pairs.push([v, v + 100]);
  }
  const symbolic = analyseSymmetric(assemble(10_000, pairs, buildRandom(1)).pattern);
  expect(symbolic.factorEntries).toBeLessThan(280_000);
  expect(Array.from(symbolic.supernodes.order).sort((a, b) => a - b)).toEqual(
    Array.from({ length: 10_000 }, (_, i) => i),
  );
});
