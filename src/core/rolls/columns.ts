// Which heights of each narrow column across the roll a shape takes up, never too little. A raster along x only; y is exact.
// Does not: place anything. Source: own (trapezoids between neighbouring points, the hull of each in its column).

/** Occupied intervals column by column: column first + k covers x from (first + k)·dx on, and owns start[k] … start[k+1]. */
export interface Columns {
  first: number;
  start: Uint32Array<ArrayBuffer>;
  lo: Float64Array<ArrayBuffer>;
  hi: Float64Array<ArrayBuffer>;
}

/**
 * Walks the slabs of a ring between neighbouring stops along x: its own corners and the ones given.
 * @shape visit gets, for each side that crosses the slab from xa to xb, its y at both ends; sides sorted upward
 */
export function walkSlabs(
  ring: Float64Array,
  x: number,
  stops: number[],
  visit: (xa: number, xb: number, sides: [number, number][]) => void,
): void {
  const edges: { x0: number; y0: number; x1: number; y1: number }[] = [];
  const all = [...stops];
  for (let i = 0, j = ring.length - 2; i < ring.length; j = i, i += 2) {
    const [p, q] = ring[i] < ring[j] ? [i, j] : [j, i];
    all.push(ring[i] + x);
    if (ring[p] < ring[q]) edges.push({ x0: ring[p] + x, y0: ring[p + 1], x1: ring[q] + x, y1: ring[q + 1] });
  }
  all.sort((a, b) => a - b);
  edges.sort((a, b) => a.x0 - b.x0);
  let next = 0;
  let active: typeof edges = [];
  for (let k = 0; k + 1 < all.length; k++) {
    const [xa, xb] = [all[k], all[k + 1]];
    if (!(xb > xa)) continue;
    active = active.filter((e) => e.x1 >= xb);
    while (next < edges.length && edges[next].x0 <= xa) {
      if (edges[next].x1 >= xb) active.push(edges[next]);
      next++;
    }
    const sides = active.map((e): [number, number] => {
      const slope = (e.y1 - e.y0) / (e.x1 - e.x0);
      return [e.y0 + slope * (xa - e.x0), e.y0 + slope * (xb - e.x0)];
    });
    sides.sort((a, b) => a[0] + a[1] - b[0] - b[1]);
    visit(xa, xb, sides);
  }
}

/** Intervals of the inside of a ring, column by column. */
function addInside(
  ring: Float64Array,
  x: number,
  dx: number,
  add: (column: number, lo: number, hi: number) => void,
): void {
  let least = Infinity;
  let most = -Infinity;
  for (let i = 0; i < ring.length; i += 2) {
    least = Math.min(least, ring[i] + x);
    most = Math.max(most, ring[i] + x);
  }
  const stops: number[] = [];
  for (let c = Math.floor(least / dx) + 1; c * dx < most; c++) stops.push(c * dx);
  walkSlabs(ring, x, stops, (xa, xb, at) => {
    const column = Math.floor((xa + xb) / 2 / dx);
    for (let i = 0; i + 1 < at.length; i += 2)
      add(column, Math.min(at[i][0], at[i][1]), Math.max(at[i + 1][0], at[i + 1][1]));
  });
}

/** Intervals of a band of width 2·grow round a ring's line (square ends: a little too much at corners). */
function addBand(
  ring: Float64Array,
  x: number,
  dx: number,
  grow: number,
  add: (column: number, lo: number, hi: number) => void,
): void {
  for (let i = 0, j = ring.length - 2; i < ring.length; j = i, i += 2) {
    const flip = ring[i] < ring[j];
    const [p, q] = flip ? [i, j] : [j, i];
    const [ax, ay, bx, by] = [ring[p] + x, ring[p + 1], ring[q] + x, ring[q + 1]];
    const slope = bx > ax ? (by - ay) / (bx - ax) : 0;
    for (let c = Math.floor((ax - grow) / dx); c <= Math.floor((bx + grow) / dx); c++) {
      const from = Math.max(ax, c * dx - grow);
      const to = Math.min(bx, (c + 1) * dx + grow);
      const y0 = bx > ax ? ay + slope * (from - ax) : ay;
      const y1 = bx > ax ? ay + slope * (to - ax) : by;
      add(c, Math.min(y0, y1) - grow, Math.max(y0, y1) + grow);
    }
  }
}

/**
 * The columns of a ring shifted by x, grown by a gap.
 * @shape ring 2*n, any simple ring
 */
export function buildColumns(ring: Float64Array, x: number, dx: number, grow: number): Columns {
  const lists = new Map<number, [number, number][]>();
  let first = Infinity;
  let last = -Infinity;
  const add = (column: number, lo: number, hi: number) => {
    const list = lists.get(column);
    if (list) list.push([lo, hi]);
    else lists.set(column, [[lo, hi]]);
    first = Math.min(first, column);
    last = Math.max(last, column);
  };
  addInside(ring, x, dx, add);
  if (grow > 0) addBand(ring, x, dx, grow, add);
  const count = Number.isFinite(first) ? last - first + 1 : 0;
  const start = new Uint32Array(count + 1);
  const lo: number[] = [];
  const hi: number[] = [];
  for (let k = 0; k < count; k++) {
    const list = (lists.get(first + k) ?? []).sort((a, b) => a[0] - b[0]);
    for (const [a, b] of list) {
      if (lo.length > start[k] && a <= hi[hi.length - 1]) hi[hi.length - 1] = Math.max(hi[hi.length - 1], b);
      else {
        lo.push(a);
        hi.push(b);
      }
    }
    start[k + 1] = lo.length;
  }
  return { first: count > 0 ? first : 0, start, lo: Float64Array.from(lo), hi: Float64Array.from(hi) };
}
