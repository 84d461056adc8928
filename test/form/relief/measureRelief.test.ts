import { expect, test } from "vitest";
import { measureCurvatures } from "../../../src/core/form/relief/measureRelief.ts";
import { runForm } from "../../../src/core/form/runForm.ts";
import { measureAreas } from "../../../src/core/surface/measures.ts";
import { buildJob, placeMesh } from "../formJob.ts";
import { buildCatenoid, buildGrid, listSides } from "../formMeshes.ts";

type Parts = ReturnType<typeof buildGrid>;
const reliefOf = (parts: Parts) => {
  const relief = runForm(placeMesh(parts), buildJob(), {}).output.relief;
  if (!relief) throw new Error("no relief");
  return relief;
};

/** Every second quad of a grid split along its other diagonal. */
function alternate(parts: Parts, n: number): Parts {
  const faceVertex = parts.faceVertex.slice();
  for (let q = 0; q < n * n; q++) {
    if ((q + Math.floor(q / n)) % 2 === 0) continue;
    const [a, b, d, , , c] = faceVertex.subarray(6 * q, 6 * q + 6);
    faceVertex.set([a, b, c, b, d, c], 6 * q);
  }
  return { ...parts, faceVertex };
}

// Closed forms (check-values.md 4.2): hypar z = c·x·y has -c² in its middle; a sphere 1/R²; a catenoid -1/(a²·cosh⁴(z/a)).
test("curvature: hypar, sphere, catenoid; diagonals all one way or alternating", () => {
  const n = 40;
  const hypar = buildGrid(n, n, (u, v) => [16 * u - 8, 16 * v - 8, 2.5 * (2 * u - 1) * (2 * v - 1)]);
  const cap = buildGrid(n, n, (u, v) => {
    const [x, y] = [4 * u - 2, 4 * v - 2];
    return [x, y, Math.sqrt(25 - x * x - y * y)];
  });
  for (const turn of [(p: Parts) => p, (p: Parts) => alternate(p, n)]) {
    const saddle = reliefOf(turn(hypar)).curvature;
    expect(Math.abs((saddle?.least ?? 0) / -((2.5 / 64) ** 2) - 1)).toBeLessThan(0.005);
    expect(saddle?.leastAt).toBe((n / 2) * (n + 1) + n / 2);
    const sphere = reliefOf(turn(cap)).curvature;
    for (const k of [sphere?.least, sphere?.greatest]) expect(Math.abs((k ?? 0) * 25 - 1)).toBeLessThan(0.01);
  }
  const tube = reliefOf(buildCatenoid(60, 30, 1.5, 1)).curvature;
  expect(Math.abs((tube?.least ?? 0) * 1.5 ** 2 + 1)).toBeLessThan(0.01);
});

// Gauss-Bonnet for a disc: the sum over the inside is 2π less what the rim turns, here of a cap over a circle.
test("curvature times area adds up to the total curvature of a cap, 2π(1 - cos a), within the mesh", () => {
  const parts = buildGrid(
    60,
    30,
    (u, v) => {
      const [r, a] = [2 * (0.02 + 0.98 * v), -2 * Math.PI * u];
      return [r * Math.cos(a), r * Math.sin(a), Math.sqrt(9 - r * r)];
    },
    true,
  );
  const surface = { xyz: parts.xyz, tri: parts.faceVertex };
  const inside = Uint8Array.from({ length: parts.xyz.length / 3 }, (_, v) => (v >= 60 && v < 30 * 60 ? 1 : 0));
  const areas = measureAreas(surface);
  const sum = measureCurvatures(surface, inside, areas).reduce((s, k, t) => s + k * areas[t], 0);
  const total = (r: number) => 2 * Math.PI * (1 - Math.sqrt(1 - (r / 3) ** 2));
  // rows 1 to 29 stand for the rings half a row either side of them
  const row = (2 * 0.98) / 30;
  expect(Math.abs(sum / (total(2 - row / 2) - total(0.04 + row / 2)) - 1)).toBeLessThan(0.005);
});

test("a ridge is left out: its kink is no curvature of cloth", () => {
  const n = 12;
  const parts = buildGrid(n, n, (u, v) => [10 * u, 10 * v, 3 - 4 * Math.abs(u - 0.5) - 0.5 * v]);
  const column = Array.from({ length: n + 1 }, (_, j) => j * (n + 1) + n / 2);
  parts.lines = [{ name: "ridge", vertices: column }];
  parts.points = [{ name: "rim", vertices: listSides(n, n).flat() }];
  const k = reliefOf(parts).curvature;
  for (const value of [k?.least, k?.greatest]) expect(Math.abs(value ?? 1)).toBeLessThan(1e-9);
});

test("slope: a plane of 5 degrees drains, one of 1 degree is cautioned", () => {
  const plane = (degrees: number) =>
    buildGrid(8, 8, (u, v) => [10 * u, 10 * v, 10 * u * Math.tan((degrees * Math.PI) / 180)]);
  const steep = runForm(placeMesh(plane(5)), buildJob(), {});
  expect(steep.output.relief?.flattest).toBeCloseTo((5 * Math.PI) / 180, 12);
  expect(steep.output.relief?.flatShare).toBe(0);
  expect(steep.findings.map((f) => f.code)).not.toContain("form-flat");
  const [f] = runForm(placeMesh(plane(1)), buildJob(), {}).findings.filter((x) => x.code === "form-flat");
  expect([f.level, f.value, f.basis]).toEqual(["caution", 1, "common practice"]);
  expect(f.text).toMatch(/^100 % of the cloth slopes less than 2\.0°, flattest 1\.0°/);
});

test("a pit holds water, a saddle has none", () => {
  const n = 10;
  const place = (depth: number) =>
    buildGrid(n, n, (u, v) => [
      10 * u,
      10 * v,
      2 * (2 * u - 1) * (2 * v - 1) - depth * Math.exp(-40 * ((u - 0.7) ** 2 + (v - 0.7) ** 2)),
    ]);
  const { output, findings } = runForm(placeMesh(place(1.5)), buildJob(), {});
  expect(output.relief?.pits).toBe(1);
  expect(findings.find((f) => f.code === "form-pit")?.text).toMatch(
    /lower than the cloth all round.*water cannot run off/,
  );
  expect(reliefOf(place(0)).pits).toBe(0);
});
