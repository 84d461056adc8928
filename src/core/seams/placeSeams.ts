// Where the seams of one candidate stand: fewest strips that fit, all of one width, ends drawn to corners and to seams
// that already end on the same cable, first and last seam clear of a hollow rim.
import type { Candidate } from "./candidate.ts";
import { type Chain, listChainPoints, measureChain } from "./chain.ts";
import {
  type Bounds,
  type Comb,
  countStrips,
  endsAt,
  type SeamEnds,
  sizeBetween,
  sizeOfCurves,
  stepStrips,
  traceTooth,
  type WidthFactors,
} from "./comb.ts";
import { measureClearance, type SeamLine } from "./seamLine.ts";
import type { StripSize } from "./stripWidth.ts";

/** What the seams are placed for. */
export interface PlaceOptions {
  /** m, flat width without allowances. */
  usableWidth: number;
  count: number | "auto";
  /** Fewest strips to be tried. */
  least: number;
  /** Arc lengths on start and finish that already carry a seam's end from the other side. */
  marks: { start: number[]; finish: number[] };
}

/** Seams placed. */
export interface Placement {
  /** Shares of the way from left to right: n + 1 with both rims. */
  shares: number[];
  lines: SeamLine[];
  sizes: StripSize[];
  /** Seams (index) that run along the rim or touch it. */
  hugging: number[];
  /** False where the strips do not fit the usable width whatever their number. */
  fits: boolean;
  /** The correction that is in the sizes. */
  factors: WidthFactors;
}

/** A seam end is drawn to a corner within this, m, and within SNAP_SHARE of a strip's end. own: shorter pieces of edge cannot be clamped or hemmed. */
const SNAP = 0.1;
const SNAP_SHARE = 0.06;
/** A seam starts at a mesh vertex rather than within this share of a side beside it: no sliver at the rim. */
const VERTEX_SHARE = 0.04;
/** Least waist of a strip beside a hollow rim, of the usable width. own: less is a ribbon that cannot be welded from both sides. */
const WAIST = 0.08;
/** Seams stand still within this part of a strip. */
const EVEN = 0.003;
/** Rounds of shifting, and counts tried beside the first. own: three rounds are the rule, each costs one trace a seam. */
const ROUNDS = 8;
const TRIES = 5;
/** More strips than this in one region are a mistake in the units. */
export const MOST_STRIPS = 200;

/** The nearest stop within reach, else the next vertex of the mesh within VERTEX_SHARE of its side, else s itself. */
function snapTo(s: number, chain: Chain, stops: readonly number[], spacing: number): number {
  let best = s;
  let gap = Math.min(SNAP, SNAP_SHARE * spacing);
  for (const stop of stops) {
    const d = Math.abs(stop - s);
    if (d < gap && stop > 1e-9 && stop < measureChain(chain) - 1e-9) {
      best = stop;
      gap = d;
    }
  }
  if (best !== s) return best;
  for (let i = 1; i < chain.vertices.length - 1; i++) {
    const side = s < chain.arc[i] ? chain.arc[i] - chain.arc[i - 1] : chain.arc[i + 1] - chain.arc[i];
    if (Math.abs(chain.arc[i] - s) < VERTEX_SHARE * side) return chain.arc[i];
  }
  return s;
}

function snapEnds(candidate: Candidate, ends: SeamEnds, n: number, marks: PlaceOptions["marks"]): SeamEnds {
  const on = (chain: Chain, s: number, own: number[]) =>
    snapTo(s, chain, [...own, ...chain.corners], measureChain(chain) / n);
  return {
    start: on(candidate.start, ends.start, marks.start),
    finish: on(candidate.finish, ends.finish, marks.finish),
  };
}

/** True where a seam runs clear of the rim and leaves a waist beside it. */
function isClear(comb: Comb, line: SeamLine, rim: Chain | null, usable: number): boolean {
  if (!line.clear) return false;
  if (!rim || rim.vertices.length < 2) return true;
  return measureClearance(line.curve, listChainPoints(comb.region.surface, rim)) >= WAIST * usable;
}

/** The share nearest to the rim at which a seam runs clear, from `from` inwards; 2 where none does up to the middle. */
function findClear(comb: Comb, from: number, step: number, rim: Chain, usable: number): number {
  const clearAt = (u: number) => isClear(comb, traceTooth(comb, endsAt(comb.candidate, u)), rim, usable);
  let bad = from;
  let good = from;
  for (let k = 0; k < 12; k++) {
    good = bad + step;
    if (good <= 0.02 || good >= 0.98) return 2;
    if (clearAt(good)) {
      for (let i = 0; i < 4; i++) {
        const mid = (bad + good) / 2;
        if (clearAt(mid)) good = mid;
        else bad = mid;
      }
      return good;
    }
    bad = good;
  }
  return 2;
}

/** Tightens the bounds where the first or last seam is not clear of its rim; true where it did. */
function tightenBoundsInPlace(
  bounds: Bounds,
  comb: Comb,
  shares: readonly number[],
  lines: readonly SeamLine[],
  usable: number,
): boolean {
  const { left, right } = comb.candidate;
  const n = shares.length - 1;
  let changed = false;
  if (left && left.vertices.length > 1 && !isClear(comb, lines[0], left, usable)) {
    bounds.first = findClear(comb, shares[1], 0.25 / n, left, usable);
    changed = true;
  }
  if (right && right.vertices.length > 1 && !isClear(comb, lines[n - 2], right, usable)) {
    const last = findClear(comb, shares[n - 1], -0.25 / n, right, usable);
    bounds.last = last > 1 ? -1 : last;
    changed = true;
  }
  return changed;
}

/** Shares at which all strips are equally wide, if width grows evenly within each strip of today; bounds kept. */
function evenOut(shares: readonly number[], sizes: readonly StripSize[], bounds: Bounds): number[] {
  const n = sizes.length;
  const spread = (from: number, to: number): number[] => {
    const total = sizes.slice(from, to).reduce((sum, size) => sum + size.width, 0);
    const out = [shares[from]];
    let j = from;
    let done = 0;
    for (let k = 1; k < to - from; k++) {
      const goal = (total * k) / (to - from);
      while (j < to - 1 && done + sizes[j].width < goal) done += sizes[j++].width;
      out.push(shares[j] + ((goal - done) / sizes[j].width) * (shares[j + 1] - shares[j]));
    }
    return [...out, shares[to]];
  };
  const free = spread(0, n);
  const first = free[1] < bounds.first && n > 2 ? 1 : 0;
  const last = free[n - 1] > bounds.last && n > 2 ? n - 1 : n;
  if (first === 0 && last === n) return free;
  const kept = [...shares];
  if (first === 1) kept[1] = bounds.first;
  if (last === n - 1) kept[n - 1] = bounds.last;
  if (last - first < 1) return kept;
  const inner = spread(first, last);
  return kept.map((u, k) => (k > first && k < last ? inner[k - first] : u));
}

interface Settled {
  shares: number[];
  lines: SeamLine[];
  sizes: StripSize[];
  widest: number;
  /** Falls as the strips become alike: the eighth power mean of the widths, so that a strip held wide by its rim does not hide the rest. */
  unevenness: number;
}

/** Sizes of the strips between traced lines. */
function sizesOf(comb: Comb, shares: readonly number[], lines: readonly SeamLine[]): StripSize[] {
  if (lines.length === 0) return [sizeBetween(comb, 0, 1)];
  const rim = [comb.teeth[0].curve, ...lines.map((line) => line.curve), comb.teeth[comb.teeth.length - 1].curve];
  return shares.slice(1).map((u, j) => sizeOfCurves(comb, [rim[j], rim[j + 1]], (shares[j] + u) / 2));
}

/** Traces n strips and shifts their seams until all are equally wide; the best found. */
function settleStrips(comb: Comb, start: number[], bounds: Bounds, usable: number): Settled | null {
  let shares = start;
  let best: Settled | null = null;
  for (let round = 0; round < ROUNDS; round++) {
    const lines = shares.slice(1, -1).map((u) => traceTooth(comb, endsAt(comb.candidate, u)));
    if (lines.length > 0 && tightenBoundsInPlace(bounds, comb, shares, lines, usable)) {
      if (bounds.first > bounds.last) return null;
      shares = clampShares(shares, bounds);
      continue;
    }
    const sizes = sizesOf(comb, shares, lines);
    const widths = sizes.map((size) => size.width);
    const widest = Math.max(...widths);
    const unevenness = widths.reduce((sum, w) => sum + (w / usable) ** 8, 0);
    if (!best || unevenness < best.unevenness) best = { shares, lines, sizes, widest, unevenness };
    const next = evenOut(shares, sizes, bounds);
    if (next.every((u, j) => Math.abs(u - shares[j]) < EVEN / shares.length)) break;
    shares = next;
  }
  return best;
}

/** Keeps the first and last seam to the bounds, and the rest between them in their order. */
function clampShares(shares: readonly number[], bounds: Bounds): number[] {
  const n = shares.length - 1;
  const low = n > 1 ? Math.max(shares[1], bounds.first) : 0;
  const high = n > 1 ? Math.min(shares[n - 1], bounds.last) : 1;
  if (n === 2) return [0, Math.min(low, bounds.last), 1];
  const scale = (high - low) / (shares[n - 1] - shares[1]);
  return shares.map((u, j) => (j === 0 || j === n ? u : low + scale * (u - shares[1])));
}

/** How many strips more (or fewer) it takes, judged by the strips that no bound holds. */
function countChange(settled: Settled, bounds: Bounds, usable: number): number {
  const { shares, sizes } = settled;
  const n = sizes.length;
  const held = (j: number) =>
    n > 2 && ((j === 0 && shares[1] === bounds.first) || (j === n - 1 && shares[n - 1] === bounds.last));
  const free = sizes.filter((_, j) => !held(j));
  const total = free.reduce((sum, size) => sum + size.width, 0);
  return Math.ceil(total / (0.999 * usable)) - free.length;
}

/** Places the seams of a candidate. */
export function placeSeams(comb: Comb, options: PlaceOptions): Placement {
  const { usableWidth: usable } = options;
  const bounds: Bounds = { first: 0, last: 1 };
  const settle = (n: number) => settleStrips(comb, clampShares(stepStrips(n), bounds), bounds, usable);
  let kept: Settled | null = null;
  if (options.count !== "auto") kept = settle(options.count);
  else {
    const tried = new Set<number>();
    let n = countStrips(comb, usable, options.least, bounds, MOST_STRIPS);
    while (n <= MOST_STRIPS && !tried.has(n) && tried.size < TRIES) {
      tried.add(n);
      const settled = settle(n);
      if (!settled) break;
      const fits = settled.widest <= usable;
      if (!kept || kept.widest > usable || (fits && n < kept.sizes.length)) kept = settled;
      const better = Math.max(options.least, n + countChange(settled, bounds, usable));
      if (fits && better >= n) break;
      n = fits ? better : Math.max(n + 1, better);
    }
  }
  if (!kept) return { shares: [0, 1], lines: [], sizes: [], hugging: [], fits: false, factors: comb.factors };
  return finishPlacement(comb, kept, options);
}

/** Snaps the ends, as far as the strips still fit. */
function finishPlacement(comb: Comb, settled: Settled, options: PlaceOptions): Placement {
  const { shares } = settled;
  const usable = options.usableWidth;
  const n = shares.length - 1;
  const wide = (list: readonly StripSize[]) => list.some((size) => size.width > usable);
  let { lines, sizes } = settled;
  const snapped = shares
    .slice(1, -1)
    .map((u) => traceTooth(comb, snapEnds(comb.candidate, endsAt(comb.candidate, u), n, options.marks)));
  const after = sizesOf(comb, shares, snapped);
  if (snapped.every((line, j) => line.clear || !lines[j].clear) && (wide(sizes) || !wide(after))) {
    lines = snapped;
    sizes = after;
  }
  if (comb.candidate.left === null) lines = [traceTooth(comb, endsAt(comb.candidate, 0)), ...lines];
  const hugging = lines.flatMap((line, j) => (line.clear ? [] : [j]));
  return { shares, lines, sizes, hugging, fits: !wide(sizes), factors: comb.factors };
}
