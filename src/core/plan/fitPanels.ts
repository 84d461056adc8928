// Seams and panels together: strips are laid out on estimated widths, flattened, and laid out again until the cut panels fit
// the cloth. Ends with the best it found; a panel that is still too wide is left for the rolls station to name.

import { runPanels } from "../panels/runPanels.ts";
import type { StationContext, StationResult } from "../problem.ts";
import type { CutPanel } from "../records/flatPanel.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import { runSeams, type SeamOptions } from "../seams/runSeams.ts";

/** Layouts tried before the last one stands. */
const rounds = 6;

/** Widths the cloth sets, m. */
export interface ClothRoom {
  /** Usable width of the narrowest roll, or the job's own limit if that is less. */
  width: number;
  /** Longest piece a roll takes; null: no limit. */
  length: number | null;
}

/** The cloth's room: the narrowest of the job's rolls, or the fabric's full roll. */
export function measureRoom(job: Job): ClothRoom {
  const rolls = job.rolls ?? [
    { width: job.fabric.rollWidth, selvedge: job.fabric.selvedge, length: job.fabric.rollLength, start: 0 },
  ];
  const width = Math.min(...rolls.map((r) => r.width - 2 * r.selvedge), job.seams.maxWidth ?? Infinity) / 1000;
  const length = Math.min(Math.max(...rolls.map((r) => r.length - r.start)), job.seams.maxLength ?? Infinity) / 1000;
  return { width, length: Number.isFinite(length) ? length : null };
}

/** Extent across the warp of a ring, m. */
function measureBreadth(ring: ArrayLike<number>): number {
  let low = Infinity;
  let high = -Infinity;
  for (let i = 1; i < ring.length; i += 2) {
    low = Math.min(low, ring[i]);
    high = Math.max(high, ring[i]);
  }
  return (high - low) / 1000;
}

/** What both stations made of one layout. */
export interface Fitted {
  seams: StationResult<StripLayout>;
  panels: StationResult<CutPanel[]>;
}

/** Context of both stations; onStation is told which of them works. */
export interface FitContext {
  seams: StationContext;
  panels: StationContext;
  onStation: (station: "seams" | "panels") => void;
}

/** Lays out, flattens and outlines until every panel fits the room, or the count is the job's own. */
export function fitPanels(form: FoundForm, job: Job, context: FitContext): Fitted {
  const room = measureRoom(job);
  let options: SeamOptions = firstOptions(room, job.allowances.seam / 1000);
  let fitted: Fitted | null = null;
  for (let round = 0; round < rounds; round++) {
    context.onStation("seams");
    const seams = runSeams(form, job, options, context.seams);
    context.onStation("panels");
    const panels = runPanels(seams.output, form, job, context.panels);
    fitted = { seams, panels };
    const wide = panels.output.filter((p) => measureBreadth(p.cut) > room.width);
    if (wide.length === 0 || job.seams.count !== "auto" || job.seams.layout === "pairs") break;
    options = tighten(options, fitted, { room, wide: new Set(wide.map((p) => p.id)), round });
  }
  return fitted as Fitted;
}

/** Options before anything is flat: the cloth's width less one finished overlap, since most strips have two seams. */
export function firstOptions(room: ClothRoom, lap: number): SeamOptions {
  return { usableWidth: Math.max(room.width - lap, 0.2 * room.width), maxLength: room.length };
}

/** Options for the next round: measured widths first, then one strip more wherever a panel is still too wide. */
function tighten(
  options: SeamOptions,
  fitted: Fitted,
  is: { room: ClothRoom; wide: Set<string>; round: number },
): SeamOptions {
  const byId = new Map(fitted.panels.output.map((p) => [p.id, p]));
  const widthFactors: Record<string, number[]> = { ...options.widthFactors };
  const moreStrips: Record<string, number> = { ...options.moreStrips };
  let allowance = 0;
  for (const p of fitted.panels.output) allowance = Math.max(allowance, measureBreadth(p.cut) - measureBreadth(p.net));
  for (const choice of fitted.seams.output.choices) {
    if (choice.widths.length !== choice.panels.length) continue;
    widthFactors[choice.region] = choice.panels.map((id, i) => {
      const panel = byId.get(id);
      return panel ? measureBreadth(panel.net) / choice.widths[i] : 1;
    });
    if (is.round > 0 && choice.panels.some((id) => is.wide.has(id)))
      moreStrips[choice.region] = (moreStrips[choice.region] ?? 0) + 1;
  }
  return {
    ...options,
    usableWidth: Math.max(is.room.width - allowance, 0.2 * is.room.width),
    widthFactors,
    moreStrips,
  };
}
