// A sail with a guyed mast at each of its high corners, from the job to the played moves.
import { beforeAll, expect, test } from "vitest";
import type { RigJob } from "../../src/core/records/job.ts";
import type { FactsRig } from "../../src/core/records/rig.ts";
import { type RigResult, runRig } from "../../src/core/rig/runRig.ts";
import type { Vec3 } from "../../src/core/surface/surface.ts";
import { guy, guyAnchors } from "./guyedSail.ts";
import { giveAdjusters, makeSmallSail, planInput } from "./madeRig.ts";
import { buildAgain } from "./solveAgain.ts";

const made = makeSmallSail([8, 6]);
const plan = (rig: Partial<RigJob>) =>
  planInput(made, { anchors: guyAnchors }, { adjusters: giveAdjusters(made), ...rig });

let result: { output: RigResult; checks: { holds: boolean }[]; findings: { code: string; level: string }[] };
let rig: FactsRig;

beforeAll(() => {
  result = runRig(plan(guy(1)).input, {});
  if (!result.output.rig) throw new Error("no rig");
  rig = result.output.rig;
});

test("the heads are free and in balance: residual below 1e-8 by a second method, masts pressed, stays taut", () => {
  expect(result.checks.every((c) => c.holds)).toBe(true);
  expect(result.findings.filter((f) => f.level === "stop")).toEqual([]);
  for (const s of rig.struts) expect(rig.fixed).not.toContain(s.nodes[1]);
  expect(buildAgain(rig, plan(guy(1)).input.fabric).measureResidual()).toBeLessThan(1e-8);
  const forces = result.output.asBuilt?.forces ?? {};
  for (const name of ["mast-1", "mast-2"]) expect(forces[name]).toBeLessThan(-20);
  for (const name of ["stay-1", "stay-2", "stay-3", "stay-4"]) expect(forces[name]).toBeGreaterThan(10);
});

test("stays carry what balance asks, within the rounding of the moves", () => {
  const forces = result.output.asBuilt?.forces ?? {};
  for (const c of result.output.cables) expect(Math.abs(forces[c.id] / c.force - 1)).toBeLessThan(0.03);
});

test("adjusters reach their targets in every stage, heads and all", () => {
  for (const stage of result.output.tensioning?.stages ?? [])
    for (const a of rig.adjusters) expect(Math.abs(stage.forces[a.id] / a.target - stage.fraction)).toBeLessThan(0.1);
});

test("a mast named from its head instead of its foot is the same mast", () => {
  const { struts, stays } = guy(1);
  const turned = struts.map((s) => ({ ...s, from: s.to, to: s.from }));
  const other = runRig(plan({ struts: turned, stays }).input, {}).output;
  for (const [id, kN] of Object.entries(result.output.asBuilt?.forces ?? {}))
    expect(other.asBuilt?.forces[id]).toBeCloseTo(kN, 5);
});

test("a corner that sits on its mast without an adjuster is held by it", () => {
  const { struts, stays } = guy(1);
  const place = made.corners.find((c) => c.name === "corner-nw")!.vertex;
  const at = [0, 1, 2].map((k) => made.xyz[3 * place + k]);
  const own = { ...struts[1], from: [at[0] - 0.2, at[1] + 0.2, 0] as Vec3 };
  const adjusters = giveAdjusters(made).filter((a) => a.anchor !== "corner-nw");
  const { output, checks } = runRig(plan({ adjusters, struts: [own], stays: stays.slice(2) }).input, {});
  expect(checks.every((c) => c.holds)).toBe(true);
  expect(output.rig?.fixed).not.toContain(place);
  expect(output.asBuilt?.forces["mast-2"]).toBeLessThan(-20);
});

test("a mast whose stays lie under the sail cannot be balanced: a stop that names the masts, no rig, cables still listed", () => {
  const { output, findings } = runRig(plan(guy(-1)).input, {});
  expect(findings.map((f) => [f.code, f.level, f.where])).toEqual([["mast-balance", "stop", ["mast-1", "mast-2"]]]);
  expect(output.rig).toBeNull();
  expect(output.tensioning).toBeNull();
  expect(output.cables.filter((c) => c.edge !== null).map((c) => c.id)).toHaveLength(4);
});

test("a mast or stay at a place the form has not is an error with both names", () => {
  const { struts, stays } = guy(1);
  expect(() => runRig(plan({ struts: [{ ...struts[0], to: "corner-x" }], stays }).input, {})).toThrow(
    /mast-1.*"corner-x".*corner-sw/,
  );
});
