// A first sleeve (row of triangles) between two places: best-first search over triangle sides, guided by the straight distance.
// The distance to a side is not taken along a graph: every state keeps the source's image in the unfolded plane and the two
// corners that bound its view (a funnel of one step), so lengths are those of near-straight lines. The sleeve is a start,
// not the answer: see sleeve.ts.
// Source: own, from A* (Hart, Nilsson & Raphael 1968) and one-window propagation after Chen & Han 1990.
import { type Adjacency, nextHalfedge, previousHalfedge } from "./adjacency.ts";
import { pointAt } from "./measures.ts";
import type { Surface, SurfacePoint, Vec3 } from "./surface.ts";
import { findTrianglesAt } from "./surfacePoint.ts";
import type { Unfolding } from "./unfolding.ts";

/** Numbers kept for a state: portal left, right; source image; left and right bound of its view; length before the image; length to the side's middle. */
const STRIDE = 12;

/**
 * Weight of the straight distance ahead where any way will do: a somewhat eager search sees fewer sides. Where a certain side of a
 * hole is asked for the weight is 1, since nothing corrects the way afterwards.
 */
const EAGER = 1.06;

/** Reusable scratch of the search, owned by the geodesic solver. */
export interface SearchScratch {
  /** Best length per side and mark, valid where stamp equals run. @shape 2*3*nT */
  best: Float64Array<ArrayBuffer>;
  stamp: Uint32Array<ArrayBuffer>;
  run: number;
  /** States: @shape data STRIDE*capacity, side and parent capacity */
  data: Float64Array<ArrayBuffer>;
  side: Int32Array<ArrayBuffer>;
  parent: Int32Array<ArrayBuffer>;
  mark: Uint8Array<ArrayBuffer>;
  count: number;
  /** Binary heap of states by key. */
  heap: Int32Array<ArrayBuffer>;
  key: Float64Array<ArrayBuffer>;
  heapSize: number;
}

export function createSearchScratch(nT: number): SearchScratch {
  const capacity = 1024;
  return {
    best: new Float64Array(6 * nT),
    stamp: new Uint32Array(6 * nT),
    run: 0,
    data: new Float64Array(STRIDE * capacity),
    side: new Int32Array(capacity),
    parent: new Int32Array(capacity),
    mark: new Uint8Array(capacity),
    count: 0,
    heap: new Int32Array(capacity),
    key: new Float64Array(capacity),
    heapSize: 0,
  };
}

function growInPlace(s: SearchScratch): void {
  const n = 2 * s.side.length;
  const copy = <T extends Float64Array | Int32Array | Uint8Array>(from: T, to: T): T => {
    to.set(from as never);
    return to;
  };
  s.data = copy(s.data, new Float64Array(STRIDE * n));
  s.side = copy(s.side, new Int32Array(n));
  s.parent = copy(s.parent, new Int32Array(n));
  s.mark = copy(s.mark, new Uint8Array(n));
  s.heap = copy(s.heap, new Int32Array(n));
  s.key = copy(s.key, new Float64Array(n));
}

function pushInPlace(s: SearchScratch, state: number, key: number): void {
  const { heap, key: keys } = s;
  let i = s.heapSize++;
  while (i > 0) {
    const p = (i - 1) >> 1;
    if (keys[p] <= key) break;
    heap[i] = heap[p];
    keys[i] = keys[p];
    i = p;
  }
  heap[i] = state;
  keys[i] = key;
}

function popInPlace(s: SearchScratch): number {
  const { heap, key: keys } = s;
  const top = heap[0];
  const n = --s.heapSize;
  const state = heap[n];
  const key = keys[n];
  let i = 0;
  for (;;) {
    let c = 2 * i + 1;
    if (c >= n) break;
    if (c + 1 < n && keys[c + 1] < keys[c]) c++;
    if (keys[c] >= key) break;
    heap[i] = heap[c];
    keys[i] = keys[c];
    i = c;
  }
  heap[i] = state;
  keys[i] = key;
  return top;
}

/** What the search runs on. */
export interface SearchField {
  surface: Surface;
  adjacency: Adjacency;
  unfolding: Unfolding;
  /** Marks of the hole cuts on half-edges, or null. */
  crossing: Uint32Array<ArrayBuffer> | null;
  scratch: SearchScratch;
}

/** What is searched for: `hole` -1 takes any way; else the way must cross that hole's cut `parity` times (mod 2), no longer than `limit`. */
export interface SearchAim {
  from: SurfacePoint;
  to: SurfacePoint;
  hole: number;
  parity: number;
  limit: number;
}

/** A row of triangles: the first, then the half-edges crossed one after the other. */
export interface Sleeve {
  first: number;
  sides: number[];
  /** Marks of all cuts crossed (xor), ends counted from the first triangle round each. */
  marks: number;
}

/** Length from a state's source image to point (x, y) beyond its portal, going round the bounds of the view. */
function reachLength(d: Float64Array, o: number, x: number, y: number): number {
  const ax = d[o + 4];
  const ay = d[o + 5];
  const lx = d[o + 6] - ax;
  const ly = d[o + 7] - ay;
  const rx = d[o + 8] - ax;
  const ry = d[o + 9] - ay;
  const mx = x - ax;
  const my = y - ay;
  if (lx * my - ly * mx > 0)
    return d[o + 10] + Math.sqrt(lx * lx + ly * ly) + Math.sqrt((mx - lx) ** 2 + (my - ly) ** 2);
  if (rx * my - ry * mx < 0)
    return d[o + 10] + Math.sqrt(rx * rx + ry * ry) + Math.sqrt((mx - rx) ** 2 + (my - ry) ** 2);
  return d[o + 10] + Math.sqrt(mx * mx + my * my);
}

/** Narrows the view of state o by its portal, whose left (side 6) or right (side 8) end is new. */
function narrowViewInPlace(d: Float64Array, o: number, left: boolean): void {
  const near = left ? o + 6 : o + 8;
  const far = left ? o + 8 : o + 6;
  const sign = left ? 1 : -1;
  const px = d[left ? o : o + 2];
  const py = d[left ? o + 1 : o + 3];
  const ax = d[o + 4];
  const ay = d[o + 5];
  const turn = (k: number) => sign * ((d[k] - ax) * (py - ay) - (d[k + 1] - ay) * (px - ax));
  const isApex = d[near] === ax && d[near + 1] === ay;
  if (!isApex && turn(near) >= 0) return;
  if (turn(far) < 0) {
    // The new end lies beyond the other bound: the line bends there, and sees the whole portal from it.
    d[o + 10] += Math.sqrt((d[far] - ax) ** 2 + (d[far + 1] - ay) ** 2);
    d[o + 4] = d[far];
    d[o + 5] = d[far + 1];
    d[o + 6] = d[o];
    d[o + 7] = d[o + 1];
    d[o + 8] = d[o + 2];
    d[o + 9] = d[o + 3];
    return;
  }
  d[near] = px;
  d[near + 1] = py;
}

/** Middle of a side in space, as the guide of the search sees it. */
function guideLength(surface: Surface, h: number, to: Vec3): number {
  const { xyz: x, tri } = surface;
  const a = 3 * tri[h];
  const b = 3 * tri[nextHalfedge(h)];
  const dx = (x[a] + x[b]) / 2 - to[0];
  const dy = (x[a + 1] + x[b + 1]) / 2 - to[1];
  const dz = (x[a + 2] + x[b + 2]) / 2 - to[2];
  return Math.sqrt(dx * dx + dy * dy + dz * dz);
}

/** Enters a filled state (the last of the pool) in the heap, unless its side was reached on a shorter way. */
function offerStateInPlace(field: SearchField, aim: SearchAim, goal: Vec3): void {
  const s = field.scratch;
  const n = s.count;
  const o = STRIDE * n;
  const h = s.side[n];
  const g = reachLength(s.data, o, (s.data[o] + s.data[o + 2]) / 2, (s.data[o + 1] + s.data[o + 3]) / 2);
  const other = field.adjacency.twin[h];
  const slot = 2 * Math.min(h, other) + s.mark[n];
  if (s.stamp[slot] === s.run && s.best[slot] <= g) return;
  const guide = guideLength(field.surface, h, goal);
  if (g + guide > aim.limit) return;
  s.stamp[slot] = s.run;
  s.best[slot] = g;
  s.data[o + 11] = g;
  pushInPlace(s, n, g + (aim.hole < 0 ? EAGER : 1) * guide);
  s.count++;
}

/** Places p in a triangle whose corners' plane positions are given by vertex. */
function placePoint(p: SurfacePoint, tri: ArrayLike<number>, t: number, xy: readonly number[]): [number, number] {
  const corner = (v: number) => (tri[3 * t] === v ? 0 : tri[3 * t + 1] === v ? 2 : 4);
  const a = corner(p.a);
  const b = corner(p.b);
  return [xy[a] + p.t * (xy[b] - xy[a]), xy[a + 1] + p.t * (xy[b + 1] - xy[a + 1])];
}

/** Starts states over the far sides of one triangle that holds the source. */
function seedTriangleInPlace(field: SearchField, aim: SearchAim, t: number, mark: number, goal: Vec3): void {
  const { surface, adjacency, unfolding, crossing, scratch: s } = field;
  const { tri } = surface;
  const h0 = 3 * t;
  const xy = [0, 0, unfolding.length[h0], 0, unfolding.apexX[h0], unfolding.apexY[h0]];
  const source = placePoint(aim.from, tri, t, xy);
  for (let k = 0; k < 3; k++) {
    const h = h0 + k;
    const a = tri[h];
    const b = tri[nextHalfedge(h)];
    const holds = (v: number) => v === a || v === b;
    if (adjacency.twin[h] < 0 || (holds(aim.from.a) && holds(aim.from.b))) continue;
    if (s.count + 4 > s.side.length) growInPlace(s);
    const n = s.count;
    const o = STRIDE * n;
    const kb = (k + 1) % 3;
    const d = s.data;
    d[o] = xy[2 * kb];
    d[o + 1] = xy[2 * kb + 1];
    d[o + 2] = xy[2 * k];
    d[o + 3] = xy[2 * k + 1];
    d[o + 4] = source[0];
    d[o + 5] = source[1];
    for (let i = 0; i < 4; i++) d[o + 6 + i] = d[o + i];
    d[o + 10] = 0;
    s.side[n] = h;
    s.parent[n] = -1;
    s.mark[n] = aim.hole < 0 || !crossing ? 0 : mark ^ ((crossing[h] >> aim.hole) & 1);
    offerStateInPlace(field, aim, goal);
  }
}

/** Lays the triangle behind a state's portal down and offers its two other sides. */
function expandStateInPlace(field: SearchField, aim: SearchAim, n: number, goal: Vec3): void {
  const { adjacency, unfolding, crossing, scratch: s } = field;
  const g = adjacency.twin[s.side[n]];
  if (s.count + 4 > s.side.length) growInPlace(s);
  const d = s.data;
  const from = STRIDE * n;
  const ux = (d[from + 2] - d[from]) / unfolding.length[g];
  const uy = (d[from + 3] - d[from + 1]) / unfolding.length[g];
  const px = unfolding.apexX[g];
  const py = unfolding.apexY[g];
  const cx = d[from] + px * ux - py * uy;
  const cy = d[from + 1] + px * uy + py * ux;
  for (let k = 0; k < 2; k++) {
    const left = k === 0;
    const h = left ? nextHalfedge(g) : previousHalfedge(g);
    if (adjacency.twin[h] < 0) continue;
    const m = s.count;
    const o = STRIDE * m;
    for (let i = 0; i < STRIDE - 1; i++) d[o + i] = d[from + i];
    d[left ? o : o + 2] = cx;
    d[left ? o + 1 : o + 3] = cy;
    narrowViewInPlace(d, o, left);
    s.side[m] = h;
    s.parent[m] = n;
    s.mark[m] = aim.hole < 0 || !crossing ? 0 : s.mark[n] ^ ((crossing[h] >> aim.hole) & 1);
    offerStateInPlace(field, aim, goal);
  }
}

/** Length to the goal in the triangle behind state n, as seen from its source image. */
function measureToGoal(field: SearchField, n: number, to: SurfacePoint): number {
  const { adjacency, unfolding, surface, scratch } = field;
  const d = scratch.data;
  const o = STRIDE * n;
  const g = adjacency.twin[scratch.side[n]];
  const l = unfolding.length[g];
  const ux = (d[o + 2] - d[o]) / l;
  const uy = (d[o + 3] - d[o + 1]) / l;
  const corner = (v: number) =>
    v === surface.tri[g]
      ? [0, 0]
      : v === surface.tri[nextHalfedge(g)]
        ? [l, 0]
        : [unfolding.apexX[g], unfolding.apexY[g]];
  const [a, b] = [corner(to.a), corner(to.b)];
  const px = a[0] + to.t * (b[0] - a[0]);
  const py = a[1] + to.t * (b[1] - a[1]);
  return reachLength(d, o, d[o] + px * ux - py * uy, d[o + 1] + px * uy + py * ux);
}

/**
 * A sleeve from one place to another that is near the shortest of its kind, or null where none is within the limit.
 * Both places in normal form, not in one triangle.
 */
export function findSleeve(field: SearchField, aim: SearchAim): Sleeve | null {
  const { surface, adjacency, crossing, scratch: s } = field;
  const goal = pointAt(surface, aim.to);
  const starts = findTrianglesAt(surface, adjacency, aim.from, crossing);
  const ends = findTrianglesAt(surface, adjacency, aim.to, crossing);
  const bit = (marks: number) => (aim.hole < 0 ? 0 : (marks >> aim.hole) & 1);
  s.run++;
  s.count = 0;
  s.heapSize = 0;
  for (let i = 0; i < starts.triangles.length; i++)
    seedTriangleInPlace(field, aim, starts.triangles[i], bit(starts.marks[i]), goal);
  let found = -1;
  let length = Number.POSITIVE_INFINITY;
  while (s.heapSize > 0 && s.key[0] < length) {
    const n = popInPlace(s);
    const h = s.side[n];
    const o = STRIDE * n;
    const g = adjacency.twin[h];
    if (s.best[2 * Math.min(h, g) + s.mark[n]] < s.data[o + 11]) continue;
    expandStateInPlace(field, aim, n, goal);
    const t = Math.floor(g / 3);
    const e = ends.triangles.indexOf(t);
    if (e < 0 || (aim.hole >= 0 && (s.mark[n] ^ bit(ends.marks[e])) !== aim.parity)) continue;
    const l = measureToGoal(field, n, aim.to);
    if (l >= length) continue;
    length = l;
    found = n;
  }
  if (found < 0) return null;
  const sides: number[] = [];
  for (let n = found; n >= 0; n = s.parent[n]) sides.push(s.side[n]);
  sides.reverse();
  const first = Math.floor(sides[0] / 3);
  const last = Math.floor(adjacency.twin[sides[sides.length - 1]] / 3);
  let marks = starts.marks[starts.triangles.indexOf(first)] ^ ends.marks[ends.triangles.indexOf(last)];
  if (crossing) for (const h of sides) marks ^= crossing[h];
  return { first, sides, marks };
}
