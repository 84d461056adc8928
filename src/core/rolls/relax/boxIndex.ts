// Which boxes on a strip meet a given one: sets of bits by column and row, so that a look-up costs a few words for every 32
// boxes and the boxes come in the order of their numbers. Does not: test exactly; a few come that lie a cell apart.
// Source: own (prefix sets of ends by cells of even width).

/** Cells each way, from one a box. */
const CELLS_LEAST = 64;
const CELLS_MOST = 256;

/** Boxes by the cells their ends lie in. */
export interface BoxIndex {
  cells: number;
  /** Words of 32 bits that hold one bit a box. */
  words: number;
  x0: number;
  perX: number;
  perY: number;
  /** By column: the boxes that begin there or before, that end there or after; by row likewise. */
  starts: Int32Array<ArrayBuffer>;
  ends: Int32Array<ArrayBuffer>;
  floors: Int32Array<ArrayBuffer>;
  roofs: Int32Array<ArrayBuffer>;
  /** Cells of each box now: first and last column, first and last row. */
  at: Int32Array<ArrayBuffer>;
}

/** An index without boxes. @param n boxes to come @param size where the strip begins and ends, and its width */
export function openIndex(n: number, size: { start: number; end: number; width: number }): BoxIndex {
  const cells = Math.max(CELLS_LEAST, Math.min(CELLS_MOST, n));
  const words = Math.ceil(n / 32);
  const sets = () => new Int32Array(cells * words);
  const at = new Int32Array(4 * n);
  for (let i = 0; i < n; i++) at.set([cells, -1, cells, -1], 4 * i);
  return {
    cells,
    words,
    x0: size.start,
    perX: cells / Math.max(Number.MIN_VALUE, size.end - size.start),
    perY: cells / size.width,
    starts: sets(),
    ends: sets(),
    floors: sets(),
    roofs: sets(),
    at,
  };
}

/** The column x lies in: the first also holds all before it, the last all after it. */
export function columnOf(index: BoxIndex, x: number): number {
  const c = (x - index.x0) * index.perX;
  return c > 0 ? (c < index.cells ? c | 0 : index.cells - 1) : 0;
}

/** The row y lies in, likewise. */
export function rowOf(index: BoxIndex, y: number): number {
  const c = y * index.perY;
  return c > 0 ? (c < index.cells ? c | 0 : index.cells - 1) : 0;
}

/** Bit `bit` of word w of the sets of cells from ≤ c < to. */
function flipBits(sets: Int32Array, words: number, w: number, bit: number, from: number, to: number): void {
  for (let c = from; c < to; c++) sets[c * words + w] ^= bit;
}

/** Puts box i where its ends are, or moves it there. */
export function indexBox(index: BoxIndex, i: number, x: number, x1: number, y: number, y1: number): void {
  const { words, at } = index;
  const w = i >> 5;
  const bit = 1 << (i & 31);
  const move = (k: number, sets: Int32Array, cell: number, more: number) => {
    const old = at[4 * i + k];
    if (old === cell) return;
    at[4 * i + k] = cell;
    flipBits(sets, words, w, bit, Math.min(old, cell) + more, Math.max(old, cell) + more);
  };
  // A start in cell c is in the sets from c on, an end in those up to c.
  move(0, index.starts, columnOf(index, x), 0);
  move(1, index.ends, columnOf(index, x1), 1);
  move(2, index.floors, rowOf(index, y), 0);
  move(3, index.roofs, rowOf(index, y1), 1);
}
