// What the hand has to do at a turnbuckle: turns in whole and sixths, and the torque the body asks for under load.
// Torque: screw thread with friction, both ends turned at once by the body. Textbook formula; thread by name or pitch, friction and what a
// hand can give are common practice, said so on the sheet. Never a reason to leave the gauge away.
import type { FactsAdjuster } from "../../records/rig.ts";

/** Sixths: the flats of a hexagonal body. */
const PARTS = 6;
/** Dry or poorly greased steel threads, common practice 0.10 to 0.20. */
export const THREAD_FRICTION = 0.15;
/** What one person gives at a bar of half a metre, kN·m (common practice: 400 N). */
export const HAND_TORQUE = 0.2;

/** Coarse metric threads: pitch by diameter, mm. ISO 261, from memory. */
const COARSE: readonly (readonly [number, number])[] = [
  [8, 1.25],
  [10, 1.5],
  [12, 1.75],
  [14, 2],
  [16, 2],
  [18, 2.5],
  [20, 2.5],
  [22, 2.5],
  [24, 3],
  [27, 3],
  [30, 3.5],
  [33, 3.5],
  [36, 4],
  [39, 4],
  [42, 4.5],
  [45, 4.5],
  [48, 5],
  [52, 5],
  [56, 5.5],
  [60, 5.5],
  [64, 6],
];

/** "1 turn + 2/6": whole turns and sixths of one, without a sign. */
export function turnsText(turns: number): string {
  const sixths = Math.round(Math.abs(turns) * PARTS);
  const whole = Math.floor(sixths / PARTS);
  const rest = sixths % PARTS;
  const wholeText = whole === 1 ? "1 turn" : `${whole} turns`;
  if (rest === 0) return wholeText;
  // Bound so that a line never breaks between the sign and the fraction.
  return whole === 0 ? `${rest}/${PARTS} turn` : `${wholeText} +\u00a0${rest}/${PARTS}`;
}

/**
 * The thread an adjuster is taken to have, mm: the one given; else the one its turnbuckle's name tells ("m24") where the pitch
 * agrees; else the thickest coarse thread of the pitch, which asks for most. null where the travel a turn fits none.
 */
export function threadOf(
  adjuster: FactsAdjuster,
): { diameter: number; pitch: number; ends: 1 | 2; assumed: boolean } | null {
  const ends = adjuster.ends === "single" ? 1 : 2;
  const pitch = adjuster.perTurn / ends;
  if (adjuster.thread !== undefined) return { diameter: adjuster.thread, pitch, ends, assumed: false };
  const fitting = COARSE.filter(([, p]) => Math.abs(p - pitch) < 1e-6).map(([d]) => d);
  if (fitting.length === 0) return null;
  const named = Number(/(?:^|[^a-z0-9])m(\d+)(?!\d)/i.exec(adjuster.turnbuckle)?.[1]);
  return { diameter: fitting.includes(named) ? named : Math.max(...fitting), pitch, ends, assumed: true };
}

/** The thread in words: "M24", "M24 assumed", or that nothing is known of it. */
export function threadText(adjuster: FactsAdjuster): string {
  const thread = threadOf(adjuster);
  return thread ? `M${thread.diameter}${thread.assumed ? " assumed" : ""}` : "thread not known";
}

/**
 * Torque at the body of a turnbuckle, kN·m: F·(d2/2)·tan(φ + ρ') for each of its threads, both turned at once.
 * @shape force kN; thread diameter and pitch mm; ends: threads in the body, two where left out
 * @source screw with V-thread of 60°: lead angle φ = P/(π d2), tan ρ' = μ/cos 30°, d2 = d − 0.6495 P (ISO 724); textbook
 */
export function bodyTorque(
  force: number,
  thread: { diameter: number; pitch: number; ends?: 1 | 2 },
  friction: number,
): number {
  const pitchDiameter = thread.diameter - 0.6495 * thread.pitch;
  const lead = Math.atan(thread.pitch / (Math.PI * pitchDiameter));
  const rub = Math.atan(friction / Math.cos(Math.PI / 6));
  return (((thread.ends ?? 2) / 2) * force * pitchDiameter * Math.tan(lead + rub)) / 1000;
}
