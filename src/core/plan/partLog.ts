// How the readings of a site are parted into rounds: each is one state of the roof, and between two of them stand the turns that
// were made. Readings across a turn or across stages are no one state, however they lie in one log or file.
import type { Reading } from "../records/rig.ts";
import type { EarlierRound } from "../rig/correct/correctRig.ts";
import { readReadings } from "../rig/correct/readReadings.ts";

/** A line of a site's log: something read, or an adjuster turned by `travel` mm, positive shortens. */
export interface LogLine<R> {
  /** Step of the schedule after which it stands; null: not told, taken as the one asked for. */
  step: number | null;
  what: { reading: R } | { adjuster: string; travel: number };
}

/** Readings of one state, and what was turned after them, mm by adjuster. */
export interface LogRound<R> {
  readings: R[];
  travel: Record<string, number>;
}

/**
 * Parts a log at its turns, for the state after one step of the schedule.
 * @returns now: what was read since the last turn; earlier: rounds before it, oldest first. A line of another step ends all that
 *   stands before it: the roof has gone on
 */
export function partLog<R>(log: readonly LogLine<R>[], step: number): { now: R[]; earlier: LogRound<R>[] } {
  let earlier: LogRound<R>[] = [];
  let now: R[] = [];
  let turning = false;
  for (const { step: at, what } of log) {
    if (at !== null && at !== step) {
      [earlier, now, turning] = [[], [], false];
      continue;
    }
    if ("reading" in what) {
      now.push(what.reading);
      turning = false;
      continue;
    }
    // turns that follow on each other belong to one round
    if (!turning) {
      earlier.push({ readings: now, travel: {} });
      [now, turning] = [[], true];
    }
    const { travel } = earlier[earlier.length - 1];
    travel[what.adjuster] = (travel[what.adjuster] ?? 0) + what.travel;
  }
  return { now, earlier };
}

/** A set of readings kept from before, and what was told to be turned after it, mm by adjuster, positive shortens. */
export interface KeptRound {
  text: string;
  travel: Record<string, number>;
}

/** What makes a row the same reading as another one: all but its place in the file. Rows without a time are never known again. */
function nameReading(r: Reading): string | null {
  const { row: _, ...rest } = r;
  return r.time === "" ? null : JSON.stringify(rest);
}

/** Kept rounds and this one, each row in the first set that holds it: a log that grows is sent whole every time. */
export function partRounds(text: string, kept: readonly KeptRound[]): { now: Reading[]; earlier: EarlierRound[] } {
  const seen = new Set<string>();
  const fresh = (readings: Reading[]) => readings.filter((r) => !seen.has(nameReading(r) ?? ""));
  const note = (readings: Reading[]) => {
    for (const r of readings) seen.add(nameReading(r) ?? "no time");
  };
  const earlier: EarlierRound[] = [];
  for (const round of kept) {
    const readings = fresh(readReadings(round.text));
    note(readings);
    if (readings.length > 0) earlier.push({ readings, travel: round.travel });
  }
  const all = readReadings(text);
  const now = fresh(all);
  // nothing new: the last set is asked about again
  return now.length > 0 ? { now, earlier } : { now: all, earlier: [] };
}
