// Where the knife comes down and which way it goes, the same on every outline, so that it can be stated: from the leftmost corner,
// counter-clockwise. A corner, because a cut that begins on a smooth edge leaves a nick there.
import type { Vec2 } from "../../records/facts.ts";
import { ringArea } from "../../surface/ring.ts";

/** As the cut files have it. */
export const CUT_START =
  "CUTS: COUNTER-CLOCKWISE FROM THE LEFTMOST CORNER OF EACH OUTLINE, AFTER ITS PEN MARKS AND SLITS";

/** What turns by more than this is a corner, degrees; faired edges turn by a few. own */
const CORNER = 30;
/** Directions before and behind a point are taken over this much, mm: corners of outlines come with points near them. */
const ARM = 5;

function arm(ring: readonly Vec2[], i: number, step: 1 | -1): Vec2 {
  const [x, y] = ring[i];
  for (let k = 1; k < ring.length; k++) {
    const p = ring[(i + step * k + ring.length * k) % ring.length];
    if (Math.hypot(p[0] - x, p[1] - y) >= ARM) return [p[0] - x, p[1] - y];
  }
  return [1, 0];
}

function isCorner(ring: readonly Vec2[], i: number): boolean {
  const [back, on] = [arm(ring, i, -1), arm(ring, i, 1)];
  const turn = Math.atan2(back[1] * on[0] - back[0] * on[1], -(back[0] * on[0] + back[1] * on[1]));
  return Math.abs(turn) > (CORNER * Math.PI) / 180;
}

/** The same closed outline, counter-clockwise, from its leftmost corner (of two the lower); without a corner from its leftmost point. */
export function fromCutStart(outline: readonly Vec2[]): Vec2[] {
  const ring = ringArea(Float64Array.from(outline.flat())) < 0 ? [...outline].reverse() : outline;
  const byX = ring.map((_, i) => i).sort((a, b) => ring[a][0] - ring[b][0] || ring[a][1] - ring[b][1]);
  const start = byX.find((i) => isCorner(ring, i)) ?? byX[0];
  return [...ring.slice(start), ...ring.slice(0, start)];
}
