// What is to be read at a place of the roof after a step, by the windows the papers print, and what a reading says against them. Pure.
import { holdReadings, limitOf, rigFacts } from "../../../core/papers/tables/rigReadings.ts";
import type { Facts } from "../../../core/records/facts.ts";
import type { RigStep } from "../../flat/rigSteps.ts";
import { figure } from "../../parts/figure.ts";

/** kN; low and high: its window, null where the schedule asks for no reading; limit: what it may never show, null where not known. */
export interface Expected {
  planned: number;
  low: number | null;
  high: number | null;
  limit: number | null;
}

/** @returns null where the schedule says nothing of the place at this step */
export function expectReading(facts: Facts, step: RigStep, id: string): Expected | null {
  const rig = rigFacts(facts);
  const last = step.forces[id];
  if (rig === null || last === undefined) return null;
  const limit = limitOf(rig, id);
  const move = step.moves.find((m) => m.adjuster === id);
  if (move !== undefined) return { planned: move.expect, low: move.low, high: move.high, limit };
  const stage = step.hold ? rig.tensioning.stages.find((s) => s.name === step.stage) : undefined;
  const held = stage && holdReadings(rig, stage).find((h) => h.id === id);
  if (held !== undefined) return { planned: held.planned, low: held.low, high: held.high, limit };
  return { planned: last, low: null, high: null, limit };
}

/** In words. */
export function tellExpected({ planned, low, high, limit }: Expected): string {
  const window = low === null || high === null ? "" : `, window ${figure(low, 1)} to ${figure(high, 1)}`;
  return `Expected ${figure(planned, 1)} kN${window}${limit === null ? "" : `, never above ${figure(limit, 1)}`}`;
}

/** What a reading says; null where it is held against nothing. */
export function judgeReading(
  { planned, low, high, limit }: Expected,
  kN: number,
): { fine: boolean; words: string } | null {
  if (limit !== null && kN > limit)
    return { fine: false, words: `above the limit by ${figure(kN - limit, 1)} kN: stop, ease it, ask the engineer` };
  // held against nothing else, a slip of the unit would pass unseen
  if ((low === null || high === null) && planned > 0 && kN > 10 * planned)
    return { fine: false, words: "more than ten times what is expected: read again, and give its unit (N, daN, kN)" };
  if (low === null || high === null) return null;
  if (kN < low) return { fine: false, words: `low by ${figure(low - kN, 1)} kN: do not go on, ask the engineer` };
  if (kN > high) return { fine: false, words: `high by ${figure(kN - high, 1)} kN: stop, ask the engineer` };
  return { fine: true, words: "inside the window" };
}
