// A strip on which shapes lie, overlapping or not: places, weights of pairs, the price of a place. Does not: search.
// Source: guided local search weights on pairs (J. Egeblad, B. K. Nielsen and A. Odgaard, Fast neighborhood search for two-
// and three-dimensional nesting problems, EJOR 183, 2007); depth of overlap as price (T. Imamichi et al., Discrete
// Optimization 6, 2009), here by pairField.ts.
import type { PlaneRing } from "../../surface/ring.ts";
import { buildPairField, fieldDepth, type PairField } from "./pairField.ts";

/** A shape as the strip sees it: box at 0, 0. */
export interface StripShape {
  length: number;
  height: number;
  parts: PlaneRing[];
  /** How far the true outline may lie outside the parts. */
  slack: number;
  /** How far the parts may reach outside the box. */
  over: number;
}

/** What lies on the strip. Shapes are shared: pieces of one kind name the same ones. */
export interface StripTask {
  shapes: StripShape[];
  /** The shapes each piece may take, one a rotation. */
  choices: number[][];
  /** Pieces from here on never move (pins, flaws). */
  movable: number;
  width: number;
  start: number;
  gap: number;
  /** Gap and twice the greatest slack and overreach: boxes further apart than this cannot overlap. */
  reach: number;
  /** Size of a mean piece, and the overlap in all that counts as none. */
  size: number;
  none: number;
}

/** A strip with its pieces. */
export interface Strip {
  task: StripTask;
  n: number;
  length: number;
  x: Float64Array<ArrayBuffer>;
  y: Float64Array<ArrayBuffer>;
  shape: Int32Array<ArrayBuffer>;
  /** Far ends of the pieces' boxes. */
  x1: Float64Array<ArrayBuffer>;
  y1: Float64Array<ArrayBuffer>;
  /** Weight of each pair, both ways, and its least: pairs of large pieces weigh more, so that small ones give way. */
  weight: Float64Array<ArrayBuffer>;
  least: Float64Array<ArrayBuffer>;
  /** The pieces a price is made of: the first `nearCount`. */
  near: Int32Array<ArrayBuffer>;
  nearCount: number;
  fields: (PairField | null)[];
  /** Places priced so far. */
  priced: number;
}

/** A place of every piece. */
export interface StripState {
  length: number;
  x: Float64Array<ArrayBuffer>;
  y: Float64Array<ArrayBuffer>;
  shape: Int32Array<ArrayBuffer>;
}

/** Cells of a field times shapes: fields of many shapes are coarser, since each is looked up less often. */
const CELLS = 1200;
/** Fields already built, by the task they belong to: only time depends on it. */
const BUILT = new WeakMap<StripTask, (PairField | null)[]>();

function fieldsFor(task: StripTask): (PairField | null)[] {
  const known = BUILT.get(task);
  if (known) return known;
  const fields = new Array<PairField | null>(task.shapes.length ** 2).fill(null);
  BUILT.set(task, fields);
  return fields;
}

/** Least weight of each pair: the mean size of its boxes, of a mean piece 1. */
function leastWeights(task: StripTask): Float64Array<ArrayBuffer> {
  const n = task.choices.length;
  const sizes = task.choices.map(([s]) => Math.sqrt(task.shapes[s].length * task.shapes[s].height) / task.size);
  return Float64Array.from({ length: n * n }, (_, k) => Math.sqrt(sizes[Math.floor(k / n)] * sizes[k % n]));
}

/** A strip with its pieces where a state has them. */
export function openStrip(task: StripTask, state: StripState): Strip {
  const n = task.choices.length;
  const strip: Strip = {
    task,
    n,
    length: state.length,
    x: new Float64Array(n),
    y: new Float64Array(n),
    shape: new Int32Array(n),
    x1: new Float64Array(n),
    y1: new Float64Array(n),
    weight: leastWeights(task),
    least: leastWeights(task),
    near: new Int32Array(n),
    nearCount: 0,
    fields: fieldsFor(task),
    priced: 0,
  };
  setState(strip, state);
  return strip;
}

/** Where all lies now. */
export function copyState(strip: Strip): StripState {
  return { length: strip.length, x: strip.x.slice(), y: strip.y.slice(), shape: strip.shape.slice() };
}

/** Puts a piece somewhere. */
export function putPiece(strip: Strip, i: number, s: number, x: number, y: number): void {
  const shape = strip.task.shapes[s];
  strip.shape[i] = s;
  strip.x[i] = x;
  strip.y[i] = y;
  strip.x1[i] = x + shape.length;
  strip.y1[i] = y + shape.height;
}

/** Puts everything where a state has it. */
export function setState(strip: Strip, state: StripState): void {
  strip.length = state.length;
  for (let i = 0; i < strip.n; i++) putPiece(strip, i, state.shape[i], state.x[i], state.y[i]);
}

/** The field of shape a against shape b, a ≤ b. */
export function fieldOf(strip: Strip, a: number, b: number): PairField {
  const slot = a * strip.task.shapes.length + b;
  let field = strip.fields[slot];
  if (field === null) {
    const { shapes, gap, none } = strip.task;
    const apart = gap + shapes[a].slack + shapes[b].slack - none / 8;
    const cells = Math.max(12, Math.min(40, Math.floor(CELLS / shapes.length)));
    field = buildPairField(shapes[a].parts, shapes[b].parts, apart, cells);
    strip.fields[slot] = field;
  }
  return field;
}

/** Depth of overlap of shape s at x, y with piece j where it lies. */
export function depthAgainst(strip: Strip, s: number, j: number, x: number, y: number): number {
  const t = strip.shape[j];
  return s <= t
    ? fieldDepth(fieldOf(strip, s, t), x - strip.x[j], y - strip.y[j])
    : fieldDepth(fieldOf(strip, t, s), strip.x[j] - x, strip.y[j] - y);
}

/** Takes all pieces but i into the prices to come. */
export function gatherAll(strip: Strip, i: number): void {
  let count = 0;
  for (let j = 0; j < strip.n; j++) if (j !== i) strip.near[count++] = j;
  strip.nearCount = count;
}

/** Takes into the prices to come what piece i as shape s can meet within `margin` of x, y. */
export function gatherNear(strip: Strip, i: number, s: number, at: { x: number; y: number }, margin: number): void {
  const { n, near, x, y, x1, y1 } = strip;
  const { length, height } = strip.task.shapes[s];
  const more = strip.task.reach + margin;
  const [left, right] = [at.x - more, at.x + length + more];
  const [low, high] = [at.y - more, at.y + height + more];
  let count = 0;
  for (let j = 0; j < n; j++)
    if (x[j] < right && x1[j] > left && y[j] < high && y1[j] > low && j !== i) near[count++] = j;
  strip.nearCount = count;
}

/** Weighted price of piece i as shape s at x, y against the pieces gathered; given up once it passes the bound. */
// Six parameters: called a million times a second, a record of options would be built each time.
export function pricePlace(strip: Strip, i: number, s: number, x: number, y: number, bound: number): number {
  const { near, nearCount, x: px, y: py, x1, y1, weight } = strip;
  const { reach } = strip.task;
  const shape = strip.task.shapes[s];
  const left = x - reach;
  const right = x + shape.length + reach;
  const low = y - reach;
  const high = y + shape.height + reach;
  const row = i * strip.n;
  let price = 0;
  strip.priced++;
  for (let k = 0; k < nearCount; k++) {
    const j = near[k];
    if (px[j] >= right || x1[j] <= left || py[j] >= high || y1[j] <= low) continue;
    const d = depthAgainst(strip, s, j, x, y);
    if (d > 0) {
      price += weight[row + j] * d;
      if (price >= bound) return price;
    }
  }
  return price;
}

/** Depths of all overlapping pairs: visit gets the two pieces, the first the lesser number, and the depth. */
export function visitOverlaps(strip: Strip, visit: (i: number, j: number, depth: number) => void): void {
  const { n, x, y, x1, y1, shape } = strip;
  const { reach, movable } = strip.task;
  for (let i = 0; i < movable; i++)
    for (let j = i + 1; j < n; j++) {
      if (x[j] >= x1[i] + reach || x1[j] + reach <= x[i] || y[j] >= y1[i] + reach || y1[j] + reach <= y[i]) continue;
      const d = depthAgainst(strip, shape[i], j, x[i], y[i]);
      if (d > 0) visit(i, j, d);
    }
}

/** Sum of all depths. */
export function measureOverlap(strip: Strip): number {
  let sum = 0;
  visitOverlaps(strip, (_i, _j, d) => {
    sum += d;
  });
  return sum;
}
