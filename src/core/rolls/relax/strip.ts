// A strip on which shapes lie, overlapping or not: places, weights of pairs, the price of a place. Does not: search.
// Source: guided local search weights on pairs (J. Egeblad, B. K. Nielsen and A. Odgaard, Fast neighborhood search for two-
// and three-dimensional nesting problems, EJOR 183, 2007); depth of overlap as price (T. Imamichi et al., Discrete
// Optimization 6, 2009), here by pairField.ts, with a fixed charge of our own for overlapping at all.
import type { PlaneRing } from "../../surface/ring.ts";
import { type BoxIndex, columnOf, indexBox, openIndex, rowOf } from "./boxIndex.ts";
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
  /** Where the boxes lie. */
  index: BoxIndex;
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

/** Charged for any overlap, as a share of the size of a mean piece; by trial on four public instances. */
const CHARGE = 0.03;
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
    index: openIndex(n, { start: task.start, end: state.length, width: task.width }),
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
  indexBox(strip.index, i, x, strip.x1[i], y, strip.y1[i]);
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

/**
 * Price of shape s at x, y against piece j where it lies: the depth of their overlap and a fixed charge, 0 where they are apart. With
 * the charge few pairs overlap a little more rather than many a hair each, and few are soon parted.
 */
export function overlapPrice(strip: Strip, s: number, j: number, x: number, y: number): number {
  const t = strip.shape[j];
  const depth =
    s <= t
      ? fieldDepth(fieldOf(strip, s, t), x - strip.x[j], y - strip.y[j])
      : fieldDepth(fieldOf(strip, t, s), strip.x[j] - x, strip.y[j] - y);
  return depth > 0 ? depth + CHARGE * strip.task.size : 0;
}

/** Weighted price of piece i as shape s at x, y against all others; given up once it passes the bound. */
// Six parameters: called a million times a second, a record of options would be built each time.
export function pricePlace(strip: Strip, i: number, s: number, x: number, y: number, bound: number): number {
  const { x: px, y: py, x1, y1, weight, index } = strip;
  const { starts, ends, floors, roofs, words } = index;
  const { reach } = strip.task;
  const shape = strip.task.shapes[s];
  const left = x - reach;
  const right = x + shape.length + reach;
  const low = y - reach;
  const high = y + shape.height + reach;
  const row = i * strip.n;
  let a = columnOf(index, right) * words;
  let b = columnOf(index, left) * words;
  let c = rowOf(index, high) * words;
  let d = rowOf(index, low) * words;
  let price = 0;
  strip.priced++;
  for (let w = 0; w < words; w++) {
    let bits = starts[a++] & ends[b++] & floors[c++] & roofs[d++];
    while (bits !== 0) {
      const j = 32 * w + 31 - Math.clz32(bits & -bits);
      bits &= bits - 1;
      if (px[j] >= right || x1[j] <= left || py[j] >= high || y1[j] <= low || j === i) continue;
      const own = overlapPrice(strip, s, j, x, y);
      if (own > 0) {
        price += weight[row + j] * own;
        if (price >= bound) return price;
      }
    }
  }
  return price;
}

/** Prices of all overlapping pairs, unweighted: visit gets the two pieces, the first the lesser number, and the price. */
export function visitOverlaps(strip: Strip, visit: (i: number, j: number, price: number) => void): void {
  const { x, y, x1, y1, shape, index } = strip;
  const { starts, ends, floors, roofs, words } = index;
  const { reach, movable } = strip.task;
  for (let i = 0; i < movable; i++) {
    const a = columnOf(index, x1[i] + reach) * words;
    const b = columnOf(index, x[i] - reach) * words;
    const c = rowOf(index, y1[i] + reach) * words;
    const d = rowOf(index, y[i] - reach) * words;
    for (let w = i >> 5; w < words; w++) {
      let bits = starts[a + w] & ends[b + w] & floors[c + w] & roofs[d + w];
      while (bits !== 0) {
        const j = 32 * w + 31 - Math.clz32(bits & -bits);
        bits &= bits - 1;
        if (j <= i) continue;
        if (x[j] >= x1[i] + reach || x1[j] + reach <= x[i] || y[j] >= y1[i] + reach || y1[j] + reach <= y[i]) continue;
        const own = overlapPrice(strip, shape[i], j, x[i], y[i]);
        if (own > 0) visit(i, j, own);
      }
    }
  }
}

/** Sum of all prices, unweighted; 0 where nothing overlaps. */
export function measureOverlap(strip: Strip): number {
  let sum = 0;
  visitOverlaps(strip, (_i, _j, d) => {
    sum += d;
  });
  return sum;
}
