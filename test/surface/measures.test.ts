import { expect, test } from "vitest";
import {
  measureArea,
  measureAreas,
  measureDistance,
  measurePathLength,
  measureVectorAreas,
  measureVertexNormals,
  pointAt,
} from "../../src/core/surface/measures.ts";
import { makeHeights, makeRing, moveSurface } from "./madeSurfaces.ts";

test("areas: a plane slope, closed form, and after moving", () => {
  const s = makeHeights(6, 4, (x, y) => 0.5 * x - 0.25 * y, 0.5);
  const area = 16 * Math.sqrt(1 + 0.25 + 0.0625);
  expect(measureArea(s)).toBeCloseTo(area, 11);
  expect(measureArea(moveSurface(s))).toBeCloseTo(area, 11);
  expect(measureAreas(s).reduce((sum, a) => sum + a, 0)).toBeCloseTo(area, 11);
  // The vector areas add up to the projections: 16 m2 seen from above, doubled.
  const sum = [0, 0, 0];
  measureVectorAreas(s).forEach((x, i) => {
    sum[i % 3] += x;
  });
  expect(sum[0]).toBeCloseTo(-16, 11);
  expect(sum[1]).toBeCloseTo(8, 11);
  expect(sum[2]).toBeCloseTo(32, 11);
});

test("vertex normals: outwards on a prism, of length one", () => {
  const s = makeRing(12, 2, (a, v) => [Math.cos(a), Math.sin(a), v]);
  const n = measureVertexNormals(s);
  for (let v = 12; v < 24; v++) {
    const out = n[3 * v] * s.xyz[3 * v] + n[3 * v + 1] * s.xyz[3 * v + 1];
    expect(out).toBeGreaterThan(0.96);
    expect(Math.hypot(n[3 * v], n[3 * v + 1], n[3 * v + 2])).toBeCloseTo(1, 12);
  }
});

test("places and lengths", () => {
  const s = makeHeights(2, 2, () => 1);
  expect(pointAt(s, { a: 0, b: 1, t: 0.25 })).toEqual([0.25, 0, 1]);
  expect(pointAt(s, { a: 4, b: 4, t: 0 })).toEqual([1, 1, 1]);
  expect(measureDistance([0, 0, 0], [2, 3, 6])).toBe(7);
  expect(
    measurePathLength([
      [0, 0, 0],
      [3, 4, 0],
      [3, 4, 12],
    ]),
  ).toBe(17);
});
