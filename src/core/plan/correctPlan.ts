// The chain as far as the rig, then the crew's readings held against it.
import type { Finding, StationContext } from "../problem.ts";
import type { Job, MeshSource } from "../records/job.ts";
import type { Correction, Reading } from "../records/rig.ts";
import { correctRig, type EarlierRound } from "../rig/correct/correctRig.ts";
import { readReadings } from "../rig/correct/readReadings.ts";
import { buildRigInput } from "./buildRigInput.ts";
import { runBuiltForm } from "./builtForm.ts";
import { fitPanels } from "./fitPanels.ts";

/** A correction with the findings it stands on. */
export interface CorrectedPlan {
  correction: Correction;
  findings: Finding[];
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
function partRounds(text: string, kept: readonly KeptRound[]): { now: Reading[]; earlier: EarlierRound[] } {
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

/**
 * What to turn after reading a roof. text: the readings as CSV; kept: sets read before at the same stage, oldest first; percent: the stage at whose end was read, null: the finished roof.
 * Rolls are not nested: they change nothing here.
 * @throws PlanError of any station; readings-…, reading-unknown, correct-stage, correct-none
 */
export function correctPlan(
  job: Job,
  source: MeshSource,
  readings: { text: string; percent: number | null; kept?: readonly KeptRound[] },
  context: StationContext,
): CorrectedPlan {
  const { now, earlier } = partRounds(readings.text, readings.kept ?? []);
  const { form, shifts } = runBuiltForm(source, job, context).output;
  const fitted = fitPanels(form, job, { seams: context, panels: context, onStation: () => {} });
  const rolls = (job.rolls ?? []).map((r) => r.id);
  const layout = fitted.seams.output;
  const input = buildRigInput(job, { form, shifts, layout, panels: fitted.panels.output, rolls }).output;
  return correctRig(input, { readings: now, earlier, percent: readings.percent }, context);
}
