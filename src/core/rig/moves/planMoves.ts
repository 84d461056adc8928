// From stage lengths to moves a hand can make: travel rounded to sixths of a turn, every step played on the full structure so
// that the reading right after it is known.
import type { FactsMove, FactsStage, RigDecision } from "../../records/rig.ts";
import { measureLink } from "../../structure/elements.ts";
import type { EquilibriumSolver } from "../../structure/equilibrium.ts";
import { measureInfluence } from "../../structure/influence.ts";
import type { Rig } from "../build/buildRig.ts";
import {
  findGreatest,
  findTautest,
  listMembers,
  measurePins,
  measureSlackCloth,
  measureTravel,
  readAdjusters,
  readCorners,
  readForces,
} from "../stages/readState.ts";
import { type RigState, solveState } from "../stages/solveLengths.ts";
import type { LinearStage } from "./chooseOrder.ts";
import { listSteps, type NotchStep, triedByThree } from "./notchSteps.ts";

/** Parts of a full turn that a hand can set: the flats of a hexagonal body. */
export const partsOfTurn = 6;

/** Smallest travel a hand sets at adjuster i, m. */
export function measureNotch(rig: Rig, i: number): number {
  return rig.adjusters[i].turnbuckle.perTurn / partsOfTurn / 1000;
}

/** Furthest a rounded length may lie from the wanted one, in notches: beyond it the corners wander. */
const furthest = 1.5;

/** Turns up to this length may be spared, m. */
const spared = 0.006;

/**
 * Lengths near the wanted ones that whole notches from `from` reach, chosen so that the adjusters' forces stay nearest: single
 * notches, pairs and threes of notches are tried until none helps.
 * @shape one for each adjuster, m; influence: rows of the adjusters first, n columns, kN per m added; allowed: share of a target by
 *   which forces may be off so that an adjuster that would move little need not be visited
 */
export function roundLengths(
  rig: Rig,
  influence: ArrayLike<number>,
  wanted: readonly number[],
  from: readonly number[],
  allowed = 0,
): number[] {
  const n = rig.adjusters.length;
  const notch = rig.adjusters.map((_, i) => measureNotch(rig, i));
  const count = wanted.map((w, i) => Math.round((from[i] - w) / notch[i]));
  // force missed at each adjuster over its target, kept up to date notch by notch
  const miss = rig.adjusters.map((a, i) => {
    let df = 0;
    for (let j = 0; j < n; j++) df += influence[i * n + j] * (from[j] - count[j] * notch[j] - wanted[j]);
    return df / a.target;
  });
  const steps = listSteps(n, n <= triedByThree ? 3 : 2);
  const change = (step: NotchStep, i: number) =>
    step.reduce((sum, [j, way]) => sum - (influence[i * n + j] * way * notch[j]) / rig.adjusters[i].target, 0);
  let best = Math.max(...miss.map(Math.abs));
  for (let better = true; better; ) {
    better = false;
    for (const step of steps) {
      const far = step.some(
        ([j, way]) => Math.abs(from[j] - (count[j] + way) * notch[j] - wanted[j]) > furthest * notch[j],
      );
      if (far) continue;
      let worst = 0;
      for (let i = 0; i < n && worst < best; i++) worst = Math.max(worst, Math.abs(miss[i] + change(step, i)));
      if (worst >= best - 1e-9) continue;
      for (let i = 0; i < n; i++) miss[i] += change(step, i);
      for (const [j, way] of step) count[j] += way;
      best = worst;
      better = true;
    }
  }
  // an adjuster that the stage can do without is not visited: the smallest turns are looked at first
  const order = count.map((_, i) => i).sort((p, q) => Math.abs(count[p]) - Math.abs(count[q]) || p - q);
  for (const j of order) {
    if (count[j] === 0 || Math.abs(from[j] - wanted[j]) > spared) continue;
    const back = -count[j] * notch[j];
    const without = miss.map((m, i) => m - (influence[i * n + j] * back) / rig.adjusters[i].target);
    const worst = Math.max(...without.map(Math.abs));
    if (worst > Math.max(best, allowed)) continue;
    without.forEach((m, i) => {
      miss[i] = m;
    });
    count[j] = 0;
  }
  return from.map((f, i) => f - count[i] * notch[i]);
}

/** A state to first order: influence of the adjusters on every member at its most pulled link, adjusters first. */
export function linearise(rig: Rig, solver: EquilibriumSolver, state: RigState): Float64Array<ArrayBuffer> {
  const read = listMembers(rig).map((m) => findTautest(rig, state, m));
  const turned = rig.adjusters.map((a) => a.link);
  return measureInfluence(solver, state.x, state.L0, turned, read);
}

/** Forces of all members at a state, in the order of listMembers, kN. */
export function readMembers(rig: Rig, state: RigState): number[] {
  return listMembers(rig).map((m) => measureLink(rig.structure, state.x, state.L0, findTautest(rig, state, m)).force);
}

/** A stage between two sets of lengths, its end solved. */
export interface Stage {
  name: string;
  fraction: number;
  /** Slack lengths of the adjusters before it, m. */
  from: number[];
  /** State before it; null: the cloth hangs slack. */
  begin: RigState | null;
  end: RigState;
  linear: LinearStage;
}

/** A stage as played: what is written, and the states right after its steps. */
export interface PlayedStage {
  stage: FactsStage;
  states: RigState[];
}

/**
 * Plays one stage group by group and writes its moves down. A stage that begins slack is one step: all are brought in, in rounds,
 * and read when all stand. States are solved from the stage's end backwards, so that looser ones are reached from tauter ones.
 */
export function playStage(
  rig: Rig,
  solver: EquilibriumSolver,
  decision: RigDecision,
  stage: Stage,
  way: { groups: readonly number[][]; firstStep: number; cancelled?: (() => boolean) | undefined },
): PlayedStage {
  const { from } = stage;
  const to = rig.adjusters.map((a) => stage.end.L0[a.link]);
  const moved = (g: readonly number[]) => g.filter((i) => from[i] !== to[i]);
  const groups = (stage.begin === null ? [way.groups.flat()] : way.groups).map(moved).filter((g) => g.length > 0);
  const after: RigState[] = new Array(groups.length);
  let state = stage.end;
  for (let s = groups.length - 1; s >= 0; s--) {
    after[s] = state;
    if (s === 0) break;
    const L0 = state.L0.slice();
    for (const i of groups[s]) L0[rig.adjusters[i].link] = from[i];
    state = solveState(rig, solver, { x: state.x, L0 }, way);
  }
  const moves: FactsMove[] = [];
  const readings: NonNullable<FactsStage["readings"]> = [];
  groups.forEach((group, s) => {
    const before = s === 0 ? stage.begin : after[s - 1];
    const greatest = findGreatest(rig, after[s], decision.limit);
    const forces = readAdjusters(rig, after[s]);
    const step = way.firstStep + s;
    readings.push({ step, forces: Object.fromEntries(rig.adjusters.map((a, i) => [a.id, forces[i]])) });
    for (const i of group) {
      const a = rig.adjusters[i];
      const travel = 1000 * (from[i] - to[i]);
      const window = decision.readingError * a.target;
      moves.push({
        step,
        adjuster: a.id,
        from: from[i],
        to: to[i],
        pinFrom: before ? measurePins(rig, before, i) : from[i],
        pinTo: measurePins(rig, after[s], i),
        travel,
        turns: travel / a.turnbuckle.perTurn,
        expect: forces[i],
        low: Math.max(0, forces[i] - window),
        high: forces[i] + window,
        greatest,
      });
    }
  });
  return {
    stage: {
      name: stage.name,
      fraction: stage.fraction,
      moves,
      forces: readForces(rig, stage.end),
      slackCloth: measureSlackCloth(rig, stage.end),
      corners: readCorners(rig, stage.end),
      travel: Object.fromEntries(rig.adjusters.map((a, i) => [a.id, measureTravel(rig, stage.end, i)])),
      readings,
    },
    states: after,
  };
}
