// One roll being filled: what lies on it, the columns it takes up, where the next shape fits, and how far it slides from there.
// Does not: choose orders or rolls. Source: own; the rule is least x, then least y, of the raster, then exact slides.
import type { PlaneRing } from "../surface/ring.ts";
import { buildColumns, type Columns } from "./columns.ts";
import { buildShape, type NestShape, searchColumns } from "./nestShape.ts";
import { type PlacedRing, slideRoom } from "./slideRoom.ts";

/** A shape lying on a roll, its box beginning at x, y. */
export interface LaidShape {
  piece: number;
  shape: NestShape;
  x: number;
  y: number;
  /** Pinned pieces are never moved. */
  pinned: boolean;
}

/** What a bed is to be. */
export interface BedSize {
  start: number;
  length: number;
  /** Usable width. */
  width: number;
  /** Width over all, which is what cloth is counted and paid by; left out: the usable one. */
  overall?: number;
  gap: number;
  /** Width of a column. */
  dx: number;
  /** Places within a millionth of a multiple of this are moved onto it (outlines drawn on a lattice fit exactly); 0: never. */
  snap: number;
  /** Greatest slack of any shape that may come (nestShape.ts). */
  slack: number;
  flaws: { x: number; y: number; length: number; width: number }[];
}

/** A roll being filled. */
export interface Bed extends BedSize {
  laid: LaidShape[];
  /** Occupied intervals of each column, lo and hi in turn, lower ends rising. */
  columns: number[][];
  /** Tallest free interval of each column, a gap beyond both edges counted in. */
  free: number[];
  /** First column worth trying, by shape key. */
  tried: Map<string, number>;
  flawShapes: LaidShape[];
}

const FLAW = -1;

function flawShape(f: BedSize["flaws"][number]): LaidShape {
  const ring: PlaneRing = Float64Array.from([0, 0, f.length, 0, f.length, f.width, 0, f.width]);
  return { piece: FLAW, shape: buildShape(ring, 0, "flaw"), x: f.x, y: f.y, pinned: true };
}

/** Tallest free interval of a column. */
function tallestFree(bed: Bed, taken: number[]): number {
  const reach = bed.gap + 2 * bed.slack;
  let top = -reach;
  let tallest = 0;
  for (let i = 0; i < taken.length; i += 2) {
    if (taken[i] - top > tallest) tallest = taken[i] - top;
    if (taken[i + 1] > top) top = taken[i + 1];
  }
  return Math.max(tallest, bed.width + reach - top);
}

/** Adds an interval to a column, lower ends rising. */
function addSorted(taken: number[], lo: number, hi: number): void {
  let i = taken.length;
  taken.push(lo, hi);
  for (; i > 0 && taken[i - 2] > lo; i -= 2) {
    taken[i] = taken[i - 2];
    taken[i + 1] = taken[i - 1];
  }
  taken[i] = lo;
  taken[i + 1] = hi;
}

/** Marks the columns under a laid shape as taken. */
function stampInPlace(bed: Bed, laid: LaidShape): void {
  const c = buildColumns(laid.shape.ring, laid.x, bed.dx, 0);
  for (let k = 0; k + 1 < c.start.length; k++) {
    const column = c.first + k;
    if (column < 0) continue;
    while (bed.columns.length <= column) {
      bed.columns.push([]);
      bed.free.push(Infinity);
    }
    for (let i = c.start[k]; i < c.start[k + 1]; i++)
      addSorted(bed.columns[column], c.lo[i] + laid.y, c.hi[i] + laid.y);
    bed.free[column] = tallestFree(bed, bed.columns[column]);
  }
}

/** An empty roll, its flaws in place. */
export function openBed(size: BedSize): Bed {
  const bed: Bed = {
    ...size,
    laid: [],
    columns: [],
    free: [],
    tried: new Map(),
    flawShapes: size.flaws.map(flawShape),
  };
  for (const f of bed.flawShapes) stampInPlace(bed, f);
  return bed;
}

/** Lays a shape down where it is. */
export function layInPlace(bed: Bed, laid: LaidShape): void {
  bed.laid.push(laid);
  stampInPlace(bed, laid);
}

/** Greatest x that anything but flaws reaches, 0 on an empty roll. */
export function bedReach(bed: Bed): number {
  let reach = 0;
  for (const p of bed.laid) reach = Math.max(reach, p.x + p.shape.length);
  return reach;
}

/** Columns of shapes by key, built once a search. */
export type ColumnStore = Map<string, Columns>;

function columnsOf(bed: Bed, shape: NestShape, store: ColumnStore): Columns {
  const key = `${shape.key}@${bed.dx}`;
  let columns = store.get(key);
  if (!columns) {
    columns = searchColumns(shape, bed.dx, bed.gap + shape.slack + bed.slack);
    store.set(key, columns);
  }
  return columns;
}

/** The least y from `from` on at which column k of a shape is free. */
function clearColumn(c: Columns, k: number, taken: number[], from: number, hair: number): number {
  let y = from;
  for (let moved = taken.length > 0; moved; ) {
    moved = false;
    for (let i = c.start[k]; i < c.start[k + 1]; i++) {
      const [lo, hi] = [c.lo[i] + hair, c.hi[i] - hair];
      for (let j = 0; j < taken.length; j += 2) {
        if (y + lo < taken[j + 1] && y + hi > taken[j]) {
          y = taken[j + 1] - c.lo[i];
          moved = true;
        }
      }
    }
  }
  return y;
}

/** Least free y of a shape whose raster column 0 is `at`, or Infinity; starts with the column that blocked it last. */
function leastY(bed: Bed, c: Columns, at: number, top: number, last: { column: number }): number {
  const base = at + c.first;
  const k0 = Math.max(0, -base);
  const k1 = Math.min(c.start.length - 1, bed.columns.length - base);
  if (k0 >= k1) return 0;
  const hair = 1e-9 * bed.width;
  const first = last.column - base;
  let k = first >= k0 && first < k1 ? first : k0;
  let y = 0;
  for (let clean = 0; clean < k1 - k0; ) {
    const higher = clearColumn(c, k, bed.columns[base + k], y, hair);
    if (higher > top) {
      last.column = base + k;
      return Infinity;
    }
    clean = higher > y ? 1 : clean + 1;
    y = higher;
    k = k + 1 < k1 ? k + 1 : k0;
  }
  return y;
}

/** The next raster place where no column of the shape is taller than the free cloth there; `at` itself if it is one. */
function skipFull(bed: Bed, c: Columns, at: number): number {
  const n = c.start.length - 1;
  const hair = 1e-9 * bed.width;
  let place = at;
  for (let k = Math.min(n, bed.columns.length - place - c.first) - 1; k >= 0 && place + c.first + k >= 0; k--) {
    const free = bed.free[place + c.first + k] + hair;
    if (c.tall[k] <= free) continue;
    // Move on until a lower column of the shape stands in this place, then look at all columns again.
    const column = place + c.first + k;
    let lower = k - 1;
    while (lower >= 0 && c.tall[lower] > free) lower--;
    place = column - c.first - lower;
    k = Math.min(n, bed.columns.length - place - c.first);
  }
  return place;
}

/** The raster place of least x, then least y, or null where the roll has none left. */
export function findPlace(bed: Bed, shape: NestShape, store: ColumnStore): { x: number; y: number } | null {
  const top = bed.width - shape.height;
  if (top < -1e-9) return null;
  const columns = columnsOf(bed, shape, store);
  const begin = bed.tried.get(shape.key) ?? Math.ceil(bed.start / bed.dx - 1e-9);
  const last = { column: -1 };
  const end = bed.length - shape.length;
  for (let at = skipFull(bed, columns, begin); ; at = skipFull(bed, columns, at + 1)) {
    // The last place of a roll may lie between two columns, and a slide of less than a column may bring a shape in.
    if (at * bed.dx > end + 2 * bed.dx) break;
    const y = leastY(bed, columns, at, Math.max(0, top), last);
    if (y <= Math.max(0, top)) {
      bed.tried.set(shape.key, at);
      return { x: Math.max(bed.start, at * bed.dx), y };
    }
  }
  return null;
}

/** How far a shape may slide along an axis before it meets the start, the edge or what lies there. */
function roomTo(bed: Bed, laid: LaidShape, at: PlacedRing, axis: 0 | 1): number {
  let room = axis === 0 ? at.x - bed.start : at.y;
  for (const list of [bed.laid, bed.flawShapes])
    for (const other of list) {
      if (room <= 0) return 0;
      if (other !== laid) room = slideRoom(at, other, axis, bed.gap, room);
    }
  return Math.max(0, room);
}

function snapTo(step: number, v: number): number {
  if (step === 0) return v;
  const near = Math.round(v / step) * step;
  return Math.abs(v - near) < 1e-6 * step ? near : v;
}

/** Slides a shape left and down by turns until it rests against what lies there. */
export function settle(bed: Bed, laid: LaidShape, rounds: number): { x: number; y: number } {
  const at = { shape: laid.shape, x: laid.x, y: laid.y };
  for (let round = 0; round < rounds; round++) {
    const left = roomTo(bed, laid, at, 0);
    at.x -= left;
    const down = roomTo(bed, laid, at, 1);
    at.y -= down;
    if (left + down < 1e-4 * bed.dx) break;
  }
  return { x: snapTo(bed.snap, at.x), y: snapTo(bed.snap, at.y) };
}
