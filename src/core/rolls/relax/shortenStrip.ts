// Shortens a strip attempt by attempt: cut a little off, take the overlap out; where that fails, disturb a failed layout and
// try again; at the end smaller and smaller cuts from the best. The best layout is valid at any moment.
// Source: the outer loop of the relaxed family (packing.md section 3, points 1-3); disturbing by swapping two large pieces and
// drawing from failed layouts by their overlap after arXiv 2509.13329 (2025); steps and shares own, by trial.
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
  /** The layout now worked on: valid, at times longer than the best. */
  now: StripState;
  /** Layouts that could not be parted at the length now tried, least overlap first. */
  failed: { state: StripState; overlap: number }[];
  /** Share of the length now cut off at once: halved where it keeps failing. */
  cut: number;
  /** Least cuts tried since one succeeded. */
  idle: number;
  /** Pieces by the size of their boxes, greatest first. */
  large: number[];
  /** Reach of what cannot move, and of the longest piece: no strip is shorter. */
  fixed: number;
}

export const SETTINGS = {
  /** Shares of the length cut off: at first, and at least. */
  cut: 0.005,
  cutLeast: 0.0003,
  /** Failures at one length before the cut is halved. */
  failures: 6,
  /** Fine cuts lie between these shares. */
  fineMost: 0.002,
  fineLeast: 0.0001,
  /** Failures of least cuts before the layout is disturbed: so many, and so many a piece. */
  stall: 20,
  stallPiece: 0.6,
  /** One in so many attempts at least cuts is a slice instead. */
  slices: 4,
  /** Length given back to a layout that is disturbed; one that grew longer than the best by more than `drop` is left. */
  ease: 0.005,
  drop: 0.006,
  /** Share of the work after which the best is no longer disturbed. */
  settle: 0.85,
  /** Swaps of a disturbance at most. */
  swaps: 3,
};
/** Rounding. */
const HAIR = 1e-9;
/** Passes without a gain: of few pieces few, since they have few ways to lie. */
const PASSES = 60;
const PASSES_LEAST = 6;
const passesFor = (strip: Strip) => Math.min(PASSES, PASSES_LEAST + strip.task.movable);
/** Pieces that may be swapped, as a share of all. */
const LARGE = 0.6;

/** Greatest x of what counts as lying on the strip. */
function reachOf(strip: Strip): number {
  let reach = 0;
  for (let i = 0; i < strip.task.movable; i++) reach = Math.max(reach, strip.x1[i]);
  return reach;
}

/** A search from a layout that does not overlap; `fixed` is how far what cannot move reaches. */
export function openSearch(task: StripTask, from: StripState, seed: number, fixed: number): StripSearch {
  const strip = openStrip(task, from);
  const box = (i: number) => {
    const { length, height } = task.shapes[task.choices[i][0]];
    return length * height;
  };
  const order = Array.from({ length: task.movable }, (_, i) => i).sort((a, b) => box(b) - box(a) || a - b);
  const large = order.slice(0, Math.max(2, Math.ceil(LARGE * order.length)));
  // Nor is a strip shorter than its longest piece, lain the shortest way.
  const long = task.choices.map((own) => task.start + Math.min(...own.map((s) => task.shapes[s].length)));
  const least = Math.max(fixed, ...long.slice(0, task.movable));
  const best = copyState(strip);
  const { cut } = SETTINGS;
  return { strip, random: buildRandom(seed), best, now: best, failed: [], cut, idle: 0, large, fixed: least };
}

/** Takes over a better layout found elsewhere. */
export function adoptState(search: StripSearch, state: StripState): void {
  if (state.length >= search.best.length) return;
  search.best = state;
  begin(search, state);
}

/** Goes on from a layout. */
function begin(search: StripSearch, state: StripState): void {
  search.now = state;
  search.failed = [];
  search.cut = SETTINGS.cut;
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

/** Takes the strip, where nothing overlaps, as the layout to go on from. Returns whether it is the best. */
function keepLayout(search: StripSearch): boolean {
  const { strip } = search;
  strip.length = Math.max(reachOf(strip), search.fixed);
  search.now = copyState(strip);
  search.failed = [];
  search.idle = 0;
  if (search.now.length >= search.best.length) return false;
  search.best = search.now;
  return true;
}

function tryCoarse(search: StripSearch, stop: () => boolean): boolean {
  const { strip } = search;
  if (search.failed.length > 0) drawFailed(search);
  else {
    setState(strip, search.now);
    cutInPlace(strip, Math.max(search.fixed, search.now.length * (1 - search.cut)));
  }
  if (separate(strip, { passes: passesFor(strip), strikes: 3 }, search.random, stop)) return keepLayout(search);
  search.failed.push({ state: copyState(strip), overlap: measureOverlap(strip) });
  search.failed.sort((a, b) => a.overlap - b.overlap);
  if (search.failed.length >= SETTINGS.failures && search.cut > SETTINGS.cutLeast) {
    search.cut = Math.max(SETTINGS.cutLeast, search.cut / 2);
    search.failed = [];
  }
  return false;
}

/** Cuts a narrow slice out somewhere: all beyond it moves up. */
function tryFine(search: StripSearch, stop: () => boolean): boolean {
  const { strip, random, now } = search;
  setState(strip, now);
  const { fineMost, fineLeast } = SETTINGS;
  const slice = now.length * fineMost * (fineLeast / fineMost) ** random();
  const at = random() * now.length;
  const { start, movable } = strip.task;
  for (let i = 0; i < movable; i++)
    if (strip.x[i] + strip.x1[i] > 2 * at)
      putPiece(strip, i, strip.shape[i], Math.max(start, strip.x[i] - slice), strip.y[i]);
  cutInPlace(strip, Math.max(search.fixed, now.length - slice));
  return separate(strip, { passes: passesFor(strip) / 2, strikes: 1 }, random, stop) && keepLayout(search);
}

/** Swaps pieces of the layout with a little more room, and goes on from there; from the best where it strayed too far. */
function disturb(search: StripSearch, stop: () => boolean): void {
  const { strip, random, best } = search;
  const from = search.now.length > best.length * (1 + SETTINGS.drop) ? best : search.now;
  setState(strip, from);
  strip.length = from.length * (1 + SETTINGS.ease);
  for (let k = drawInteger(random, SETTINGS.swaps); k >= 0; k--) disturbInPlace(search);
  if (!separate(strip, { passes: passesFor(strip), strikes: 2 }, random, stop)) {
    begin(search, best);
    return;
  }
  begin(search, best);
  keepLayout(search);
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
  const settling = share >= SETTINGS.settle;
  if (settling && search.now !== search.best) begin(search, search.best);
  const least = search.cut <= SETTINGS.cutLeast;
  if (least) search.idle++;
  if (!settling && search.idle > SETTINGS.stall + SETTINGS.stallPiece * search.strip.task.movable) {
    const before = search.best;
    disturb(search, stop);
    return search.best !== before;
  }
  return settling || (least && search.idle % SETTINGS.slices === 0) ? tryFine(search, stop) : tryCoarse(search, stop);
}
