// A layout in words and in a table: why it was taken, and the ways it was weighed against.
import type { Job } from "../records/job.ts";
import type { LayoutChoice, LayoutRow } from "../records/stripLayout.ts";
import { measureArea } from "../surface/measures.ts";
import { estimateStressError, measureCurvature } from "./estimateStress.ts";
import type { Placement } from "./placeSeams.ts";
import type { Region } from "./region.ts";
import type { SeamLine } from "./seamLine.ts";
import type { RegionLayout, Trial } from "./trial.ts";

/** Metres of seam of placed lines. */
export function measureLines(lines: readonly SeamLine[]): number {
  return lines.reduce((sum, line) => sum + line.length, 0);
}

/** Table of the ways tried, estimates all, the one taken first. */
export function compareTrials(region: Region, taken: Trial, trials: readonly Trial[], job: Job): LayoutRow[] {
  const curvature = measureCurvature(region);
  const area = measureArea(region.surface);
  const cloth = { Ew: job.fabric.Ew, G: job.fabric.G, warp: job.prestress.warp };
  const ordered = [...trials].sort((a, b) => Number(b === taken) - Number(a === taken));
  return ordered.map((trial): LayoutRow => {
    const { candidate, placed } = trial;
    const sizes = placed?.sizes ?? trial.sizes;
    const widths = sizes.map((size) => size.width);
    const seams = placed ? measureLines(placed.lines) : trial.metres;
    return {
      region: region.id,
      layout: candidate.layout,
      from: candidate.from,
      to: candidate.to,
      strips: sizes.length,
      panels: sizes.length,
      seams,
      cloth: area + (seams * job.allowances.seam) / 1000,
      least: Math.min(...widths),
      greatest: Math.max(...widths),
      stressError: Math.max(...sizes.map((size) => estimateStressError(curvature, size, cloth))),
      measured: false,
      taken: trial === taken,
    };
  });
}

/** Why a layout was taken, in words. */
export function explainChoice(
  chosen: { trial: Trial; placement: Placement },
  trials: readonly Trial[],
  limits: { usableWidth: number; count: number | "auto"; way: string | null },
): string {
  const { placement, trial } = chosen;
  const n = placement.sizes.length;
  const widest = Math.max(...placement.sizes.map((size) => size.width));
  const width = `widest about ${widest.toFixed(2)} m of ${limits.usableWidth.toFixed(2)} m usable`;
  const told = limits.count === "auto" || limits.way !== null ? "" : " as asked";
  const head = n === 1 ? `one panel${told}, ${width}` : `${n} strips${told}, ${width}`;
  const others = trials.filter((other) => other !== trial);
  if (others.length === 0) return `${head}.`;
  const countOf = (other: Trial) => other.placed?.sizes.length ?? other.count;
  const more = others.filter((other) => countOf(other) > n).length;
  const metres = others.filter((other) => countOf(other) <= n && other.metres > 1.02 * trial.metres).length;
  const words: string[] = [];
  if (more > 0) words.push(`${more} other ${more === 1 ? "way needs" : "ways need"} more strips`);
  if (metres > 0) words.push(`${metres} more metres of seam`);
  const rest = others.length - more - metres;
  if (rest > 0)
    words.push(
      `${rest} ${rest === 1 ? "is" : "are"} alike in both, or ${rest === 1 ? "runs" : "run"} too near an edge`,
    );
  return `${head}; of ${trials.length} ways: ${words.join(", ")}.`;
}

/** The choice in the words of the papers. */
export function describeChoice(layout: RegionLayout, panels: string[], pieces: readonly number[]): LayoutChoice {
  const { candidate, placement, region } = layout;
  const parted = pieces.filter((n) => n > 1).length;
  const told = parted === 0 ? "" : ` ${parted} of them cut across: ${panels.length} panels.`;
  return {
    region: region.id,
    panels,
    layout: panels.length === 1 ? "whole" : candidate.layout,
    from: candidate.from,
    to: candidate.to,
    count: placement.sizes.length || panels.length,
    why: layout.why + told,
    widths: placement.sizes.flatMap((size, j) => Array.from({ length: pieces[j] }, () => size.width)),
  };
}
