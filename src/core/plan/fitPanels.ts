// Seams and panels together: strips are laid out on estimated sizes, flattened, and laid out again until the cut panels fit the
// cloth and share its width; then, where the stress as patterned is too far off, in narrower strips (easeStress.ts).
// Ends with the best it found; a panel that is still too wide or too long is left for the rolls station to name. Source: own.
import { runPanels } from "../panels/runPanels.ts";
import type { Finding, StationContext } from "../problem.ts";
import type { CutPanel } from "../records/flatPanel.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import type { LayoutEstimate, LayoutRow } from "../records/stripLayout.ts";
import { runSeams, type SeamOptions } from "../seams/runSeams.ts";
import { findCount } from "./askedCount.ts";
import { type ClothRoom, firstOptions, isTurned, measureExtent, measureRoom } from "./clothRoom.ts";
import { easeStress, measureStressExcess } from "./easeStress.ts";
import type { Fitted, RunBoth } from "./fitted.ts";
import { joinRows, measureRows } from "./measureLayout.ts";
import { tellTooWide } from "./tellTooWide.ts";

/** Layouts tried for the sake of the width before the best one stands. */
const ROUNDS = 6;
/** Panels of one region whose widths differ by no more than this share are alike. own: 5 cm on a roll of 2.5 m. */
const ALIKE = 0.02;
/** A further layout for alike widths must take this share off the difference. */
const GAIN = 0.2;

/** Context of both stations; onStation is told which of them works. */
export interface FitContext {
  seams: StationContext;
  panels: StationContext;
  onStation: (station: "seams" | "panels") => void;
}

interface Judged {
  /** Panels too wide or too long for the cloth. */
  misfits: number;
  panels: number;
  /** Greatest difference of cut widths within a region, as a share of the widest. */
  spread: number;
}

/** Cut sizes of an estimate's strips, m: the widest and the longest of each strip's panels; null where the job turns one. */
function measureStrips(estimate: LayoutEstimate, byId: ReadonlyMap<string, CutPanel>) {
  return estimate.strips.map(({ panels }) => {
    const own = panels.flatMap((id) => byId.get(id) ?? []);
    if (own.length === 0 || own.some(isTurned)) return null;
    const sizes = own.map((p) => measureExtent(p.cut));
    return { width: Math.max(...sizes.map((s) => s.width)), length: Math.max(...sizes.map((s) => s.length)) };
  });
}

function judge(fitted: Fitted, room: ClothRoom): Judged {
  const panels = fitted.panels.output;
  const byId = new Map(panels.map((p) => [p.id, p]));
  let misfits = 0;
  for (const p of panels) {
    if (isTurned(p)) continue;
    const { width, length } = measureExtent(p.cut);
    if (width > room.width || (room.length !== null && length > room.length)) misfits++;
  }
  let spread = 0;
  for (const estimate of fitted.seams.output.estimates ?? []) {
    const widths = measureStrips(estimate, byId).flatMap((size) => (size ? [size.width] : []));
    if (widths.length > 1) spread = Math.max(spread, 1 - Math.min(...widths) / Math.max(...widths));
  }
  return { misfits, panels: panels.length, spread };
}

function isBetter(a: Judged, b: Judged): boolean {
  if (a.misfits !== b.misfits) return a.misfits < b.misfits;
  if (a.panels !== b.panels) return a.panels < b.panels;
  return a.spread < b.spread;
}

/**
 * Options for the next round: measured sizes in place of estimated ones, allowances but one overlap counted as width.
 * `press` makes the strips of a region that is still too wide count as so much wider.
 */
function correct(options: SeamOptions, fitted: Fitted, lap: number, press: (way: string) => number): SeamOptions {
  const byId = new Map(fitted.panels.output.map((p) => [p.id, p]));
  const widthFactors = { ...options.widthFactors };
  const lengthFactors = { ...options.lengthFactors };
  for (const estimate of fitted.seams.output.estimates ?? []) {
    const { way, strips } = estimate;
    const sizes = measureStrips(estimate, byId);
    const factor = strips.map((strip, j) => {
      const size = sizes[j];
      return size ? (press(way) * Math.max(size.width - lap, 0.01)) / strip.width : 1;
    });
    widthFactors[way] = { at: strips.map((strip) => strip.at), factor };
    const longer = strips.map((strip, j) => {
      const size = sizes[j];
      return size ? ((size.length - lap) * strip.panels.length) / strip.length : 1;
    });
    if (strips.some(({ panels }) => panels.length > 1)) lengthFactors[way] = Math.max(1, ...longer);
  }
  return { ...options, widthFactors, lengthFactors };
}

/** Widest cut panel of an estimate's strips, m. */
function widestOf(fitted: Fitted, estimate: LayoutEstimate): number {
  const byId = new Map(fitted.panels.output.map((p) => [p.id, p]));
  return Math.max(0, ...measureStrips(estimate, byId).map((size) => size?.width ?? 0));
}

/** The longest panel over the longest piece that the cloth gives; strips between given seams are parted anew by it. */
function measureOverlength(fitted: Fitted, room: ClothRoom): number {
  const lengths = fitted.panels.output.filter((p) => !isTurned(p)).map((p) => measureExtent(p.cut).length);
  return room.length === null ? 0 : Math.max(0, ...lengths) / room.length;
}

/** Ways whose panels are wider than the cloth, with the share by which they are. */
function listWideWays(fitted: Fitted, room: ClothRoom): [string, number][] {
  return (fitted.seams.output.estimates ?? []).flatMap((estimate): [string, number][] => {
    const most = widestOf(fitted, estimate) / room.width;
    return most > 1 ? [[estimate.way, most]] : [];
  });
}

/** Lays out until every panel fits the room and the widths are alike; `free`: the number of strips may grow. */
function fitWidths(
  runBoth: RunBoth,
  room: ClothRoom,
  lap: number,
  free: boolean,
): { fitted: Fitted; options: SeamOptions } {
  let options = firstOptions(room, lap);
  let best: { fitted: Fitted; options: SeamOptions; judged: Judged } | null = null;
  const wideBefore = new Map<string, number>();
  for (let round = 0; round < ROUNDS; round++) {
    const fitted = runBoth(options);
    const judged = judge(fitted, room);
    const before = best?.judged;
    if (!best || isBetter(judged, best.judged)) best = { fitted, options, judged };
    if ((fitted.seams.output.estimates ?? []).length === 0) {
      const longer = measureOverlength(fitted, room);
      if (longer <= 1 || options.maxLength === null) break;
      options = { ...options, maxLength: options.maxLength / longer / 1.001 };
      continue;
    }
    if (best.judged.misfits === 0) {
      if (best.judged.spread <= ALIKE) break;
      if (before && before.misfits === 0 && best.judged.spread > (1 - GAIN) * before.spread) break;
    }
    // a fixed number that is too few stays too few: alike and measured once more is all there is to gain
    if (!free && before && before.misfits === best.judged.misfits && best.judged.spread <= ALIKE) break;
    // A way that is too wide again although its widths were measured is pressed: its strips count as that much wider.
    const wide = free ? listWideWays(fitted, room) : [];
    for (const [way, most] of wide)
      if (options.widthFactors?.[way]) wideBefore.set(way, 1.002 * most * (wideBefore.get(way) ?? 1));
    options = correct(options, fitted, lap, (way) => wideBefore.get(way) ?? 1);
  }
  if (!best) throw new RangeError("no round was run");
  return best;
}

/** Fits as fitPanels does, without the table; `withCount` runs both stations for another number of strips. */
function fitAll(runBoth: RunBoth, job: Job, withCount: (count: number) => RunBoth): Fitted {
  const room = measureRoom(job);
  const lap = job.allowances.seam / 1000;
  const { count } = job.seams;
  const { fitted, options } = fitWidths(runBoth, room, lap, count === "auto");
  if (count !== "auto") {
    const layOut = (n: number) => fitWidths(withCount(n), room, lap, false).fitted;
    const told = findCount(fitted, { count, room, lap, widestOf, layOut });
    return told ? { ...fitted, seams: { ...fitted.seams, findings: [told, ...fitted.seams.findings] } } : fitted;
  }
  const eased = easeStress(fitted, options, runBoth, job.seams.minWidth ?? null);
  if (eased.fitted === fitted || judge(eased.fitted, room).spread <= ALIKE) return eased.tell(eased.fitted);
  const again = runBoth(correct(eased.options, eased.fitted, lap, () => 1));
  const better =
    isBetter(judge(again, room), judge(eased.fitted, room)) &&
    worstStress(again) <= Math.max(1, worstStress(eased.fitted));
  return eased.tell(better ? again : eased.fitted);
}

/** Lays out, flattens and outlines until every panel fits the room, widths are alike and the stress error is in bounds. */
export function fitPanels(form: FoundForm, job: Job, context: FitContext): Fitted {
  const measured: LayoutRow[] = [];
  const tried: Fitted[] = [];
  let weighed: LayoutRow[] = [];
  const runAs =
    (asked: Job): RunBoth =>
    (options) => {
      context.onStation("seams");
      const seams = runSeams(form, asked, options, context.seams);
      context.onStation("panels");
      const panels = runPanels(seams.output, form, asked, context.panels);
      if (weighed.length === 0) weighed = seams.output.compared ?? [];
      const fitted = { seams, panels, options };
      measured.push(...measureRows(fitted));
      if (asked === job) tried.push(fitted);
      return fitted;
    };
  const fitted = fitAll(runAs(job), job, (count) => runAs({ ...job, seams: { ...job.seams, count } }));
  const narrow = noteNarrow(fitted, job.seams.minWidth ?? null);
  const compared = joinRows(measureRows(fitted), measured, weighed);
  const findings = [...fitted.seams.findings, ...narrow];
  const choices = tellTooWide(fitted, tried, measureRoom(job));
  return { ...fitted, seams: { ...fitted.seams, findings, output: { ...fitted.seams.output, compared, choices } } };
}

/** Panels narrower than the job allows. */
function noteNarrow(fitted: Fitted, minWidth: number | null): Finding[] {
  if (minWidth === null) return [];
  const sizes = fitted.panels.output.map((p) => ({ id: p.id, width: 1000 * measureExtent(p.net).width }));
  const narrow = sizes.filter(({ width }) => width < minWidth);
  if (narrow.length === 0) return [];
  const least = Math.min(...narrow.map(({ width }) => width));
  return [
    {
      code: "strip-narrow",
      level: "caution",
      station: "seams",
      where: narrow.map(({ id }) => id),
      value: least,
      limit: minWidth,
      text: `${narrow.map(({ id, width }) => `${id} (${width.toFixed(0)} mm)`).join(", ")}: narrower than the ${minWidth} mm the job asks for.`,
      remedy: "Ask for fewer strips, slide the seams beside it, or allow narrower panels (seams.minWidth).",
      basis: "job: seams.minWidth",
    },
  ];
}

/** Stress error of the worst panel over what is let pass. */
function worstStress(fitted: Fitted): number {
  return Math.max(0, ...fitted.panels.output.map(measureStressExcess));
}
