// A seam end that is dragged: the panels on both sides of the seam cut, flattened and outlined again while all other panels stay as
// they are, their seams held as long as they are. When it is let go the whole roof is tied again (tieRoof).
import { reflattenPanels } from "../panels/flatten/flattenPanels.ts";
import { outlinePanel } from "../panels/outline/outlinePanel.ts";
import { buildFlattenOptions, buildPanelPlace } from "../panels/runPanels.ts";
import type { StationContext } from "../problem.ts";
import type { FactsPanel, FactsSeam } from "../records/facts.ts";
import type { CutPanel } from "../records/flatPanel.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { EdgePlace, Job } from "../records/job.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import { moveSeamInPlace, openSeams, type SeamWork } from "../seams/moveSeam.ts";
import type { Vec3 } from "../surface/surface.ts";
import { buildPanelFacts, buildSeamFacts } from "./buildFacts.ts";
import { fitPanels } from "./fitPanels.ts";
import type { Fitted } from "./fitted.ts";

/** What a plan makes of a job up to its panels: all that dragging needs. Plain records, so that it can be sent to a worker. */
export interface MadeRoof {
  form: FoundForm;
  job: Job;
  fitted: Fitted;
}

/** A fitted roof whose seams can be dragged. Holds what is the same from one move to the next. */
export interface SeamDrag {
  form: FoundForm;
  fitted: Fitted;
  work: SeamWork;
  /** The other panels in the numbers of the seam in hand. */
  held: { weld: string; others: CutPanel[] } | null;
}

/** What came of a move. */
export interface Dragged {
  /** The seam's two strips and all seams they have; choices and estimates left out. */
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

/**
 * Moves a weld and makes its panels anew. Called again and again while a finger drags; the first call for a weld takes longer.
 * @throws PlanError seam-move where the seam cannot go there; those of flattening and outlines
 */
export function dragSeamInPlace(drag: SeamDrag, weld: string, to: readonly [EdgePlace, EdgePlace]): Dragged {
  const { form, work, fitted } = drag;
  const { layout, flat: start } = moveSeamInPlace(work, weld, to);
  const moved = new Set(layout.strips.map((strip) => strip.id));
  const number = work.held?.seam.number ?? [];
  if (drag.held?.weld !== weld) {
    const others = fitted.panels.output.filter((p) => !moved.has(p.id));
    drag.held = { weld, others: others.map((p) => ({ ...p, surfaceVertex: p.surfaceVertex.map((v) => number[v]) })) };
  }
  const { others } = drag.held;
  const flat = reflattenPanels(layout, buildFlattenOptions(form, work.job), others, start);
  const shared = new Set(layout.seams.flatMap((s) => s.strips));
  const near = [...flat, ...others.filter((p) => shared.has(p.id))];
  const place = buildPanelPlace(near, { seams: layout.seams, form, job: work.job });
  return { layout, panels: flat.map((panel) => outlinePanel(panel, place, work.job.allowances).output) };
}

/** A weld that can be dragged: the places of its ends, and its place in seams.pairs where the job gives the seams one by one. */
export interface Grip {
  weld: string;
  pair: number | null;
  ends: [EdgePlace, EdgePlace];
}

/** All welds that can be dragged, in the order of their names. */
export function listGrips({ work }: SeamDrag): Grip[] {
  return [...work.ends].map(([weld, ends]) => {
    const given = /^seams\.pairs\[(\d+)\]$/.exec(work.laid.paths[work.pathsOf.get(weld)?.[0] ?? -1]?.weld ?? "");
    return { weld, pair: given ? Number(given[1]) : null, ends };
  });
}

/** A panel as it is seen while its seam is dragged: the cut cloth and its figures, not the mesh. */
export type SeenPanel = Omit<FactsPanel, "erected" | "flat" | "triangles">;

function seePanel(panel: CutPanel): SeenPanel {
  const { erected: _erected, flat: _flat, triangles: _triangles, ...seen } = buildPanelFacts(panel);
  return seen;
}

/** What is drawn of a move: the weld's path over the form, m, and its two panels. */
export function seeDragged({ layout, panels }: Dragged, weld: string): { path: Vec3[]; panels: SeenPanel[] } {
  const own = buildSeamFacts({ ...layout, seams: layout.seams.filter((s) => s.weld === weld) }, []);
  return { path: own.flatMap((s, i) => (i === 0 ? s.path : s.path.slice(1))), panels: panels.map(seePanel) };
}

/**
 * The whole roof with its seams between these places, all panels tied together again: what a plan makes of the job with these pairs.
 * @throws PlanError as runSeams and runPanels
 */
export function tieRoof(roof: MadeRoof, pairs: EdgePlace[][], context: StationContext = {}): MadeRoof {
  const job: Job = {
    ...roof.job,
    seams: { ...roof.job.seams, layout: "pairs", pairs, from: null, to: null, count: "auto" },
  };
  const fitted = fitPanels(roof.form, job, { seams: context, panels: context, onStation: () => {} });
  return { form: roof.form, job, fitted };
}

/** What is shown of a tied roof before the rest of the plan is there. */
export function seeRoof({ fitted }: MadeRoof): { seams: FactsSeam[]; panels: SeenPanel[] } {
  const panels = fitted.panels.output;
  return { seams: buildSeamFacts(fitted.seams.output, []), panels: panels.map(seePanel) };
}
