// The way of a crew without a schedule: one adjuster after the other round the roof, each turned until its own gauge shows the
// stage's force, and round again at the end until all hold. Worked out to be compared with; nobody is told to do it.
import type { StationContext } from "../../problem.ts";
import type { FactsWay, RigDecision } from "../../records/rig.ts";
import type { EquilibriumSolver } from "../../structure/equilibrium.ts";
import type { Rig } from "../build/buildRig.ts";
import { findGreatest, pickHigher, readAdjusters } from "../stages/readState.ts";
import { measureAdjusterInfluence, type RigState, turnTo } from "../stages/solveLengths.ts";
import { orderClockwise } from "./chooseOrder.ts";
import { measureNotch, type Stage } from "./planMoves.ts";

/** Rounds after the last stage before the crew would give up. */
const mostRounds = 10;

/** Share of the target within which a gauge's reading is let be. */
const goodEnough = 0.03;

/** Plays it from the end of the first stage, where both ways stand alike. */
export function playByForce(
  decision: RigDecision,
  rig: Rig,
  solver: EquilibriumSolver,
  stages: readonly Stage[],
  context: StationContext,
): FactsWay {
  const order = orderClockwise(rig).flat();
  const first = stages.find((s) => s.begin === null);
  let state = stages[0].end;
  let peak = findGreatest(rig, state, decision.limit);
  let visits = first ? rig.adjusters.length : 0;
  let steps = first ? 1 : 0;
  const measureOff = () => {
    const forces = readAdjusters(rig, state);
    return Math.max(...forces.map((f, i) => Math.abs(f / rig.adjusters[i].target - 1)));
  };
  const goRound = (fraction: number) => {
    for (const i of order) {
      const wanted = fraction * rig.adjusters[i].target;
      const next = turnUntil(rig, solver, state, { i, wanted }, context);
      if (next === state) continue;
      state = next;
      visits++;
      steps++;
      peak = pickHigher(peak, findGreatest(rig, state, decision.limit));
    }
  };
  for (const stage of stages.slice(first ? 1 : 0)) goRound(stage.fraction);
  for (let round = 0; round < mostRounds && measureOff() > goodEnough; round++) goRound(1);
  const end = findGreatest(rig, state, decision.limit);
  return { way: "by-force", peak, end, visits, steps, off: measureOff() };
}

/** Turns one adjuster by whole notches until its own force is within half a notch of what is wanted. */
export function turnUntil(
  rig: Rig,
  solver: EquilibriumSolver,
  start: RigState,
  aim: { i: number; wanted: number },
  context: StationContext,
): RigState {
  const notch = measureNotch(rig, aim.i);
  let state = start;
  for (let round = 0; round < 6; round++) {
    const force = readAdjusters(rig, state)[aim.i];
    const gain = -measureAdjusterInfluence(rig, solver, state).get(aim.i, aim.i);
    const want = gain > 0 ? (aim.wanted - force) / gain : 0.003;
    const count = Math.round(Math.max(-0.02, Math.min(0.02, want)) / notch);
    if (count === 0) return state;
    const lengths = rig.adjusters.map((a, j) => state.L0[a.link] - (j === aim.i ? count * notch : 0));
    state = turnTo(rig, solver, state, lengths, context);
  }
  return state;
}
