// The shortest line in a sleeve (row of triangles laid in the plane), and the flipping of the sleeve to the other side of
// every inner vertex where that line bends though it could be shorter there; repeated until no bend can be taken out.
// Every flip keeps the old line inside the new sleeve, so the length only falls, and the way round the holes stays as it was.
// Source: flipping after Xin & Wang, Computer-Aided Design 39(12), 2007.
import { PlanError } from "../problem.ts";
import { nextHalfedge, previousHalfedge } from "./adjacency.ts";
import { type FunnelField, layDownInPlace, runFunnel, type SleeveLine } from "./funnel.ts";
import type { Sleeve } from "./sleeveSearch.ts";
import type { Surface, SurfacePoint } from "./surface.ts";
import { isVertexPoint, namePoint, normalizePoint, vertexPoint } from "./surfacePoint.ts";
import { measureCornerAngle } from "./unfolding.ts";

/** A bend below this (rad) is rounding: it costs its square over eight in length. */
const LEAST_TURN = 1e-9;

/** A turn below minus this (rad) is one of more than half round. */
const WOUND_TURN = 1e-6;

/** A crossing within this share of a side's end is the vertex there. */
const VERTEX_SHARE = 1e-8;

/** What shortening needs to know of the surface. */
export interface SleeveField extends FunnelField {
  /** Sum of corner angles, filled when first asked for; -1 before. @shape nV */
  angle: Float64Array<ArrayBuffer>;
  /** 1 on the boundary. @shape nV */
  onBoundary: Uint8Array<ArrayBuffer>;
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

/** Angle by which the line goes round the corner of node k, rad, 0…2π: a sleeve may wind round its corner by more than half a turn. */
function measureTurn(line: SleeveLine, k: number): number {
  const ux = line.x[k] - line.x[k - 1];
  const uy = line.y[k] - line.y[k - 1];
  const wx = line.x[k + 1] - line.x[k];
  const wy = line.y[k + 1] - line.y[k];
  const turn = line.hand[k] * Math.atan2(ux * wy - uy * wx, ux * wx + uy * wy);
  return turn < -WOUND_TURN ? turn + 2 * Math.PI : turn;
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
