// Exports as modellers leave them: each flaw ends in a finding with its count and worst place, and the form stays what it was.
import { expect, test } from "vitest";
import type { MeshParts } from "../../../src/core/form/reading/readObj.ts";
import { runForm } from "../../../src/core/form/runForm.ts";
import { buildRandom } from "../../../src/core/numeric/random.ts";
import { buildJob, placeMesh } from "../formJob.ts";
import { buildArcSail, mapPlaces } from "../formMeshes.ts";

const N = 12;
const FACES = 2 * N * N;

/** A level sail between four arcs, in balance. */
const sail = buildArcSail(N, 5, 12);

function look(parts: MeshParts) {
  const { output: form, findings } = runForm(placeMesh(parts), buildJob(), {});
  return {
    area: form.area,
    edges: form.edges.map((e) => `${e.id} ${e.kind} ${e.vertices.length}`),
    forces: form.edges.map((e) => e.force ?? 0),
    mesh: findings.filter((f) => f.code.startsWith("mesh-")),
    codes: findings.map((f) => f.code).filter((c) => !c.startsWith("mesh-")),
  };
}

const plain = look(sail);

function expectPlain(seen: ReturnType<typeof look>, within: number): void {
  expect(Math.abs(seen.area / plain.area - 1)).toBeLessThan(within);
  expect(seen.edges).toEqual(plain.edges);
  for (const [k, force] of plain.forces.entries()) expect(Math.abs(seen.forces[k] / force - 1)).toBeLessThan(within);
  expect(seen.codes).toEqual(plain.codes);
}

/** Every face with vertices of its own, behind those the lines and points use. */
function splitVertices(parts: MeshParts): MeshParts {
  const own = [...parts.faceVertex].flatMap((v) => [...parts.xyz.subarray(3 * v, 3 * v + 3)]);
  const nV = parts.xyz.length / 3;
  return {
    ...parts,
    xyz: Float64Array.from([...parts.xyz, ...own]),
    faceVertex: parts.faceVertex.map((_, i) => nV + i),
  };
}

test("the sail itself has nothing to repair", () => {
  expect(plain.mesh).toEqual([]);
  expect(plain.edges).toEqual(["arc_1", "arc_2", "arc_3", "arc_4"].map((id) => `${id} cable ${N + 1}`));
});

test("split vertices a few thousandths of a millimetre apart: welded, counted, the widest gap named", () => {
  const split = splitVertices(sail);
  const random = buildRandom(8);
  for (let i = sail.xyz.length; i < split.xyz.length; i++) split.xyz[i] += 2e-6 * (random() - 0.5);
  const wide = sail.xyz.length / 3 + 301;
  split.xyz[3 * wide + 2] = 3 + 9e-6;
  const seen = look(split);
  expect(seen.mesh.map((f) => [f.code, f.value, f.where])).toEqual([["mesh-welded", 3 * FACES, `vertex ${wide}`]]);
  expect(seen.mesh[0].text).toContain("0.0091 mm at most");
  expectPlain(seen, 1e-4);
});

test("mixed winding: every third triangle turned back, counted, the first named", () => {
  const mixed = { ...sail, faceVertex: sail.faceVertex.slice() };
  for (let t = 1; t < FACES; t += 3) mixed.faceVertex.subarray(3 * t, 3 * t + 3).reverse();
  const seen = look(mixed);
  expect(seen.mesh.map((f) => [f.code, f.value])).toEqual([["mesh-winding", FACES / 3]]);
  expect(seen.mesh[0].where).toBe(`vertex ${mixed.faceVertex[3]}`);
  expectPlain(seen, 1e-9);
});

test("cables as polylines of their own, 1 to 5 mm off the mesh: snapped, counted, the worst named", () => {
  const nV = sail.xyz.length / 3;
  const own: number[] = [];
  const lines = sail.lines.map((line) => ({
    ...line,
    vertices: line.vertices.map((v) => {
      const k = own.length / 3;
      const off = k === 29 ? 0.005 : 0.001 + 0.0001 * (k % 30);
      own.push(sail.xyz[3 * v], sail.xyz[3 * v + 1], sail.xyz[3 * v + 2] + (k % 2 ? off : -off));
      return nV + k;
    }),
  }));
  const off = { ...sail, xyz: Float64Array.from([...sail.xyz, ...own]), lines };
  const seen = look(off);
  const [found] = seen.mesh.filter((f) => f.code === "mesh-line-snapped");
  expect([found.level, found.value, found.where]).toEqual(["note", 4 * (N + 1), ["arc_3", `vertex ${nV + 29}`]]);
  expect(found.text).toContain("by up to 5.0 mm");
  expectPlain(seen, 1e-9);
  // points exactly on vertices of the mesh are not spoken of
  const exact = mapPlaces(off, (x, y, z) => [x, y, Math.abs(z - 3) < 0.01 ? 3 : z]);
  expect(look(exact).mesh.map((f) => f.code)).toEqual(["mesh-welded"]);
});

test("a seam 1 mm open is no weld: two pieces, said with their places", () => {
  const seam = splitVertices(sail);
  const middle = sail.faceVertex.length / 2;
  // upper half of the faces on vertices of their own, 1 mm up; the lower half on the sail's
  const faceVertex = seam.faceVertex.map((v, i) => (i < middle ? sail.faceVertex[i] : v));
  const xyz = seam.xyz.slice();
  for (let i = sail.xyz.length + 3 * middle; i < xyz.length; i += 3) xyz[i + 2] += 0.001;
  const pieces = look({ ...seam, xyz, faceVertex }).mesh.filter((f) => f.code === "mesh-pieces");
  expect(pieces.map((f) => [f.level, f.value])).toEqual([["caution", 2]]);
});

test("a polygon given twice from another corner is split once (it closed the cloth before)", () => {
  const quads = { ...sail, faceStart: new Uint32Array(N * N + 2), faceVertex: new Uint32Array(4 * N * N + 4) };
  for (let f = 0; f <= N * N; f++) {
    const q = Math.min(f, N * N - 1);
    const a = Math.floor(q / N) * (N + 1) + (q % N);
    const ring = [a, a + 1, a + N + 2, a + N + 1];
    quads.faceVertex.set(f === q ? ring : [...ring.slice(1), ring[0]], 4 * f);
    quads.faceStart[f + 1] = 4 * (f + 1);
  }
  const seen = look(quads);
  expect(seen.mesh.map((f) => [f.code, f.value])).toEqual([["mesh-double-triangles", 2]]);
  expect(Math.abs(seen.area / plain.area - 1)).toBeLessThan(1e-9);
});
