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

/** Ends of the crossed sides in the plane. */
interface SleevePlane {
  lx: number[];
  ly: number[];
  rx: number[];
  ry: number[];
  start: [number, number];
  end: [number, number];
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

/** Lays the sleeve down in the plane, its first triangle's first side along x. */
function layDown(field: SleeveField, from: SurfacePoint, to: SurfacePoint, sleeve: Sleeve): SleevePlane {
  const { surface, adjacency, unfolding } = field;
  const { tri } = surface;
  const { first, sides } = sleeve;
  const n = sides.length;
  const plane: SleevePlane = { lx: [], ly: [], rx: [], ry: [], start: [0, 0], end: [0, 0] };
  const h0 = 3 * first;
  const corners: [number, number, number][] = [
    [tri[h0], 0, 0],
    [tri[h0 + 1], unfolding.length[h0], 0],
    [tri[h0 + 2], unfolding.apexX[h0], unfolding.apexY[h0]],
  ];
  const place = (p: SurfacePoint): [number, number] => {
    const a = corners.find((c) => c[0] === p.a) ?? corners[0];
    const b = corners.find((c) => c[0] === p.b) ?? corners[0];
    return [a[1] + p.t * (b[1] - a[1]), a[2] + p.t * (b[2] - a[2])];
  };
  plane.start = place(from);
  if (n > 0) {
    const right = corners[sides[0] - h0];
    const left = corners[nextHalfedge(sides[0]) - h0];
    plane.lx.push(left[1]);
    plane.ly.push(left[2]);
    plane.rx.push(right[1]);
    plane.ry.push(right[2]);
  }
  for (let i = 0; i < n; i++) {
    const g = adjacency.twin[sides[i]];
    const ux = (plane.rx[i] - plane.lx[i]) / unfolding.length[g];
    const uy = (plane.ry[i] - plane.ly[i]) / unfolding.length[g];
    const cx = plane.lx[i] + unfolding.apexX[g] * ux - unfolding.apexY[g] * uy;
    const cy = plane.ly[i] + unfolding.apexX[g] * uy + unfolding.apexY[g] * ux;
    if (i + 1 < n) {
      const left = sides[i + 1] === nextHalfedge(g);
      plane.lx.push(left ? cx : plane.lx[i]);
      plane.ly.push(left ? cy : plane.ly[i]);
      plane.rx.push(left ? plane.rx[i] : cx);
      plane.ry.push(left ? plane.ry[i] : cy);
    } else {
      corners[0] = [tri[g], plane.lx[i], plane.ly[i]];
      corners[1] = [tri[nextHalfedge(g)], plane.rx[i], plane.ry[i]];
      corners[2] = [tri[previousHalfedge(g)], cx, cy];
    }
  }
  plane.end = place(to);
  return plane;
}

/** Shortest line from start to end inside the laid-down sleeve, by a funnel kept as a double-ended row of nodes. */
function runFunnel(field: SleeveField, sleeve: Sleeve, plane: SleevePlane): SleeveLine {
  const { tri } = field.surface;
  const { sides } = sleeve;
  const x = [plane.start[0]];
  const y = [plane.start[1]];
  const vertex = [-1];
  const at = [0];
  const hand = [0];
  const parent = [-1];
  const n = sides.length;
  const row = new Int32Array(2 * n + 5);
  let apex = n + 2;
  let leftEnd = apex;
  let rightEnd = apex;
  row[apex] = 0;
  const cross = (i: number, j: number, k: number) => (x[j] - x[i]) * (y[k] - y[i]) - (y[j] - y[i]) * (x[k] - x[i]);
  const addNode = (px: number, py: number, v: number, i: number, side: number): number => {
    x.push(px);
    y.push(py);
    vertex.push(v);
    at.push(i);
    hand.push(side);
    return x.length - 1;
  };
  const addRight = (k: number) => {
    while (rightEnd > apex && cross(row[rightEnd - 1], row[rightEnd], k) >= 0) rightEnd--;
    if (rightEnd === apex) {
      while (apex > leftEnd && cross(row[apex], row[apex - 1], k) >= 0) apex--;
      rightEnd = apex;
    }
    parent[k] = row[rightEnd];
    row[++rightEnd] = k;
  };
  const addLeft = (k: number) => {
    while (leftEnd < apex && cross(row[leftEnd + 1], row[leftEnd], k) <= 0) leftEnd++;
    if (leftEnd === apex) {
      while (apex < rightEnd && cross(row[apex], row[apex + 1], k) <= 0) apex++;
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
    if (l !== left) addLeft(addNode(plane.lx[i], plane.ly[i], l, i, 1));
    if (r !== right) addRight(addNode(plane.rx[i], plane.ry[i], r, i, -1));
    left = l;
    right = r;
  }
  const end = addNode(plane.end[0], plane.end[1], -1, n, 0);
  addRight(end);
  const line: SleeveLine = { x: [], y: [], vertex: [], from: [], hand: [], length: 0 };
  for (let k = end; k >= 0; k = parent[k]) {
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

/** One round: the sleeve with every bend that can be shortened flipped (bends that share sides wait), or null where none can. */
function flipBends(field: SleeveField, sleeve: Sleeve, line: SleeveLine): number[] | null {
  const { tri } = field.surface;
  const { sides } = sleeve;
  const out: number[] = [];
  let done = 0;
  let flipped = false;
  for (let k = 1; k + 1 < line.x.length; k++) {
    const v = line.vertex[k];
    if (field.onBoundary[v]) continue;
    // The corner's far side holds angle(v) - π - turn; below π the line gets shorter there.
    if (measureTurn(line, k) <= measureAngle(field, v) - 2 * Math.PI + LEAST_TURN) continue;
    const left = line.hand[k] > 0;
    const ends = (i: number) => (left ? tri[nextHalfedge(sides[i])] : tri[sides[i]]) === v;
    const i = line.from[k];
    let j = i;
    while (j + 1 < sides.length && ends(j + 1)) j++;
    if (i < done) continue;
    for (; done < i; done++) out.push(sides[done]);
    for (const h of turnRound(field, sleeve, i, j, left)) out.push(h);
    done = j + 1;
    flipped = true;
  }
  if (!flipped) return null;
  for (; done < sides.length; done++) out.push(sides[done]);
  return out;
}

/** Places where the line meets mesh sides, in order, ends included. */
function readPlaces(
  field: SleeveField,
  ends: [SurfacePoint, SurfacePoint],
  sleeve: Sleeve,
  plane: SleevePlane,
  line: SleeveLine,
): SurfacePoint[] {
  const { tri } = field.surface;
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
    const toLeft = ux * (plane.ly[i] - line.y[k]) - uy * (plane.lx[i] - line.x[k]);
    const toRight = ux * (plane.ry[i] - line.y[k]) - uy * (plane.rx[i] - line.x[k]);
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
  let sleeve = trimSleeve(field, from, to, start.first, start.sides);
  const limit = 100 + 10 * start.sides.length;
  for (let round = 0; round < limit; round++) {
    const plane = layDown(field, from, to, sleeve);
    const line = runFunnel(field, sleeve, plane);
    const flipped = flipBends(field, sleeve, line);
    if (!flipped) return { points: readPlaces(field, [from, to], sleeve, plane, line), length: line.length };
    sleeve = trimSleeve(field, from, to, sleeve.first, flipped);
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
