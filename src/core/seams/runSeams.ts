// The seams station: lays seams over a found form and cuts it into strips. Pure; the widths it works with are estimates, so the
// plan flattens and may call again with corrected widths (widthFactors), lengths, or a number of strips (counts).
// Not here: flattening, allowances.
import { type Check, type Finding, PlanError, type StationContext, type StationResult } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import type { LayoutChoice, LayoutEstimate, StripEstimate, StripLayout } from "../records/stripLayout.ts";
import { type Adjacency, buildAdjacency } from "../surface/adjacency.ts";
import type { SurfacePoint } from "../surface/surface.ts";
import type { Candidate } from "./candidate.ts";
import { type Chain, findOnChain } from "./chain.ts";
import { checkStrips } from "./checkStrips.ts";
import { factorAt, NO_FACTORS, type WidthFactors } from "./comb.ts";
import { crossGivenStrips, isShort } from "./crossGiven.ts";
import { type CrossPlan, layCrossSeams } from "./crossSeams.ts";
import { cutStrips } from "./cutStrips.ts";
import { layoutRegion, wayKey } from "./layoutRegion.ts";
import { nameStrips } from "./nameStrips.ts";
import { noteSeamEnds } from "./noteEnds.ts";
import { noteHugging, notePruned, noteSizes } from "./noteSeams.ts";
import { openHoles } from "./openHoles.ts";
import { findEdge, findInRegion, tracePairs } from "./pairs.ts";
import { buildRegions, type Region, segmentKey } from "./region.ts";
import type { RegionPlan, SeamPath } from "./seamPath.ts";
import { describeChoice } from "./tellLayout.ts";
import type { RegionLayout } from "./trial.ts";

/** What the plan asks of the layout beside the job. */
export interface SeamOptions {
  /** m: greatest flat width of a strip, net of seam allowances. */
  usableWidth: number;
  /** m: greatest flat length of a strip; null: no limit. */
  maxLength: number | null;
  /** By region ("region 1"): the way its strips must run and their number, in place of the fewest that fit. */
  counts?: Record<string, { way: string; count: number }>;
  /** By way (see wayKey): measured flat width over StripEstimate.width of an earlier run. */
  widthFactors?: Record<string, WidthFactors>;
  /** By way: measured flat length of its longest piece over what was thought. */
  lengthFactors?: Record<string, number>;
}

function tagEnds(form: FoundForm, region: Region, candidate: Candidate): Map<number, 1 | 2> {
  const nV = form.surface.xyz.length / 3;
  const endOf = new Map<number, 1 | 2>();
  const tag = (chain: Chain, end: 1 | 2) => {
    for (let i = 1; i < chain.vertices.length; i++) {
      const a = region.formVertex[chain.vertices[i - 1]];
      const b = region.formVertex[chain.vertices[i]];
      endOf.set(chain.reversed ? segmentKey(b, a, nV) : segmentKey(a, b, nV), end);
    }
  };
  tag(candidate.start, 1);
  tag(candidate.finish, 2);
  return endOf;
}

/** Panels before each strip of a region. */
function countBefore(pieces: readonly number[]): number[] {
  let sum = 0;
  return pieces.map((n) => {
    sum += n;
    return sum - n;
  });
}

/** Seam lines of a laid-out region with the panels to their left and right, seams along the strips first. */
function listPaths(layout: RegionLayout, cross: CrossPlan, r: number): SeamPath[] {
  const { candidate, placement, region } = layout;
  const round = candidate.left === null;
  const n = placement.sizes.length;
  const first = countBefore(cross.pieces);
  // With the outline run forward along the start, more u lies to the right of the way from start to finish.
  const rightIsNext = !candidate.start.reversed;
  const along = placement.lines.flatMap((line, j): SeamPath[] => {
    if (placement.hugging.includes(j)) return [];
    const before = first[round ? (j + n - 1) % n : j];
    const after = first[round ? j : j + 1];
    const [left, right] = rightIsNext ? [before, after] : [after, before];
    return [{ region: r, line, weld: `${region.id}, seam ${j + 1}`, left, right }];
  });
  // A seam across runs the way of growing u: the finish lies to its left where the next strip lies to the right.
  const across = cross.seams.map(({ line, strip, piece }): SeamPath => {
    const near = first[strip] + piece;
    const weld = `${region.id}, strip ${strip + 1}, seam across ${piece + 1}`;
    return rightIsNext
      ? { region: r, line, weld, left: near + 1, right: near, across: { left: 1, right: 2 } }
      : { region: r, line, weld, left: near, right: near + 1, across: { left: 2, right: 1 } };
  });
  return [...along, ...across];
}

/** Form places that carry a seam's end already, as arc lengths on a candidate's ends. */
function findMarks(form: FoundForm, region: Region, placed: readonly SurfacePoint[], candidate: Candidate) {
  const on = (chain: Chain) =>
    placed.flatMap((p) =>
      findInRegion(form, region, p)
        .map((q) => findOnChain(chain, q))
        .filter((s) => s >= 0),
    );
  return { start: on(candidate.start), finish: on(candidate.finish) };
}

function checkNames(form: FoundForm, job: Job) {
  const { from, to } = job.seams;
  for (const [name, key] of [
    [from, "seams.from"],
    [to, "seams.to"],
  ] as const)
    if (name !== null) findEdge(form, name, key);
  if (from !== null && from === to && job.seams.layout !== "pairs")
    throw new PlanError(
      "seam-edge-name",
      `strips run from one edge to another, not from ${from} to itself: name two edges`,
      ["seams.from", "seams.to"],
    );
}

/** Strips of a region with their panels; none where seams fell out and the panels are others. */
function listEstimates(layout: RegionLayout, cross: CrossPlan, panels: readonly string[]): StripEstimate[] {
  const { sizes, shares, factors } = layout.placement;
  const first = countBefore(cross.pieces);
  if (panels.length !== cross.pieces.reduce((sum, n) => sum + n, 0)) return [];
  return sizes.map((size, j) => {
    const at = (shares[j] + shares[j + 1]) / 2;
    const own = panels.slice(first[j], first[j] + cross.pieces[j]);
    return { panels: own, at, width: size.width / factorAt(factors, at), length: size.length };
  });
}

/** The form with its regions, those of several rings opened by seams from ring to ring. */
function prepareRegions(found: FoundForm, job: Job) {
  const adjacency = buildAdjacency(found.surface);
  const parted = buildRegions(found, adjacency);
  const form = job.seams.layout === "pairs" ? null : openHoles(found, adjacency, parted.regions);
  if (!form) return { form: found, adjacency, ...parted };
  const after = buildAdjacency(form.surface);
  return { form, adjacency: after, ...buildRegions(form, after), pruned: parted.pruned };
}

/** Correction of a way; one that was never measured is taken to be like those of its region that were. */
function findFactors(all: Record<string, WidthFactors>, region: string, way: string): WidthFactors {
  if (all[way]) return all[way];
  const known = Object.keys(all).filter((key) => key.startsWith(`${region}: `));
  if (known.length === 0) return NO_FACTORS;
  const factor = known.flatMap((key) => all[key].factor);
  return { at: [0.5], factor: [factor.reduce((sum, f) => sum + f, 0) / factor.length] };
}

/** Lays out all regions one after another; seams that meet on one cable are drawn together. */
function layoutAll(
  form: FoundForm,
  job: Job,
  options: SeamOptions,
  regions: readonly Region[],
  context: StationContext,
) {
  const placed: SurfacePoint[] = [];
  return regions.map((region, r): RegionLayout => {
    if (context.cancelled?.()) throw new PlanError("cancelled", "the plan was stopped while seams were laid", "seams");
    context.onProgress?.(r / (regions.length + 1), `seams of ${region.id}`);
    const layout = layoutRegion(form, region, job, {
      usableWidth: options.usableWidth,
      maxLength: options.maxLength,
      count: options.counts?.[region.id]?.count ?? job.seams.count,
      alone: regions.length === 1,
      way: options.counts?.[region.id]?.way ?? null,
      factorsOf: (way) => findFactors(options.widthFactors ?? {}, region.id, way),
      findMarks: (candidate) => findMarks(form, region, placed, candidate),
    });
    for (const line of layout.placement.lines)
      for (const p of [line.points[0], line.points[line.points.length - 1]])
        placed.push({ a: region.formVertex[p.a], b: region.formVertex[p.b], t: p.t });
    return layout;
  });
}

/** Regions without a given seam are one panel each, their ends as for one strip. */
function layoutPairs(form: FoundForm, job: Job, options: SeamOptions, regions: readonly Region[]) {
  const { legs, findings } = tracePairs(form, regions, job.seams.pairs);
  const paths = legs.map(
    (leg): SeamPath => ({
      region: regions.indexOf(leg.region),
      line: leg.line,
      weld: `seams.pairs[${leg.pair}]`,
      left: -1,
      right: -1,
    }),
  );
  const plans = regions.map((region): RegionPlan => {
    const bare = !legs.some((leg) => leg.region === region) && region.outlines.length === 1;
    if (!bare) return { region, strips: null, endOf: new Map() };
    const one = layoutRegion(form, region, job, {
      usableWidth: options.usableWidth,
      maxLength: null,
      count: 1,
      alone: regions.length === 1,
      way: null,
      factorsOf: () => NO_FACTORS,
      findMarks: () => ({ start: [], finish: [] }),
    });
    return { region, strips: 1, endOf: tagEnds(form, region, one.candidate) };
  });
  return { paths, plans, findings };
}

/** The given seams with those across their strips that the cloth's length asks for, m. */
function crossGiven(
  on: { form: FoundForm; adjacency: Adjacency; labels: Map<number, number> },
  given: ReturnType<typeof layoutPairs>,
  maxLength: number | null,
) {
  if (maxLength === null || isShort(given.plans, given.paths, maxLength)) return given;
  const across = crossGivenStrips({ ...on, ...given }, maxLength);
  const crossed = new Set(across.map((path) => path.region));
  const plans = given.plans.map((plan, r) => (crossed.has(r) ? { ...plan, strips: null } : plan));
  return { ...given, plans, paths: [...given.paths, ...across] };
}

/** Seams laid, nothing cut. */
export interface LaidSeams {
  /** The form, or its working copy with openings opened. */
  form: FoundForm;
  adjacency: Adjacency;
  regions: Region[];
  labels: Map<number, number>;
  /** None for seams given one by one. */
  layouts: RegionLayout[];
  crosses: CrossPlan[];
  plans: RegionPlan[];
  paths: SeamPath[];
  findings: Finding[];
}

/** The first half of runSeams: where all seams run. @throws PlanError as runSeams */
export function laySeams(found: FoundForm, job: Job, options: SeamOptions, context: StationContext): LaidSeams {
  if (!(options.usableWidth > 0))
    throw new PlanError(
      "seam-width",
      `the usable width of the cloth is ${options.usableWidth} m: roll width less selvedges and allowances must leave something`,
      ["fabric.rollWidth", "seams.maxWidth"],
      { usableWidth: options.usableWidth },
    );
  checkNames(found, job);
  const { form, adjacency, regions, labels, pruned } = prepareRegions(found, job);
  const findings: Finding[] = notePruned(pruned);
  const given =
    job.seams.layout === "pairs"
      ? crossGiven({ form, adjacency, labels }, layoutPairs(form, job, options, regions), options.maxLength)
      : null;
  const layouts = given ? [] : layoutAll(form, job, options, regions, context);
  findings.push(...(given?.findings ?? []), ...layouts.flatMap((l) => [...l.findings, ...noteHugging(l)]));
  const crosses = layouts.map((layout) => {
    const factor = options.lengthFactors?.[wayKey(layout.region.id, layout.candidate)] ?? 1;
    return layCrossSeams(layout, options.maxLength === null ? null : options.maxLength / factor);
  });
  const plans: RegionPlan[] =
    given?.plans ??
    layouts.map((layout, r) => ({
      region: layout.region,
      strips: layout.placement.hugging.length > 0 ? null : crosses[r].pieces.reduce((sum, n) => sum + n, 0),
      endOf: tagEnds(form, layout.region, layout.candidate),
    }));
  const paths = given?.paths ?? layouts.flatMap((layout, r) => listPaths(layout, crosses[r], r));
  findings.push(...noteSeamEnds(regions, paths, given !== null));
  return { form, adjacency, regions, labels, layouts, crosses, plans, paths, findings };
}

/**
 * Lays seams over a form and cuts it into strips.
 * @units m
 * @throws PlanError seam-edge-name, seam-cable-path, seam-open-boundary, seam-closed-surface, seam-holes, seam-none, seam-panel-ring,
 *   seam-panel-count, seam-panel-self, seam-sides, seam-width, cancelled
 * @source own; geodesics and cutting as in surface/geodesic.ts and surface/cut.ts
 */
export function runSeams(
  found: FoundForm,
  job: Job,
  options: SeamOptions,
  context: StationContext = {},
): StationResult<StripLayout> {
  const laid = laySeams(found, job, options, context);
  const { form, adjacency, regions, labels, layouts, crosses, plans, paths, findings } = laid;
  context.onProgress?.(regions.length / (regions.length + 1), "cutting");
  const cut = cutStrips(form, adjacency, labels, plans, paths);
  const named = nameStrips(form, job, plans, cut);
  findings.push(...cut.findings, ...named.findings);
  const estimates = layouts.flatMap((layout, r): LayoutEstimate[] => {
    const strips = listEstimates(layout, crosses[r], named.byRegion[r]);
    findings.push(...noteSizes(strips, layout.placement.sizes, options));
    if (strips.length === 0) return [];
    return [{ region: layout.region.id, way: wayKey(layout.region.id, layout.candidate), strips }];
  });
  const compared = layouts.flatMap((layout, r) =>
    layout.compared.map((row) => (row.taken ? { ...row, panels: named.byRegion[r].length } : row)),
  );
  const choices = plans.map((plan, r): LayoutChoice => {
    const panels = named.byRegion[r];
    const told = job.seams.why ? ` Taken because: ${job.seams.why}` : "";
    if (layouts[r]) {
      const choice = describeChoice(layouts[r], panels, crosses[r].pieces);
      return { ...choice, why: choice.why + told };
    }
    return {
      region: plan.region.id,
      panels,
      layout: panels.length === 1 ? "whole" : "pairs",
      from: "",
      to: "",
      count: panels.length,
      why: `as asked, seam by seam.${told}`,
      widths: [],
    };
  });
  const output: StripLayout = {
    surface: cut.surface,
    seams: named.seams,
    strips: named.strips,
    choices,
    estimates,
    compared,
  };
  const checks: Check[] = checkStrips(found, output);
  const broken = checks.filter((check) => !check.holds);
  for (const check of broken)
    findings.push({
      code: "seam-check",
      level: "stop",
      station: "seams",
      where: "seams",
      value: check.value,
      limit: check.limit,
      text: `Cutting failed its own check: ${check.text} is ${check.value}, at most ${check.limit}.`,
      remedy: "Report the job; meanwhile move a seam or change the count.",
      basis: "own argument",
    });
  return { output, findings, checks };
}
