import { expect, test } from "vitest";
import { runRig } from "../../src/core/rig/runRig.ts";
import { cable, giveAdjusters, giveForces, makeSmallSail, planInput } from "./madeRig.ts";

const made = makeSmallSail([6, 4]);
const adjusters = giveAdjusters(made);
const steel = 12e-6;

/** Forces of T1 by temperature; everything of one expansion where told. */
function table(frameAlpha: number, alike: boolean) {
  const { input, job } = planInput(made, {}, { adjusters, frameAlpha });
  const cables = Object.fromEntries(
    Object.entries(input.cables).map(([id, c]) => [id, { ...c, type: { ...c.type, alpha: alike ? steel : 16e-6 } }]),
  );
  const fabric = alike ? { ...job.fabric, alpha: steel } : input.fabric;
  const { tensioning } = runRig({ ...input, cables, fabric }, {}).output;
  return Object.fromEntries(tensioning!.temperatureTable.map((r) => [r.temperature, r.forces.T1]));
}

test("anchors that stay: warm cloth and cables slacken; anchors on a frame that warms alike: it cancels, up to the size that grows", () => {
  expect(Object.keys(giveForces(made))).toHaveLength(4);
  expect(cable.alpha).toBe(16e-6);
  const fixed = table(0, true);
  const moving = table(steel, true);
  expect(fixed[35]).toBeLessThan(0.99 * fixed[15]);
  expect(fixed[-5]).toBeGreaterThan(1.01 * fixed[15]);
  // a structure that grows in one piece keeps its strains; force and stress grow with its size only by α·ΔT
  for (const at of [35, 25, 5, -5]) expect(Math.abs(moving[at] / moving[15] - 1)).toBeLessThan(2e-3);
  expect(moving[15]).toBeCloseTo(fixed[15], 9);
});

test("a frame that grows more than what hangs in it tightens the roof", () => {
  const aluminium = table(24e-6, true);
  expect(aluminium[35]).toBeGreaterThan(1.005 * aluminium[15]);
});
