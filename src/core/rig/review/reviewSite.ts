// What a crew must be told of this roof in particular: cloth that is slack between stages, and what a length does where no gauge is read.
import type { Finding } from "../../problem.ts";
import type { FactsStage } from "../../records/rig.ts";
import type { EquilibriumSolver } from "../../structure/equilibrium.ts";
import type { Rig } from "../build/buildRig.ts";
import { readForces } from "../stages/readState.ts";
import { type RigState, turnTo } from "../stages/solveLengths.ts";

/** Length at all adjusters at once whose effect is told, m. */
const told = 0.01;

/** Share of a force from which on that effect is a caution (site habit: forces within a tenth). */
const toldFrom = 0.1;

/** Stages left with cloth that is not taut: wind flogs it. limit: share of the cloth that may be slack */
export function reviewSlackCloth(stages: readonly FactsStage[], limit: number): Finding[] {
  const slack = stages.slice(0, -1).filter((s) => (s.slackCloth ?? 0) > limit);
  if (slack.length === 0) return [];
  const shares = slack.map((s) => `${(100 * (s.slackCloth ?? 0)).toFixed(0)} % at the end of stage ${s.name}`);
  const taut = stages.find((s) => (s.slackCloth ?? 0) <= limit);
  return [
    {
      code: "stage-slack",
      level: "caution",
      station: "rig",
      where: [],
      value: Math.max(...slack.map((s) => s.slackCloth ?? 0)),
      limit,
      text: `cloth that is not taut: ${shares.join(", ")}. Wind lifts and flogs it, and forces read then mean little`,
      remedy: `work on${taut ? ` to stage ${taut.name}` : ""} without a break or tie the cloth down, within the engineer's wind limit; never leave it so overnight`,
      basis: "equilibrium at the end of each stage; what wind does to slack cloth is common practice",
    },
  ];
}

/** What a crew does that follows a length instead of a gauge: 10 mm taken in at all adjusters of the finished roof. */
export function reviewTravelAlone(rig: Rig, solver: EquilibriumSolver, finished: RigState): Finding[] {
  const shorter = rig.adjusters.map((a) => finished.L0[a.link] - told);
  const [before, after] = [finished, turnTo(rig, solver, finished, shorter)].map((s) => readForces(rig, s));
  const gain = (id: string) => after[id] / before[id] - 1;
  const [worst] = rig.adjusters.map((a) => a.id).sort((p, q) => gain(q) - gain(p) || (p < q ? -1 : 1));
  if (!(gain(worst) > toldFrom)) return [];
  return [
    {
      code: "travel-alone",
      level: "caution",
      station: "rig",
      where: rig.adjusters.map((a) => a.id),
      value: gain(worst),
      limit: toldFrom,
      text: `10 mm taken in at all adjusters adds ${(after[worst] - before[worst]).toFixed(0)} kN to the ${before[worst].toFixed(0)} kN of ${worst}: lengths alone overload this roof`,
      remedy: "no tensioning without gauges: stop at the force or the length, whichever comes first",
      basis: "equilibrium of the finished roof with every adjuster 10 mm shorter",
    },
  ];
}
