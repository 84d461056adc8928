import { expect, test } from "vitest";
import { buildRig } from "../../src/core/rig/build/buildRig.ts";
import { measureSensitivity } from "../../src/core/rig/otherwise/sensitivity.ts";
import { growCloth } from "../../src/core/rig/otherwise/warmRig.ts";
import { listMembers, readForces } from "../../src/core/rig/stages/readState.ts";
import { solveState } from "../../src/core/rig/stages/solveLengths.ts";
import { createEquilibriumSolver } from "../../src/core/structure/equilibrium.ts";
import { measureResponse } from "../../src/core/structure/influence.ts";
import { giveAdjusters, makeSmallSail, planInput } from "./madeRig.ts";

const made = makeSmallSail([6, 4]);
const rig = buildRig(planInput(made, {}, { adjusters: giveAdjusters(made) }).input);
const solver = createEquilibriumSolver(rig.structure);
const finished = solveState(rig, solver, { x: rig.structure.xyz, L0: rig.L0 }, { sharp: true });
const lines = measureSensitivity(rig, solver, finished);
const before = readForces(rig, finished);

/** Slope of a member's force by solving a small error both ways (second method), kN for the whole error. */
function solveAgain(change: (share: number) => Record<string, number>): Record<string, number> {
  const h = 0.01;
  const [up, down] = [change(h), change(-h)];
  return Object.fromEntries(Object.keys(before).map((id) => [id, (up[id] - down[id]) / (2 * h)]));
}

const near = (line: (typeof lines)[number], again: Record<string, number>) => {
  for (const m of listMembers(rig))
    expect(Math.abs(line.forces[m.id] - again[m.id]), `${line.id}: ${m.id}`).toBeLessThan(0.01 * before[m.id]);
};

test("one line for each cable, each adjuster's pin and the cloth", () => {
  expect(lines.map((l) => l.what)).toEqual([
    ...new Array(4).fill("cable-length"),
    ...new Array(4).fill("anchor"),
    "compensation",
  ]);
});

test("a cable 5 mm too long: as solved again with longer links", () => {
  const cable = rig.cables[0];
  const again = solveAgain((share) => {
    const L0 = finished.L0.slice();
    const n = cable.nodes.length - 1;
    for (let k = cable.firstLink; k < cable.firstLink + n; k++) L0[k] += (share * 0.005) / n;
    return readForces(rig, solveState(rig, solver, { x: finished.x, L0 }, { sharp: true }));
  });
  near(lines[0], again);
});

test("a pin 10 mm nearer the sail: as solved again with the pin moved", () => {
  const a = rig.adjusters[1];
  const again = solveAgain((share) => {
    const x = finished.x.slice();
    const [n, f] = a.nodes;
    const d = [0, 1, 2].map((k) => x[3 * n + k] - x[3 * f + k]);
    const l = Math.hypot(...d);
    for (let k = 0; k < 3; k++) x[3 * f + k] += (share * 0.01 * d[k]) / l;
    return readForces(rig, solveState(rig, solver, { x, L0: finished.L0 }, { sharp: true }));
  });
  near(lines[5], again);
});

test("cloth cut 0.2 % too small raises every force, as solved again with that cloth", () => {
  const again = solveAgain((share) => {
    const structure = growCloth(rig.structure, { warp: -0.002 * share, weft: -0.002 * share });
    return readForces(rig, solveState({ ...rig, structure }, { ...solver, structure }, finished, { sharp: true }));
  });
  near(lines[8], again);
  for (const m of listMembers(rig)) expect(lines[8].forces[m.id]).toBeGreaterThan(0);
});

test("the tolerance is the error that puts the worst member a tenth off", () => {
  for (const l of lines) {
    const worst = Math.max(...listMembers(rig).map((m) => Math.abs(l.forces[m.id]) / before[m.id]));
    expect(l.greatest.share).toBeCloseTo(worst, 9);
    expect((l.tolerance ?? 0) * worst).toBeCloseTo(0.1 * l.change, 9);
  }
});

test("where a corner goes when an adjuster is let out: as solved again", () => {
  const links = rig.adjusters.map((a) => a.link);
  const nodes = rig.adjusters.map((a) => a.nodes[0]);
  const { moves } = measureResponse(solver, finished.x, finished.L0, links, { links: [], nodes });
  const h = 1e-5;
  const L0 = finished.L0.slice();
  L0[links[2]] += h;
  const next = solveState(rig, solver, { x: finished.x, L0 }, { sharp: true });
  nodes.forEach((v, r) => {
    for (let k = 0; k < 3; k++)
      expect(Math.abs((next.x[3 * v + k] - finished.x[3 * v + k]) / h - moves[(3 * r + k) * 4 + 2])).toBeLessThan(0.01);
  });
});
