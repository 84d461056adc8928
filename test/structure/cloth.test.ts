import { expect, test } from "vitest";
import {
  buildErectedMetric,
  buildStiffness,
  measureEngineeringStrain,
  measureLeastPrincipal,
  measureTargetStrain,
  measureTriangleStrain,
} from "../../src/core/structure/cloth.ts";

const CLOTH = { Ew: 600, Ef: 500, nuWf: 0.25, G: 20 };

/** One triangle in space, its flat shape, and its strain. */
function strainOf(erected: number[][], flat: number[][]): number[] {
  const tri = Uint32Array.from([0, 1, 2]);
  const metric = buildErectedMetric(Float64Array.from(erected.flat()), tri);
  return [...measureTriangleStrain(metric, Float64Array.from(flat.flat()), tri, 0, new Float64Array(7))];
}

// Closed form: F = diag(a, b) gives E = ½(a² − 1), ½(b² − 1), no shear.
test("a triangle pulled along warp and weft has the strain of its stretches", () => {
  const flat = [
    [1, 1],
    [3, 1.5],
    [1.7, 4],
  ];
  const [a, b] = [1.01, 0.98];
  // Erected in a tilted plane with unit vectors p, q.
  const [p, q] = [
    [0.36, 0.8, -0.48],
    [-0.48, 0.6, 0.64],
  ];
  const erected = flat.map(([x, y]) => p.map((v, k) => 5 + a * x * v + b * y * q[k]));
  const e = strainOf(erected, flat);
  expect(e[0]).toBeCloseTo((a * a - 1) / 2, 13);
  expect(e[1]).toBeCloseTo((b * b - 1) / 2, 13);
  expect(e[2]).toBeCloseTo(0, 13);
  expect(e[3]).toBeCloseTo(2 * 3 - 0.5 * 0.7, 13);
});

// Closed form: simple shear x' = x + g·y gives 2E_wf = g, E_ff = ½g².
test("simple shear", () => {
  const g = 0.03;
  const flat = [
    [0, 0],
    [2, 0.1],
    [0.3, 1.5],
  ];
  const e = strainOf(
    flat.map(([x, y]) => [x + g * y, y, 7]),
    flat,
  );
  expect(e[0]).toBeCloseTo(0, 13);
  expect(e[1]).toBeCloseTo((g * g) / 2, 13);
  expect(e[2]).toBeCloseTo(g, 13);
});

test("a triangle turned over has a negative area; its strain does not mind", () => {
  const flat = [
    [0, 0],
    [0, 1],
    [1, 0],
  ];
  const e = strainOf(
    flat.map(([x, y]) => [x, y, 0]),
    flat,
  );
  expect(e[3]).toBe(-1);
  expect(e.slice(0, 3)).toEqual([0, 0, 0]);
});

test("the strain of a stress carries that stress", () => {
  const d = buildStiffness(CLOTH);
  const e = measureTargetStrain(d, { warp: 3, weft: -1 });
  expect(d.ww * e.warp + d.wf * e.weft).toBeCloseTo(3, 12);
  expect(d.wf * e.warp + d.ff * e.weft).toBeCloseTo(-1, 12);
});

// E = ½((1 + e)² − 1)
test("engineering strain inverts the Green strain", () => {
  for (const e of [-0.02, 0, 0.001, 0.05]) expect(measureEngineeringStrain(((1 + e) ** 2 - 1) / 2)).toBeCloseTo(e, 14);
});

// Closed form: eigenvalues of [[3, 2], [2, 0]] are 4 and −1.
test("least principal stress", () => {
  expect(measureLeastPrincipal(3, 0, 2)).toBeCloseTo(-1, 14);
  expect(measureLeastPrincipal(2, 2, 0)).toBe(2);
});

test("constants of no real cloth are refused", () => {
  expect(() => buildStiffness({ ...CLOTH, G: 0 })).toThrow(/Ew 600, Ef 500, G 0/);
  expect(() => buildStiffness({ ...CLOTH, nuWf: 1.2 })).toThrow(/nuWf·nuFw = 1.2/);
});
