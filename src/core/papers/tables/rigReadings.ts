// What a crew reads and compares on a tensioning sheet, worked out from the facts: where each adjuster starts, at which reading a
// move is to be stopped, the window of a member at a hold point, the distances between corners. Judges nothing.
import type { Facts } from "../../records/facts.ts";
import type { FactsAdjuster, FactsMove, FactsStage, FactsTensioning } from "../../records/rig.ts";
import type { Vec3 } from "../../surface/surface.ts";
import { bodyTorque, HAND_TORQUE, THREAD_FRICTION, threadOf } from "./turnbuckleWork.ts";

/** The rig's parts of the facts, all of them there. */
export interface RigFacts {
  facts: Facts;
  adjusters: FactsAdjuster[];
  tensioning: FactsTensioning;
}

/** The rig's parts, or null where the plan has none to tension. */
export function rigFacts(facts: Facts): RigFacts | null {
  const { rig, tensioning } = facts;
  return rig && tensioning && rig.adjusters.length > 0 ? { facts, adjusters: rig.adjusters, tensioning } : null;
}

/** All moves in the order of the work. */
export function allMoves(tensioning: FactsTensioning): FactsMove[] {
  return tensioning.stages.flatMap((s) => s.moves);
}

/** Pin to pin before the first move, m: what the adjuster is set to before anything is hung. */
export function startPins(rig: RigFacts, adjuster: FactsAdjuster): number {
  return allMoves(rig.tensioning).find((m) => m.adjuster === adjuster.id)?.pinFrom ?? adjuster.pinLength;
}

/** Greatest force a member may ever show, kN: its share of the weakest part, or null where that is not known. */
export function limitOf(rig: RigFacts, id: string): number | null {
  const adjuster = rig.adjusters.find((a) => a.id === id);
  const cable = rig.facts.cables?.find((c) => c.id === id);
  const parts = adjuster ? [adjuster.capacity] : [cable?.minBreakingForce ?? null, cable?.fitting ?? null];
  const known = parts.filter((kN) => kN !== null);
  return known.length === 0 ? null : rig.tensioning.limit * Math.min(...known);
}

/** The reading at which a move is stopped whatever the travel: the top of its window, or the member's limit where that is less. */
export function stopForce(rig: RigFacts, move: FactsMove): number {
  return Math.min(move.high, limitOf(rig, move.adjuster) ?? Infinity);
}

export interface HoldReading {
  id: string;
  planned: number;
  low: number;
  high: number;
}

/** What a member carries when the last stage is done, moves as a hand sets them; an adjuster without a reading its target. @units kN */
export function finalForce(rig: RigFacts, id: string): number | null {
  const last = rig.tensioning.stages[rig.tensioning.stages.length - 1];
  return last?.forces[id] ?? rig.adjusters.find((a) => a.id === id)?.target ?? null;
}

/**
 * What all members are to read at the end of a stage. The window is the gauge's share of the force aimed at: an adjuster's target, as
 * in the windows of its moves, else the member's final force. @units kN
 */
export function holdReadings(rig: RigFacts, stage: FactsStage): HoldReading[] {
  return Object.keys(stage.forces).map((id) => {
    const planned = stage.forces[id];
    const aim = rig.adjusters.find((a) => a.id === id)?.target ?? finalForce(rig, id) ?? planned;
    const window = rig.tensioning.readingError * Math.abs(aim);
    const low = planned >= 0 ? Math.max(0, planned - window) : planned - window;
    return { id, planned, low, high: planned + window };
  });
}

export interface CornerDistance {
  from: string;
  to: string;
  /** m */
  finished: number;
  /** m, at the end of the stage; null where the facts do not hold it. */
  atStage: number | null;
}

function gap(a: Vec3, b: Vec3): number {
  return Math.hypot(b[0] - a[0], b[1] - a[1], b[2] - a[2]);
}

/** Distances to measure between the near pins of adjusters: round the roof from neighbour to neighbour, then across. */
export function cornerDistances(rig: RigFacts, stage: FactsStage): CornerDistance[] {
  const nodes = rig.facts.rig?.nodes ?? [];
  const corners = rig.adjusters.map((a) => ({ id: a.id, at: nodes[a.nodes[0]] }));
  const n = corners.length;
  const middle = [0, 1].map((k) => corners.reduce((s, c) => s + c.at[k], 0) / n);
  const angle = (p: Vec3) => Math.atan2(p[1] - middle[1], p[0] - middle[0]);
  const ring = corners.map((c, i) => ({ ...c, i })).sort((a, b) => angle(a.at) - angle(b.at) || a.i - b.i);
  const pairs = ring.map((_, k): [number, number] => [k, (k + 1) % n]);
  const half = Math.floor(n / 2);
  if (n > 3) for (let k = 0; k < (n % 2 === 0 ? half : n); k++) pairs.push([k, (k + half) % n]);
  const seen = new Set<string>();
  return pairs.flatMap(([p, q]): CornerDistance[] => {
    const key = p < q ? `${p} ${q}` : `${q} ${p}`;
    if (p === q || seen.has(key)) return [];
    seen.add(key);
    const [a, b] = ring[p].i < ring[q].i ? [ring[p], ring[q]] : [ring[q], ring[p]];
    const [u, v] = [stage.corners?.[a.id], stage.corners?.[b.id]];
    return [{ from: a.id, to: b.id, finished: gap(a.at, b.at), atStage: u && v ? gap(u, v) : null }];
  });
}

/** Heights of the near pins to level, in the order of the adjusters: z of the mesh. @units m */
export function cornerHeights(
  rig: RigFacts,
  stage: FactsStage,
): { id: string; finished: number; atStage: number | null }[] {
  const nodes = rig.facts.rig?.nodes ?? [];
  return rig.adjusters.map((a) => ({
    id: a.id,
    finished: nodes[a.nodes[0]][2],
    atStage: stage.corners?.[a.id]?.[2] ?? null,
  }));
}

/** Step from which on an adjuster asks for more than a hand gives at its body, or null; by estimate. */
export function jackStep(rig: RigFacts, adjuster: FactsAdjuster): number | null {
  const thread = threadOf(adjuster);
  if (!thread) return null;
  const heavy = allMoves(rig.tensioning).find(
    (m) => m.adjuster === adjuster.id && bodyTorque(m.expect, thread, THREAD_FRICTION) > HAND_TORQUE,
  );
  return heavy?.step ?? null;
}
