// The panels station: strips flattened together, then outlined and marked one by one.
import type { Check, Finding, StationContext, StationResult } from "../problem.ts";
import type { CutPanel } from "../records/flatPanel.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import { flattenPanels } from "./flattenPanels.ts";
import { keepSeamPoints } from "./netOutline.ts";
import { outlinePanel } from "./outlinePanel.ts";
import type { PanelPlace } from "./panelPlace.ts";
import { listFoldFindings } from "./slitFlaps.ts";

/**
 * Panels ready to be cut, in the order of the strips.
 * @units mm in the flat, warp along x, outer face up
 * @throws PlanError as flattenPanels and outlinePanel
 */
export function runPanels(
  layout: StripLayout,
  form: FoundForm,
  job: Job,
  context: StationContext,
): StationResult<CutPanel[]> {
  const rings = form.edges
    .filter((e) => e.kind === "clamped" && e.vertices[0] === e.vertices[e.vertices.length - 1])
    .map((e) => e.id);
  const options = {
    fabric: job.fabric,
    prestress: job.prestress,
    panels: job.panels,
    compensation: job.compensation,
    decompensation: job.decompensation,
    rings,
  };
  const flat = flattenPanels(layout, options, context);
  const findings: Finding[] = [...flat.findings];
  const checks: Check[] = [...flat.checks];
  const cutBack = new Map(job.anchors.map((a) => [a.name, a.cutBack ?? 0]));
  const place: PanelPlace = {
    keep: keepSeamPoints(flat.output),
    seams: layout.seams,
    anchors: form.anchors.map((a) => ({ id: a.id, vertex: a.vertex, cutBack: cutBack.get(a.id) ?? 0 })),
  };
  const output = flat.output.map((panel) => {
    const outlined = outlinePanel(panel, place, job.allowances);
    findings.push(...outlined.findings);
    checks.push(...outlined.checks);
    return outlined.output;
  });
  findings.push(...listFoldFindings(output));
  return { output, findings, checks };
}
