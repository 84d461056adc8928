// Cable forces of forms with ridges, valleys, hoops and masts, recovered by balance. The forms were found by a program that
// shares no code with this one (numpy and scipy: Delaunay meshes, least energy of an equal stress and constant cable forces, then
// moves along normals); each file's first line says its forces.
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { readObj } from "../../src/core/form/reading/readObj.ts";
import { runForm } from "../../src/core/form/runForm.ts";
import { buildJob, placeMesh } from "./formJob.ts";
import { mapPlaces, renumber } from "./formMeshes.ts";

const forms = ["ridgesAndValley", "saddleCross", "twinMasts", "peakRidges", "hoopCone"];

function readForm(name: string) {
  const text = readFileSync(new URL(`../fixtures/forms/${name}.obj`, import.meta.url), "utf8");
  const head = /^# (\S+) kN\/m both ways; forces in kN: (.*)$/m.exec(text);
  if (head === null) throw new Error(`${name}: the first line says no forces`);
  const forces = new Map(head[2].split(", ").map((f) => [f.split(" ")[0], Number(f.split(" ")[1])] as const));
  return { parts: readObj(text), stress: Number(head[1]), forces };
}

function findWorst(name: string, change: (parts: ReturnType<typeof readObj>) => ReturnType<typeof readObj>, unit = 1) {
  const { parts, stress, forces } = readForm(name);
  const source = placeMesh(change(parts), { unit: unit === 1 ? "m" : "mm" });
  const { output } = runForm(source, buildJob({ prestress: { warp: stress, weft: stress } }), {});
  const cables = output.edges.filter((e) => e.force !== null);
  expect(cables.map((e) => e.id).sort()).toEqual([...forces.keys()].sort());
  return Math.max(...cables.map((e) => Math.abs((e.force as number) / (forces.get(e.id) as number) - 1)));
}

const toMillimetre = (...place: number[]) => place.map((c) => Math.round(1000 * c) / 1000);

describe("ridges, valleys, hoops, masts: forces found from balance alone", () => {
  test.each(forms)("%s: within 0.1 %% as it is, renumbered, and in millimetres turned about z", (name) => {
    expect(findWorst(name, (parts) => parts)).toBeLessThan(1e-3);
    expect(findWorst(name, (parts) => renumber(parts, 5))).toBeLessThan(1e-3);
    const [c, s] = [Math.cos(0.7), Math.sin(0.7)];
    const turned = (x: number, y: number, z: number) =>
      [c * x - s * y + 40, s * x + c * y - 7, z + 3].map((p) => 1000 * p);
    expect(findWorst(name, (parts) => mapPlaces(parts, turned), 1000)).toBeLessThan(1e-3);
  });

  test.each(forms)("%s: within 2 %% with coordinates rounded to the millimetre", (name) => {
    expect(findWorst(name, (parts) => mapPlaces(parts, toMillimetre))).toBeLessThan(0.02);
    expect(findWorst(name, (parts) => renumber(mapPlaces(parts, toMillimetre), 9))).toBeLessThan(0.02);
  });
});

test("twin masts under equal stress: uneven triangles leave a residual within the cloth only, and that is no caution", () => {
  const { parts, stress } = readForm("twinMasts");
  const even = { prestress: { warp: stress, weft: stress } };
  const { output, findings, checks } = runForm(placeMesh(parts), buildJob(even), {});
  expect(output.residual.tangentialMax).toBeGreaterThan(0.01);
  expect(output.residual.normalMax).toBeLessThan(1e-3);
  const codes = findings.map((f) => f.code).filter((c) => c.startsWith("form-balance"));
  expect(codes).toEqual(["form-balance-within"]);
  expect(checks.filter((c) => !c.holds)).toEqual([]);
  // where warp and weft differ the same mesh is out of balance within the cloth too, and a wrong cable force shows as ever
  const other = { prestress: { warp: 1.2 * stress, weft: 0.8 * stress }, warp: [1, 0, 0] as [number, number, number] };
  const caution = (job: Parameters<typeof buildJob>[0]) =>
    runForm(placeMesh(parts), buildJob(job), {}).findings.some((f) => f.code === "form-balance");
  expect(caution(other)).toBe(true);
  expect(caution({ ...even, edges: { default: { force: 40 }, edge2: { force: 60 } } })).toBe(true);
});
