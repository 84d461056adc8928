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
