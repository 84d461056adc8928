// What a person must know of the states on the way: solves that did not come to rest, masts that lean, turnbuckles too coarse.
import type { Check, Finding } from "../../problem.ts";
import { measureDistance, vertexAt } from "../../surface/measures.ts";
import type { Rig } from "../build/buildRig.ts";
import { measureNotch } from "../moves/planMoves.ts";
import { readAdjusters } from "../stages/readState.ts";
import type { RigState } from "../stages/solveLengths.ts";

/** Way of a mast's head from its finished place, over the mast's length, that asks for a word with the engineer (own default). */
export const leanLimit = 0.01;

/** Every state that a reading is taken from must have come to rest. */
export function reviewRest(states: readonly RigState[]): { findings: Finding[]; checks: Check[] } {
  const restless = states.filter((s) => !s.equilibrium.converged).length;
  const check: Check = {
    station: "rig",
    text: `states of the sequence that did not come to rest, of ${states.length}`,
    value: restless,
    limit: 0,
    holds: restless === 0,
  };
  if (restless === 0) return { findings: [], checks: [check] };
  return {
    findings: [
      {
        code: "rig-unsettled",
        level: "stop",
        station: "rig",
        where: [],
        value: restless,
        limit: 0,
        text: `${restless} of ${states.length} states of the sequence did not come to rest; their readings mean nothing`,
        remedy:
          "check the balance of the form, the masts' stays and the stages; a loose node or a stay without force is the usual cause",
        basis: "own argument",
      },
    ],
    checks: [check],
  };
}

/** Mast heads that stray from their finished place after any step beyond the first stage, as cautions. */
export function reviewLean(rig: Rig, finished: RigState, states: readonly RigState[]): Finding[] {
  const at = (state: RigState, v: number) => vertexAt({ xyz: state.x, tri: new Uint32Array(0) }, v);
  return rig.struts.flatMap((s): Finding[] => {
    const [a, b] = s.nodes;
    const length = measureDistance(at(finished, a), at(finished, b));
    let most = 0;
    for (const state of states)
      for (const v of s.nodes) most = Math.max(most, measureDistance(at(state, v), at(finished, v)));
    if (most <= leanLimit * length) return [];
    return [
      {
        code: "mast-lean",
        level: "caution",
        station: "rig",
        where: s.id,
        value: most,
        limit: leanLimit * length,
        text: `${s.id}: its head stands up to ${(1000 * most).toFixed(0)} mm from its finished place during the sequence; 1 % of its length is ${(1000 * leanLimit * length).toFixed(0)} mm`,
        remedy:
          "hold the head with temporary guys, put adjusters in its stays, or take smaller stages; the engineer decides",
        basis: "own default",
      },
    ];
  });
}

/** Adjusters whose smallest hand's turn is a large part of their force, where the finished state shows it. @shape influence n × n first, kN per m */
export function reviewNotches(rig: Rig, finished: RigState, influence: ArrayLike<number>, limit: number): Finding[] {
  const n = rig.adjusters.length;
  const forces = readAdjusters(rig, finished);
  return rig.adjusters.flatMap((a, i): Finding[] => {
    const off = Math.abs(forces[i] / a.target - 1);
    if (off <= limit) return [];
    const half = Math.abs(influence[i * n + i]) * (measureNotch(rig, i) / 2);
    return [
      {
        code: "turnbuckle-coarse",
        level: "caution",
        station: "rig",
        where: a.id,
        value: off,
        limit,
        text: `${a.id} ends ${(100 * off).toFixed(1)} % off its target: half a sixth of a turn there is ${half.toFixed(2)} kN, ${((100 * half) / a.target).toFixed(1)} % of it`,
        remedy: "take a turnbuckle with a finer thread there, or a softer link",
        basis: "3 % after moves are rounded (design)",
      },
    ];
  });
}
