import fc from "fast-check";
import { expect, test } from "vitest";
import { splitPolygons } from "../../../src/core/form/repair/splitPolygons.ts";

const one = (points: number[][]) => {
  const xyz = Float64Array.from(points.flat());
  const n = points.length;
  const source = {
    faceStart: Uint32Array.from([0, n]),
    faceVertex: Uint32Array.from(Array.from({ length: n }, (_, i) => i)),
  };
  return { xyz, ...splitPolygons(xyz, source, Uint32Array.from(source.faceVertex)) };
};

test("a bent quad is split along the diagonal that folds least, wherever its corners are counted from", () => {
  // along 1–3 it folds by 2·atan(1/3) = 37 degrees, along 0–2 by 90 degrees
  const quad = [
    [-3, 0, 0],
    [0, -1, 1],
    [3, 0, 0],
    [0, 1, 1],
  ];
  expect([...one(quad).tri]).toEqual([1, 2, 3, 1, 3, 0]);
  expect([...one([...quad.slice(1), quad[0]]).tri]).toEqual([0, 1, 2, 0, 2, 3]);
});

test("a level quad is split along its shorter diagonal, a hollow one inside", () => {
  expect([
    ...one([
      [0, 0, 0],
      [4, 0, 0],
      [5, 1, 0],
      [0, 1, 0],
    ]).tri,
  ]).toEqual([1, 2, 3, 1, 3, 0]);
  const hollow = one([
    [0, 0, 0],
    [4, 0, 0],
    [0.5, 0.5, 0],
    [0, 4, 0],
  ]);
  expect([...hollow.tri]).toEqual([0, 1, 2, 0, 2, 3]);
});

test("star-shaped polygons: every triangle wound the same way, areas add up to the shoelace formula", () => {
  fc.assert(
    fc.property(fc.array(fc.double({ min: 0.3, max: 3, noNaN: true }), { minLength: 3, maxLength: 12 }), (radii) => {
      const points = radii.map((r, i) => [
        r * Math.cos((2 * Math.PI * i) / radii.length),
        r * Math.sin((2 * Math.PI * i) / radii.length),
        0,
      ]);
      const shoelace = points.reduce((s, p, i) => {
        const q = points[(i + 1) % points.length];
        return s + (p[0] * q[1] - p[1] * q[0]) / 2;
      }, 0);
      const { tri } = one(points);
      let sum = 0;
      for (let t = 0; t < tri.length; t += 3) {
        const [a, b, c] = [points[tri[t]], points[tri[t + 1]], points[tri[t + 2]]];
        const area = ((b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])) / 2;
        expect(area).toBeGreaterThan(-1e-12);
        sum += area;
      }
      expect(sum).toBeCloseTo(shoelace, 10);
    }),
    { seed: 5, numRuns: 300 },
  );
});

test("a polygon folded along one line is split along it, wherever its corners are counted from", () => {
  // a hexagon with a ridge between corners 1 and 4
  const hexagon = [
    [0, 0, 0],
    [2, -0.3, 1],
    [4, 0.2, 0],
    [4.2, 3, 0],
    [2.1, 3.2, 1],
    [-0.2, 2.9, 0],
  ];
  // each half made level by its own three corners
  const level = (p: number[], a: number[], b: number[], c: number[]) => {
    const [u, v] = [b, c].map((q) => q.map((x, k) => x - a[k]));
    const n = [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
    p[2] = a[2] - (n[0] * (p[0] - a[0]) + n[1] * (p[1] - a[1])) / n[2];
  };
  level(hexagon[5], hexagon[0], hexagon[1], hexagon[4]);
  level(hexagon[3], hexagon[2], hexagon[1], hexagon[4]);
  for (let shift = 0; shift < 6; shift++) {
    const { tri } = one([...hexagon.slice(shift), ...hexagon.slice(0, shift)]);
    const sides = new Set<string>();
    for (let t = 0; t < tri.length; t += 3)
      for (let k = 0; k < 3; k++) {
        const [p, q] = [tri[t + k], tri[t + ((k + 1) % 3)]].map((v) => (v + shift) % 6).sort();
        sides.add(`${p}-${q}`);
      }
    expect(tri.length).toBe(12);
    expect(sides.has("1-4")).toBe(true);
  }
});

test("bent polygons fold no more than the best way found by trying all of them, but for roundness (fast-check seed 71)", () => {
  const fold = (points: number[][], parts: number[][]) => {
    const normal = (t: number[]) => {
      const [u, v] = [1, 2].map((k) => points[t[k]].map((x, i) => x - points[t[0]][i]));
      const n = [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
      return n.map((x) => x / Math.hypot(...n));
    };
    let sum = 0;
    for (let i = 0; i < parts.length; i++)
      for (let j = i + 1; j < parts.length; j++)
        if (parts[i].filter((v) => parts[j].includes(v)).length === 2) {
          const [m, n] = [normal(parts[i]), normal(parts[j])];
          sum += 1 - m.reduce((s, x, k) => s + x * n[k], 0);
        }
    return sum;
  };
  const all = (ring: number[]): number[][][] => {
    if (ring.length < 3) return [[]];
    const [a, b] = [ring[0], ring[ring.length - 1]];
    return ring
      .slice(1, -1)
      .flatMap((c, i) =>
        all(ring.slice(0, i + 2)).flatMap((left) =>
          all(ring.slice(i + 1)).map((right) => [[a, c, b], ...left, ...right]),
        ),
      );
  };
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: -0.6, max: 0.6, noNaN: true }), { minLength: 5, maxLength: 7 }),
      (heights) => {
        const n = heights.length;
        const points = heights.map((z, i) => [
          2 * Math.cos((2 * Math.PI * i) / n),
          2 * Math.sin((2 * Math.PI * i) / n),
          z,
        ]);
        const { tri } = one(points);
        const own = Array.from({ length: tri.length / 3 }, (_, t) => [...tri.subarray(3 * t, 3 * t + 3)]);
        const least = Math.min(...all(heights.map((_, i) => i)).map((parts) => fold(points, parts)));
        expect(fold(points, own)).toBeLessThan(least + 2e-3);
      },
    ),
    { seed: 71, numRuns: 150 },
  );
});

test.each([100, 6000])("a star of %i corners is cut by ears, none against the others, areas add up", (count) => {
  const points = Array.from({ length: count }, (_, i) => {
    const r = i % 2 === 0 ? 3 : 1.5;
    return [r * Math.cos((2 * Math.PI * i) / count), r * Math.sin((2 * Math.PI * i) / count), 0];
  });
  const { tri } = one(points);
  let sum = 0;
  for (let t = 0; t < tri.length; t += 3) {
    const [a, b, c] = [points[tri[t]], points[tri[t + 1]], points[tri[t + 2]]];
    const area = ((b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])) / 2;
    expect(area).toBeGreaterThanOrEqual(-1e-12);
    sum += area;
  }
  expect(tri.length).toBe((count - 2) * 3);
  expect(sum).toBeCloseTo((count / 2) * 3 * 1.5 * Math.sin((2 * Math.PI) / count), 9);
});
