// A seam end that is dragged: the panels on both sides of the seam cut, flattened and outlined again while all other panels stay as
// they are, their seams held as long as they are. When it is let go the whole roof is due (fitPanels or runPlan on the new job).
import { reflattenPanels } from "../panels/flatten/flattenPanels.ts";
import { outlinePanel } from "../panels/outline/outlinePanel.ts";
import { buildFlattenOptions, buildPanelPlace } from "../panels/runPanels.ts";
import type { CutPanel } from "../records/flatPanel.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { EdgePlace, Job } from "../records/job.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import { matchVertices, moveSeam, openSeams, type SeamWork } from "../seams/moveSeam.ts";
import type { Fitted } from "./fitted.ts";

/** A fitted roof whose seams can be dragged. Holds what is the same from one move to the next. */
export interface SeamDrag {
  form: FoundForm;
  fitted: Fitted;
  work: SeamWork;
  /** The other panels as the seam's own cutting numbers their vertices. */
  held: { weld: string; others: CutPanel[] } | null;
}

/** What came of a move. */
export interface Dragged {
  /** The whole roof cut again; choices and estimates left out. */
  layout: StripLayout;
  /** The panels on both sides of the seam, as they would be cut. */
  panels: CutPanel[];
}

/**
 * Makes a fitted roof ready for dragging. Welds that can be dragged, and where their ends are, stand in work.ends.
 * @throws PlanError as runSeams
 */
export function openDrag(form: FoundForm, job: Job, fitted: Fitted): SeamDrag {
  return { form, fitted, work: openSeams(form, job, fitted.options), held: null };
}

/** The other panels in the numbers of a layout cut with this seam last. */
function holdOthers(drag: SeamDrag, layout: StripLayout, moved: ReadonlySet<string>): CutPanel[] {
  const number = matchVertices(drag.fitted.seams.output, layout);
  return drag.fitted.panels.output
    .filter((p) => !moved.has(p.id))
    .map((p) => ({ ...p, surfaceVertex: p.surfaceVertex.map((v) => number[v]) }));
}

/**
 * Moves a weld and makes its panels anew. Called again and again while a finger drags; the first call for a weld takes longer.
 * @throws PlanError seam-move where the seam cannot go there; those of flattening and outlines
 */
export function dragSeamInPlace(drag: SeamDrag, weld: string, to: readonly [EdgePlace, EdgePlace]): Dragged {
  const { form, work } = drag;
  const layout = moveSeam(work, weld, to);
  const moved = new Set(layout.seams.filter((seam) => seam.weld === weld).flatMap((seam) => seam.strips));
  if (drag.held?.weld !== weld) drag.held = { weld, others: holdOthers(drag, layout, moved) };
  const { others } = drag.held;
  const flat = reflattenPanels(layout, buildFlattenOptions(form, work.job), others, {});
  const shared = new Set(layout.seams.filter((s) => s.strips.some((id) => moved.has(id))).flatMap((s) => s.strips));
  const near = [...flat, ...others.filter((p) => shared.has(p.id))];
  const place = buildPanelPlace(near, { seams: layout.seams, form, job: work.job });
  return { layout, panels: flat.map((panel) => outlinePanel(panel, place, work.job.allowances).output) };
}
