// The shortest line in a sleeve (row of triangles laid in the plane), and the flipping of the sleeve to the other side of
// every inner vertex where that line bends though it could be shorter there; repeated until no bend can be taken out.
// Every flip keeps the old line inside the new sleeve, so the length only falls, and the way round the holes stays as it was.
// Source: funnel of Lee & Preparata 1984; flipping after Xin & Wang, IEEE Trans. Vis. Comput. Graph. 13(1), 2007.
import { PlanError } from "../problem.ts";
import type { Adjacency } from "./adjacency.ts";
import { nextHalfedge, previousHalfedge } from "./adjacency.ts";
import type { Sleeve } from "./sleeveSearch.ts";
import type { Surface, SurfacePoint } from "./surface.ts";
import { isVertexPoint, namePoint, normalizePoint, vertexPoint } from "./surfacePoint.ts";
import { measureCornerAngle, type Unfolding } from "./unfolding.ts";

/** A bend below this (rad) is rounding: it costs its square over eight in length. */
const LEAST_TURN = 1e-9;

/** A crossing within this share of a side's end is the vertex there. */
const VERTEX_SHARE = 1e-8;

/** What shortening needs to know of the surface. */
export interface SleeveField {
  surface: Surface;
  adjacency: Adjacency;
  unfolding: Unfolding;
  /** Sum of corner angles, filled when first asked for; -1 before. @shape nV */
  angle: Float64Array<ArrayBuffer>;
  /** 1 on the boundary. @shape nV */
  onBoundary: Uint8Array<ArrayBuffer>;
  sleeveScratch: SleeveScratch;
}

/** A line in the plane of an unfolded sleeve. Node 0 is the start, the last node the end, between them the corners it may bend at. */
interface SleeveLine {
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

function holdsPoint(surface: Surface, t: number, p: SurfacePoint): boolean {
  const { tri } = surface;
  const holds = (v: number) => tri[3 * t] === v || tri[3 * t + 1] === v || tri[3 * t + 2] === v;
  return holds(p.a) && holds(p.b);
}

/** Drops turning back, and triangles at both ends that the line need not enter. */
function trimSleeve(
  field: SleeveField,
  from: SurfacePoint,
  to: SurfacePoint,
  first: number,
  sides: readonly number[],
): Sleeve {
  const { twin } = field.adjacency;
  const kept: number[] = [];
  for (const h of sides) {
    if (kept.length > 0 && twin[kept[kept.length - 1]] === h) kept.pop();
    else kept.push(h);
  }
  const behind = (i: number) => Math.floor(twin[kept[i]] / 3);
  let start = 0;
  while (start < kept.length && holdsPoint(field.surface, behind(start), from)) start++;
  let end = kept.length;
  while (end > start && holdsPoint(field.surface, Math.floor(kept[end - 1] / 3), to)) end--;
  return { first: start > 0 ? behind(start - 1) : first, sides: kept.slice(start, end), marks: 0 };
}

/** Plane position of a place in a triangle whose corners (vertex, x, y) are given. */
function placeIn(corners: readonly (readonly [number, number, number])[], p: SurfacePoint): [number, number] {
  const a = corners.find((c) => c[0] === p.a) ?? corners[0];
  const b = corners.find((c) => c[0] === p.b) ?? corners[0];
  return [a[1] + p.t * (b[1] - a[1]), a[2] + p.t * (b[2] - a[2])];
}

/** Lays the sleeve down in the plane, its first triangle's first side along x; writes the field's scratch. */
function layDownInPlace(field: SleeveField, from: SurfacePoint, to: SurfacePoint, sleeve: Sleeve): void {
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
function runFunnel(field: SleeveField, sleeve: Sleeve): SleeveLine {
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

/** Sum of the corner angles round vertex v, rad. */
export function measureAngle(field: SleeveField, v: number): number {
  if (field.angle[v] < 0) {
    const { fan, fanStart } = field.adjacency;
    let sum = 0;
    for (let i = fanStart[v]; i < fanStart[v + 1]; i++) sum += measureCornerAngle(field.unfolding, fan[i]);
    field.angle[v] = sum;
  }
  return field.angle[v];
}

/** Angle of the bend at node k, towards its corner's side, rad; positive where the line goes round the corner. */
function measureTurn(line: SleeveLine, k: number): number {
  const ux = line.x[k] - line.x[k - 1];
  const uy = line.y[k] - line.y[k - 1];
  const wx = line.x[k + 1] - line.x[k];
  const wy = line.y[k + 1] - line.y[k];
  return line.hand[k] * Math.atan2(ux * wy - uy * wx, ux * wx + uy * wy);
}

/**
 * Sides to cross so that the sleeve passes the corner of node k on its other side: for sides i…j (all ending in that corner)
 * the sides met when turning round it the other way.
 */
function turnRound(field: SleeveField, sleeve: Sleeve, i: number, j: number, left: boolean): number[] {
  const { twin } = field.adjacency;
  const step = left ? nextHalfedge : previousHalfedge;
  const goal = Math.floor(twin[sleeve.sides[j]] / 3);
  const out: number[] = [];
  let h = step(sleeve.sides[i]);
  while (Math.floor(h / 3) !== goal) {
    out.push(h);
    h = step(twin[h]);
  }
  return out;
}

/** A corner the sleeve is to pass on its other side, and the first side that ends in it. */
interface Flip {
  vertex: number;
  from: number;
  left: boolean;
}

/**
 * Corners to flip: the bends that would be shorter on their far side, and where eager also the inner corners of the same hand that
 * stand in the way of the straight line from the node before the bend to the node after it (they would be the next bends).
 */
function listFlips(field: SleeveField, line: SleeveLine, eager: boolean): Flip[] {
  const { x, y, vertex, at, hand } = field.sleeveScratch;
  const flips: Flip[] = [];
  let node = 1;
  for (let k = 1; k + 1 < line.x.length; k++) {
    const v = line.vertex[k];
    if (field.onBoundary[v]) continue;
    // The corner's far side holds angle(v) - π - turn; below π the line gets shorter there.
    if (measureTurn(line, k) <= measureAngle(field, v) - 2 * Math.PI + LEAST_TURN) continue;
    const left = line.hand[k] > 0;
    if (!eager) {
      flips.push({ vertex: v, from: line.from[k], left });
      continue;
    }
    const dx = line.x[k + 1] - line.x[k - 1];
    const dy = line.y[k + 1] - line.y[k - 1];
    while (at[node] < line.from[k - 1]) node++;
    for (; vertex[node] >= 0 && at[node] < line.from[k + 1]; node++) {
      if (hand[node] !== line.hand[k] || field.onBoundary[vertex[node]]) continue;
      const beside = hand[node] * (dx * (y[node] - line.y[k - 1]) - dy * (x[node] - line.x[k - 1]));
      if (beside < 0 && vertex[node] !== line.vertex[k - 1]) flips.push({ vertex: vertex[node], from: at[node], left });
    }
  }
  return flips;
}

/** The crossed sides with these corners passed on their other side; a flip that shares sides with one before it waits. */
function flipCorners(field: SleeveField, sleeve: Sleeve, flips: readonly Flip[]): number[] {
  const { tri } = field.surface;
  const { sides } = sleeve;
  const out: number[] = [];
  let done = 0;
  for (const { vertex, from, left } of flips) {
    if (from < done) continue;
    const ends = (i: number) => (left ? tri[nextHalfedge(sides[i])] : tri[sides[i]]) === vertex;
    let j = from;
    while (j + 1 < sides.length && ends(j + 1)) j++;
    for (; done < from; done++) out.push(sides[done]);
    for (const h of turnRound(field, sleeve, from, j, left)) out.push(h);
    done = j + 1;
  }
  for (; done < sides.length; done++) out.push(sides[done]);
  return out;
}

/** Places where the line meets mesh sides, in order, ends included. */
function readPlaces(
  field: SleeveField,
  ends: [SurfacePoint, SurfacePoint],
  sleeve: Sleeve,
  line: SleeveLine,
): SurfacePoint[] {
  const { tri } = field.surface;
  const { lx, ly, rx, ry } = field.sleeveScratch;
  const places: SurfacePoint[] = [ends[0]];
  const add = (p: SurfacePoint) => {
    const q = places[places.length - 1];
    if (q.a !== p.a || q.b !== p.b || q.t !== p.t) places.push(p);
  };
  let k = 0;
  for (let i = 0; i < sleeve.sides.length; i++) {
    while (k + 2 < line.x.length && line.from[k + 1] <= i) {
      k++;
      add(vertexPoint(line.vertex[k]));
    }
    const r = tri[sleeve.sides[i]];
    const l = tri[nextHalfedge(sleeve.sides[i])];
    if (l === line.vertex[k] || r === line.vertex[k]) continue;
    const ux = line.x[k + 1] - line.x[k];
    const uy = line.y[k + 1] - line.y[k];
    const toLeft = ux * (ly[i] - line.y[k]) - uy * (lx[i] - line.x[k]);
    const toRight = ux * (ry[i] - line.y[k]) - uy * (rx[i] - line.x[k]);
    // Along the side itself: its ends are met at the sides before and after.
    if (toLeft <= 0 && toRight >= 0) continue;
    const t = Math.min(1, Math.max(0, toRight / (toRight - toLeft)));
    add(normalizePoint({ a: r, b: l, t }, VERTEX_SHARE));
  }
  while (k + 2 < line.x.length) add(vertexPoint(line.vertex[++k]));
  add(ends[1]);
  return places;
}

/**
 * The shortest line of a sleeve's kind (same way round all holes), straight wherever it does not touch the boundary
 * or pass a saddle vertex.
 * @units length in m
 * @throws PlanError geodesic-open: bends remain after 100 rounds and 10 for each triangle of the first sleeve
 */
export function shortenSleeve(
  field: SleeveField,
  from: SurfacePoint,
  to: SurfacePoint,
  start: Sleeve,
): { points: SurfacePoint[]; length: number } {
  const lay = (first: number, sides: readonly number[]) => {
    const trimmed = trimSleeve(field, from, to, first, sides);
    layDownInPlace(field, from, to, trimmed);
    return { sleeve: trimmed, line: runFunnel(field, trimmed) };
  };
  let now = lay(start.first, start.sides);
  const limit = 100 + 10 * start.sides.length;
  for (let round = 0; round < limit; round++) {
    const { sleeve, line } = now;
    const sure = listFlips(field, line, false);
    if (sure.length === 0) return { points: readPlaces(field, [from, to], sleeve, line), length: line.length };
    now = lay(sleeve.first, flipCorners(field, sleeve, listFlips(field, line, true)));
    // Only the flip of bends is sure to shorten; the eager one has to show it.
    if (!(now.line.length < line.length)) now = lay(sleeve.first, flipCorners(field, sleeve, sure));
  }
  throw new PlanError(
    "geodesic-open",
    `no straight line found between ${namePoint(from)} and ${namePoint(to)} in ${limit} rounds: check the mesh there for needle triangles`,
    [namePoint(from), namePoint(to)],
    { rounds: limit },
  );
}

/** True where a path between its ends passes a boundary vertex or runs along a boundary side. */
export function touchesBoundary(field: SleeveField, points: readonly SurfacePoint[]): boolean {
  const { surface, adjacency } = field;
  for (let i = 1; i + 1 < points.length; i++)
    if (isVertexPoint(points[i]) && field.onBoundary[points[i].a]) return true;
  for (let i = 1; i < points.length; i++) {
    const ends = new Set([points[i - 1].a, points[i - 1].b, points[i].a, points[i].b]);
    if (ends.size !== 2) continue;
    const [a, b] = [...ends];
    const { fan, fanStart, twin } = adjacency;
    for (const v of [a, b])
      for (let f = fanStart[v]; f < fanStart[v + 1]; f++)
        if (twin[fan[f]] < 0 && surface.tri[nextHalfedge(fan[f])] === (v === a ? b : a)) return true;
  }
  return false;
}
