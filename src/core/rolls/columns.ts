// Which heights of each narrow column across the roll a shape takes up, never too little. A raster along x only; y is exact.
// Does not: place anything. Source: own (trapezoids between neighbouring points, the hull of each in its column).

/** Occupied intervals column by column: column first + k covers x from (first + k)·dx on, and owns start[k] … start[k+1]. */
export interface Columns {
  first: number;
  start: Uint32Array<ArrayBuffer>;
  lo: Float64Array<ArrayBuffer>;
  hi: Float64Array<ArrayBuffer>;
  /** Tallest interval of each column. */
  tall: Float64Array<ArrayBuffer>;
}

/** Sides of a ring that cross a slab, from below upward: y at its left and right end. Reused from slab to slab. */
export interface SlabSides {
  count: number;
  left: number[];
  right: number[];
}

/** Fills in the sides that cross the slab, sorted by their height in the middle; drops those that end before it. */
function crossInPlace(sides: SlabSides, active: Float64Array[], xa: number, xb: number): void {
  let kept = 0;
  sides.count = 0;
  for (const e of active) {
    if (e[2] < xb) continue;
    active[kept++] = e;
    const slope = (e[3] - e[1]) / (e[2] - e[0]);
    const ya = e[1] + slope * (xa - e[0]);
    const yb = e[1] + slope * (xb - e[0]);
    let i = sides.count++;
    for (; i > 0 && sides.left[i - 1] + sides.right[i - 1] > ya + yb; i--) {
      sides.left[i] = sides.left[i - 1];
      sides.right[i] = sides.right[i - 1];
    }
    sides.left[i] = ya;
    sides.right[i] = yb;
  }
  active.length = kept;
}

/**
 * Walks the slabs of a ring, shifted by x, between neighbouring stops: its own corners and the ones given.
 * @shape visit gets the slab's ends and the sides that cross it, valid during the call
 */
export function walkSlabs(
  ring: Float64Array,
  x: number,
  stops: number[],
  visit: (xa: number, xb: number, sides: SlabSides) => void,
): void {
  const n = ring.length / 2;
  const edges: Float64Array[] = [];
  const all = new Float64Array(n + stops.length);
  all.set(stops, n);
  for (let i = 0, j = ring.length - 2; i < ring.length; j = i, i += 2) {
    const p = ring[i] < ring[j] ? i : j;
    const q = p === i ? j : i;
    all[i >> 1] = ring[i] + x;
    if (ring[p] < ring[q]) edges.push(Float64Array.of(ring[p] + x, ring[p + 1], ring[q] + x, ring[q + 1]));
  }
  all.sort();
  edges.sort((a, b) => a[0] - b[0]);
  const sides: SlabSides = { count: 0, left: [], right: [] };
  const active: Float64Array[] = [];
  let next = 0;
  for (let k = 0; k + 1 < all.length; k++) {
    const xa = all[k];
    const xb = all[k + 1];
    if (!(xb > xa)) continue;
    while (next < edges.length && edges[next][0] <= xa) active.push(edges[next++]);
    crossInPlace(sides, active, xa, xb);
    visit(xa, xb, sides);
  }
}

/** Collects intervals by column, from the first column any can lie in. */
interface Gather {
  first: number;
  lists: number[][];
}

function addTo(gather: Gather, column: number, lo: number, hi: number): void {
  const k = column - gather.first;
  if (k >= 0 && k < gather.lists.length) gather.lists[k].push(lo, hi);
}

/** Intervals of the inside of a ring, column by column. */
function addInside(ring: Float64Array, x: number, dx: number, ends: [number, number], gather: Gather): void {
  const stops: number[] = [];
  for (let c = Math.floor(ends[0] / dx) + 1; c * dx < ends[1]; c++) stops.push(c * dx);
  walkSlabs(ring, x, stops, (xa, xb, sides) => {
    const column = Math.floor((xa + xb) / 2 / dx);
    const { left, right } = sides;
    for (let i = 0; i + 1 < sides.count; i += 2)
      addTo(gather, column, Math.min(left[i], right[i]), Math.max(left[i + 1], right[i + 1]));
  });
}

/** Intervals of a band of width 2·grow round a ring's line (square ends: a little too much at corners). */
function addBand(ring: Float64Array, x: number, dx: number, grow: number, gather: Gather): void {
  for (let i = 0, j = ring.length - 2; i < ring.length; j = i, i += 2) {
    const [p, q] = ring[i] < ring[j] ? [i, j] : [j, i];
    const [ax, ay, bx, by] = [ring[p] + x, ring[p + 1], ring[q] + x, ring[q + 1]];
    const slope = bx > ax ? (by - ay) / (bx - ax) : 0;
    for (let c = Math.floor((ax - grow) / dx); c <= Math.floor((bx + grow) / dx); c++) {
      const from = Math.max(ax, c * dx - grow);
      const to = Math.min(bx, (c + 1) * dx + grow);
      const y0 = bx > ax ? ay + slope * (from - ax) : ay;
      const y1 = bx > ax ? ay + slope * (to - ax) : by;
      addTo(gather, c, Math.min(y0, y1) - grow, Math.max(y0, y1) + grow);
    }
  }
}

/** Overlapping intervals of a column run together, lower ends rising. */
function mergeInto(list: number[], lo: number[], hi: number[]): void {
  if (list.length === 2) {
    lo.push(list[0]);
    hi.push(list[1]);
    return;
  }
  const order = Array.from({ length: list.length / 2 }, (_, i) => 2 * i).sort((a, b) => list[a] - list[b]);
  const begin = lo.length;
  for (const i of order) {
    if (lo.length > begin && list[i] <= hi[hi.length - 1]) hi[hi.length - 1] = Math.max(hi[hi.length - 1], list[i + 1]);
    else {
      lo.push(list[i]);
      hi.push(list[i + 1]);
    }
  }
}

/**
 * The columns of a ring shifted by x, grown by a gap.
 * @shape ring 2*n, any simple ring
 */
export function buildColumns(ring: Float64Array, x: number, dx: number, grow: number): Columns {
  const ends: [number, number] = [Infinity, -Infinity];
  for (let i = 0; i < ring.length; i += 2) {
    ends[0] = Math.min(ends[0], ring[i] + x);
    ends[1] = Math.max(ends[1], ring[i] + x);
  }
  const first = Math.floor((ends[0] - grow) / dx);
  const count = Math.floor((ends[1] + grow) / dx) - first + 1;
  const gather: Gather = { first, lists: Array.from({ length: count }, () => []) };
  addInside(ring, x, dx, ends, gather);
  if (grow > 0) addBand(ring, x, dx, grow, gather);
  const start = new Uint32Array(count + 1);
  const tall = new Float64Array(count);
  const lo: number[] = [];
  const hi: number[] = [];
  for (let k = 0; k < count; k++) {
    mergeInto(gather.lists[k], lo, hi);
    start[k + 1] = lo.length;
    for (let i = start[k]; i < lo.length; i++) tall[k] = Math.max(tall[k], hi[i] - lo[i]);
  }
  return { first, start, lo: Float64Array.from(lo), hi: Float64Array.from(hi), tall };
}
