// The chain as far as the rig, then the crew's readings held against it.
import { runForm } from "../form/runForm.ts";
import type { Finding, StationContext } from "../problem.ts";
import type { Job, MeshSource } from "../records/job.ts";
import type { Correction } from "../records/rig.ts";
import { correctRig } from "../rig/correct/correctRig.ts";
import { readReadings } from "../rig/correct/readReadings.ts";
import { buildRigInput } from "./buildRigInput.ts";
import { fitPanels } from "./fitPanels.ts";

/** A correction with the findings it stands on. */
export interface CorrectedPlan {
  correction: Correction;
  findings: Finding[];
}

/**
 * What to turn after reading a roof. text: the readings as CSV; percent: the stage at whose end was read, null: the finished roof.
 * Rolls are not nested: they change nothing here.
 * @throws PlanError of any station; readings-…, reading-unknown, correct-stage, correct-none
 */
export function correctPlan(
  job: Job,
  source: MeshSource,
  readings: { text: string; percent: number | null },
  context: StationContext,
): CorrectedPlan {
  const read = readReadings(readings.text);
  const form = runForm(source, job, context).output;
  const fitted = fitPanels(form, job, { seams: context, panels: context, onStation: () => {} });
  const rolls = (job.rolls ?? []).map((r) => r.id);
  const layout = fitted.seams.output;
  const input = buildRigInput(job, { form, layout, panels: fitted.panels.output, rolls }).output;
  return correctRig(input, read, readings.percent, context);
}
