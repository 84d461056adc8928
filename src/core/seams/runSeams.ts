// The seams station: lays seams over a found form and cuts it into strips. Pure; the widths it works with are estimates, so the
// plan flattens and may call again with corrected widths (widthFactors) or more strips (moreStrips).
// Not here: flattening, allowances, cross seams in a strip that is longer than the cloth (a stop says so).
import { type Check, type Finding, PlanError, type StationContext, type StationResult } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import type { LayoutChoice, StripLayout } from "../records/stripLayout.ts";
import { buildAdjacency } from "../surface/adjacency.ts";
import type { SurfacePoint } from "../surface/surface.ts";
import type { Candidate } from "./candidate.ts";
import { type Chain, findOnChain } from "./chain.ts";
import { checkStrips } from "./checkStrips.ts";
import { cutStrips } from "./cutStrips.ts";
import { describeChoice, layoutRegion, type RegionLayout } from "./layoutRegion.ts";
import { nameStrips } from "./nameStrips.ts";
import { openHoles } from "./openHoles.ts";
import { findEdge, findInRegion, tracePairs } from "./pairs.ts";
import { buildRegions, type Region, segmentKey } from "./region.ts";
import type { RegionPlan, SeamPath } from "./seamPath.ts";

/** What the plan asks of the layout beside the job. */
export interface SeamOptions {
  /** m: greatest flat width of a strip, net of seam allowances. */
  usableWidth: number;
  /** m: greatest flat length of a strip; null: no limit. */
  maxLength: number | null;
  /** By region ("region 1"): strips on top of the fewest that are thought to fit. */
  moreStrips?: Record<string, number>;
  /** By region: measured flat width over LayoutChoice.widths, strip by strip of an earlier run. */
  widthFactors?: Record<string, number[]>;
}

/** Strips narrower than this are a caution, m. own: two weld overlaps of 40 mm and a hand between. */
const NARROW = 0.15;

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

/** Seam lines of a laid-out region with the strips to their left and right. */
function listPaths(layout: RegionLayout, r: number): SeamPath[] {
  const { candidate, placement, region } = layout;
  const round = candidate.left === null;
  const n = placement.sizes.length;
  // With the outline run forward along the start, more u lies to the right of the way from start to finish.
  const rightIsNext = !candidate.start.reversed;
  return placement.lines.flatMap((line, j) => {
    if (placement.hugging.includes(j)) return [];
    const before = round ? (j + n - 1) % n : j;
    const after = round ? j : j + 1;
    const [left, right] = rightIsNext ? [before, after] : [after, before];
    return [{ region: r, line, weld: `${region.id}, seam ${j + 1}`, left, right }];
  });
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

function noteHugging(layout: RegionLayout): Finding[] {
  return layout.placement.hugging.map((j) => ({
    code: "seam-hugs-edge",
    level: "stop" as const,
    station: "seams" as const,
    where: [layout.region.id, `seam ${j + 1}`],
    value: null,
    limit: null,
    text: `Seam ${j + 1} of ${layout.region.id} from ${layout.candidate.from} to ${layout.candidate.to} runs along the edge of the cloth or touches it between its ends; it was left out.`,
    remedy: "Lay the strips between two other edges, ask for another count, or give the seams one by one.",
    basis: "own argument",
  }));
}

function noteSizes(layout: RegionLayout, panels: readonly string[], options: SeamOptions): Finding[] {
  const findings: Finding[] = [];
  const { sizes } = layout.placement;
  if (sizes.length !== panels.length) return findings;
  sizes.forEach((size, j) => {
    const base = { station: "seams" as const, where: panels[j] };
    if (options.maxLength !== null && size.length > options.maxLength)
      findings.push({
        ...base,
        code: "strip-length",
        level: "stop",
        value: size.length,
        limit: options.maxLength,
        text: `${panels[j]} is about ${size.length.toFixed(2)} m long; the cloth gives ${options.maxLength.toFixed(2)} m.`,
        remedy: "Lay the strips the other way, give a seam across (pairs), or take a longer roll.",
        basis: "job: seams.maxLength or the roll's length",
      });
    if (size.width > options.usableWidth * 1.0005)
      findings.push({
        ...base,
        code: "strip-width",
        level: "caution",
        value: size.width,
        limit: options.usableWidth,
        text: `${panels[j]} is about ${size.width.toFixed(3)} m wide before flattening; ${options.usableWidth.toFixed(3)} m can be used.`,
        remedy: "Ask for more strips, or leave the count to the tool.",
        basis: "estimate; the flat panel decides",
      });
    if (size.width < NARROW)
      findings.push({
        ...base,
        code: "strip-narrow",
        level: "caution",
        value: size.width,
        limit: NARROW,
        text: `${panels[j]} is only about ${size.width.toFixed(3)} m wide.`,
        remedy: "Ask for fewer strips or lay them between other edges.",
        basis: "own argument: room for two weld overlaps",
      });
  });
  return findings;
}

function notePruned(pruned: readonly string[]): Finding[] {
  return pruned.map((id) => ({
    code: "seam-cable-open",
    level: "caution" as const,
    station: "seams" as const,
    where: id,
    value: null,
    limit: null,
    text: `${id} ends inside the cloth and divides nothing: that part of it is no border between panels.`,
    remedy: "Lead the cable on to an edge or another cable, or lay a seam along its line.",
    basis: "own argument",
  }));
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
      count: job.seams.count,
      alone: regions.length === 1,
      more: options.moreStrips?.[region.id] ?? 0,
      factors: options.widthFactors?.[region.id] ?? [],
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
      more: 0,
      factors: [],
      findMarks: () => ({ start: [], finish: [] }),
    });
    return { region, strips: 1, endOf: tagEnds(form, region, one.candidate) };
  });
  return { paths, plans, findings };
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
  const given = job.seams.layout === "pairs" ? layoutPairs(form, job, options, regions) : null;
  const layouts = given ? [] : layoutAll(form, job, options, regions, context);
  findings.push(...(given?.findings ?? []), ...layouts.flatMap((l) => [...l.findings, ...noteHugging(l)]));
  const plans: RegionPlan[] =
    given?.plans ??
    layouts.map((layout) => ({
      region: layout.region,
      strips: layout.placement.hugging.length > 0 ? null : layout.placement.sizes.length,
      endOf: tagEnds(form, layout.region, layout.candidate),
    }));
  const paths = given?.paths ?? layouts.flatMap(listPaths);
  context.onProgress?.(regions.length / (regions.length + 1), "cutting");
  const cut = cutStrips(form, adjacency, labels, plans, paths);
  const named = nameStrips(form, job, plans, cut);
  findings.push(...cut.findings, ...named.findings);
  layouts.forEach((layout, r) => {
    findings.push(...noteSizes(layout, named.byRegion[r], options));
  });
  const choices = plans.map((plan, r): LayoutChoice => {
    const panels = named.byRegion[r];
    if (layouts[r]) return describeChoice(layouts[r], panels);
    return {
      region: plan.region.id,
      panels,
      layout: panels.length === 1 ? "whole" : "pairs",
      from: "",
      to: "",
      count: panels.length,
      why: "as asked, seam by seam.",
      widths: [],
    };
  });
  const output: StripLayout = { surface: cut.surface, seams: named.seams, strips: named.strips, choices };
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
