// What a person must know of the rig: targets missed, limits passed, travel too short, slack members, poor balance of forces.
import type { Check, Finding } from "../../problem.ts";
import type { FactsStage } from "../../records/rig.ts";
import { measureLink } from "../../structure/elements.ts";
import type { Rig } from "../build/buildRig.ts";
import { findPinsOff } from "../build/pinDirections.ts";
import type { RigInput } from "../rigInput.ts";
import { measureEngaged, readAdjusters } from "../stages/readState.ts";
import { countModes, type RigState } from "../stages/solveLengths.ts";

/** Share of the target an adjuster may miss before and after moves are rounded. */
const exactLimit = 0.005;
export const roundedLimit = 0.03;

/** Share of its force below which a member counts as slack. */
const slackShare = 0.01;

/** Adjusters whose target cannot be had by any lengths, as stops. */
export function findTargetMisses(rig: Rig, exact: RigState & { off: number }): Finding[] {
  if (exact.off <= exactLimit) return [];
  const forces = readAdjusters(rig, exact);
  return rig.adjusters.flatMap((a, i) => {
    const off = Math.abs(forces[i] / a.target - 1);
    if (off <= exactLimit) return [];
    return [
      {
        code: "adjuster-target",
        level: "stop" as const,
        station: "rig" as const,
        where: a.id,
        value: forces[i],
        limit: a.target,
        text:
          forces[i] > slackShare * a.target
            ? `${a.id} reaches ${forces[i].toFixed(2)} kN of its target of ${a.target.toFixed(2)} kN: no lengths of the adjusters give all targets at once`
            : `${a.id} cannot go taut: it hangs slack where ${a.target.toFixed(2)} kN are wanted, at any lengths tried`,
        remedy: "put the far pin where the pull of the form points, check the cable forces and the balance of the form",
        basis: "0.5 % before moves are rounded (design)",
      },
    ];
  });
}

/** Findings and checks on a finished rig and its sequence. */
export function reviewRig(
  input: RigInput,
  rig: Rig,
  plan: { stages: FactsStage[]; finished: RigState; singular: number[] },
): { findings: Finding[]; checks: Check[] } {
  const findings: Finding[] = [];
  const checks: Check[] = [];
  const forces = readAdjusters(rig, plan.finished);
  const off = Math.max(...forces.map((f, i) => Math.abs(f / rig.adjusters[i].target - 1)));
  checks.push({
    station: "rig",
    text: "finished state with moves as a hand sets them: adjusters off their targets by at most",
    value: off,
    limit: roundedLimit,
    holds: off <= roundedLimit,
  });
  checks.push({
    station: "rig",
    text: "finished state: out-of-balance force over the largest force",
    value: plan.finished.equilibrium.residual,
    limit: 1e-8,
    holds: plan.finished.equilibrium.residual < 1e-8,
  });
  findings.push(
    ...reviewReach(rig, plan.stages, plan.finished),
    ...reviewThreads(rig, plan.stages),
    ...reviewSlackAdjusters(rig, plan.stages),
    ...reviewSlackMembers(rig, plan.stages),
    ...reviewModes(rig, plan.singular),
    ...findPinsOff(input, rig.structure.xyz, rig.adjusters),
  );
  for (const a of rig.adjusters) if (a.capacity === null) findings.push(noCapacity(a.id, "turnbuckle"));
  for (const c of rig.cables) if (c.capacity === null) findings.push(noCapacity(c.id, "cable"));
  return { findings, checks };
}

function noCapacity(id: string, what: string): Finding {
  return {
    code: "capacity-missing",
    level: "caution",
    station: "rig",
    where: id,
    value: null,
    limit: null,
    text: `${id}: the ${what}'s breaking force or capacity is not given, so no step is checked against it`,
    remedy: `give the ${what} of ${id} in the job; the engineer sizes it from design forces, not from prestress`,
    basis: "rules of the facts file",
  };
}

/** Travel: every length an adjuster takes must lie between its shortest and longest. */
function reviewReach(rig: Rig, stages: FactsStage[], finished: RigState): Finding[] {
  const findings: Finding[] = [];
  for (const a of rig.adjusters) {
    const pin = measureLink(rig.structure, finished.x, finished.L0, a.link).length * 1000;
    const moves = stages.flatMap((s) => s.moves).filter((m) => m.adjuster === a.id);
    const longest = Math.max(pin, ...moves.map((m) => m.pinFrom * 1000));
    const { shortest: low, longest: high } = a.turnbuckle;
    if (pin < low || pin > high) {
      findings.push({
        code: "adjuster-reach",
        level: "stop",
        station: "rig",
        where: a.id,
        value: pin,
        limit: pin < low ? low : high,
        text: `${a.id} would have to be ${pin.toFixed(0)} mm pin to pin at the finished state; its turnbuckle reaches from ${low.toFixed(0)} to ${high.toFixed(0)} mm`,
        remedy: "take another turnbuckle or link, or move the far pin",
        basis: "turnbuckle lengths as given",
      });
      continue;
    }
    const hang =
      longest -
      Math.max(
        ...moves.filter((m) => m.step === Math.min(...moves.map((q) => q.step))).map((m) => m.pinTo * 1000),
        pin,
      );
    if (hang < 10)
      findings.push({
        code: "adjuster-hang",
        level: "stop",
        station: "rig",
        where: a.id,
        value: hang,
        limit: 10,
        text: `${a.id} can be let out only ${hang.toFixed(0)} mm beyond its first stage; the cloth cannot be hung slack`,
        remedy: "take a turnbuckle with more travel, or hang the cloth with temporary links",
        basis: "common practice",
      });
    const left = pin - low;
    const all = high - low;
    if (left < 0.25 * all)
      findings.push({
        code: "travel-spent",
        level: "caution",
        station: "rig",
        where: a.id,
        value: left,
        limit: 0.25 * all,
        text: `${a.id} has ${left.toFixed(0)} mm of ${all.toFixed(0)} mm left to shorten at the finished state`,
        remedy: "keep a quarter of the travel for re-tensioning: shorten the link or take a longer turnbuckle",
        basis: "common practice",
      });
  }
  return findings;
}

/** Threads: at every length of the sequence at least one diameter of thread in the body at each threaded end. */
function reviewThreads(rig: Rig, stages: FactsStage[]): Finding[] {
  return rig.adjusters.flatMap((a): Finding[] => {
    const { thread } = a.turnbuckle;
    const moves = stages.flatMap((s) => s.moves).filter((m) => m.adjuster === a.id);
    const longest = 1000 * Math.max(...moves.flatMap((m) => [m.pinFrom, m.pinTo]), 0);
    const engaged = measureEngaged(a.turnbuckle, longest);
    if (thread === undefined || engaged === null || moves.length === 0 || engaged >= thread - 0.5) return [];
    return [
      {
        code: "thread-short",
        level: "stop",
        station: "rig",
        where: a.id,
        value: engaged,
        limit: thread,
        text: `${a.id}: let out to ${longest.toFixed(0)} mm pin to pin only ${engaged.toFixed(0)} mm of its thread hold at each end; one diameter is ${thread.toFixed(0)} mm`,
        remedy: "hang the cloth with temporary links, or take a longer turnbuckle or link there",
        basis: "at least one diameter of thread in the body (common practice)",
      },
    ];
  });
}

/** Adjusters that hang slack after any step of the stages after the first. */
function reviewSlackAdjusters(rig: Rig, stages: FactsStage[]): Finding[] {
  const findings: Finding[] = [];
  for (const s of stages.slice(1))
    for (const a of rig.adjusters) {
      const slack = s.readings?.find((r) => r.forces[a.id] < slackShare * a.target);
      if (slack)
        findings.push({
          code: "adjuster-slack",
          level: "caution",
          station: "rig",
          where: a.id,
          value: slack.forces[a.id],
          limit: slackShare * a.target,
          text: `${a.id} is slack after step ${slack.step}, in stage ${s.name}`,
          remedy: "check its target and the order of the moves",
          basis: "own argument",
        });
    }
  return findings;
}

/** Cables and stays that carry nothing: in the stages after the first, or at the end. */
function reviewSlackMembers(rig: Rig, stages: FactsStage[]): Finding[] {
  return rig.cables.flatMap((c): Finding[] => {
    const slack = stages.slice(1).filter((s) => s.forces[c.id] < slackShare * Math.max(c.force, least(rig)));
    if (slack.length === 0) return [];
    const finished = slack.includes(stages[stages.length - 1]);
    const names = slack.map((s) => s.name).join(", ");
    return [
      {
        code: "stay-slack",
        level: "caution",
        station: "rig",
        where: c.id,
        value: slack[0].forces[c.id],
        limit: null,
        text: `${c.id} hangs slack at the end of stage${slack.length > 1 ? "s" : ""} ${names}${finished ? ": at the finished state the others hold without it" : ""}`,
        remedy: finished
          ? "give it a force of its own (rig.stays), or leave it out: a slack rope whips in wind and wears at its ends"
          : "tie it back so that it cannot whip, and look at its ends before it takes load",
        basis: "own argument",
      },
    ];
  });
}

/** Smallest target of the rig, kN: what little means here. */
function least(rig: Rig): number {
  return Math.min(...rig.adjusters.map((a) => a.target));
}

/** How many tension modes the adjusters have: forces say nothing of the weak ones. */
function reviewModes(rig: Rig, singular: number[]): Finding[] {
  if (singular.length === 0) return [];
  const strong = countModes(singular);
  if (strong === rig.adjusters.length) return [];
  return [
    {
      code: "tension-modes",
      level: "note",
      station: "rig",
      where: rig.adjusters.map((a) => a.id),
      value: strong,
      limit: rig.adjusters.length,
      text: `${strong} of ${rig.adjusters.length} tension modes are strong enough to be read from forces; where the corners stand must be measured too`,
      remedy: "survey the corners at every hold point and compare them with the plan",
      basis: "singular values of the influence matrix, those above 5 % of the greatest counted",
    },
  ];
}
