// Where the seams of one candidate stand: fewest strips that fit, all of one width, ends drawn to corners and to seams
// that already end on the same cable, first and last seam clear of a hollow rim.
import type { Candidate } from "./candidate.ts";
import { type Chain, listChainPoints, measureChain } from "./chain.ts";
import {
  addTooth,
  type Bounds,
  type Comb,
  countStrips,
  endsAt,
  type SeamEnds,
  sizeBetween,
  spreadStrips,
  traceTooth,
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
  /** Strips on top of the fewest that fit. */
  more: number;
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
}

/** A seam end is drawn to a corner within this, m, and within SNAP_SHARE of a strip's end. own: shorter pieces of edge cannot be clamped or hemmed. */
const SNAP = 0.1;
const SNAP_SHARE = 0.06;
/** Least waist of a strip beside a hollow rim, of the usable width. own: less is a ribbon that cannot be welded from both sides. */
const WAIST = 0.06;
/** More strips than this in one region are a mistake in the units. */
const MOST_STRIPS = 200;

/** The nearest stop within reach, or s itself. */
function snapTo(s: number, chain: Chain, stops: readonly number[], spacing: number): number {
  const within = Math.min(SNAP, SNAP_SHARE * spacing);
  let best = s;
  let gap = within;
  for (const stop of stops) {
    const d = Math.abs(stop - s);
    if (d < gap && stop > 1e-9 && stop < measureChain(chain) - 1e-9) {
      best = stop;
      gap = d;
    }
  }
  return best;
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

/** Drops blended knowledge beside a seam that is about to be traced. */
function addSeam(comb: Comb, u: number, n: number, ends: SeamEnds): SeamLine {
  comb.teeth = comb.teeth.filter((tooth) => tooth.u === 0 || tooth.u === 1 || Math.abs(tooth.u - u) > 0.25 / n);
  return addTooth(comb, u, ends);
}

/** Tightens the bounds where the first or last seam is not clear of its rim; true where it did. */
function tightenBounds(comb: Comb, shares: number[], lines: SeamLine[], bounds: Bounds, usable: number): boolean {
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

/** Places the seams of a candidate. */
export function placeSeams(comb: Comb, options: PlaceOptions): Placement {
  const { usableWidth: usable, marks } = options;
  const bounds: Bounds = { first: 0, last: 1 };
  const fail: Placement = { shares: [0, 1], lines: [], sizes: [], hugging: [], fits: false };
  let least = options.least;
  let before: number[] = [];
  let shares: number[] = [];
  let lines: SeamLine[] = [];
  for (let round = 0; round < 8; round++) {
    const n =
      options.count === "auto" ? countStrips(comb, usable, least, bounds, MOST_STRIPS) + options.more : options.count;
    if (n > MOST_STRIPS) return fail;
    if (bounds.first > bounds.last) return { ...fail, hugging: [0] };
    shares = spreadStrips(comb, n, bounds);
    const same = shares.length === before.length && shares.every((u, j) => Math.abs(u - before[j]) < 0.01 / n);
    if (same && round > 1) {
      const over = options.count === "auto" && sizesOf(comb, before).some((size) => size.width > usable);
      if (!over) {
        shares = before;
        break;
      }
      least = n + 1 - options.more;
      continue;
    }
    lines = shares.slice(1, -1).map((u) => addSeam(comb, u, n, endsAt(comb.candidate, u)));
    if (n > 1 && tightenBounds(comb, shares, lines, bounds, usable)) before = [];
    else before = shares;
  }
  return finishPlacement(comb, shares, usable, marks, options.count === "auto");
}

function sizesOf(comb: Comb, shares: readonly number[]): StripSize[] {
  return shares.slice(1).map((u, j) => sizeBetween(comb, shares[j], u));
}

/** Snaps the ends, as far as the strips still fit, and reads the figures off the seams as they will be cut. */
function finishPlacement(
  comb: Comb,
  shares: number[],
  usable: number,
  marks: PlaceOptions["marks"],
  auto: boolean,
): Placement {
  const n = shares.length - 1;
  const inner = shares.slice(1, -1);
  const round = comb.candidate.left === null;
  const place = (snapped: boolean) =>
    inner.map((u) => {
      const ends = endsAt(comb.candidate, u);
      return addSeam(comb, u, n, snapped ? snapEnds(comb.candidate, ends, n, marks) : ends);
    });
  let lines = place(true);
  let sizes = sizesOf(comb, shares);
  const wide = (list: StripSize[]) => list.some((size) => size.width > usable);
  if (auto && wide(sizes)) {
    lines = place(false);
    sizes = sizesOf(comb, shares);
  }
  if (round) lines = [traceTooth(comb, endsAt(comb.candidate, 0)), ...lines];
  const hugging = lines.flatMap((line, j) => (line.clear ? [] : [j]));
  return { shares, lines, sizes, hugging, fits: !wide(sizes) };
}
