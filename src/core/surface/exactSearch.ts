// Is there a path shorter than the one in hand, on any way over the surface? Straight beams from the source are followed over the
// triangles (windows: the part of a side they light, and the source's image), new beams start at saddle and boundary
// vertices, and whatever cannot beat the path in hand is dropped: what is left is a narrow ellipse round it.
// Needed only where the surface is domed: two geodesics enclose positive curvature (Gauss–Bonnet), a membrane in tension has none.
// Source: Chen & Han 1990; window filter and queue after Xin & Wang, ACM Trans. Graph. 28(4), 2009; differs: bounded by the path
// in hand and the straight distance to the goal.
import { nextHalfedge, previousHalfedge } from "./adjacency.ts";
import { measureDistance, pointAt, vertexAt } from "./measures.ts";
import type { SearchField, Sleeve } from "./sleeveSearch.ts";
import type { SurfacePoint, Vec3 } from "./surface.ts";
import { findTrianglesAt, isVertexPoint } from "./surfacePoint.ts";

/** A shorter path counts only when shorter by this share. */
const LEAST_GAIN = 1e-10;

/** The search ends with the best found when it has followed so many beams (about 100 MB). */
const MOST_BEAMS = 1_000_000;

/** Part of side `side` (seen from the triangle behind it) lit from one source. */
interface Beam {
  /** Crossed half-edge. */
  side: number;
  /** Beam that lit the triangle before, -1 where it comes from its source. */
  parent: number;
  /** Source: a vertex, or -1 for the path's start. */
  source: number;
  /** m along the twin of side, from its start. */
  from: number;
  to: number;
  /** The source's image in the twin's frame, y below 0. */
  x: number;
  y: number;
  /** Length up to the source. */
  before: number;
}

/** How a vertex was reached: over a beam, or straight from a source in a triangle of both. */
interface Arrival {
  beam: number;
  source: number;
}

interface Search {
  field: SearchField;
  goalPoint: SurfacePoint;
  goal: Vec3;
  goalTriangles: ReadonlySet<number>;
  limit: number;
  beams: Beam[];
  /** Shortest length found to each vertex. @shape nV */
  length: Float64Array;
  arrival: Map<number, Arrival>;
  /** Best way to the goal. */
  found: Arrival | null;
  /** Heap of [key, beam] and of vertices as -1 - vertex. */
  key: number[];
  item: number[];
  bends: (v: number) => boolean;
}

function push(s: Search, key: number, item: number): void {
  let i = s.key.length;
  s.key.push(key);
  s.item.push(item);
  while (i > 0) {
    const p = (i - 1) >> 1;
    if (s.key[p] <= key) break;
    s.key[i] = s.key[p];
    s.item[i] = s.item[p];
    i = p;
  }
  s.key[i] = key;
  s.item[i] = item;
}

function pop(s: Search): number {
  const top = s.item[0];
  const key = s.key.pop() ?? 0;
  const item = s.item.pop() ?? 0;
  const n = s.key.length;
  if (n === 0) return top;
  let i = 0;
  for (;;) {
    let c = 2 * i + 1;
    if (c >= n) break;
    if (c + 1 < n && s.key[c + 1] < s.key[c]) c++;
    if (s.key[c] >= key) break;
    s.key[i] = s.key[c];
    s.item[i] = s.item[c];
    i = c;
  }
  s.key[i] = key;
  s.item[i] = item;
  return top;
}

function reachVertex(s: Search, v: number, length: number, beam: number, source: number): void {
  if (length >= s.length[v]) return;
  const bound = length + measureDistance(vertexAt(s.field.surface, v), s.goal);
  if (bound >= s.limit) return;
  s.length[v] = length;
  s.arrival.set(v, { beam, source });
  if (s.bends(v)) push(s, length, -1 - v);
}

function reachGoal(s: Search, length: number, beam: number, source: number): void {
  if (length >= s.limit) return;
  s.limit = length;
  s.found = { beam, source };
}

/** True where all that a beam lights is nearer by way of an end of its side. */
function isOutshone(s: Search, beam: Beam): boolean {
  const { surface, adjacency, unfolding } = s.field;
  const g = adjacency.twin[beam.side];
  const slack = LEAST_GAIN * s.limit * 1e-2;
  const toFrom = Math.sqrt((beam.from - beam.x) ** 2 + beam.y ** 2);
  const toTo = Math.sqrt((beam.to - beam.x) ** 2 + beam.y ** 2);
  if (s.length[surface.tri[g]] + beam.to < beam.before + toTo - slack) return true;
  const back = unfolding.length[g] - beam.from;
  return s.length[surface.tri[nextHalfedge(g)]] + back < beam.before + toFrom - slack;
}

/** Enters a beam unless it is too narrow, cannot beat the limit, or all it lights is nearer by way of an end of its side. */
function offerBeam(s: Search, beam: Beam): void {
  const { surface, adjacency, unfolding } = s.field;
  const g = adjacency.twin[beam.side];
  if (g < 0) return;
  const l = unfolding.length[g];
  if (beam.to - beam.from <= 1e-12 * l || !(beam.y < 0)) return;
  if (isOutshone(s, beam)) return;
  const a = surface.tri[g];
  const b = surface.tri[nextHalfedge(g)];
  // The straight way through the side to a goal laid into the beam's plane is the shortest there can be.
  const A = vertexAt(surface, a);
  const B = vertexAt(surface, b);
  let along = 0;
  let square = 0;
  for (let k = 0; k < 3; k++) {
    along += ((s.goal[k] - A[k]) * (B[k] - A[k])) / l;
    square += (s.goal[k] - A[k]) ** 2;
  }
  const off = Math.sqrt(Math.max(0, square - along * along));
  const through = beam.x + ((along - beam.x) * -beam.y) / (off - beam.y);
  const x = Math.min(beam.to, Math.max(beam.from, through));
  const bound = beam.before + Math.sqrt((x - beam.x) ** 2 + beam.y ** 2) + Math.sqrt((along - x) ** 2 + off * off);
  if (bound >= s.limit) return;
  const near = Math.min(beam.to, Math.max(beam.from, beam.x));
  s.beams.push(beam);
  push(s, beam.before + Math.sqrt((near - beam.x) ** 2 + beam.y ** 2), s.beams.length - 1);
}

/** Follows a beam through the triangle behind its side. */
function followBeam(s: Search, index: number): void {
  const { surface, adjacency, unfolding } = s.field;
  const beam = s.beams[index];
  const g = adjacency.twin[beam.side];
  const l = unfolding.length[g];
  const px = unfolding.apexX[g];
  const py = unfolding.apexY[g];
  const t = Math.floor(g / 3);
  // Where a line from the source to (qx, qy) crosses the side.
  const crossAt = (qx: number, qy: number) => beam.x + ((qx - beam.x) * -beam.y) / (qy - beam.y);
  const far = (qx: number, qy: number) => beam.before + Math.sqrt((qx - beam.x) ** 2 + (qy - beam.y) ** 2);
  const slack = 1e-9 * l;
  const middle = crossAt(px, py);
  if (middle >= beam.from - slack && middle <= beam.to + slack)
    reachVertex(s, surface.tri[previousHalfedge(g)], far(px, py), index, beam.source);
  if (s.goalTriangles.has(t)) {
    const corner = (v: number) =>
      v === surface.tri[g] ? [0, 0] : v === surface.tri[nextHalfedge(g)] ? [l, 0] : [px, py];
    const [u, w] = [corner(s.goalPoint.a), corner(s.goalPoint.b)];
    const qx = u[0] + s.goalPoint.t * (w[0] - u[0]);
    const qy = u[1] + s.goalPoint.t * (w[1] - u[1]);
    const x = crossAt(qx, qy);
    if (x >= beam.from - slack && x <= beam.to + slack) reachGoal(s, far(qx, qy), index, beam.source);
  }
  const split = (left: boolean) => {
    // Left: side C → a, twin a → C. Right: side b → C, twin C → b.
    const side = left ? previousHalfedge(g) : nextHalfedge(g);
    const [ox, oy] = left ? [0, 0] : [px, py];
    const length = unfolding.length[side];
    const ux = (left ? px : l - px) / length;
    const uy = (left ? py : -py) / length;
    const meet = (x: number) => {
      const rx = x - beam.x;
      const ry = -beam.y;
      const m = ((ox - beam.x) * ry - (oy - beam.y) * rx) / -(ux * ry - uy * rx);
      return Math.min(length, Math.max(0, m));
    };
    const from = left ? meet(beam.from) : middle >= beam.from ? 0 : meet(beam.from);
    const to = left && middle <= beam.to ? length : meet(beam.to);
    const x = (beam.x - ox) * ux + (beam.y - oy) * uy;
    const y = ux * (beam.y - oy) - uy * (beam.x - ox);
    offerBeam(s, { side, parent: index, source: beam.source, from, to, x, y, before: beam.before });
  };
  if (middle > beam.from) split(true);
  if (middle < beam.to) split(false);
}

/** Sends beams over the far sides of a triangle from a place in it. */
function lightTriangle(s: Search, t: number, p: SurfacePoint, before: number, source: number): void {
  const { surface, unfolding } = s.field;
  const { tri } = surface;
  const at = pointAt(surface, p);
  for (let h = 3 * t; h < 3 * t + 3; h++) {
    const a = tri[h];
    const b = tri[nextHalfedge(h)];
    if (a !== p.a || a !== p.b) reachVertex(s, a, before + measureDistance(at, vertexAt(surface, a)), -1, source);
    const holds = (v: number) => v === a || v === b;
    if (holds(p.a) && holds(p.b)) continue;
    // Place in the frame of the side, then in that of its twin (turned half round).
    const corner = (v: number) =>
      v === a ? [0, 0] : v === b ? [unfolding.length[h], 0] : [unfolding.apexX[h], unfolding.apexY[h]];
    const [u, w] = [corner(p.a), corner(p.b)];
    const x = u[0] + p.t * (w[0] - u[0]);
    const y = u[1] + p.t * (w[1] - u[1]);
    const length = unfolding.length[h];
    offerBeam(s, { side: h, parent: -1, source, from: 0, to: length, x: length - x, y: -y, before });
  }
  if (s.goalTriangles.has(t)) reachGoal(s, before + measureDistance(at, s.goal), -1, source);
}

/** Sides crossed when turning round vertex v from triangle t to triangle u. */
function turnBetween(field: SearchField, v: number, t: number, u: number): number[] {
  const { tri } = field.surface;
  const { twin } = field.adjacency;
  const corner = (f: number) => (tri[3 * f] === v ? 3 * f : tri[3 * f + 1] === v ? 3 * f + 1 : 3 * f + 2);
  for (const left of [true, false]) {
    const out: number[] = [];
    let h = corner(t);
    while (h >= 0 && Math.floor(h / 3) !== u) {
      const side: number = left ? previousHalfedge(h) : h;
      out.push(side);
      h = twin[side];
      if (h >= 0 && !left) h = nextHalfedge(h);
      if (out.length > 1 && Math.floor(h / 3) === t) h = -1;
    }
    if (h >= 0) return out;
  }
  return [];
}

/** One sleeve out of the legs from source to source. */
function joinLegs(s: Search, from: SurfacePoint, last: Arrival): Sleeve {
  const { field, beams } = s;
  const { adjacency, surface } = field;
  const legs: { sides: number[]; source: number; first: number; last: number }[] = [];
  let arrival: Arrival | undefined = last;
  let to = s.goalPoint;
  while (arrival) {
    const source: number = arrival.source;
    const origin: SurfacePoint = source < 0 ? from : { a: source, b: source, t: 0 };
    const sides: number[] = [];
    for (let i = arrival.beam; i >= 0; i = beams[i].parent) sides.push(beams[i].side);
    sides.reverse();
    let first = -1;
    if (sides.length > 0) first = Math.floor(sides[0] / 3);
    else {
      const there = findTrianglesAt(surface, adjacency, to).triangles;
      first = findTrianglesAt(surface, adjacency, origin).triangles.find((t) => there.includes(t)) ?? -1;
    }
    const end = sides.length > 0 ? Math.floor(adjacency.twin[sides[sides.length - 1]] / 3) : first;
    legs.unshift({ sides, source, first, last: end });
    to = origin;
    arrival = source < 0 ? undefined : s.arrival.get(source);
  }
  const sides = [...legs[0].sides];
  for (let i = 1; i < legs.length; i++)
    sides.push(...turnBetween(field, legs[i].source, legs[i - 1].last, legs[i].first), ...legs[i].sides);
  return { first: legs[0].first, sides, marks: 0 };
}

/**
 * A sleeve that holds a path shorter than `length`, the shortest of all such (of those found within MOST_BEAMS); null where there is none.
 * Both places in normal form, not in one triangle; `bends` tells the vertices at which a shortest path may bend.
 * @units m
 */
export function findShorterSleeve(
  field: SearchField,
  ends: readonly [SurfacePoint, SurfacePoint],
  length: number,
  bends: (v: number) => boolean,
): Sleeve | null {
  const { surface, adjacency } = field;
  const [from, to] = ends;
  const s: Search = {
    field,
    goalPoint: to,
    goal: pointAt(surface, to),
    goalTriangles: new Set(findTrianglesAt(surface, adjacency, to).triangles),
    limit: length * (1 - LEAST_GAIN),
    beams: [],
    length: new Float64Array(adjacency.nV).fill(Number.POSITIVE_INFINITY),
    arrival: new Map(),
    found: null,
    key: [],
    item: [],
    bends,
  };
  if (isVertexPoint(from)) s.length[from.a] = 0;
  for (const t of findTrianglesAt(surface, adjacency, from).triangles) lightTriangle(s, t, from, 0, -1);
  while (s.key.length > 0 && s.key[0] < s.limit && s.beams.length < MOST_BEAMS) {
    const before = s.key[0];
    const item = pop(s);
    if (item >= 0) followBeam(s, item);
    else if (before <= s.length[-1 - item]) {
      const v = -1 - item;
      const p: SurfacePoint = { a: v, b: v, t: 0 };
      for (const t of findTrianglesAt(surface, adjacency, p).triangles) lightTriangle(s, t, p, before, v);
    }
  }
  return s.found ? joinLegs(s, from, s.found) : null;
}
