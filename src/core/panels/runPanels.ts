// The panels station: strips flattened together, then outlined and marked one by one.
import type { Check, Finding, StationContext, StationResult } from "../problem.ts";
import type { CutPanel, FlatPanel } from "../records/flatPanel.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import { flattenPanels } from "./flatten/flattenPanels.ts";
import type { FlattenOptions } from "./flatten/panelTarget.ts";
import { listFoldFindings } from "./marks/slitFlaps.ts";
import { keepSeamPoints } from "./outline/netOutline.ts";
import { outlinePanel } from "./outline/outlinePanel.ts";
import type { PanelPlace } from "./outline/panelPlace.ts";
import { noteCompensation, noteLaps } from "./proof/compensationNotes.ts";

/** What the job decides on flattening. */
export function buildFlattenOptions(form: FoundForm, job: Job): FlattenOptions {
  const rings = form.edges
    .filter((e) => e.kind === "clamped" && e.vertices[0] === e.vertices[e.vertices.length - 1])
    .map((e) => e.id);
  return {
    fabric: job.fabric,
    prestress: job.prestress,
    panels: job.panels,
    compensation: job.compensation,
    decompensation: job.decompensation,
    rings,
    lap: job.seams.doubleCloth ? { overlap: job.allowances.seam / 1000, on: job.allowances.seamOn } : null,
  };
}

/** The roof round the panels; `flat` are those whose seams are faired alike. */
export function buildPanelPlace(
  flat: readonly FlatPanel[],
  roof: { seams: StripLayout["seams"]; form: FoundForm; job: Job },
): PanelPlace {
  const cutBack = new Map(roof.job.anchors.map((a) => [a.name, a.cutBack ?? 0]));
  return {
    keep: keepSeamPoints(flat),
    seams: roof.seams,
    anchors: roof.form.anchors.map((a) => ({ id: a.id, vertex: a.vertex, cutBack: cutBack.get(a.id) ?? 0 })),
  };
}

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
  const options = buildFlattenOptions(form, job);
  const flat = flattenPanels(layout, options, context);
  const findings: Finding[] = [...flat.findings];
  const checks: Check[] = [...flat.checks];
  const place = buildPanelPlace(flat.output, { seams: layout.seams, form, job });
  const output = flat.output.map((panel) => {
    const outlined = outlinePanel(panel, place, job.allowances);
    findings.push(...outlined.findings);
    checks.push(...outlined.checks);
    return outlined.output;
  });
  findings.push(...listFoldFindings(output), ...noteCompensation(output));
  if (options.lap) findings.push(noteLaps(output, options.lap.overlap));
  return { output, findings, checks };
}
