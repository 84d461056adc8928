// The form on its clamped edges as they were surveyed. Before the cloth is cut the drawn form is moved to them and settled anew, so
// that seams and panels follow; once it is cut the panels stay, and the rig station works out what the cloth then carries.
import { runForm } from "../form/runForm.ts";
import type { Finding, StationContext, StationResult } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job, MeshSource } from "../records/job.ts";
import type { EdgeShift } from "../rig/rigInput.ts";
import { findGreatestShift, measureShifts, moveEdges } from "./surveyedEdges.ts";

/** The form that is cut, and how far its clamped edges stand from it (empty unless the cloth was cut before they were surveyed). */
export interface BuiltForm {
  form: FoundForm;
  shifts: Record<string, EdgeShift[]>;
}

function tellShift(shifts: Record<string, EdgeShift[]>, cut: boolean): Finding {
  const { edge, way } = findGreatestShift(shifts);
  const names = Object.keys(shifts);
  const words = `${names.join(", ")}: clamped where surveyed, up to ${(1000 * way).toFixed(0)} mm from where drawn (${edge})`;
  return {
    code: "survey-clamped",
    level: cut ? "caution" : "note",
    station: "form",
    where: names,
    value: 1000 * way,
    limit: null,
    text: cut
      ? `${words}; the cloth is cut, so no panel follows and no turnbuckle takes it up: the stress as built is that on the surveyed edges`
      : `${words}; the form was settled anew on the surveyed edges, and seams and panels are those of it`,
    remedy: cut
      ? "compare the stress as built with the intended one, set the edge right where it is too far off, or let the engineer judge it"
      : "cut from these files only; files of an earlier revision do not fit the edges as built",
    basis: "survey of the job; between surveyed points the edge is taken as shifted evenly",
  };
}

/**
 * The form station with the survey of clamped edges.
 * @throws PlanError as runForm; survey-anchor, survey-edge, survey-place
 */
export function runBuiltForm(source: MeshSource, job: Job, context: StationContext): StationResult<BuiltForm> {
  const drawn = runForm(source, job, context);
  const shifts = measureShifts(drawn.output, job.survey);
  if (Object.keys(shifts).length === 0) return { ...drawn, output: { form: drawn.output, shifts } };
  const told = tellShift(shifts, job.clothCut);
  if (job.clothCut) return { ...drawn, output: { form: drawn.output, shifts }, findings: [...drawn.findings, told] };
  // cables keep the forces the drawn form gave them
  const edges = Object.assign(Object.create(null), job.edges) as Job["edges"];
  for (const { id, force } of drawn.output.edges) if (force !== null) edges[id] = { ...edges[id], force };
  // so does the cloth, where the drawn form was asked for its stress
  const prestress = { ...drawn.output.stress };
  const moved = runForm(source, { ...job, edges, prestress }, context, moveEdges(drawn.output, shifts));
  const { stressSpread } = drawn.output;
  const form = stressSpread ? { ...moved.output, stressSpread } : moved.output;
  const said = drawn.findings.filter((f) => f.code.startsWith("cloth-stress"));
  return { ...moved, output: { form, shifts: {} }, findings: [...said, ...moved.findings, told] };
}
