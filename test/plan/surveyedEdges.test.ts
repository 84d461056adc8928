import { expect, test } from "vitest";
import { runPlan } from "../../src/core/plan/runPlan.ts";
import { measureShifts } from "../../src/core/plan/surveyedEdges.ts";
import type { Job, SurveyPoint } from "../../src/core/records/job.ts";
import { runRig } from "../../src/core/rig/runRig.ts";
import type { Vec3 } from "../../src/core/surface/surface.ts";
import { makeJob } from "../madeJob.ts";
import { placeForm, planInput } from "../rig/madeRig.ts";
import { makeSaddle } from "../templates/makeForms.ts";

const edges: Job["edges"] = { default: { kind: "clamped" } };
const warp: Vec3 = [1, 0, 0];
/** A flat square of 16 m clamped all round, 2 kN/m both ways, and the starter hall's kind of saddle. */
const flat = makeSaddle([16, 16], [3, 3, 3, 3], [8, 8]);
const saddle = makeSaddle([16, 16], [2, 5, 2, 5], [8, 8]);

/** Both ends of the east edge, 10 mm further out. */
const east = (made: typeof flat): SurveyPoint[] =>
  ["corner-se", "corner-ne"].map((anchor) => {
    const v = made.corners.find((c) => c.name === anchor)!.vertex;
    return { anchor, at: [made.xyz[3 * v] + 0.01, made.xyz[3 * v + 1], made.xyz[3 * v + 2]] };
  });

test("10 mm on a flat clamped roof of 16 m is a fifth of its prestress: uniaxial strain, in closed form", () => {
  const fabric = { ...makeJob().fabric, Ew: 600, Ef: 500, nuWf: 0.25, G: 20 };
  const { input, job } = planInput(flat, { edges, warp, fabric, clothCut: true, survey: east(flat) });
  const { output, findings, checks } = runRig(input, {});
  const { Ew, Ef, nuWf } = job.fabric;
  // the sides along x are clamped too, so the cloth is stretched one way only: S_ww by Ew/(1 − nuWf·nuFw) times the strain
  const more = (Ew / (1 - (nuWf * nuWf * Ef) / Ew)) * (0.01 / 16);
  expect(checks.find((c) => c.text.includes("come to rest"))?.holds).toBe(true);
  // which flat axis lies along x is the layout's choice
  const along = Math.max(output.asBuilt!.stress.warp.mean, output.asBuilt!.stress.weft.mean);
  const across = Math.min(output.asBuilt!.stress.warp.mean, output.asBuilt!.stress.weft.mean);
  expect(Math.abs(along - 2 - more)).toBeLessThan(0.03 * more);
  expect(along / 2 - 1).toBeGreaterThan(0.15);
  expect(along / 2 - 1).toBeLessThan(0.25);
  expect(across).toBeLessThan(2 + 0.35 * more);
  const told = findings.find((f) => f.code === "survey-stress");
  expect(told?.level).toBe("caution");
  expect(told?.value).toBeCloseTo(along / 2 - 1, 9);
});

test("on the saddle the same 10 mm do nearly as much; without a survey nothing is said", () => {
  const { input } = planInput(saddle, { edges, warp, clothCut: true, survey: east(saddle) });
  const { asBuilt } = runRig(input, {}).output;
  const off = [asBuilt!.stress.warp.mean, asBuilt!.stress.weft.mean].map((s) => s / 2 - 1);
  expect(Math.max(...off)).toBeGreaterThan(0.12);
  expect(Math.max(...off)).toBeLessThan(0.25);
  const plain = runRig(planInput(saddle, { edges, warp, clothCut: true }).input, {});
  expect(plain.findings.map((f) => f.code)).not.toContain("survey-stress");
  expect(Math.abs(plain.output.asBuilt!.stress.warp.mean - 2)).toBeLessThan(0.1);
});

test("before cutting the panels follow the surveyed edge: form on it, panels longer by the way, stress as intended", () => {
  const plan = (changes: Partial<Job>) =>
    runPlan(makeJob({ edges, warp, ...changes }), placeForm(saddle), { until: "panels", revision: "test" }, {});
  const drawn = plan({});
  const built = plan({ survey: east(saddle) });
  const told = built.findings.find((f) => f.code === "survey-clamped");
  expect([told?.level, told?.value]).toEqual(["note", expect.closeTo(10, 6)]);
  // east and, towards it, north and south are shifted; west stands as drawn
  expect(told?.where).toEqual(["south", "east", "north"]);
  const reach = (facts: typeof drawn) => Math.max(...facts.form!.vertices.map((v) => v[0]));
  expect(reach(built) - reach(drawn)).toBeCloseTo(0.01, 9);
  const side = saddle.lines.find((l) => l.name === "south")!.vertices;
  side.forEach((v, i) => {
    expect(built.form!.vertices[v][0] - drawn.form!.vertices[v][0]).toBeCloseTo((0.01 * i) / (side.length - 1), 4);
  });
  const area = (facts: typeof drawn) => facts.panels!.reduce((sum, p) => sum + p.area.net, 0);
  // half of 10 mm over 16 m of width, less what prestress takes off
  expect(area(built) / area(drawn) - 1).toBeCloseTo(0.01 / 16, 4);
  for (const p of built.panels!)
    for (const way of ["warp", "weft"] as const) expect(Math.abs(p.stress[way].mean - 2)).toBeLessThan(0.1);
});

test("a point along an edge shifts it in between, straight to its ends, which stand as drawn", () => {
  const { form } = planInput(flat, { edges });
  const shifts = measureShifts(form, [{ edge: "north", along: 0.25, at: [12, 16.02, 3] }]);
  expect(Object.keys(shifts)).toEqual(["north"]);
  expect(shifts.north.map(({ at, by }) => [at, ...by.map((q) => Math.round(1e6 * q) / 1e6)])).toEqual([
    [0, 0, 0, 0],
    [expect.closeTo(4, 9), 0, 0.02, 0],
    [expect.closeTo(16, 9), 0, 0, 0],
  ]);
});

test("an anchor or edge the form has not, and a place far off, are errors with names", () => {
  const { form } = planInput(flat, { edges });
  expect(() => measureShifts(form, [{ anchor: "A9", at: [0, 0, 0] }])).toThrow(/"A9".*corner-sw/);
  expect(() => measureShifts(form, [{ edge: "roof", along: 0.5, at: [0, 0, 0] }])).toThrow(/"roof".*north/);
  expect(() => measureShifts(form, [{ edge: "north", along: 0.5, at: [8000, 16000, 3000] }])).toThrow(/north.*unit/);
});
