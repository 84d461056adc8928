// All stages played in the order chosen, and beside it in the plain ways, where the rig has modes enough for order to matter.
import type { StationContext } from "../../problem.ts";
import type { FactsStage, FactsWay, RigDecision } from "../../records/rig.ts";
import type { EquilibriumSolver } from "../../structure/equilibrium.ts";
import type { Rig } from "../build/buildRig.ts";
import { pickHigher, readAdjusters } from "../stages/readState.ts";
import type { RigState } from "../stages/solveLengths.ts";
import { chooseOrder, orderClockwise } from "./chooseOrder.ts";
import { type PlayedStage, playStage, type Stage } from "./planMoves.ts";
import { playByForce } from "./playByForce.ts";

/** Strong tension modes from which on the order of the visits matters and is compared. */
export const modesThatMatter = 3;

/** The sequence as written, the states right after its steps, and the ways compared. */
export interface PlayedPlan {
  stages: FactsStage[];
  states: RigState[];
  ways: FactsWay[] | null;
}

/** Plays the stages in the best order found; modes: strong tension modes of the rig. */
export function playPlan(
  decision: RigDecision,
  rig: Rig,
  solver: EquilibriumSolver,
  stages: readonly Stage[],
  about: { modes: number; context: StationContext },
): PlayedPlan {
  const { context } = about;
  const later = stages.filter((s) => s.begin !== null).map((s) => s.linear);
  const play = (groups: number[][], say: boolean) => {
    const out: PlayedStage[] = [];
    let firstStep = 1;
    stages.forEach((stage, k) => {
      if (say) context.onProgress?.(0.5 + (0.3 * k) / stages.length, `moves of stage ${stage.name}`);
      const played = playStage(rig, solver, decision, stage, { groups, firstStep, ...context });
      firstStep += played.states.length;
      out.push(played);
    });
    return out;
  };
  const chosen = play(chooseOrder(rig, later, decision.limit), true);
  if (about.modes < modesThatMatter) return gather(chosen, null);
  context.onProgress?.(0.8, "plain ways to compare with");
  const plain = play(orderClockwise(rig), false);
  const end = stages[stages.length - 1].end;
  const ways = [
    describeWay("chosen", rig, chosen, end),
    describeWay("clockwise", rig, plain, end),
    playByForce(decision, rig, solver, stages, context),
  ];
  // first order may have been wrong: then the plain order it is, so that no peak is ever higher than the plain order's
  if (measureHeight(ways[0]) > measureHeight(ways[1]))
    return gather(plain, [{ ...ways[1], way: "chosen" }, ways[1], ways[2]]);
  return gather(chosen, ways);
}

function measureHeight({ peak }: FactsWay): number {
  return peak.share > 0 ? peak.share : peak.kN;
}

function gather(played: PlayedStage[], ways: FactsWay[] | null): PlayedPlan {
  return { stages: played.map((p) => p.stage), states: played.flatMap((p) => p.states), ways };
}

function describeWay(way: FactsWay["way"], rig: Rig, played: PlayedStage[], end: RigState): FactsWay {
  const moves = played.flatMap((p) => p.stage.moves);
  const forces = readAdjusters(rig, end);
  return {
    way,
    peak: moves.map((m) => m.greatest).reduce(pickHigher),
    end: moves[moves.length - 1].greatest,
    visits: moves.length,
    steps: played.reduce((sum, p) => sum + p.states.length, 0),
    off: Math.max(...forces.map((f, i) => Math.abs(f / rig.adjusters[i].target - 1))),
  };
}
