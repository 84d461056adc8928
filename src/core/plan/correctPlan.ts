// The chain as far as the rig, then the crew's readings held against it.
import type { Finding, StationContext } from "../problem.ts";
import type { Job, MeshSource } from "../records/job.ts";
import type { Correction } from "../records/rig.ts";
import { correctRig } from "../rig/correct/correctRig.ts";
import { buildRigInput } from "./buildRigInput.ts";
import { runBuiltForm } from "./builtForm.ts";
import { fitPanels } from "./fitPanels.ts";
import { type KeptRound, partRounds } from "./partLog.ts";

/** A correction with the findings it stands on. */
export interface CorrectedPlan {
  correction: Correction;
  findings: Finding[];
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
