// A sleeve (row of triangles) laid down in the plane, and the shortest line inside it.
// Source: funnel of Lee & Preparata, Networks 14, 1984; own: nodes with parents in a double-ended row, so that one pass does.
import { type Adjacency, nextHalfedge, previousHalfedge } from "./adjacency.ts";
import type { Sleeve } from "./sleeveSearch.ts";
import type { Surface, SurfacePoint } from "./surface.ts";
import type { Unfolding } from "./unfolding.ts";

/** A line in the plane of an unfolded sleeve. Node 0 is the start, the last node the end, between them the corners it may bend at. */
export interface SleeveLine {
  x: number[];
  y: number[];
  vertex: number[];
  /** First crossed side that ends in the corner. */
  from: number[];
  /** 1 corner on the left of the line, -1 on the right. */
  hand: number[];
  length: number;
}

/** Scratch for laying sleeves down, owned by the solver; valid until the next sleeve. */
export interface SleeveScratch {
  /** Ends of the crossed sides in the plane. */
  lx: Float64Array<ArrayBuffer>;
  ly: Float64Array<ArrayBuffer>;
  rx: Float64Array<ArrayBuffer>;
  ry: Float64Array<ArrayBuffer>;
  start: [number, number];
  end: [number, number];
  /** Nodes of the funnel: start, ends of sides where they first occur, end. */
  x: Float64Array<ArrayBuffer>;
  y: Float64Array<ArrayBuffer>;
  vertex: Int32Array<ArrayBuffer>;
  at: Int32Array<ArrayBuffer>;
  hand: Int8Array<ArrayBuffer>;
  parent: Int32Array<ArrayBuffer>;
  row: Int32Array<ArrayBuffer>;
}

/** Scratch for sleeves of up to `sides` crossed sides; it is made larger when needed. */
export function createSleeveScratch(sides = 256): SleeveScratch {
  const nodes = 2 * sides + 4;
  return {
    lx: new Float64Array(sides),
    ly: new Float64Array(sides),
    rx: new Float64Array(sides),
    ry: new Float64Array(sides),
    start: [0, 0],
    end: [0, 0],
    x: new Float64Array(nodes),
    y: new Float64Array(nodes),
    vertex: new Int32Array(nodes),
    at: new Int32Array(nodes),
    hand: new Int8Array(nodes),
    parent: new Int32Array(nodes),
    row: new Int32Array(2 * sides + 5),
  };
}

/** What laying down needs of the surface. */
export interface FunnelField {
  surface: Surface;
  adjacency: Adjacency;
  unfolding: Unfolding;
  sleeveScratch: SleeveScratch;
}

/** Plane position of a place in a triangle whose corners (vertex, x, y) are given. */
function placeIn(corners: readonly (readonly [number, number, number])[], p: SurfacePoint): [number, number] {
  const a = corners.find((c) => c[0] === p.a) ?? corners[0];
  const b = corners.find((c) => c[0] === p.b) ?? corners[0];
  return [a[1] + p.t * (b[1] - a[1]), a[2] + p.t * (b[2] - a[2])];
}

/** Lays the sleeve down in the plane, its first triangle's first side along x; writes the field's scratch. */
export function layDownInPlace(field: FunnelField, from: SurfacePoint, to: SurfacePoint, sleeve: Sleeve): void {
  const { tri } = field.surface;
  const { twin } = field.adjacency;
  const { length, apexX, apexY } = field.unfolding;
  const { first, sides } = sleeve;
  const n = sides.length;
  if (n > field.sleeveScratch.lx.length) field.sleeveScratch = createSleeveScratch(2 * n);
  const scratch = field.sleeveScratch;
  const { lx, ly, rx, ry } = scratch;
  const h0 = 3 * first;
  const corners: [number, number, number][] = [
    [tri[h0], 0, 0],
    [tri[h0 + 1], length[h0], 0],
    [tri[h0 + 2], apexX[h0], apexY[h0]],
  ];
  scratch.start = placeIn(corners, from);
  if (n === 0) {
    scratch.end = placeIn(corners, to);
    return;
  }
  const right = corners[sides[0] - h0];
  const left = corners[nextHalfedge(sides[0]) - h0];
  lx[0] = left[1];
  ly[0] = left[2];
  rx[0] = right[1];
  ry[0] = right[2];
  for (let i = 0; ; i++) {
    const g = twin[sides[i]];
    const ux = (rx[i] - lx[i]) / length[g];
    const uy = (ry[i] - ly[i]) / length[g];
    const cx = lx[i] + apexX[g] * ux - apexY[g] * uy;
    const cy = ly[i] + apexX[g] * uy + apexY[g] * ux;
    if (i + 1 === n) {
      scratch.end = placeIn(
        [
          [tri[g], lx[i], ly[i]],
          [tri[nextHalfedge(g)], rx[i], ry[i]],
          [tri[previousHalfedge(g)], cx, cy],
        ],
        to,
      );
      return;
    }
    const leftNew = sides[i + 1] === nextHalfedge(g);
    lx[i + 1] = leftNew ? cx : lx[i];
    ly[i + 1] = leftNew ? cy : ly[i];
    rx[i + 1] = leftNew ? rx[i] : cx;
    ry[i + 1] = leftNew ? ry[i] : cy;
  }
}

/** Twice the signed area of nodes i, j, k. */
function crossNodes(x: Float64Array, y: Float64Array, i: number, j: number, k: number): number {
  return (x[j] - x[i]) * (y[k] - y[i]) - (y[j] - y[i]) * (x[k] - x[i]);
}

/** Shortest line from start to end inside the laid-down sleeve, by a funnel kept as a double-ended row of nodes. */
export function runFunnel(field: FunnelField, sleeve: Sleeve): SleeveLine {
  const { tri } = field.surface;
  const { sides } = sleeve;
  const { lx, ly, rx, ry, start, end, x, y, vertex, at, hand, parent, row } = field.sleeveScratch;
  const n = sides.length;
  let count = 0;
  let apex = n + 2;
  let leftEnd = apex;
  let rightEnd = apex;
  const addNode = (px: number, py: number, v: number, i: number, side: number): number => {
    x[count] = px;
    y[count] = py;
    vertex[count] = v;
    at[count] = i;
    hand[count] = side;
    return count++;
  };
  row[apex] = addNode(start[0], start[1], -1, 0, 0);
  parent[0] = -1;
  const addRight = (k: number) => {
    while (rightEnd > apex && crossNodes(x, y, row[rightEnd - 1], row[rightEnd], k) >= 0) rightEnd--;
    if (rightEnd === apex) {
      while (apex > leftEnd && crossNodes(x, y, row[apex], row[apex - 1], k) >= 0) apex--;
      rightEnd = apex;
    }
    parent[k] = row[rightEnd];
    row[++rightEnd] = k;
  };
  const addLeft = (k: number) => {
    while (leftEnd < apex && crossNodes(x, y, row[leftEnd + 1], row[leftEnd], k) <= 0) leftEnd++;
    if (leftEnd === apex) {
      while (apex < rightEnd && crossNodes(x, y, row[apex], row[apex + 1], k) <= 0) apex++;
      leftEnd = apex;
    }
    parent[k] = row[leftEnd];
    row[--leftEnd] = k;
  };
  let left = -1;
  let right = -1;
  for (let i = 0; i < n; i++) {
    const r = tri[sides[i]];
    const l = tri[nextHalfedge(sides[i])];
    if (l !== left) addLeft(addNode(lx[i], ly[i], l, i, 1));
    if (r !== right) addRight(addNode(rx[i], ry[i], r, i, -1));
    left = l;
    right = r;
  }
  const last = addNode(end[0], end[1], -1, n, 0);
  addRight(last);
  const line: SleeveLine = { x: [], y: [], vertex: [], from: [], hand: [], length: 0 };
  for (let k = last; k >= 0; k = parent[k]) {
    line.x.push(x[k]);
    line.y.push(y[k]);
    line.vertex.push(vertex[k]);
    line.from.push(at[k]);
    line.hand.push(hand[k]);
  }
  for (const list of [line.x, line.y, line.vertex, line.from, line.hand]) list.reverse();
  for (let i = 1; i < line.x.length; i++)
    line.length += Math.sqrt((line.x[i] - line.x[i - 1]) ** 2 + (line.y[i] - line.y[i - 1]) ** 2);
  return line;
}
