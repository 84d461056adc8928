import { expect, test } from "vitest";
import { buildRig, type Rig } from "../../src/core/rig/build/buildRig.ts";
import {
  chooseOrder,
  foretellPeak,
  type LinearStage,
  orderClockwise,
  pairAdjusters,
} from "../../src/core/rig/moves/chooseOrder.ts";
import { linearise, measureNotch, roundLengths } from "../../src/core/rig/moves/planMoves.ts";
import { readAdjusters } from "../../src/core/rig/stages/readState.ts";
import { measureAdjusterInfluence, solveState } from "../../src/core/rig/stages/solveLengths.ts";
import { createEquilibriumSolver } from "../../src/core/structure/equilibrium.ts";
import { giveAdjusters, makeSmallSail, planInput } from "./madeRig.ts";

/** Adjusters at places in plan, nothing else. */
function at(...places: [number, number][]): Rig {
  return {
    structure: { xyz: new Float64Array(places.flatMap(([x, y]) => [x, y, 0])) },
    adjusters: places.map((_, i) => ({ nodes: [i, i], turnbuckle: { perTurn: 6 } })),
  } as unknown as Rig;
}

test("opposite adjusters are moved together, whatever their order in the job", () => {
  const pairs = (rig: Rig) => pairAdjusters(rig).map((g) => g.toSorted((p, q) => p - q));
  expect(pairs(at([1, 0], [0, 1], [-1, 0], [0, -1])).sort()).toEqual([
    [0, 2],
    [1, 3],
  ]);
  expect(pairs(at([1, 0], [-1, 0], [0, 1], [0, -1])).sort()).toEqual([
    [0, 1],
    [2, 3],
  ]);
});

test("an odd number is moved one by one, round the middle", () => {
  const angle = (k: number): [number, number] => [Math.cos((2 * Math.PI * k) / 5), Math.sin((2 * Math.PI * k) / 5)];
  const order = pairAdjusters(at(angle(0), angle(2), angle(4), angle(1), angle(3))).flat();
  // 144° and 216° stand either side of the cut at ±180°: counter-clockwise from there
  expect(order).toEqual([4, 2, 0, 3, 1]);
});

test("the plain way goes clockwise from the job's first adjuster", () => {
  expect(orderClockwise(at([1, 0], [0, 1], [-1, 0], [0, -1])).flat()).toEqual([0, 3, 2, 1]);
});

test("three cables on a guided bar (k 10, 8, 12, support 50 kN/mm; check-values 6.3): peaks on the way, and the best order", () => {
  // A = diag(k) − k kᵀ/(Σk + ks); shortenings 4.5, 4.0, 3.583 mm end at 30, 20, 25 kN; on the way 39.38, then 35.38
  const k = [10, 8, 12];
  const s = [4.5, 4, 3.58333333];
  const influence = new Float64Array(9);
  for (let i = 0; i < 3; i++)
    for (let j = 0; j < 3; j++) influence[3 * i + j] = -1000 * ((i === j ? k[i] : 0) - (k[i] * k[j]) / 80);
  const stage: LinearStage = {
    from: [0, 0, 0],
    to: s.map((mm) => -mm / 1000),
    members: ["A", "B", "C"].map((id, i) => ({ id, firstLink: i, links: 1, capacity: 100 })),
    forces: [30, 20, 25],
    influence,
  };
  expect(foretellPeak([stage], [[0], [1], [2]], 0.5)).toBeCloseTo(39.375 / 50, 4);
  expect(foretellPeak([stage], [[0, 1, 2]], 0.5)).toBeCloseTo(30 / 50, 4);
  // the order with the lowest peak of all six, found by hand: second, third, first
  const rig = at([1, 0], [-0.5, 0.8], [-0.5, -0.8]);
  const order = chooseOrder(rig, [stage], 0.5);
  const all = [
    [0, 1, 2],
    [0, 2, 1],
    [1, 0, 2],
    [1, 2, 0],
    [2, 0, 1],
    [2, 1, 0],
  ].map((o) =>
    foretellPeak(
      [stage],
      o.map((i) => [i]),
      0.5,
    ),
  );
  expect(foretellPeak([stage], order, 0.5)).toBeCloseTo(Math.min(...all), 9);
  expect(Math.min(...all)).toBeLessThan(Math.max(...all));
});

test("a notch is a sixth of a turn: 1.0 mm for 6 mm a turn", () => {
  expect(measureNotch(at([0, 0]), 0)).toBeCloseTo(0.001, 12);
});

test("rounded lengths are whole notches from where the adjusters stand, none a notch off, and no worse than the nearest", () => {
  const made = makeSmallSail([6, 4]);
  const rig = buildRig(planInput(made, {}, { adjusters: giveAdjusters(made, { perTurn: 5 }) }).input);
  const solver = createEquilibriumSolver(rig.structure);
  const state = solveState(rig, solver, { x: rig.structure.xyz, L0: rig.L0 });
  const wanted = rig.adjusters.map((a) => state.L0[a.link]);
  const from = wanted.map((w, i) => w + 0.0131 + 0.0007 * i);
  const to = roundLengths(rig, linearise(rig, solver, state), wanted, from);
  const notch = 5 / 6000;
  to.forEach((t, i) => {
    const count = (from[i] - t) / notch;
    expect(Math.abs(count - Math.round(count))).toBeLessThan(1e-9);
    expect(Math.abs(t - wanted[i])).toBeLessThanOrEqual(notch);
  });
  const J = measureAdjusterInfluence(rig, solver, state);
  const miss = (lengths: number[]) =>
    Math.max(
      ...rig.adjusters.map((a, i) =>
        Math.abs(lengths.reduce((sum, l, j) => sum + J.get(i, j) * (l - wanted[j]), 0) / a.target),
      ),
    );
  const nearest = from.map((f, i) => f - Math.round((f - wanted[i]) / notch) * notch);
  expect(miss(to)).toBeLessThanOrEqual(miss(nearest) + 1e-12);
  // what first order foretells is what the structure does
  const L0 = state.L0.slice();
  rig.adjusters.forEach((a, i) => {
    L0[a.link] = to[i];
  });
  const forces = readAdjusters(rig, solveState(rig, solver, { x: state.x, L0 }));
  const before = readAdjusters(rig, state);
  rig.adjusters.forEach((a, i) => {
    expect(Math.abs(forces[i] - before[i]) / a.target).toBeLessThan(miss(to) + 0.01);
  });
});
