// What every nest must satisfy, judged with exact polygon distances on the true outlines, whatever built it.
import type { Check, Finding } from "../problem.ts";
import type { NestedRoll, NestPiece } from "../records/roll.ts";
import { type PlaneRing, ringBox } from "../surface/ring.ts";
import { turnRing } from "./nestShape.ts";
import { ringGap } from "./ringGap.ts";
import { stopFinding } from "./sortPieces.ts";

/** mm: what a distance may miss by rounding. */
const HAIR = 0.01;
/** mm: depth of overlap that counts. */
const TOUCH = 1e-3;
/** Two pins may miss the gap by this, mm: they are typed with rounded figures. */
export const PIN_GAP = 0.05;

interface Lying {
  id: string;
  ring: PlaneRing;
  x: number;
  y: number;
  x0: number;
  x1: number;
  y0: number;
  y1: number;
}

function lyingOn(roll: NestedRoll, pieces: Map<string, NestPiece>): Lying[] {
  return roll.placements.map((p) => {
    const ring = turnRing((pieces.get(p.panel) as NestPiece).cut, p.rotation);
    const box = ringBox(ring);
    return {
      id: p.panel,
      ring,
      x: p.x,
      y: p.y,
      x0: box.x0 + p.x,
      x1: box.x1 + p.x,
      y0: box.y0 + p.y,
      y1: box.y1 + p.y,
    };
  });
}

/** Least distance of any two pieces on a roll (Infinity where all are further than the gap), and which two; pins as they were allowed. */
function leastGap(lying: Lying[], gap: number, pinned: ReadonlySet<string>): { near: number; who: string[] } {
  const order = [...lying].sort((a, b) => a.x0 - b.x0);
  let near = Infinity;
  let who: string[] = [];
  order.forEach((a, i) => {
    for (let j = i + 1; j < order.length && order[j].x0 <= a.x1 + gap + 1; j++) {
      const d = ringGap(a, order[j], gap + 1, TOUCH);
      if (d >= gap - PIN_GAP && pinned.has(a.id) && pinned.has(order[j].id)) continue;
      if (d < near) {
        near = d;
        who = [a.id, order[j].id];
      }
    }
  });
  return { near, who };
}

function onFlaws(lying: Lying[], roll: NestedRoll): string[] {
  const bad = new Set<string>();
  for (const f of roll.flaws) {
    const flaw = { ring: Float64Array.from([0, 0, f.length, 0, f.length, f.width, 0, f.width]), x: f.x, y: f.y };
    for (const p of lying) if (ringGap(p, flaw, 1, TOUCH) < 0) bad.add(p.id);
  }
  return [...bad];
}

/** How far the used length lies above its bound, in words. */
function gapWords(roll: NestedRoll): string {
  return `${((100 * (roll.used - roll.lowerBound)) / Math.max(roll.lowerBound, 1e-9)).toFixed(1)} %`;
}

/** Checks of one filled roll; a check that fails is a stop as well. */
export function checkRoll(
  roll: NestedRoll,
  start: number,
  pieces: Map<string, NestPiece>,
  pinned: ReadonlySet<string> = new Set(),
): { checks: Check[]; findings: Finding[] } {
  const lying = lyingOn(roll, pieces);
  const { near, who } = leastGap(lying, roll.gap, pinned);
  const outside = lying.filter(
    (p) => p.x0 < start - HAIR || p.x1 > roll.length + HAIR || p.y0 < -HAIR || p.y1 > roll.usableWidth + HAIR,
  );
  const flawed = onFlaws(lying, roll);
  const foreign = roll.placements.filter((p) => {
    const piece = pieces.get(p.panel) as NestPiece;
    return piece.fabric !== roll.fabric || (piece.batch !== null && piece.batch !== roll.batch);
  });
  const gapHolds = near >= roll.gap - HAIR;
  const inside = outside.length === 0 && flawed.length === 0 && foreign.length === 0;
  const bound = roll.lowerBound <= roll.used + HAIR;
  const apart = Number.isFinite(near) ? near : roll.gap + 1;
  const check = (text: string, value: number, limit: number, holds: boolean): Check => ({
    station: "rolls",
    text: `roll ${roll.id}: ${text}`,
    value,
    limit,
    holds,
  });
  const findings: Finding[] = [];
  const remedy = "This is a fault of the program: send the job file to its makers.";
  if (!gapHolds)
    findings.push(
      stopFinding("nest-gap", who, near, roll.gap, {
        text: `${who.join(" and ")} lie too near on roll ${roll.id}.`,
        remedy,
      }),
    );
  const off = [...outside.map((p) => p.id), ...flawed, ...foreign.map((p) => p.panel)];
  if (!inside)
    findings.push(
      stopFinding("nest-place", off, null, null, {
        text: `${off.join(", ")}: not on good cloth of roll ${roll.id}.`,
        remedy,
      }),
    );
  return {
    checks: [
      check("least distance between cuts, mm", apart, roll.gap, gapHolds),
      check("pieces off the cloth, on flaws or on another cloth", off.length, 0, inside),
      check(`used length, ${gapWords(roll)} over its lower bound, mm`, roll.used, roll.lowerBound, bound),
    ],
    findings,
  };
}

/** Every piece lies on a roll exactly once. */
export function checkComplete(rolls: NestedRoll[], pieces: NestPiece[]): Check {
  const laid = rolls.flatMap((r) => r.placements.map((p) => p.panel));
  const once = new Set(laid).size === laid.length && laid.length === pieces.length;
  return {
    station: "rolls",
    text: "every piece is placed once",
    value: laid.length,
    limit: pieces.length,
    holds: once,
  };
}
