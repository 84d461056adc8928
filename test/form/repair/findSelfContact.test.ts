import fc from "fast-check";
import { expect, test } from "vitest";
import { findSelfContact } from "../../../src/core/form/repair/findSelfContact.ts";
import { isGraph } from "../../../src/core/form/repair/isGraph.ts";
import { buildTriangleTree, visitNearPairs } from "../../../src/core/form/repair/triangleTree.ts";
import { runForm } from "../../../src/core/form/runForm.ts";
import { buildRandom } from "../../../src/core/numeric/random.ts";
import type { Surface } from "../../../src/core/surface/surface.ts";
import { buildJob, placeMesh } from "../formJob.ts";
import { buildCatenoid, buildGrid } from "../formMeshes.ts";

const same: number[] = Array.from({ length: 100_000 }, (_, v) => v);
const toSurface = (p: { xyz: Float64Array<ArrayBuffer>; faceVertex: Uint32Array<ArrayBuffer> }): Surface => ({
  xyz: p.xyz,
  tri: p.faceVertex,
});
const join = (a: Surface, b: Surface): Surface => ({
  xyz: Float64Array.from([...a.xyz, ...b.xyz]),
  tri: Uint32Array.from([...a.tri, ...b.tri.map((v) => v + a.xyz.length / 3)]),
});
const count = (s: Surface) => findSelfContact(s, same)[0]?.value ?? 0;

const saddle = toSurface(buildGrid(12, 12, (u, v) => [10 * u, 10 * v, 2 * (2 * u - 1) * (2 * v - 1)]));
const tube = toSurface(buildCatenoid(24, 10, 1, 0.8));

test("sound roofs, tubes and two roofs over one another touch nothing", () => {
  expect(isGraph(saddle)).toBe(true);
  expect(isGraph(tube)).toBe(false);
  const above = { xyz: saddle.xyz.map((c, i) => (i % 3 === 2 ? c + 0.01 : c)), tri: saddle.tri };
  for (const s of [saddle, tube, join(saddle, above)]) expect(count(s)).toBe(0);
});

test("a roof with an eye covers its plan once; a ramp that winds over itself does not, and touches nothing", () => {
  const ring = (turns: number, rise: number) =>
    toSurface(
      buildGrid(60, 4, (u, v) => {
        const a = 2 * Math.PI * turns * u;
        return [(2 + 3 * v) * Math.cos(a), (2 + 3 * v) * Math.sin(a), rise * u];
      }),
    );
  expect(isGraph(ring(0.9, 1))).toBe(true);
  expect(isGraph(ring(1.4, 3))).toBe(false);
  expect(count(ring(1.4, 3))).toBe(0);
  // flat, the same ramp lies on itself
  expect(count(ring(1.4, 0))).toBeGreaterThan(10);
});

test("one sheet through another, a sheet laid on itself, and a fold", () => {
  const wall = toSurface(buildGrid(3, 3, (u, v) => [5.1 + 0.2 * u, 10 * v - 0.3, 12 * u - 6]));
  const pierced = findSelfContact(join(saddle, wall), same);
  expect(pierced.map((f) => [f.code, f.level])).toEqual([["mesh-self-contact", "caution"]]);
  expect(pierced[0].value).toBeGreaterThan(5);
  const flat = toSurface(buildGrid(6, 6, (u, v) => [u, v, 0]));
  expect(count(join(flat, toSurface(buildGrid(5, 5, (u, v) => [0.3 + u, 0.2 + v, 0]))))).toBeGreaterThan(5);
  const folded: Surface = {
    xyz: Float64Array.of(0, 0, 0, 1, 0, 0, 0.5, 1, 0, 0.5, 0.9, 0.001),
    tri: Uint32Array.of(0, 1, 2, 1, 0, 3),
  };
  expect(findSelfContact(folded, same)[0].text).toMatch(/1 pair of triangles \(1 of neighbours folded back/);
});

test("through the station: a note of where, by the file's own vertex", () => {
  const wall = toSurface(buildGrid(3, 3, (u, v) => [5.1 + 0.2 * u, 10 * v - 0.3, 12 * u - 6]));
  const both = join(saddle, wall);
  const parts = {
    xyz: both.xyz,
    faceStart: Uint32Array.from({ length: both.tri.length / 3 + 1 }, (_, f) => 3 * f),
    faceVertex: both.tri,
    lines: [],
    points: [],
  };
  const { findings } = runForm(placeMesh(parts), buildJob(), {});
  const [f] = findings.filter((x) => x.code === "mesh-self-contact");
  expect(f?.where).toMatch(/^vertex \d+$/);
});

test("near pairs: none is missed (oracle: every pair of boxes; fast-check seed 51)", () => {
  fc.assert(
    fc.property(fc.integer({ min: 0, max: 1e6 }), fc.integer({ min: 1, max: 60 }), (seed, n) => {
      const random = buildRandom(seed);
      const xyz = new Float64Array(9 * n);
      for (let t = 0; t < n; t++) {
        const at = [0, 1, 2].map(() => Math.round(8 * random()));
        for (let i = 0; i < 9; i++) xyz[9 * t + i] = at[i % 3] + random();
      }
      const surface = { xyz, tri: Uint32Array.from({ length: 3 * n }, (_, v) => v) };
      const found = new Set<string>();
      visitNearPairs(buildTriangleTree(surface, 0), (s, t) => {
        const key = `${Math.min(s, t)}-${Math.max(s, t)}`;
        expect(found.has(key) || s === t).toBe(false);
        found.add(key);
        return true;
      });
      const range = (t: number, k: number) => {
        const c = [0, 1, 2].map((i) => xyz[9 * t + 3 * i + k]);
        return [Math.min(...c), Math.max(...c)];
      };
      for (let s = 0; s < n; s++)
        for (let t = s + 1; t < n; t++) {
          const meet = [0, 1, 2].every((k) => range(s, k)[0] <= range(t, k)[1] && range(t, k)[0] <= range(s, k)[1]);
          if (meet) expect(found.has(`${s}-${t}`)).toBe(true);
        }
    }),
    { seed: 51, numRuns: 100 },
  );
});
