// One form written in many ways: numbers, places, units and diagonals change, areas, forces and findings stay.
import fc from "fast-check";
import { expect, test } from "vitest";
import type { MeshParts } from "../../src/core/form/reading/readObj.ts";
import { type FormJob, runForm } from "../../src/core/form/runForm.ts";
import type { MeshSource } from "../../src/core/records/job.ts";
import { buildJob, listCodes, placeMesh } from "./formJob.ts";
import { buildGrid, listSides, mapPlaces, renumber } from "./formMeshes.ts";

const N = 16;

/** A four-point sail with a ridge from side to side, in balance: settled once with forces given. */
function buildRidgedSail(): { quads: MeshParts; triangles: MeshParts } {
  const parts = buildGrid(N, N, (u, v) => [12 * u, 12 * v, 1 + 2.5 * ((u < 0.5 ? u : 1 - u) + (1 - v) * u)]);
  const ridge = Array.from({ length: N + 1 }, (_, j) => j * (N + 1) + N / 2);
  parts.lines = [
    ...listSides(N, N).map((vertices, k) => ({ name: `side_${k}`, vertices })),
    { name: "ridge", vertices: ridge },
  ];
  const ends = [ridge[0], ridge[N]];
  parts.points = [...listSides(N, N).map((s) => s[0]), ...ends].map((v, k) => ({ name: `P${k}`, vertices: [v] }));
  const edges = { default: { force: 30 }, ridge: { force: 18 } };
  const { output } = runForm(placeMesh(parts), buildJob({ settle: true, edges }), {});
  const settled = { ...parts, xyz: output.surface.xyz };
  const corners: number[] = [];
  for (let j = 0; j < N; j++)
    for (let i = 0; i < N; i++) {
      const a = j * (N + 1) + i;
      corners.push(a, a + 1, a + N + 2, a + N + 1);
    }
  const faceStart = Uint32Array.from({ length: N * N + 1 }, (_, f) => 4 * f);
  return { quads: { ...settled, faceStart, faceVertex: Uint32Array.from(corners) }, triangles: settled };
}

const { quads, triangles } = buildRidgedSail();

function look(parts: MeshParts, own: Partial<MeshSource> = {}, job: Partial<FormJob> = {}) {
  const { output: form, findings } = runForm(placeMesh(parts, own), buildJob(job), {});
  return {
    form,
    area: form.area,
    forces: Object.fromEntries(form.edges.map((e) => [e.id, e.force ?? 0])),
    codes: listCodes(findings),
    pull: Object.fromEntries(form.reactions.map((r) => [r.anchor, Math.hypot(...r.force)])),
  };
}

function expectSame(a: ReturnType<typeof look>, b: ReturnType<typeof look>, within: number, size = 1): void {
  expect(Math.abs(b.area / size ** 2 / a.area - 1)).toBeLessThan(within);
  expect(Object.keys(b.forces).sort()).toEqual(Object.keys(a.forces).sort());
  for (const [id, force] of Object.entries(a.forces))
    expect(Math.abs(b.forces[id] / size - force), id).toBeLessThan(within * force);
  for (const [id, pull] of Object.entries(a.pull))
    expect(Math.abs(b.pull[id] / size - pull), id).toBeLessThan(within * pull);
}

test("the settled sail gives back the forces it was settled with, within 2 % on its coarse mesh", () => {
  const { forces, form } = look(triangles);
  const sides = Object.entries(forces).filter(([id]) => id.startsWith("side_"));
  // two of the four are parted where the ridge ends
  expect(sides.length).toBe(6);
  for (const [id, force] of sides) expect(Math.abs(force / 30 - 1), id).toBeLessThan(0.02);
  expect(form.edges.map((e) => e.kind).filter((k) => k === "ridge").length).toBe(1);
  expect(Math.abs(forces.ridge / 18 - 1)).toBeLessThan(0.02);
});

test("renumbered, turned about z and moved (fast-check seed 61): areas, forces and findings stay", () => {
  const plain = look(triangles);
  fc.assert(
    fc.property(fc.integer({ min: 0, max: 1e6 }), fc.double({ min: 0, max: 6.28, noNaN: true }), (seed, a) => {
      const moved = mapPlaces(triangles, (x, y, z) => [
        x * Math.cos(a) - y * Math.sin(a) + 40,
        x * Math.sin(a) + y * Math.cos(a) - 7,
        z + 3,
      ]);
      const other = look(renumber(moved, seed));
      expectSame(plain, other, 1e-7);
      expect(other.codes).toEqual(plain.codes);
    }),
    { seed: 61, numRuns: 20 },
  );
});

test("a thousand times the numbers in mm is the same form; in m a thousandth or a thousand times is no roof, said so", () => {
  const plain = look(triangles);
  const inMm = look(
    mapPlaces(triangles, (...p) => p.map((c) => 1000 * c)),
    { unit: "mm" },
  );
  expectSame(plain, inMm, 1e-9);
  expect(inMm.codes).toEqual(plain.codes);
  for (const size of [1000, 0.001]) {
    const scaled = look(mapPlaces(triangles, (...p) => p.map((c) => size * c)));
    expectSame(plain, scaled, 1e-7, size);
    expect(scaled.codes).toEqual([...plain.codes, "mesh-size"].sort());
    expect(scaled.form.residual.max).toBeCloseTo(plain.form.residual.max, 9);
  }
});

test("y up, wound the other way, and quads in place of triangles: areas and forces within the mesh's error", () => {
  const plain = look(triangles);
  const yUp = look(
    mapPlaces(triangles, (x, y, z) => [x, z, -y]),
    { up: "y" },
  );
  expectSame(plain, yUp, 1e-9);
  const turned = { ...triangles, faceVertex: triangles.faceVertex.slice() };
  for (let t = 0; t < turned.faceVertex.length; t += 3)
    turned.faceVertex.set([triangles.faceVertex[t + 2], triangles.faceVertex[t + 1], triangles.faceVertex[t]], t);
  const over = look(turned);
  expectSame(plain, over, 1e-9);
  expect(over.codes).toEqual([...plain.codes, "mesh-outer-face"].sort());
  const split = look(quads);
  expectSame(plain, split, 0.02);
  expect(split.codes).toEqual(plain.codes);
});

test("every quad split along its other diagonal: area within 0.1 %, forces within 2 %, the same findings", () => {
  const other = { ...triangles, faceVertex: triangles.faceVertex.slice() };
  for (let t = 0; t < other.faceVertex.length; t += 6) {
    const [a, b, d] = triangles.faceVertex.subarray(t, t + 3);
    const c = triangles.faceVertex[t + 5];
    other.faceVertex.set([a, b, c, b, d, c], t);
  }
  const plain = look(triangles);
  const split = look(other);
  expect(Math.abs(split.area / plain.area - 1)).toBeLessThan(1e-3);
  for (const [id, force] of Object.entries(plain.forces))
    expect(Math.abs(split.forces[id] / force - 1), id).toBeLessThan(0.02);
  expect(split.codes).toEqual(plain.codes);
});
