// The cut outline of a net outline whose sides are each moved outward by their own distance (a set-back inward), mm.
// Corners: neighbouring cut lines meet, long tips are cut square; the ends of a flap that is folded back are closed so that
// the folded flap stays inside its own outline. Does not: choose distances, draw marks.
// Source: own. A flap end mirrors, about the fold line, the cut line of its neighbour, and never flares past the square.
import type { Ring } from "../../records/flatPanel.ts";
import { isSimpleRing, pointSegmentSquared, ringArea } from "../../surface/ring.ts";
import { simplifyRing } from "../../surface/simplifyRing.ts";
import { discRing, setBackRings, slotRings } from "./clearRings.ts";
import { subtractRings, unionPositive } from "./polygonBooleans.ts";
import type { Point } from "./sideLine.ts";
import { add, cross, dot, gap, type SideOffset, sidePoints, unit } from "./sideOffset.ts";

/** A tip reaches at most this many distances from its corner. */
const TIP = 2.5;
/** Two cut lines may meet this many distances away from their corner. */
const FAR = 20;
/** Below this turn (radians) sides with different distances run on into each other: a step, no mitre far from the corner. */
const STRAIGHT = 0.5;
/** A flap end is closed only at corners whose inner angle is below this (radians). */
const CLOSED_BELOW = 2.6;
/** Cut lines are simplified within this, mm. */
export const FAIRING_MM = 0.05;

/** What a corner sees of one of its two sides: both lines run away from the corner. */
interface Arm {
  net: Point[];
  cut: Point[];
  distance: number;
  fold: boolean;
  /** Unit vector away from the corner, and the outward normal there. */
  along: Point;
  out: Point;
}

/** Where a cut line is trimmed: place along it (index and share, −1 before its first point) and the point. */
interface Trim {
  at: number;
  point: Point;
}

/** The line moved to its right by d: mitred at inner points, two points where the turn is too sharp for that. */
function moveLine(line: Point[], d: number, closed: boolean): Point[] {
  const last = line.length - 1;
  const normal = line.slice(1).map((q, i): Point => {
    const t = unit(line[i], q);
    return [t[1], -t[0]];
  });
  const moved: Point[] = [];
  for (let i = 0; i <= last; i++) {
    const before = normal[i > 0 ? i - 1 : closed ? last - 1 : 0];
    const after = normal[i < last ? i : closed ? 0 : last - 1];
    const share = 1 + dot(before, after);
    if (share > 0.35) moved.push(add(line[i], [before[0] + after[0], before[1] + after[1]], d / share));
    else moved.push(add(line[i], before, d), add(line[i], after, d));
  }
  return moved;
}

/** The first meeting of two lines that run away from a corner, each drawn on backwards by `reach` beyond its first point. */
function firstMeeting(a: Point[], b: Point[], reach: number): { a: Trim; b: Trim } | null {
  const back = (line: Point[]): Point[] => [add(line[0], unit(line[1], line[0]), reach), ...line];
  const la = back(a);
  const lb = back(b);
  const limit = reach;
  let best = Infinity;
  let found: { a: Trim; b: Trim } | null = null;
  let arcA = -reach;
  for (let i = 0; i + 1 < la.length && arcA < limit; i++) {
    const lengthA = gap(la[i], la[i + 1]);
    const ua: Point = [la[i + 1][0] - la[i][0], la[i + 1][1] - la[i][1]];
    let arcB = -reach;
    for (let j = 0; j + 1 < lb.length && arcB < limit; j++) {
      const ub: Point = [lb[j + 1][0] - lb[j][0], lb[j + 1][1] - lb[j][1]];
      const lengthB = Math.hypot(ub[0], ub[1]);
      const det = cross(ua, ub);
      if (det !== 0) {
        const w: Point = [lb[j][0] - la[i][0], lb[j][1] - la[i][1]];
        const s = cross(w, ub) / det;
        const t = cross(w, ua) / det;
        const cost = Math.abs(arcA + s * lengthA) + Math.abs(arcB + t * lengthB);
        if (s >= -1e-12 && s <= 1 + 1e-12 && t >= -1e-12 && t <= 1 + 1e-12 && cost < best) {
          best = cost;
          const point = add(la[i], ua, s);
          found = { a: { at: i - 1 + s, point }, b: { at: j - 1 + t, point } };
        }
      }
      arcB += lengthB;
    }
    arcA += lengthA;
  }
  return found;
}

/** Two cut lines meet in a mitre, in a step where the sides run on into each other, or in a tip cut square. */
function mitre(a: Arm, b: Arm, corner: Point): { a: Trim; b: Trim; middle: Point[] } {
  const far = Math.max(Math.abs(a.distance), Math.abs(b.distance));
  const startA: Trim = { at: 0, point: a.cut[0] };
  const startB: Trim = { at: 0, point: b.cut[0] };
  if (far === 0) return { a: startA, b: startB, middle: [] };
  const straight = Math.abs(Math.atan2(cross(a.along, b.along), -dot(a.along, b.along))) < STRAIGHT;
  if (straight && Math.abs(a.distance - b.distance) > 0.5) return { a: startA, b: startB, middle: [] };
  const hit = firstMeeting(a.cut, b.cut, FAR * far);
  if (!hit) return { a: startA, b: startB, middle: [] };
  const point = hit.a.point;
  const tip = gap(corner, point);
  if (hit.a.at >= 0 || hit.b.at >= 0 || tip <= TIP * far) return { ...hit, middle: [] };
  const toTip = unit(corner, point);
  const square = (arm: Arm): Point => {
    const p = arm.cut[0];
    const u = unit(arm.cut[1], p);
    const s = (TIP * far - dot([p[0] - corner[0], p[1] - corner[1]], toTip)) / (dot(u, toTip) || 1);
    return add(p, u, Math.max(0, s));
  };
  return { a: startA, b: startB, middle: [square(a), square(b)] };
}

/** The end of a folded flap: from the fold line back to the flap's cut line, no wider than the fold line when folded. */
function flapEnd(flap: Arm, other: Arm): { flap: Trim; other: Trim; foot: Point } | null {
  const reach = FAR * Math.max(Math.abs(flap.distance), Math.abs(other.distance));
  const bothFold = other.fold && other.distance > 0;
  const hit = bothFold
    ? { a: { at: 0, point: flap.net[0] }, b: { at: 0, point: other.net[0] } }
    : firstMeeting(flap.net, other.cut, reach);
  if (!hit) return null;
  const inner = Math.acos(Math.max(-1, Math.min(1, dot(flap.along, other.along))));
  const slope = Math.min(inner, Math.PI / 2);
  const foot = hit.a.point;
  const way: Point = [
    Math.cos(slope) * flap.along[0] + Math.sin(slope) * flap.out[0],
    Math.cos(slope) * flap.along[1] + Math.sin(slope) * flap.out[1],
  ];
  const end = firstMeeting(flap.cut, [foot, add(foot, way, reach)], reach);
  if (!end) return null;
  return { flap: end.a, other: hit.b, foot };
}

function joinCorner(a: Arm, b: Arm, corner: Point): { a: Trim; b: Trim; middle: Point[] } {
  const inner = Math.atan2(cross(b.along, a.along), dot(b.along, a.along));
  const closes = inner > 0 && inner < CLOSED_BELOW;
  const foldA = closes && a.fold && a.distance > 0;
  const foldB = closes && b.fold && b.distance > 0;
  if (foldA && foldB) {
    const endA = flapEnd(a, b);
    const endB = flapEnd(b, a);
    if (endA && endB) return { a: endA.flap, b: endB.flap, middle: [corner] };
  } else if (foldA) {
    const end = flapEnd(a, b);
    if (end) return { a: end.flap, b: end.other, middle: [end.foot] };
  } else if (foldB) {
    const end = flapEnd(b, a);
    if (end) return { a: end.other, b: end.flap, middle: [end.foot] };
  }
  return mitre(a, b, corner);
}

function arm(net: Point[], cut: Point[], side: SideOffset, away: boolean): Arm {
  const n = away ? net : [...net].reverse();
  const c = away ? cut : [...cut].reverse();
  const along = unit(n[0], n[1]);
  const out: Point = away ? [along[1], -along[0]] : [-along[1], along[0]];
  return { net: n, cut: c, distance: side.distance, fold: side.fold, along, out };
}

/** The cut lines one after the other, trimmed where they meet; may still cross itself. */
function rawOutline(net: Ring, sides: SideOffset[]): Ring {
  const lines = sides.map((s) => sidePoints(net, s));
  const whole = sides.length === 1 && sides[0].from === sides[0].to;
  const moved = lines.map((line, k) => moveLine(line, sides[k].distance, whole));
  const out: Point[] = [];
  if (whole) out.push(...moved[0].slice(0, -1));
  else {
    const joints = sides.map((side, k) => {
      const next = (k + 1) % sides.length;
      return joinCorner(
        arm(lines[k], moved[k], side, false),
        arm(lines[next], moved[next], sides[next], true),
        lines[next][0],
      );
    });
    for (let k = 0; k < sides.length; k++) {
      const begin = joints[(k + sides.length - 1) % sides.length].b;
      const end = joints[k].a;
      const last = moved[k].length - 1;
      const stop = last - end.at;
      out.push(begin.point);
      for (let i = 0; i <= last; i++) if (i > begin.at && i < stop) out.push(moved[k][i]);
      out.push(end.point, ...joints[k].middle);
    }
  }
  return withoutDoubles(out);
}

/** Drops points closer than a micrometre to the one before. */
function withoutDoubles(points: Point[]): Ring {
  const kept = points.filter((p, i) => gap(p, points[(i + points.length - 1) % points.length]) > 1e-3);
  return Float64Array.from(kept.flat());
}

/** The ring of greatest area. */
function greatest(rings: Ring[]): Ring {
  let best: Ring = new Float64Array(0);
  for (const ring of rings) if (ringArea(ring) > (best.length ? ringArea(best) : 0)) best = ring;
  return best;
}

/** Corners of a ring that touch its line elsewhere. */
function touchingPoints(ring: Ring): Point[] {
  const found: Point[] = [];
  const n = ring.length / 2;
  for (let i = 0; i < n; i++)
    for (let j = 0; j < n; j++) {
      const k = (j + 1) % n;
      if (i === j || i === k) continue;
      const end: Point = [ring[2 * k], ring[2 * k + 1]];
      const off = pointSegmentSquared(ring[2 * i], ring[2 * i + 1], ring[2 * j], ring[2 * j + 1], end);
      if (off < 4e-6) found.push([ring[2 * i], ring[2 * i + 1]]);
    }
  return found;
}

/** Where the line of an outline touches itself, a fifth of a millimetre of cloth is taken away, and the greatest part kept. */
function partTouches(ring: Ring): Ring {
  let out = ring;
  for (let tries = 0; tries < 3 && out.length > 0 && !isSimpleRing(out); tries++) {
    const nibbles = touchingPoints(out).map(([x, y]) => {
      const [a, b, c, d] = [x - 0.1, y - 0.1, x + 0.1, y + 0.1];
      return Float64Array.from([a, b, c, b, c, d, a, d]);
    });
    out = greatest(subtractRings([out], nibbles));
  }
  return out;
}

/**
 * The line to cut: every side of a counter-clockwise net ring at its own distance, corners closed, discs taken away.
 * @units mm; empty where nothing is left
 * @throws PlanError outline-span (polygonBooleans.ts)
 */
export function offsetOutline(
  net: Ring,
  sides: SideOffset[],
  discs: { x: number; y: number; radius: number }[] = [],
): Ring {
  let ring = rawOutline(net, sides);
  if (!isSimpleRing(ring) || ringArea(ring) <= 0) ring = greatest(unionPositive([ring]));
  const away = discs.filter((d) => d.radius > 0).map((d) => discRing(d.x, d.y, d.radius));
  for (const side of sides) if (side.distance < 0) away.push(...setBackRings(net, side));
  for (const side of sides) if (side.distance === 0) away.push(...slotRings(net, side, ring));
  if (away.length > 0 && ring.length > 0) ring = greatest(subtractRings([ring], away));
  ring = partTouches(ring);
  const fair = simplifyRing(ring, FAIRING_MM);
  return isSimpleRing(fair) && ringArea(fair) > 0 ? fair : ring;
}
