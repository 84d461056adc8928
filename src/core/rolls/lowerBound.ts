// Lengths below which no nest of given pieces on a roll can come, whatever the method: area, longest piece, chords across,
// and lines along (levelBound.ts).
// Source: own argument on dual feasible functions (S. P. Fekete and J. Schepers, New classes of fast lower bounds for bin
// packing problems, 2001): at each x the chords across the roll, each with one gap, sum to at most width + gap; so do their
// images under a dual feasible function, and the integral over x bounds the length. A half turn changes no integral.
import { type PlaneRing, ringArea, ringBox } from "../surface/ring.ts";
import { walkSlabs } from "./columns.ts";
import { boundByLevels } from "./levelBound.ts";

/** Shares of a slab in which a slanting chord is taken at its least. */
const PARTS = 8;
/** A share this near a step of a function is taken below it. */
const HAIR = 1e-9;

/** The function of Fekete and Schepers with parameter k; k = 0 is the identity. */
function stepped(k: number, share: number): number {
  if (k === 0) return share;
  const scaled = (k + 1) * share;
  const whole = Math.round(scaled);
  if (Math.abs(scaled - whole) < HAIR) return Math.max(0, whole - 1) / k;
  return Math.floor(scaled) / k;
}

/** Shares above 1 − e count whole, below e not at all. */
function clipped(e: number, share: number): number {
  if (share > 1 - e + HAIR) return 1;
  return share < e + HAIR ? 0 : share;
}

/** Parameters tried: (k, e), the second applied first. */
const FUNCTIONS: [number, number][] = [];
for (const k of [0, 1, 2, 3, 4, 5, 6])
  for (const e of [0, 0.5, 0.4, 1 / 3, 0.3, 0.25, 0.2, 1 / 6, 0.1]) FUNCTIONS.push([k, e]);

/** Runs of one chord: length along x and least share of the width, the gap counted in. */
function chordRuns(ring: PlaneRing, width: number, gap: number): [number, number][] {
  const runs: [number, number][] = [];
  walkSlabs(ring, 0, [], (xa, xb, sides) => {
    let a = gap;
    let b = gap;
    for (let i = 0; i + 1 < sides.count; i += 2) {
      a += sides.left[i + 1] - sides.left[i];
      b += sides.right[i + 1] - sides.right[i];
    }
    const parts = Math.abs(a - b) < HAIR * width ? 1 : PARTS;
    for (let k = 0; k < parts; k++) {
      const at = (t: number) => a + ((b - a) * t) / parts;
      runs.push([(xb - xa) / parts, Math.min(at(k), at(k + 1)) / (width + gap)]);
    }
  });
  return runs;
}

/**
 * The greatest of all bounds, from the roll's start on.
 * @param rolls the pieces may lie on so many rolls of this width, whose lengths are added up
 * @units mm; width: usable; start: trim at the start of the roll
 */
export function boundLength(rings: PlaneRing[], width: number, gap: number, start: number, rolls = 1): number {
  if (rings.length === 0) return 0;
  let best = 0;
  let sum = 0;
  const runs: [number, number][] = [];
  for (const ring of rings) {
    const box = ringBox(ring);
    best = Math.max(best, box.x1 - box.x0);
    sum += Math.abs(ringArea(ring)) + gap * (box.x1 - box.x0);
    runs.push(...chordRuns(ring, width, gap));
  }
  best = Math.max(best, sum / (width + gap));
  for (const [k, e] of FUNCTIONS) {
    let length = 0;
    for (const [dx, share] of runs) length += dx * stepped(k, e > 0 ? clipped(e, share) : share);
    best = Math.max(best, length);
  }
  return start + Math.max(best, boundByLevels(rings, width, gap, rolls));
}
