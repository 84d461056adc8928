import { expect, test } from "vitest";
import { buildLocalStrip, buildRunDirections } from "../../../src/core/panels/flatten/localStrip.ts";
import {
  buildRelaxedFlat,
  measurePanelStress,
  measurePatternedStress,
} from "../../../src/core/panels/proof/stressFigures.ts";
import { buildStiffness, measureTargetStrain } from "../../../src/core/structure/cloth.ts";
import { CLOTH, cutGrid, gridSurface } from "../stripFixtures.ts";

const D = buildStiffness(CLOTH);
const NONE = { warp: 0, weft: 0 };

/** A flat sheet 1 × 4 m on the form with its run along y, and its flat points in mm by a map of (along, across). */
function sheet(map: (along: number, across: number) => [number, number]) {
  const layout = cutGrid(
    gridSurface(2, 8, (i, j) => [0.5 * i, 0.5 * j, 0]),
    2,
    8,
    [0, 2],
  );
  const strip = buildLocalStrip(layout, layout.strips[0]);
  const flat = new Float64Array((2 * strip.erected.length) / 3);
  for (let v = 0; 2 * v < flat.length; v++)
    flat.set(map(1000 * strip.erected[3 * v + 1], -1000 * strip.erected[3 * v]), 2 * v);
  return { ...strip, flat, permanent: NONE, target: { warp: 2, weft: 1 }, run: buildRunDirections(strip), turn: 0 };
}

// Closed form: stretched evenly by the target's own strain, the cloth carries the target.
test("an even stretch carries its stress everywhere", () => {
  const e = measureTargetStrain(D, { warp: 2, weft: 1 });
  const [a, b] = [Math.sqrt(1 + 2 * e.warp), Math.sqrt(1 + 2 * e.weft)];
  const s = measurePanelStress(
    sheet((x, y) => [x / a, y / b]),
    D,
  );
  expect(s.warp.mean).toBeCloseTo(2, 10);
  expect(s.weft.min).toBeCloseTo(1, 10);
  expect(s.weft.max).toBeCloseTo(1, 10);
  expect(s.warp.rmsError).toBeLessThan(1e-10);
  expect(s.compressedShare).toBe(0);
  expect(s.warpDeviation).toBeLessThan(1e-6);
});

// Closed form: half the sheet at 1.01, half at 0.99 of its length: E = ½(1.01² − 1), ½(0.99² − 1).
test("least, mean, greatest and rms error weigh by erected area; the slack half is compressed", () => {
  const panel = sheet((x, y) => [x < 2000 ? x / 1.01 : 2000 / 1.01 + (x - 2000) / 0.99, y]);
  const s = measurePanelStress(panel, D);
  const [high, low] = [1.01, 0.99].map((l) => (D.ww * (l * l - 1)) / 2);
  expect(s.warp.max).toBeCloseTo(high, 9);
  expect(s.warp.min).toBeCloseTo(low, 9);
  expect(s.warp.mean).toBeCloseTo((high + low) / 2, 9);
  expect(s.warp.rmsError).toBeCloseTo(Math.sqrt(((high - 2) ** 2 + (low - 2) ** 2) / 2), 9);
  expect(s.compressedShare).toBeCloseTo(0.5, 12);
});

test("permanent strain is put back before the stress is taken", () => {
  const relaxed = buildRelaxedFlat(Float64Array.from([1000, 1000]), { warp: 0.01, weft: 0.03 });
  expect([...relaxed]).toEqual([1.01, 1.03]);
  const panel = { ...sheet((x, y) => [x / 1.01, y / 1.03]), permanent: { warp: 0.01, weft: 0.03 } };
  for (const v of measurePatternedStress(panel, D)) expect(Math.abs(v)).toBeLessThan(1e-9);
});

test.each([12, -25])(
  "cloth turned by %d degrees deviates by that angle, unless the panel is meant to be turned",
  (angle) => {
    const [c, s] = [Math.cos((angle * Math.PI) / 180), Math.sin((angle * Math.PI) / 180)];
    const panel = sheet((x, y) => [c * x - s * y, s * x + c * y]);
    expect(measurePanelStress(panel, D).warpDeviation).toBeCloseTo(Math.abs(angle), 6);
    expect(measurePanelStress({ ...panel, turn: angle }, D).warpDeviation).toBeLessThan(1e-6);
  },
);

test("the run follows a bent strip from one end to the other", () => {
  const nj = 30;
  const layout = cutGrid(
    gridSurface(2, nj, (i, j) => {
      const a = (Math.PI * j) / nj;
      return [(4 - 0.5 * i) * Math.cos(a) * -1, (4 - 0.5 * i) * Math.sin(a), 0];
    }),
    2,
    nj,
    [0, 2],
  );
  const [strip] = layout.strips;
  // Seen from above the grid is wound clockwise: turn the triangles and the sides round.
  layout.surface.tri = layout.surface.tri.map((_, h, tri) => tri[3 * Math.floor(h / 3) + (2 - (h % 3))]);
  strip.sides = strip.sides.map((s) => ({ ...s, vertices: s.vertices.slice().reverse() })).reverse();
  const local = buildLocalStrip(layout, strip);
  const run = buildRunDirections(local);
  for (let t = 0; t < local.tri.length; t += 3) {
    const mid = [0, 1].map((c) => [0, 1, 2].reduce((a, k) => a + local.erected[3 * local.tri[t + k] + c] / 3, 0));
    const r = Math.sqrt(mid[0] ** 2 + mid[1] ** 2);
    // Tangent of the circle, clockwise from (−4, 0) over (0, 4) to (4, 0).
    expect((run[t] * mid[1] - run[t + 1] * mid[0]) / r).toBeGreaterThan(Math.cos(0.15));
  }
});
