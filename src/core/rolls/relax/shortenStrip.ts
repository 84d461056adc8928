// Shortens a strip attempt by attempt. At first it explores: a share is cut off and the overlap taken out; where that fails, a
// failed layout is drawn, likelier one of little overlap, two large pieces are swapped and it is tried again at the same
// length. At the end it compacts: ever thinner slices are cut out of the best. The best layout is valid at any moment.
// Source: the outer loop of the relaxed family (packing.md section 3, points 1-3); failed layouts drawn by their overlap and
// the two phases after arXiv 2509.13329 (2025); steps and shares own, by trial.
import { buildRandom, drawInteger, type Random } from "../../numeric/random.ts";
import { separate } from "./separate.ts";
import {
  copyState,
  measureOverlap,
  openStrip,
  putPiece,
  type Strip,
  type StripState,
  type StripTask,
  setState,
} from "./strip.ts";

/** A search under way. */
export interface StripSearch {
  strip: Strip;
  random: Random;
  best: StripState;
  /** Layouts that could not be parted at the length now tried, least overlap first. */
  failed: { state: StripState; overlap: number }[];
  /** Share of the length to be cut off next, and the least. */
  cut: number;
  cutLeast: number;
  /** Failures at the length now tried. */
  idle: number;
  /** Pieces by the size of their boxes, greatest first. */
  large: number[];
  /** Reach of what cannot move, and of the longest piece: no strip is shorter. */
  fixed: number;
}

export const SETTINGS = {
  /** Share of the length cut off at first while exploring. */
  cut: 0.01,
  /** Passes without a gain, and how often they are begun again: while exploring, while compacting. */
  explore: { passes: 100, strikes: 2 },
  compact: { passes: 50, strikes: 2 },
  /** Failures kept to go on from; after so many a longer strip is tried. */
  pool: 24,
  patience: 3,
  /** Slices lie between these shares of the length. */
  fineMost: 0.0005,
  fineLeast: 0.00001,
  /** Share of the work after which the best is compacted. */
  settle: 0.5,
  /** Pieces that may be swapped, as a share of all. */
  large: 0.6,
};
/**
 * Searches side by side cut in different ways, those of an even number down to the first of these shares of the length: narrow cuts
 * win a little often; wide ones win where lengths come in steps (outlines on whole numbers), since there the last of a step is
 * as hard as all of it.
 */
const CUT_LEAST = [0.0003, 0.001];
/** Rounding. */
const HAIR = 1e-9;

/** Greatest x of what counts as lying on the strip. */
function reachOf(strip: Strip): number {
  let reach = 0;
  for (let i = 0; i < strip.task.movable; i++) reach = Math.max(reach, strip.x1[i]);
  return reach;
}

/**
 * A search from a layout that does not overlap.
 * @param way seed; number of the search among those side by side; how far what cannot move reaches
 */
export function openSearch(
  task: StripTask,
  from: StripState,
  way: { seed: number; share: number; fixed: number },
): StripSearch {
  const { seed, share, fixed } = way;
  const strip = openStrip(task, from);
  const box = (i: number) => {
    const { length, height } = task.shapes[task.choices[i][0]];
    return length * height;
  };
  const order = Array.from({ length: task.movable }, (_, i) => i).sort((a, b) => box(b) - box(a) || a - b);
  const large = order.slice(0, Math.max(2, Math.ceil(SETTINGS.large * order.length)));
  // Nor is a strip shorter than its longest piece, lain the shortest way.
  const long = task.choices.map((own) => task.start + Math.min(...own.map((s) => task.shapes[s].length)));
  const least = Math.max(fixed, ...long.slice(0, task.movable));
  const best = copyState(strip);
  const cutLeast = CUT_LEAST[share % CUT_LEAST.length];
  const random = buildRandom(seed);
  return { strip, random, best, failed: [], cut: SETTINGS.cut, cutLeast, idle: 0, large, fixed: least };
}

/** Takes over a better layout found elsewhere. */
export function adoptState(search: StripSearch, state: StripState): void {
  if (state.length >= search.best.length) return;
  search.best = state;
  search.failed = [];
  search.idle = 0;
}

/** Sets the strip's end; what lies beyond is drawn in. */
function cutInPlace(strip: Strip, length: number): void {
  strip.length = length;
  for (let i = 0; i < strip.task.movable; i++) {
    const s = strip.shape[i];
    const most = length - strip.task.shapes[s].length;
    if (strip.x[i] > most) putPiece(strip, i, s, Math.max(strip.task.start, most), strip.y[i]);
  }
}

/** Cuts a slice out somewhere: all beyond it moves up. */
function sliceInPlace(strip: Strip, length: number, random: Random): void {
  const at = random() * strip.length;
  const slice = strip.length - length;
  const { start, movable } = strip.task;
  for (let i = 0; i < movable; i++)
    if (strip.x[i] + strip.x1[i] > 2 * at)
      putPiece(strip, i, strip.shape[i], Math.max(start, strip.x[i] - slice), strip.y[i]);
  cutInPlace(strip, length);
}

function putMiddle(strip: Strip, i: number, x: number, y: number): void {
  const { shapes, start, width } = strip.task;
  const s = strip.shape[i];
  const { length, height } = shapes[s];
  const px = Math.max(start, Math.min(strip.length - length, x - length / 2));
  putPiece(strip, i, s, px, Math.max(0, Math.min(width - height, y - height / 2)));
}

/** Swaps two large pieces of different kinds. */
function disturbInPlace(search: StripSearch): void {
  const { strip, random, large } = search;
  const { choices } = strip.task;
  for (let k = 0; k < 30; k++) {
    const a = large[drawInteger(random, large.length)];
    const b = large[drawInteger(random, large.length)];
    if (a === b || choices[a] === choices[b]) continue;
    const middle = (i: number) => [(strip.x[i] + strip.x1[i]) / 2, (strip.y[i] + strip.y1[i]) / 2];
    const [ma, mb] = [middle(a), middle(b)];
    putMiddle(strip, a, mb[0], mb[1]);
    putMiddle(strip, b, ma[0], ma[1]);
    return;
  }
}

/** Begins from a failed layout, good ones likelier, with two pieces swapped. */
function drawFailed(search: StripSearch): void {
  const { strip, random, failed } = search;
  const draw = Math.abs(random() + random() + random() - 1.5) / 1.5;
  setState(strip, failed[Math.min(failed.length - 1, Math.floor(draw * failed.length))].state);
  disturbInPlace(search);
}

/** Takes the strip, where nothing overlaps, where it is the shortest so far. */
function keepLayout(search: StripSearch): boolean {
  const { strip } = search;
  strip.length = Math.max(reachOf(strip), search.fixed);
  if (strip.length >= search.best.length) return false;
  search.best = copyState(strip);
  search.failed = [];
  search.idle = 0;
  return true;
}

function explore(search: StripSearch, stop: () => boolean): boolean {
  const { strip, best, failed, random } = search;
  const length = Math.max(search.fixed, best.length * (1 - search.cut));
  if (failed.length > 0) drawFailed(search);
  else setState(strip, best);
  if (strip.length > length) sliceInPlace(strip, length, random);
  strip.length = length;
  if (separate(strip, SETTINGS.explore, random, stop)) {
    if (failed.length === 0) search.cut = Math.min(SETTINGS.cut, search.cut * 1.2);
    return keepLayout(search);
  }
  failed.push({ state: copyState(strip), overlap: measureOverlap(strip) });
  failed.sort((a, b) => a.overlap - b.overlap);
  if (failed.length > SETTINGS.pool) failed.pop();
  search.idle++;
  if (search.idle % SETTINGS.patience === 0) search.cut = Math.max(search.cutLeast, search.cut / 2);
  return false;
}

/** Cuts a narrow slice out somewhere: narrower the more of the work is done. */
function compact(search: StripSearch, share: number, stop: () => boolean): boolean {
  const { strip, random, best } = search;
  setState(strip, best);
  const { fineMost, fineLeast, settle } = SETTINGS;
  const slice = best.length * fineMost * (fineLeast / fineMost) ** Math.min(1, (share - settle) / (1 - settle));
  sliceInPlace(strip, Math.max(search.fixed, best.length - slice), random);
  return separate(strip, SETTINGS.compact, random, stop) && keepLayout(search);
}

/** Whether no shorter strip is to be had. */
export function isDone(search: StripSearch): boolean {
  return search.best.length <= search.fixed * (1 + HAIR);
}

/**
 * One attempt at a shorter strip, `share` of the work being done before it.
 * @returns whether the best layout became shorter
 */
export function tryShorter(search: StripSearch, share: number, stop: () => boolean): boolean {
  return share < SETTINGS.settle ? explore(search, stop) : compact(search, share, stop);
}
