// The layout of one region: tries the ways that make sense, takes the fewest strips that fit, says why.
import { type Finding, PlanError } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import { measureDistance, vertexAt } from "../surface/measures.ts";
import {
  bandsBetween,
  type Candidate,
  findSector,
  listBands,
  listGores,
  listSpineBands,
  orientCandidate,
} from "./candidate.ts";
import { measureChain } from "./chain.ts";
import { buildComb, countStrips, curveAt, sizeBetween, stepStrips, type WidthFactors } from "./comb.ts";
import { MOST_STRIPS, type Placement, placeSeams } from "./placeSeams.ts";
import type { Region } from "./region.ts";
import { BAYS, type Curve } from "./stripWidth.ts";
import { compareTrials, explainChoice, measureLines } from "./tellLayout.ts";
import type { RegionLayout, Trial } from "./trial.ts";

/** What the layout must respect, resolved for one region. */
export interface RegionLimits {
  /** m, flat, net of seam allowances. */
  usableWidth: number;
  /** m, or null. */
  maxLength: number | null;
  count: number | "auto";
  /** True for the only region of the form. */
  alone: boolean;
  /** Only this way is tried (see wayKey); null: all. */
  way: string | null;
  /** Measured over estimated width of a way, from an earlier run. */
  factorsOf: (way: string) => WidthFactors;
  /** Arc lengths on a candidate's ends that carry seam ends already. */
  findMarks: (candidate: Candidate) => { start: number[]; finish: number[] };
}

/** Names the way a candidate's strips run over its region. */
export function wayKey(region: string, candidate: { from: string; to: string }): string {
  return `${region}: ${candidate.from} to ${candidate.to}`;
}

/** Bays traced before a candidate is judged: across, and round a ring. own: the width between them is blended. */
const TRIAL_BAYS = 4;
const TRIAL_BAYS_ROUND = 12;
/** Candidates placed in full at most. */
const MOST_PLACED = 4;
/** A first count may be this much too high where a rim is bent: what lies between it and the first traced seam is blended. */
const DOUBT = 1.5;
/** A rim longer than its chord by this share is bent. */
const BENT = 1.002;

interface Placed {
  trial: Trial;
  placement: Placement;
  /** Strips, metres of seam, unevenness: smaller is better, in this order. */
  rank: number[];
}

/** True where strips are stacked against a rim that is no straight line. */
function hasBentRim(region: Region, candidate: Candidate): boolean {
  return [candidate.left, candidate.right].some((rim) => {
    if (!rim || rim.vertices.length < 3) return false;
    const ends = [rim.vertices[0], rim.vertices[rim.vertices.length - 1]].map((v) => vertexAt(region.surface, v));
    return measureChain(rim) > BENT * measureDistance(ends[0], ends[1]);
  });
}

function measureCurve(curve: Curve): number {
  let sum = 0;
  for (let k = 0; k < BAYS; k++)
    sum += Math.sqrt(
      (curve[3 * k + 3] - curve[3 * k]) ** 2 +
        (curve[3 * k + 4] - curve[3 * k + 1]) ** 2 +
        (curve[3 * k + 5] - curve[3 * k + 2]) ** 2,
    );
  return sum;
}

/** Steps of two per cent, so that figures that differ by rounding only count as alike. */
function coarse(x: number): number {
  return Math.round(Math.log(Math.max(x, 1e-9)) / 0.02);
}

/** Judges a candidate from a few traced seams. */
function tryCandidate(region: Region, raw: Candidate, limits: RegionLimits): Trial {
  const candidate = orientCandidate(region, raw);
  const round = candidate.left === null;
  const comb = buildComb(
    region,
    candidate,
    round ? TRIAL_BAYS_ROUND : TRIAL_BAYS,
    limits.factorsOf(wayKey(region.id, candidate)),
  );
  const open = { first: 0, last: 1 };
  const least = round ? 3 : 1;
  const count = limits.count === "auto" ? countStrips(comb, limits.usableWidth, least, open) : limits.count;
  const shares = stepStrips(count > MOST_STRIPS ? 1 : count);
  const sizes = shares.slice(1).map((u, j) => sizeBetween(comb, shares[j], u));
  const seams = (round ? shares.slice(0, -1) : shares.slice(1, -1)).map((u) => curveAt(comb, u));
  const metres = seams.reduce((sum, curve) => sum + measureCurve(curve), 0);
  const widths = sizes.map((size) => size.width);
  const variation = 1 - Math.min(...widths) / Math.max(...widths);
  const hugs = comb.teeth.some((tooth) => tooth.line !== null && !tooth.line.clear);
  const tooLong = limits.maxLength !== null && sizes.some((size) => size.length > (limits.maxLength ?? 0));
  const widest = Math.max(...widths);
  const middle = curveAt(comb, 0.5);
  const way = [0, 1, 2].map((c) => middle[3 * BAYS + c] - middle[c]);
  const across = Math.abs(way[0]) / Math.hypot(...way);
  return {
    candidate,
    comb,
    count,
    hope: hasBentRim(region, candidate) ? Math.floor(count / DOUBT) : count,
    metres,
    sizes,
    key: [
      Number(tooLong),
      Number(hugs),
      count,
      limits.count === "auto" ? 0 : coarse(widest),
      coarse(metres),
      Math.round(50 * variation),
      -Math.round(20 * across),
      coarse(measureChain(candidate.start)),
    ],
  };
}

function compareKeys(a: Trial, b: Trial): number {
  const k = a.key.findIndex((x, i) => x !== b.key[i]);
  return k < 0 ? 0 : a.key[k] - b.key[k];
}

/** How the reason begins where the layout asked for lies on other regions. */
const ELSEWHERE = "it does not touch";

/** Ways to lay strips that are tried together; `failed` says why those before them did not do. */
interface Stage {
  list: Candidate[];
  failed: string;
}

/** The ways to lay strips that the job and the region's shape allow: those asked for first, then those that suit the shape. */
function listStages(form: FoundForm, region: Region, job: Job): Stage[] {
  const { layout, from, to } = job.seams;
  if (region.outlines.length === 2) {
    const failed = layout === "bands" ? "bands cannot run across the opening in it, so it has gores round it" : "";
    return [{ list: listGores(form, region, from), failed }];
  }
  const stages: Stage[] = [];
  let failed = "";
  const all = [...listSpineBands(form, region), ...listBands(form, region)];
  if (from !== null && to !== null && layout !== "auto") {
    const asked = bandsBetween(
      form,
      region,
      (edge) => edge.id === from,
      (edge) => edge.id === to,
    );
    if (asked) stages.push({ list: [{ ...asked, layout: layout === "gores" ? "gores" : "bands" }], failed });
    failed = asked
      ? `no number of strips from ${from} to ${to} fits the cloth with seams clear of its edges`
      : `${ELSEWHERE} both ${from} and ${to} in one run each`;
  } else if (layout === "bands" && from !== null) {
    const named = all.filter((c) => [c.from, c.to].some((name) => name.split(" + ").includes(from)));
    if (named.length > 0) stages.push({ list: named, failed });
    failed = `no strips that start or end on ${from} fit it`;
  }
  const sector = layout === "bands" ? null : findSector(form, region);
  if (sector) stages.push({ list: [sector], failed });
  else if (layout === "gores") failed ||= "it has no ring to start gores on";
  stages.push({ list: all, failed });
  return stages;
}

/** Places the trials that may still be the best, in order; `spare` is the first that is at least something. */
function placeTrials(trials: readonly Trial[], limits: RegionLimits, round: boolean) {
  let best: Placed | null = null;
  let spare: Placed | null = null;
  for (const trial of trials.slice(0, MOST_PLACED)) {
    if (best && (trial.key[0] > best.trial.key[0] || trial.hope > best.rank[0])) continue;
    if (best && trial.hope === trial.count && trial.count === best.rank[0] && trial.key[4] >= best.trial.key[4])
      continue;
    const placement = placeSeams(trial.comb, {
      usableWidth: limits.usableWidth,
      count: limits.count === "auto" ? "auto" : Math.max(limits.count, round ? 2 : 1),
      least: round ? 3 : 1,
      marks: limits.findMarks(trial.candidate),
    });
    const { sizes, lines, hugging } = placement;
    if (sizes.length === 0) continue;
    trial.placed = placement;
    const widths = sizes.map((size) => size.width);
    const metres = measureLines(lines);
    const uneven = Math.round(50 * (1 - Math.min(...widths) / Math.max(...widths)));
    const placed: Placed = { trial, placement, rank: [sizes.length, coarse(metres), uneven] };
    spare ??= placed;
    if (hugging.length > 0 || (!placement.fits && limits.count === "auto")) continue;
    if (!best || isBetter(placed.rank, best.rank)) best = placed;
  }
  return { best, spare };
}

function isBetter(a: readonly number[], b: readonly number[]): boolean {
  const k = a.findIndex((x, i) => x !== b[i]);
  return k >= 0 && a[k] < b[k];
}

/**
 * Lays out one region.
 * @throws PlanError seam-none: no way fits the cloth with seams clear of the edges
 */
export function layoutRegion(form: FoundForm, region: Region, job: Job, limits: RegionLimits): RegionLayout {
  const findings: Finding[] = [];
  const round = region.outlines.length === 2;
  let trials: Trial[] = [];
  let chosen: Placed | null = null;
  let spare: Placed | null = null;
  let passed = "";
  for (const stage of listStages(form, region, job)) {
    const list = stage.list.filter((c) => limits.way === null || wayKey(region.id, c) === limits.way);
    const next = list.map((candidate) => tryCandidate(region, candidate, limits)).sort(compareKeys);
    const placed = placeTrials(next, limits, round);
    spare ??= placed.spare;
    if (!placed.best) continue;
    trials = next;
    chosen = placed.best;
    passed = stage.failed;
    break;
  }
  chosen ??= spare;
  if (!chosen)
    throw new PlanError(
      "seam-none",
      `no layout of ${region.id} fits a usable width of ${limits.usableWidth.toFixed(3)} m with seams clear of its edges; give a wider cloth, or the seams one by one ("pairs")`,
      region.id,
      { usableWidth: limits.usableWidth },
    );
  if (passed)
    findings.push({
      code: "seam-layout-fallback",
      level: limits.alone || !passed.startsWith(ELSEWHERE) ? "caution" : "note",
      station: "seams",
      where: [region.id, "seams.layout"],
      value: job.seams.layout,
      limit: null,
      text: `${region.id} was not laid out as asked: ${passed}.`,
      remedy: "Name edges that both border it, or give the seams one by one.",
      basis: "own argument",
    });
  if (round && limits.count !== "auto" && limits.count < 2)
    findings.push({
      code: "seam-ring-count",
      level: "caution",
      station: "seams",
      where: [region.id, "seams.count"],
      value: limits.count,
      limit: 2,
      text: `A panel round a ring that joins itself is no panel: ${region.id} has 2 strips in place of ${limits.count}.`,
      remedy: "Ask for 2 strips or more.",
      basis: "own argument",
    });
  return {
    region,
    candidate: chosen.trial.candidate,
    placement: chosen.placement,
    why: explainChoice(chosen, trials, limits),
    findings,
    compared: compareTrials(region, chosen.trial, trials, job),
  };
}
