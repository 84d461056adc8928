// Meshes that are wrong, through the whole command line: each has a code of its own, a place and a remedy; what cannot be planned
// leaves no folder, what holds a stop leaves facts and a findings sheet.
import { existsSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { expect, it } from "vitest";
import { writePapers } from "../../src/core/papers/writePapers.ts";
import { runPlan } from "../../src/core/plan/runPlan.ts";
import type { Finding } from "../../src/core/problem.ts";
import { call, makeScratch } from "./fakePlan.ts";

const scratch = makeScratch();
const fixture = (name: string) => join(import.meta.dirname, "../fixtures/meshes", `${name}.obj`);
const doors = { runPlan, writePapers };

it.each<[name: string, code: string, place: RegExp, remedy: RegExp]>([
  ["empty", "mesh-empty", /no vertices/, /check that it is an OBJ text/],
  ["notANumber", "obj-number", /line 6, column 8: "nan"/, /correct the coordinate/],
  ["indexRange", "obj-index-range", /line 210, column 9: index 82/, /correct the index or add the vertex/],
  ["threeWay", "mesh-three-way-edge", /vertices 40–41 at \(0\.000, 0\.000, 0\.000\) m/, /delete the extra faces/],
  ["closed", "mesh-closed", /no boundary/, /cut the mesh open/],
  ["oneSided", "mesh-one-sided", /vertex 15 at/, /part the surface there/],
  ["flatFaces", "mesh-flat", /all 1 are points or lines/, /export the surface anew/],
])("%s is refused as %s, with exit 2 and nothing written", async (name, code, place, remedy) => {
  const out = join(scratch, name);
  const run = await call(["plan", fixture(name), "--out", out], doors);
  expect(run.exit).toBe(2);
  expect(run.err).toMatch(place);
  expect(run.err).toMatch(remedy);
  if (/^obj-|^mesh-(empty|no-faces)/.test(code)) expect(run.err).toContain(`${fixture(name)}: `);
  expect(run.err.trimEnd().endsWith(`(${code})`)).toBe(true);
  expect(existsSync(out)).toBe(false);
});

async function planFindings(
  path: string,
  name: string,
): Promise<{ exit: number; findings: Finding[]; files: string[] }> {
  const out = join(scratch, name);
  const run = await call(["plan", path, "--out", out, "--json"], doors);
  return { exit: run.exit, findings: JSON.parse(run.out).findings, files: readdirSync(out) };
}

it("a hole torn in the mesh is a stop that names its place; facts, findings and stamped papers are written", async () => {
  const { exit, findings, files } = await planFindings(fixture("hole"), "hole");
  expect(exit).toBe(1);
  const [stop, ...others] = findings.filter((f) => f.level === "stop");
  expect(others).toEqual([]);
  expect(stop).toMatchObject({ code: "mesh-hole", station: "form" });
  expect(stop.text).toMatch(/4\.016 m round, at \(0\.000, 0\.000, 0\.000\) m \(vertex 40 of the mesh\)/);
  expect(stop.remedy).toMatch(/\w/);
  expect(files).toEqual(expect.arrayContaining(["facts.json", "findings.pdf", "panel-cards.pdf", "rolls"]));
});

it("flipped triangles are turned and named in a note", async () => {
  const { exit, findings } = await planFindings(fixture("flipped"), "flipped");
  expect(exit).toBe(0);
  const note = findings.find((f) => f.code === "mesh-winding");
  expect(note).toMatchObject({ level: "note", where: "vertex 5" });
  expect(note?.text).toMatch(/3 triangles .* turned, first at vertex 5 at \(1\.000, -4\.000, -0\.500\) m/);
});

it("a roof read in the wrong unit: the unit is the first stop even where the seams cannot go on (8 km)", async () => {
  const { exit, findings, files } = await planFindings(fixture("millimetres"), "millimetres");
  expect(exit).toBe(1);
  const stops = findings.filter((f) => f.level === "stop");
  expect(stops.map((f) => f.code)).toEqual(["mesh-size", "seam-none"]);
  expect(stops[0]).toMatchObject({ where: "mesh.unit", value: 8000 });
  expect(stops[0].remedy).toContain('set mesh.unit to "mm"');
  expect(stops[1].remedy).toContain("stops before this one first");
  expect(files).toEqual(expect.arrayContaining(["facts.json", "findings.pdf"]));
});

it("a roof of 0.016 m is a stop that names the unit", async () => {
  const small = readFileSync(fixture("sound"), "utf8").replace(/^v (\S+) (\S+) (\S+)/gm, (_, ...at) => {
    return `v ${at
      .slice(0, 3)
      .map((c) => Number(c) / 500)
      .join(" ")}`;
  });
  const path = join(scratch, "small.obj");
  writeFileSync(path, small);
  const { exit, findings } = await planFindings(path, "small");
  expect(exit).toBe(1);
  const stop = findings.find((f) => f.level === "stop");
  expect(stop).toMatchObject({ code: "mesh-size", where: "mesh.unit" });
  expect(stop?.text).toContain("0.01600 m across, read in m");
});
