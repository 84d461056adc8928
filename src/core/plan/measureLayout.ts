// Layouts beside each other in one table: panels, metres of seam, cloth, widths, stress error. Measured where a layout was cut and
// flattened, estimated where it was only weighed.
import { runPanels } from "../panels/runPanels.ts";
import { PlanError, type StationContext } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job, SeamDecision } from "../records/job.ts";
import type { LayoutRow } from "../records/stripLayout.ts";
import { runSeams } from "../seams/runSeams.ts";
import { vertexAt } from "../surface/measures.ts";
import type { Vec3 } from "../surface/surface.ts";
import { firstOptions, measureExtent, measureRoom } from "./clothRoom.ts";
import type { Fitted } from "./fitted.ts";

/** Rows of a layout that was cut and flattened, region by region; none for seams given one by one. */
export function measureRows(fitted: Fitted): LayoutRow[] {
  const { choices, estimates, seams } = fitted.seams.output;
  const byId = new Map(fitted.panels.output.map((p) => [p.id, p]));
  return (estimates ?? []).flatMap((estimate): LayoutRow[] => {
    const choice = choices.find((c) => c.region === estimate.region);
    const ids = new Set(estimate.strips.flatMap((strip) => strip.panels));
    const panels = [...ids].flatMap((id) => byId.get(id) ?? []);
    if (!choice || panels.length === 0) return [];
    const widths = panels.map((p) => measureExtent(p.net).width);
    const errors = panels.map((p) =>
      Math.max(...(["warp", "weft"] as const).map((way) => p.stress[way].rmsError / Math.max(p.target[way], 1e-9))),
    );
    const own = seams.filter((seam) => seam.cable === null && seam.strips.every((id) => ids.has(id)));
    return [
      {
        region: estimate.region,
        layout: choice.layout === "gores" ? "gores" : "bands",
        from: choice.from,
        to: choice.to,
        strips: estimate.strips.length,
        panels: panels.length,
        seams: own.reduce((sum, seam) => sum + seam.length, 0),
        cloth: panels.reduce((sum, p) => sum + p.area.cut, 0),
        least: Math.min(...widths),
        greatest: Math.max(...widths),
        stressError: Math.max(...errors),
        measured: true,
        taken: false,
      },
    ];
  });
}

const isOneWay = (a: LayoutRow, b: LayoutRow) => a.region === b.region && a.from === b.from && a.to === b.to;

/**
 * The table of a plan: for each region the layout taken, then the others that were cut and flattened on the way, then the ways
 * that were only weighed. Of two rows with one way and number of panels the last stands.
 */
export function joinRows(
  taken: readonly LayoutRow[],
  measured: readonly LayoutRow[],
  estimated: readonly LayoutRow[],
): LayoutRow[] {
  return taken.flatMap((row) => {
    const rows: LayoutRow[] = [{ ...row, taken: true }];
    for (const other of [...measured].reverse())
      if (other.region === row.region && !rows.some((r) => isOneWay(r, other) && r.panels === other.panels))
        rows.push(other);
    // what the edges' allowances and the cut outline add is the same for every way, and known from the one that was cut
    const base = estimated.find((other) => isOneWay(other, row));
    const edges = base ? row.cloth - base.cloth : 0;
    for (const other of estimated)
      if (other.region === row.region && !rows.some((r) => isOneWay(r, other)))
        rows.push({ ...other, cloth: other.cloth + edges, taken: false });
    return rows;
  });
}

/** One layout that is asked for, and what came of it: rows, or why it cannot be laid. */
export interface ComparedLayout {
  asked: Partial<SeamDecision>;
  rows: LayoutRow[];
  /** The ways that were weighed for it, as estimates, its own first. */
  ways: LayoutRow[];
  /** Its seams over the form, for a drawing in miniature, m. */
  lines: Vec3[][];
  refused: string | null;
}

/**
 * Share of a layout's work that is done once its seams are laid, for the bar alone. Measured by processor time on the three starters
 * (about 1 900 points each, loaded machine): 0.18 to 0.41 at the first, 0.20 to 0.22 at the third layout one after the other.
 */
const LAID = 0.25;

/**
 * One layout cut and flattened: the job with other decisions on its seams. One pass, widths not evened out on measured ones, so a plan
 * of the same layout may differ by a per cent or two.
 * @throws PlanError cancelled
 */
export function measureLayout(
  form: FoundForm,
  job: Job,
  asked: Partial<SeamDecision>,
  context: StationContext = {},
): ComparedLayout {
  const other: Job = { ...job, seams: { ...job.seams, ...asked } };
  try {
    const options = firstOptions(measureRoom(other), other.allowances.seam / 1000);
    const tell = (from: number, to: number): StationContext => ({
      ...context,
      onProgress: (share, words) => context.onProgress?.(from + share * (to - from), words),
    });
    const seams = runSeams(form, other, options, tell(0, LAID));
    const panels = runPanels(seams.output, form, other, tell(LAID, 1));
    const { surface, seams: lines } = seams.output;
    return {
      asked,
      rows: measureRows({ seams, panels, options }),
      ways: seams.output.compared ?? [],
      lines: lines.map((seam) => seam.vertices.map((v) => vertexAt(surface, v))),
      refused: null,
    };
  } catch (error) {
    if (!(error instanceof PlanError) || error.code === "cancelled") throw error;
    return { asked, rows: [], ways: [], lines: [], refused: error.message };
  }
}
