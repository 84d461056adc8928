// How far behind one wide piece another comes to lie on a roll, by how they lie across it: the ends of both on lines along the roll.
// A forecast by which turns and places are chosen; the pieces are then slid together exactly. Does not: lay anything. Source: own.
import type { NestShape } from "./nestShape.ts";

/** Lines across the width of a roll. */
const LEVELS = 192;
/** Points of the disc an outline is grown by: up and along, shares of the gap. */
const DISC: [number, number][] = [
  [0, 1],
  [Math.SQRT1_2, Math.SQRT1_2],
  [-Math.SQRT1_2, Math.SQRT1_2],
  [1, 0],
  [-1, 0],
];

/** Where a shape begins on each line from its lower edge less the skirt up, and where it ends, grown by the gap; ±Infinity off it. */
interface Ends {
  left: Float64Array;
  right: Float64Array;
}

/** Offsets of shapes on rolls of one width, each worked out when it is first asked for. @units mm */
export interface ChainOffsets {
  width: number;
  gap: number;
  /** From one line to the next. */
  level: number;
  /** Lines by which a grown shape stands out below and above. */
  skirt: number;
  ends: Map<NestShape, Ends>;
  /** By the shape in front, then by the one behind: by how much higher the latter lies, in levels. */
  known: Map<NestShape, Map<NestShape, Float32Array>>;
}

/** @units mm */
export function openOffsets(width: number, gap: number): ChainOffsets {
  const level = width / LEVELS;
  return { width, gap, level, skirt: Math.ceil(gap / level), ends: new Map(), known: new Map() };
}

/** The highest place of a shape across the roll, in levels. */
export function topLevel(offsets: ChainOffsets, shape: NestShape): number {
  return Math.max(0, Math.floor((offsets.width - shape.height) / offsets.level + 1e-9));
}

/** Widens the ends by those of a ring moved along and up: line k lies at (k + ½ − skirt)·level. */
function widenInPlace(
  side: Float64Array,
  ring: Float64Array,
  move: [number, number],
  offsets: ChainOffsets,
  way: 1 | -1,
) {
  const { level, skirt } = offsets;
  for (let i = 0, j = ring.length - 2; i < ring.length; j = i, i += 2) {
    const [p, q] = ring[i + 1] < ring[j + 1] ? [i, j] : [j, i];
    const [ya, yb] = [ring[p + 1] + move[1], ring[q + 1] + move[1]];
    const [xa, xb] = [ring[p] + move[0], ring[q] + move[0]];
    const first = Math.max(0, Math.ceil(ya / level + skirt - 0.5));
    const last = Math.min(side.length - 1, Math.floor(yb / level + skirt - 0.5));
    for (let k = first; k <= last; k++) {
      const y = (k + 0.5 - skirt) * level;
      const x = yb > ya ? xa + ((y - ya) / (yb - ya)) * (xb - xa) : way * Math.max(way * xa, way * xb);
      if (way * x > way * side[k]) side[k] = x;
    }
  }
}

function endsOf(offsets: ChainOffsets, shape: NestShape): Ends {
  let ends = offsets.ends.get(shape);
  if (!ends) {
    const lines = Math.ceil(shape.height / offsets.level) + 2 * offsets.skirt;
    ends = { left: new Float64Array(lines).fill(Infinity), right: new Float64Array(lines).fill(-Infinity) };
    widenInPlace(ends.left, shape.ring, [0, 0], offsets, -1);
    for (const [up, along] of DISC)
      widenInPlace(ends.right, shape.ring, [along * offsets.gap, up * offsets.gap], offsets, 1);
    offsets.ends.set(shape, ends);
  }
  return ends;
}

/**
 * Distance along the roll from where a shape begins to where the next one behind it may begin, that lies so many levels higher.
 * @units mm; −Infinity where no line runs through both
 */
export function offsetBehind(offsets: ChainOffsets, front: NestShape, behind: NestShape, higher: number): number {
  const all = offsets.known.get(front) ?? new Map<NestShape, Float32Array>();
  const known = all.get(behind) ?? new Float32Array(2 * LEVELS + 1).fill(Number.NaN);
  if (!all.has(behind)) offsets.known.set(front, all.set(behind, known));
  const at = higher + LEVELS;
  if (Number.isNaN(known[at])) {
    const { right } = endsOf(offsets, front);
    const { left } = endsOf(offsets, behind);
    let most = -Infinity;
    for (let k = Math.max(0, higher); k < Math.min(right.length, left.length + higher); k++)
      most = Math.max(most, right[k] - left[k - higher]);
    known[at] = most;
  }
  return known[at];
}
