// 200 random pairs of seam ends on each mesh, four to a job: every run ends in whole strips or in a refusal with a code; no
// triangle is lost or flipped. Seeded. The found forms lie in ../shared and are skipped where it is absent.
import { existsSync, readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { PlanError } from "../../src/core/problem.ts";
import type { FoundForm } from "../../src/core/records/foundForm.ts";
import type { EdgePlace } from "../../src/core/records/job.ts";
import type { StripLayout } from "../../src/core/records/stripLayout.ts";
import { runSeams } from "../../src/core/seams/runSeams.ts";
import { buildAdjacency } from "../../src/core/surface/adjacency.ts";
import { measureArea, measureAreas } from "../../src/core/surface/measures.ts";
import { expectSoundLayout } from "./judgeLayout.ts";
import { makeForm, makeGrid, makeJob, makeRing, makeTent, readForm } from "./madeForms.ts";

const PAIRS = 200;
const TOGETHER = 4;

/** Park and Miller's generator, 0…1. @source Comm. ACM 31(10), 1988 */
function makeRandom(seed: number) {
  let state = seed;
  return () => {
    state = (state * 48271) % 2147483647;
    return state / 2147483647;
  };
}

/** Whole, none flipped: in its parent's plane a flipped triangle would add to the area, and its sides run the wrong way. */
function expectWhole(form: FoundForm, { surface, strips }: StripLayout) {
  const before = measureArea(form.surface);
  const areas = measureAreas(surface);
  expect(Math.min(...areas)).toBeGreaterThan(0);
  expect(Math.abs(areas.reduce((sum, a) => sum + a, 0) / before - 1)).toBeLessThan(1e-9);
  const loose = buildAdjacency(surface).twin.filter((h) => h < 0).length;
  expect(loose).toBeGreaterThanOrEqual(buildAdjacency(form.surface).twin.filter((h) => h < 0).length);
  const owned = new Uint8Array(areas.length);
  for (const strip of strips) for (const t of strip.triangles) owned[t]++;
  expect(owned.every((n) => n === 1)).toBe(true);
}

function tryPairs(form: FoundForm, seed: number) {
  const random = makeRandom(seed);
  const place = (): EdgePlace => {
    const edge = form.edges[Math.floor(random() * form.edges.length)];
    // now and then a corner, or within a hair of one
    const at = random();
    return { edge: edge.id, at: at < 0.05 ? 0 : at < 0.1 ? 1e-7 : at };
  };
  let whole = 0;
  const refusals = new Map<string, number>();
  for (let k = 0; k < PAIRS / TOGETHER; k++) {
    const pairs = Array.from({ length: TOGETHER }, () => [place(), place()]);
    const told = JSON.stringify(pairs);
    try {
      const { output, checks } = runSeams(form, makeJob({ layout: "pairs", pairs }), {
        usableWidth: 5,
        maxLength: null,
      });
      expect(
        checks.filter((c) => !c.holds),
        told,
      ).toEqual([]);
      expectWhole(form, output);
      if (k % 10 === 0) expectSoundLayout(form, output);
      whole++;
    } catch (error) {
      if (!(error instanceof PlanError)) throw error;
      expect(error.code, told).toMatch(/^seam-/);
      refusals.set(error.code, (refusals.get(error.code) ?? 0) + 1);
    }
  }
  return { whole, refusals };
}

describe("made meshes", () => {
  test.each([
    ["saddle", makeForm(makeGrid(20, 20, (u, v) => [16 * u - 8, 16 * v - 8, 10 * (u - 0.5) * (v - 0.5)])), 45],
    [
      "hollow sheet",
      makeForm(
        makeGrid(16, 16, (u, v) => [8 * (u - 0.5) * (1 - v * (1 - v)), 6 * (v - 0.5) * (1 - u * (1 - u)), u * v]),
      ),
      45,
    ],
    ["ring", makeForm(makeRing(48, 8, (t, r) => [(1 + 4 * r) * Math.cos(t), (1 + 4 * r) * Math.sin(t), 3 - 3 * r])), 5],
    ["tent with belts", makeTent(48, 8, 6, 4, 4), 45],
  ])("%s", (_, form, least) => {
    const { whole, refusals } = tryPairs(form, 20261201);
    expect(whole, JSON.stringify([...refusals])).toBeGreaterThanOrEqual(least);
  });
});

const meshes = "../shared/meshes";
describe.skipIf(!existsSync(meshes))("found forms beside the project (skipped where ../shared is absent)", () => {
  test.each([
    ["hypar_16x16", 45],
    ["sail4_cables", 45],
    ["conic_belts", 45],
    ["catenoid_090", 15],
    ["cylinder_strip", 45],
    ["cone_strip", 45],
  ])("%s", (name, least) => {
    const { whole, refusals } = tryPairs(readForm(readFileSync(`${meshes}/${name}.obj`, "utf8")), 20261202);
    expect(whole, JSON.stringify([...refusals])).toBeGreaterThanOrEqual(least);
  });
});
