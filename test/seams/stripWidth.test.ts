// The flat size of a strip read off its two seams: closed forms of developable strips (check-values 4.2: unrolled without strain).
import { expect, test } from "vitest";
import { blendCurves, measureStripSize, sampleCurve } from "../../src/core/seams/stripWidth.ts";
import type { Vec3 } from "../../src/core/surface/surface.ts";

const line = (n: number, at: (s: number) => Vec3) => sampleCurve(Array.from({ length: n + 1 }, (_, i) => at(i / n)));

test("a flat rectangle, straight and askew", () => {
  const size = measureStripSize([line(5, (s) => [9 * s, 2, 1]), line(9, (s) => [9 * s, 0, 1])]);
  expect(size.length).toBeCloseTo(9, 12);
  expect(size.width).toBeCloseTo(2, 12);
  // a parallelogram: the axis runs along its long sides, the width is square to them
  const askew = measureStripSize([line(5, (s) => [3 + 9 * s, 2, 0]), line(5, (s) => [9 * s, 0, 0])]);
  expect(askew.width).toBeCloseTo(2, 12);
  expect(askew.length).toBeCloseTo(12, 12);
});

test("a strip of a cylinder of radius 3 m, 1.6 m wide along the generators, unrolls to its arc by its width", () => {
  const arc = (y: number) => line(400, (s) => [3 * Math.cos(2 * s), y, 3 * Math.sin(2 * s)]);
  const size = measureStripSize([arc(1.6), arc(0)]);
  expect(size.width).toBeCloseTo(1.6, 6);
  // 16 bays of chord: 2·r·sin(angle/2)
  expect(size.length).toBeCloseTo(16 * 2 * 3 * Math.sin(1 / 16), 3);
});

test("a sector of a cone is as wide as the chord of its outer arc in the flat", () => {
  const half = 0.3;
  const slant = (turn: number) =>
    line(8, (s) => {
      const r = 2 + 10 * s;
      return [r * 0.6 * Math.cos(turn), r * 0.6 * Math.sin(turn), 0.8 * r];
    });
  const size = measureStripSize([slant(half), slant(0), slant(-half)]);
  // developed angle: turn × sin of the half apex angle, each of two bays by its chord
  const bay = 2 * Math.asin((0.6 * Math.sin(half / 2)) as number);
  expect(size.width).toBeCloseTo(2 * 12 * Math.sin(bay), 6);
});

test("a triangle from a point to a seam; a strip wider than long keeps its axis from start to finish", () => {
  const tip = sampleCurve([[0, 0, 0]]);
  const size = measureStripSize([tip, line(6, (s) => [4 * s - 2, 3, 0])]);
  expect(size.width).toBeCloseTo(3, 9);
  expect(size.length).toBeCloseTo(4, 9);
  const wide = measureStripSize([line(4, (s) => [s, 8, 0]), line(4, (s) => [s, 0, 0])]);
  expect([wide.length, wide.width].map((x) => Math.round(1e9 * x) / 1e9)).toEqual([1, 8]);
});

test("curves between two curves", () => {
  const mid = blendCurves(
    line(3, (s) => [s, 0, 0]),
    line(3, (s) => [s, 2, 4]),
    0.25,
  );
  expect([...mid.slice(0, 3)]).toEqual([0, 0.5, 1]);
});
