// Every weld of several forms moved to random places: whole strips of its own cloth, or a refusal with a code. Seeded. The found forms
// lie in ../shared and are skipped where it is absent.
import { existsSync, readFileSync } from "node:fs";
import { expect, test } from "vitest";
import { PlanError } from "../../src/core/problem.ts";
import type { FoundForm } from "../../src/core/records/foundForm.ts";
import type { EdgePlace } from "../../src/core/records/job.ts";
import { moveSeamInPlace, openSeams } from "../../src/core/seams/moveSeam.ts";
import { measureArea, measureAreas } from "../../src/core/surface/measures.ts";
import { expectSoundStrips } from "./judgeLayout.ts";
import { makeForm, makeGrid, makeJob, makeRing, makeTent, readForm } from "./madeForms.ts";

/** Moves tried for each weld: two of three a little, as a hand makes them, the third anywhere near. */
const MOVES = 6;

function moveAll(form: FoundForm, seed: number): { moved: number; refused: number } {
  let state = seed;
  // Park and Miller's generator, 0…1
  const random = () => {
    state = (state * 48271) % 2147483647;
    return state / 2147483647;
  };
  const work = openSeams(form, makeJob(), { usableWidth: 1.9, maxLength: null });
  const count = { moved: 0, refused: 0 };
  for (const [weld, ends] of work.ends) {
    const own = new Set(work.whole.seams.filter((s) => s.weld === weld).flatMap((s) => s.strips));
    const areas = measureAreas(work.whole.surface);
    const strips = work.whole.strips.filter((s) => own.has(s.id));
    const before = strips.flatMap((s) => s.triangles).reduce((sum, t) => sum + areas[t], 0);
    for (let k = 0; k < MOVES; k++) {
      const reach = k % 3 === 2 ? 1 : 0.02;
      const to = ends.map((p) => ({ ...p, at: Math.min(1, Math.max(0, p.at + reach * (random() - 0.5))) }));
      try {
        const { layout, flat } = moveSeamInPlace(work, weld, to as [EdgePlace, EdgePlace]);
        expect(layout.strips.map((s) => s.id).sort()).toEqual([...own].sort());
        expectSoundStrips(form, layout);
        expect(measureArea(layout.surface) / before).toBeCloseTo(1, 9);
        expect(Math.min(...measureAreas(layout.surface))).toBeGreaterThan(0);
        for (const strip of layout.strips) {
          const n = new Set(strip.triangles.flatMap((t) => [...layout.surface.tri.slice(3 * t, 3 * t + 3)])).size;
          const xy = flat.get(strip.id);
          if (xy) expect(xy.length).toBe(2 * n);
        }
        count.moved++;
      } catch (error) {
        if (!(error instanceof PlanError)) throw error;
        expect(error.code, JSON.stringify(to)).toMatch(/^seam-/);
        count.refused++;
      }
    }
  }
  return count;
}

test.each([
  ["saddle", makeForm(makeGrid(24, 18, (u, v) => [12 * (u - 0.5), 9 * (v - 0.5), 7 * (u - 0.5) * (v - 0.5)]))],
  ["hollow sheet", makeForm(makeGrid(16, 16, (u, v) => [8 * (u - 0.5) * (1 - v * (1 - v)), 6 * (v - 0.5), u * v]))],
  ["ring", makeForm(makeRing(48, 8, (t, r) => [(1 + 4 * r) * Math.cos(t), (1 + 4 * r) * Math.sin(t), 3 - 3 * r]))],
  ["tent with belts", makeTent(48, 8, 6, 4, 4)],
])("%s", (_, form) => {
  const { moved, refused } = moveAll(form, 20261202);
  expect(moved, `${refused} refused`).toBeGreaterThan(refused);
});

const meshes = "../shared/meshes";
test.skipIf(!existsSync(meshes)).each(["hypar_16x16", "sail4_cables", "conic_belts", "catenoid_090"])(
  "%s (skipped where ../shared is absent)",
  (name) => {
    const { moved, refused } = moveAll(readForm(readFileSync(`${meshes}/${name}.obj`, "utf8")), 20261203);
    expect(moved, `${refused} refused`).toBeGreaterThan(refused);
  },
);
