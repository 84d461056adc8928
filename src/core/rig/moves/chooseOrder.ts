// In which order adjusters are visited within a stage, and which are turned together, so that peaks on the way stay low.
// Orders are judged to first order from the influence matrix at each stage's end; the one taken is played on the full structure
// afterwards. Never turns more than two adjusters at once. Source: superposition of influence columns in the order of the moves
// (Kwan and Pellegrino 1993, from memory).

import { vertexAt } from "../../surface/measures.ts";
import type { Rig } from "../build/buildRig.ts";
import { type Member, pickGreatest } from "../stages/readState.ts";

/** A stage to first order: forces of the members at its end, and what a metre added at each adjuster does to them. */
export interface LinearStage {
  /** Slack lengths of the adjusters before and after, m. */
  from: number[];
  to: number[];
  members: Member[];
  /** kN at the end of the stage, by member */
  forces: number[];
  /** members × adjusters, kN per m added, row-major */
  influence: Float64Array<ArrayBuffer>;
}

/** Adjusters by their angle round the middle, counter-clockwise seen from above; ties by place in the job. */
export function orderRound(rig: Rig): number[] {
  const at = rig.adjusters.map((a) => vertexAt({ xyz: rig.structure.xyz, tri: new Uint32Array(0) }, a.nodes[0]));
  const middle = [0, 1].map((i) => at.reduce((sum, p) => sum + p[i], 0) / at.length);
  const angle = at.map((p) => Math.atan2(p[1] - middle[1], p[0] - middle[0]));
  return at.map((_, i) => i).sort((p, q) => angle[p] - angle[q] || p - q);
}

/** One after the other, clockwise seen from above, from the job's first adjuster: the plain way. */
export function orderClockwise(rig: Rig): number[][] {
  const round = orderRound(rig).reverse();
  const first = round.indexOf(0);
  return [...round.slice(first), ...round.slice(0, first)].map((i) => [i]);
}

/** Opposite adjusters together, in the order of their angle round the middle; an odd number one by one. */
export function pairAdjusters(rig: Rig): number[][] {
  const order = orderRound(rig);
  const half = Math.floor(order.length / 2);
  if (order.length % 2 === 0) return order.slice(0, half).map((i, k) => [i, order[k + half]]);
  return order.map((i) => [i]);
}

/** Greatest share of a limit (or force, where nothing has a capacity) right after any step of these stages, to first order. */
export function foretellPeak(stages: readonly LinearStage[], groups: readonly number[][], limit: number): number {
  let peak = 0;
  for (const s of stages) {
    const n = s.from.length;
    const forces = s.members.map((_, m) => {
      let sum = s.forces[m];
      for (let j = 0; j < n; j++) sum += s.influence[m * n + j] * (s.from[j] - s.to[j]);
      return sum;
    });
    for (const group of groups) {
      for (const j of group)
        for (let m = 0; m < forces.length; m++) forces[m] += s.influence[m * n + j] * (s.to[j] - s.from[j]);
      const { share, kN } = pickGreatest(s.members, forces, limit);
      peak = Math.max(peak, share > 0 ? share : kN);
    }
  }
  return peak;
}

/** Peaks that differ by less than this share count as equal: first order knows no better. */
const alike = 0.002;

/**
 * Groups of adjusters in the order they are visited in every stage after the first: the lowest peak foretold; of orders alike
 * the one with fewer steps, then the one found first.
 * @shape groups of indices into rig.adjusters
 */
export function chooseOrder(rig: Rig, stages: readonly LinearStage[], limit: number): number[][] {
  const starts = [pairAdjusters(rig), orderRound(rig).map((i) => [i]), orderClockwise(rig)];
  let best = starts[0];
  let least = foretellPeak(stages, best, limit);
  const offer = (groups: number[][]) => {
    const peak = foretellPeak(stages, groups, limit);
    if (peak > least * (1 - alike) && !(peak <= least * (1 + alike) && groups.length < best.length)) return false;
    best = groups;
    least = peak;
    return true;
  };
  for (const start of starts) {
    offer(start);
    improve(start, offer);
  }
  return best;
}

/** Moves single groups to other places in the order as long as the peak falls. */
function improve(start: number[][], offer: (groups: number[][]) => boolean): void {
  let current = start;
  for (let round = 0; round < 3; round++) {
    let better = false;
    for (let i = 0; i < current.length; i++)
      for (let k = 0; k < current.length; k++) {
        if (i === k) continue;
        const trial = current.slice();
        const [group] = trial.splice(i, 1);
        trial.splice(k, 0, group);
        if (offer(trial)) {
          current = trial;
          better = true;
        }
      }
    if (!better) return;
  }
}
