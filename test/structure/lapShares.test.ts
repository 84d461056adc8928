// Where seams lap the cloth is double: areas by hand, the flattening aims at the force of both layers, and the assembled roof has it.
import { expect, test } from "vitest";
import { runRig } from "../../src/core/rig/runRig.ts";
import { listLapLines, measureLapArea, measureLapShares } from "../../src/core/structure/lapShares.ts";
import { makeJob } from "../madeJob.ts";
import { planInput } from "../rig/madeRig.ts";
import { makeGrid } from "../seams/madeForms.ts";
import { makeSaddle } from "../templates/makeForms.ts";

test("a band along the edge of a sheet: its width times its length, coarse and fine", () => {
  for (const n of [3, 8, 25]) {
    const surface = makeGrid(2 * n, n, (u, v) => [4 * u, 2 * v, 0]);
    const low = Array.from({ length: 2 * n + 1 }, (_, i) => i).filter((v) => surface.xyz[3 * v + 1] === 0);
    for (const width of [0.05, 0.12, 0.5]) {
      const shares = measureLapShares(surface, [{ vertices: low, width }]);
      // Counted on 64 parts of a triangle: one part's height is an eighth of the triangle's.
      expect(Math.abs(measureLapArea(surface, shares) * 8 - 4 * width)).toBeLessThan((0.5 * 4 * 2) / n / 8 + 1e-9);
      expect(Math.max(...shares)).toBeLessThanOrEqual(1);
    }
  }
});

test("the lap lies half on each side of a seam, or all of it under the upper panel's edge", () => {
  const seams = [{ id: "S1", upper: "P2" }] as never;
  const side = { kind: "seam", id: "S1", vertices: [0, 1] };
  const on = (strip: string, rule: "both" | "one") =>
    listLapLines({ seams }, strip, [side, { ...side, kind: "cable" }], { overlap: 0.06, on: rule }).map((l) => l.width);
  expect([on("P1", "both"), on("P2", "both")]).toEqual([[0.03], [0.03]]);
  expect([on("P1", "one"), on("P2", "one")]).toEqual([[], [0.06]]);
});

/** The clamped saddle in four strips with a wide lap, and its roof as built with the second layer counted or not. */
function planSaddle(doubleCloth: boolean) {
  const made = makeSaddle([6, 4], [2, 2.5, 2, 2.5], [12, 8]);
  const edges = { default: { kind: "clamped" as const } };
  const { allowances, seams } = makeJob();
  const { input } = planInput(made, {
    edges,
    allowances: { ...allowances, seam: 120 },
    seams: { ...seams, count: 4, doubleCloth },
  });
  return (counted: boolean) => {
    const built = runRig({ ...input, lap: counted ? { overlap: 0.12, on: "both" } : null }, {}).output.asBuilt;
    if (built === null) throw new Error("no proof");
    return built.stress;
  };
}

test("the roof carries the intended force with its laps counted; uncounted, the real laps pull harder by their share", () => {
  const counted = planSaddle(true)(true);
  const plain = planSaddle(false);
  const [single, uncounted] = [plain(false), plain(true)];
  for (const way of ["warp", "weft"] as const) {
    expect(Math.abs(counted[way].mean / 2 - 1), way).toBeLessThan(0.01);
    expect(Math.abs(single[way].mean / 2 - 1), way).toBeLessThan(0.01);
  }
  // Three laps of 120 mm across 6 m are 6 % of the area: that much more stiffness along them at the same strain.
  const more = uncounted.warp.mean / single.warp.mean - 1;
  expect(more).toBeGreaterThan(0.05);
  expect(more).toBeLessThan(0.07);
});
