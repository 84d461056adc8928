// From stage lengths to moves a hand can make: travel rounded to sixths of a turn, pairs moved together, every step played on
// the full structure so that the reading right after it is known.

import type { FactsMove, FactsStage, RigDecision } from "../records/rig.ts";
import { measureLink } from "../structure/elements.ts";
import type { EquilibriumSolver } from "../structure/equilibrium.ts";
import { vertexAt } from "../surface/measures.ts";
import type { Vec3 } from "../surface/surface.ts";
import type { Rig } from "./buildRig.ts";
import { measureAdjusterInfluence, type RigState, readAdjusters, solveState } from "./solveLengths.ts";

/** Parts of a full turn that a hand can set: the flats of a hexagonal body. */
export const partsOfTurn = 6;

/** Smallest travel a hand sets at adjuster i, m. */
export function measureNotch(rig: Rig, i: number): number {
  return rig.adjusters[i].turnbuckle.perTurn / partsOfTurn / 1000;
}

/**
 * Groups of adjusters moved together: opposite ones in plan, in the order of their angle round the middle; an odd one alone.
 * @shape indices into rig.adjusters
 */
export function pairAdjusters(rig: Rig): number[][] {
  const at = rig.adjusters.map((a) => vertexAt({ xyz: rig.structure.xyz, tri: new Uint32Array(0) }, a.nodes[0]));
  const middle = [0, 1].map((i) => at.reduce((sum, p) => sum + p[i], 0) / at.length);
  const order = at
    .map((_, i) => i)
    .sort(
      (p, q) =>
        Math.atan2(at[p][1] - middle[1], at[p][0] - middle[0]) -
          Math.atan2(at[q][1] - middle[1], at[q][0] - middle[0]) || p - q,
    );
  const half = Math.floor(order.length / 2);
  if (order.length % 2 === 0) return order.slice(0, half).map((i, k) => [i, order[k + half]]);
  return order.map((i) => [i]);
}

/**
 * Lengths nearest the wanted ones that whole notches from `from` reach, chosen so that the forces stay nearest (first order).
 * @shape one for each adjuster, m; influence n × n in kN per m added
 */
export function roundLengths(rig: Rig, solver: EquilibriumSolver, state: RigState, from: number[]): number[] {
  const n = rig.adjusters.length;
  const J = measureAdjusterInfluence(rig, solver, state);
  const wanted = rig.adjusters.map((a) => state.L0[a.link]);
  const notch = rig.adjusters.map((_, i) => measureNotch(rig, i));
  const count = wanted.map((w, i) => Math.round((from[i] - w) / notch[i]));
  const miss = (counts: number[]) => {
    let worst = 0;
    for (let i = 0; i < n; i++) {
      let df = 0;
      for (let j = 0; j < n; j++) df += J.get(i, j) * (from[j] - counts[j] * notch[j] - wanted[j]);
      worst = Math.max(worst, Math.abs(df) / rig.adjusters[i].target);
    }
    return worst;
  };
  let best = miss(count);
  for (let better = true; better; ) {
    better = false;
    for (let i = 0; i < n; i++) {
      for (const way of [1, -1]) {
        const trial = count.slice();
        trial[i] += way;
        // never further than one notch from the wanted length
        if (Math.abs(from[i] - trial[i] * notch[i] - wanted[i]) > notch[i]) continue;
        const value = miss(trial);
        if (value < best - 1e-12) {
          best = value;
          count[i] = trial[i];
          better = true;
        }
      }
    }
  }
  return from.map((f, i) => f - count[i] * notch[i]);
}

/**
 * The member nearest what it may carry in a state; share = force / (limit · its breaking force or capacity), 1 at the limit.
 * Each member is judged by its own capacity; those without one only where no member has any.
 */
export function findGreatest(rig: Rig, state: RigState, limit: number): FactsMove["greatest"] {
  let greatest = { id: "", kN: 0, share: 0 };
  const offer = (id: string, kN: number, capacity: number | null) => {
    const share = capacity === null ? 0 : kN / (limit * capacity);
    if (greatest.id === "" || share > greatest.share || (share === greatest.share && kN > greatest.kN))
      greatest = { id, kN, share };
  };
  for (const a of rig.adjusters)
    offer(a.id, measureLink(rig.structure, state.x, state.L0, a.link).force, a.turnbuckle.capacity);
  for (const c of rig.cables) offer(c.id, measureCable(rig, state, c), c.minBreakingForce);
  return greatest;
}

/** Greatest link force of a cable, kN. */
export function measureCable(rig: Rig, state: RigState, cable: Rig["cables"][number]): number {
  let most = 0;
  for (let i = 0; i + 1 < cable.nodes.length; i++)
    most = Math.max(most, measureLink(rig.structure, state.x, state.L0, cable.firstLink + i).force);
  return most;
}

/** Forces of all adjusters and cables in a state, by id, kN. */
export function readForces(rig: Rig, state: RigState): Record<string, number> {
  const out: Record<string, number> = {};
  const forces = readAdjusters(rig, state);
  rig.adjusters.forEach((a, i) => {
    out[a.id] = forces[i];
  });
  for (const c of rig.cables) out[c.id] = measureCable(rig, state, c);
  for (const s of rig.struts) out[s.id] = measureLink(rig.structure, state.x, state.L0, s.link).force;
  return out;
}

/** Where the near end of each adjuster stands, by adjuster, m. */
export function readCorners(rig: Rig, state: RigState): Record<string, Vec3> {
  const surface = { xyz: state.x, tri: new Uint32Array(0) };
  return Object.fromEntries(rig.adjusters.map((a) => [a.id, vertexAt(surface, a.nodes[0])]));
}

/** What a tape reads between the pins of an adjuster: its stretched length, or its own length where it hangs slack. */
function measurePins(rig: Rig, state: RigState, i: number): number {
  const a = rig.adjusters[i];
  const link = measureLink(rig.structure, state.x, state.L0, a.link);
  return link.force > 0 ? link.length : state.L0[a.link];
}

/**
 * Plays one stage from a state to given lengths, group by group, and writes its moves down.
 * @shape to: one for each adjuster, m; firstStep: number of the first step
 * Backwards: the stage is played from its end, so that slack states are reached from taut ones.
 */
export function playStage(
  rig: Rig,
  solver: EquilibriumSolver,
  decision: RigDecision,
  stage: { name: string; fraction: number; begin: RigState; end: RigState; slack: boolean },
  firstStep: number,
): { stage: FactsStage; states: RigState[] } {
  const from = rig.adjusters.map((a) => stage.begin.L0[a.link]);
  const to = rig.adjusters.map((a) => stage.end.L0[a.link]);
  const groups = pairAdjusters(rig)
    .map((g) => g.filter((i) => from[i] !== to[i]))
    .filter((g) => g.length > 0);
  // the state after step s has the groups up to s at their new length; solved from the end of the stage backwards
  const after: RigState[] = new Array(groups.length);
  let state = stage.end;
  for (let s = groups.length - 1; s >= 0; s--) {
    after[s] = state;
    if (s === 0) break;
    const L0 = state.L0.slice();
    for (const i of groups[s]) L0[rig.adjusters[i].link] = from[i];
    state = solveState(rig, solver, { x: state.x, L0 }, { slack: stage.slack });
  }
  const moves: FactsMove[] = [];
  groups.forEach((group, s) => {
    const before = s === 0 ? stage.begin : after[s - 1];
    const greatest = findGreatest(rig, after[s], decision.limit);
    for (const i of group) {
      const a = rig.adjusters[i];
      const travel = 1000 * (from[i] - to[i]);
      const expect = measureLink(rig.structure, after[s].x, after[s].L0, a.link).force;
      const window = decision.readingError * a.target;
      moves.push({
        step: firstStep + s,
        adjuster: a.id,
        from: from[i],
        to: to[i],
        pinFrom: measurePins(rig, before, i),
        pinTo: measurePins(rig, after[s], i),
        travel,
        turns: travel / a.turnbuckle.perTurn,
        expect,
        low: Math.max(0, expect - window),
        high: expect + window,
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
      corners: readCorners(rig, stage.end),
    },
    states: after,
  };
}
