// The strips of a candidate as functions of two shares of its ends: seams already traced, and what lies between them by
// blending. So widths are read off without tracing, and the number of strips is found by marching from left to right.
import { pointAt } from "../surface/measures.ts";
import type { SurfacePoint } from "../surface/surface.ts";
import type { Candidate } from "./candidate.ts";
import { type Chain, listChainPoints, measureChain, placeOnChain } from "./chain.ts";
import type { Region } from "./region.ts";
import { type SeamLine, traceSeam } from "./seamLine.ts";
import { BAYS, blendCurves, type Curve, measureStripSize, type StripSize, sampleCurve } from "./stripWidth.ts";

/** Places of a seam: arc lengths on the candidate's start and finish. */
export interface SeamEnds {
  start: number;
  finish: number;
}

/** A candidate with the seams traced so far, in order of their share u of the way from left to right. */
export interface Comb {
  region: Region;
  candidate: Candidate;
  teeth: { u: number; curve: Curve; line: SeamLine | null }[];
  lines: Map<string, SeamLine>;
  /** Correction of the widths along u. */
  factors: WidthFactors;
}

/** Measured over estimated width at shares of the way across, in order; empty: no correction. */
export interface WidthFactors {
  at: readonly number[];
  factor: readonly number[];
}

/** No correction. */
export const NO_FACTORS: WidthFactors = { at: [], factor: [] };

/** Arc lengths of share u on both ends. */
export function endsAt(candidate: Candidate, u: number): SeamEnds {
  const on = (chain: Chain, offset: number) => {
    const length = measureChain(chain);
    return candidate.left ? u * length : (u * length + offset) % length;
  };
  return { start: on(candidate.start, candidate.offset.start), finish: on(candidate.finish, candidate.offset.finish) };
}

/** The seam between two ends, traced once. */
export function traceTooth(comb: Comb, ends: SeamEnds): SeamLine {
  const key = `${ends.start}|${ends.finish}`;
  let line = comb.lines.get(key);
  if (!line) {
    const { candidate, region } = comb;
    line = traceSeam(region, placeOnChain(candidate.start, ends.start), placeOnChain(candidate.finish, ends.finish));
    comb.lines.set(key, line);
  }
  return line;
}

/** Puts the seam at share u into the comb. */
function addTooth(comb: Comb, u: number, ends: SeamEnds = endsAt(comb.candidate, u)): SeamLine {
  const line = traceTooth(comb, ends);
  const at = comb.teeth.findIndex((tooth) => tooth.u >= u - 1e-12);
  const same = at >= 0 && Math.abs(comb.teeth[at].u - u) <= 1e-12;
  comb.teeth.splice(at < 0 ? comb.teeth.length : at, same ? 1 : 0, { u, curve: line.curve, line });
  return line;
}

/** A comb with n equal bays traced. */
export function buildComb(region: Region, candidate: Candidate, n: number, factors: WidthFactors): Comb {
  const comb: Comb = { region, candidate, teeth: [], lines: new Map(), factors };
  const rim = (chain: Chain) => ({ curve: sampleCurve(listChainPoints(region.surface, chain)), line: null });
  if (candidate.left && candidate.right)
    comb.teeth.push({ u: 0, ...rim(candidate.left) }, { u: 1, ...rim(candidate.right) });
  else {
    addTooth(comb, 0);
    comb.teeth.push({ ...comb.teeth[0], u: 1 });
  }
  for (let k = 1; k < n; k++) addTooth(comb, k / n);
  return comb;
}

function placeAt(region: Region, p: SurfacePoint, out: Curve, k: number) {
  const x = pointAt(region.surface, p);
  out.set(x, 3 * k);
}

/** The curve at share u: traced, or blended from its neighbours with its true ends. */
export function curveAt(comb: Comb, u: number): Curve {
  const { teeth, candidate, region } = comb;
  let i = 1;
  while (i < teeth.length - 1 && teeth[i].u < u) i++;
  const a = teeth[i - 1];
  const b = teeth[i];
  const t = b.u > a.u ? (u - a.u) / (b.u - a.u) : 0;
  if (t < 1e-9) return a.curve;
  if (t > 1 - 1e-9) return b.curve;
  const out = blendCurves(a.curve, b.curve, t);
  const ends = endsAt(candidate, u);
  const truth = new Float64Array(6);
  placeAt(region, placeOnChain(candidate.start, ends.start), truth, 0);
  placeAt(region, placeOnChain(candidate.finish, ends.finish), truth, 1);
  for (let c = 0; c < 3; c++) {
    const first = truth[c] - out[c];
    const last = truth[3 + c] - out[3 * BAYS + c];
    for (let k = 0; k <= BAYS; k++) out[3 * k + c] += first + ((last - first) * k) / BAYS;
  }
  return out;
}

/** Flat size of the strip between shares u0 and u1, corrected by the factors. */
export function sizeBetween(comb: Comb, u0: number, u1: number): StripSize {
  const inside = comb.teeth.filter((tooth) => tooth.u > u0 + 1e-9 && tooth.u < u1 - 1e-9);
  const step = Math.ceil(inside.length / 3);
  const middle = inside.filter((_, k) => k % Math.max(1, step) === Math.floor(step / 2));
  const curves = [curveAt(comb, u0), ...middle.map((tooth) => tooth.curve), curveAt(comb, u1)];
  return sizeOfCurves(comb, curves, (u0 + u1) / 2);
}

/** Flat size of the strip over these curves, corrected by the factor at its middle share. */
export function sizeOfCurves(comb: Comb, curves: readonly Curve[], middle: number): StripSize {
  const size = measureStripSize(curves);
  return { length: size.length, width: size.width * factorAt(comb.factors, middle) };
}

/** The correction at a share of the way across. */
export function factorAt({ at, factor }: WidthFactors, u: number): number {
  const last = at.length - 1;
  if (last < 0) return 1;
  if (u <= at[0]) return factor[0];
  if (u >= at[last]) return factor[last];
  let i = 1;
  while (at[i] < u) i++;
  const t = at[i] > at[i - 1] ? (u - at[i - 1]) / (at[i] - at[i - 1]) : 0;
  return factor[i - 1] + t * (factor[i] - factor[i - 1]);
}

/** Shares that seams must keep to: the first no earlier than `first`, the last no later than `last`. */
export interface Bounds {
  first: number;
  last: number;
}

/** Greatest u1 whose strip from u0 is no wider than w. */
function reach(comb: Comb, u0: number, w: number): number {
  if (sizeBetween(comb, u0, 1).width <= w) return 1;
  let low = u0;
  let high = 1;
  for (let k = 0; k < 14; k++) {
    const mid = (low + high) / 2;
    if (sizeBetween(comb, u0, mid).width <= w) low = mid;
    else high = mid;
  }
  return low;
}

/** Fewest strips that fit the usable width, at least `least`; limit + 1 where more than the limit are needed. */
export function countStrips(comb: Comb, usable: number, least: number, bounds: Bounds, limit = 400): number {
  let u = 0;
  let n = 0;
  while (u < 1 - 1e-9 && n <= limit) {
    const next = reach(comb, u, usable);
    if (next - u < 1e-6) return limit + 1;
    n++;
    u = n === 1 && next < 1 ? Math.max(next, bounds.first) : next;
    if (u > bounds.last && u < 1) u = bounds.last;
  }
  return Math.max(n, least);
}

/** Shares of n strips at even steps of both ends: [0, …, 1]. */
export function stepStrips(n: number): number[] {
  return Array.from({ length: n + 1 }, (_, j) => j / n);
}
