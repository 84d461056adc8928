import fc from "fast-check";
import { expect, test } from "vitest";
import { splitPolygons } from "../../src/core/form/splitPolygons.ts";

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
