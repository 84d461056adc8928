import { expect, test } from "vitest";
import { findCorners } from "../../../src/core/form/edges/findCorners.ts";

const ring = (n: number, at: (i: number) => number[]) => ({
  xyz: Float64Array.from(Array.from({ length: n }, (_, i) => at(i)).flat()),
  loop: Array.from({ length: n }, (_, i) => i),
});

/** Polygon of k straight sides, each of m links, heights by the caller. */
const polygon = (k: number, m: number, lift: (i: number) => number) =>
  ring(k * m, (i) => {
    const [a, b] = [Math.floor(i / m), Math.floor(i / m) + 1].map((s) => (2 * Math.PI * s) / k);
    const t = (i % m) / m;
    return [
      10 * ((1 - t) * Math.cos(a) + t * Math.cos(b)),
      10 * ((1 - t) * Math.sin(a) + t * Math.sin(b)),
      lift(i / m),
    ];
  });

test.each([6, 8, 12, 96, 500])("a ring drawn as a polygon of %d equal sides has no corner", (n) => {
  const { xyz, loop } = ring(n, (i) => [6 * Math.cos((2 * Math.PI * i) / n), 6 * Math.sin((2 * Math.PI * i) / n), 3]);
  expect(findCorners(xyz, loop)).toEqual([]);
});

test.each([
  [3, 1],
  [4, 1],
  [4, 16],
  [4, 700],
  [6, 10],
  [12, 10],
  [12, 300],
])("a polygon of %d straight sides of %d links has its corners", (k, m) => {
  const { xyz, loop } = polygon(k, m, () => 0);
  expect(findCorners(xyz, loop)).toEqual(Array.from({ length: k }, (_, i) => i * m));
});

test("hypar corners, up and down in turn", () => {
  const { xyz, loop } = polygon(4, 50, (s) => 2.5 * Math.abs(1 - (s % 2)));
  expect(findCorners(xyz, loop)).toEqual([0, 50, 100, 150]);
});

test("a smooth oval with uneven links has none, rounded to a millimetre or not", () => {
  const at = (i: number) => {
    const a = (2 * Math.PI * (i + 0.3 * Math.sin(i))) / 120;
    return [8 * Math.cos(a), 4 * Math.sin(a), Math.cos(2 * a)];
  };
  for (const round of [(x: number) => x, (x: number) => Math.round(1000 * x) / 1000]) {
    const { xyz, loop } = ring(120, (i) => at(i).map(round));
    expect(findCorners(xyz, loop)).toEqual([]);
  }
});
