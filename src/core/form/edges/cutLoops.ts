// Boundary loops into runs: parted at line ends, anchors, ends of fixed runs and corners. Names and kinds come later.
import type { HeldPoint } from "./heldPoints.ts";
import type { SurfaceLine } from "./matchLines.ts";

/** A run of the boundary between two breaks. */
export interface BoundaryRun {
  loop: number;
  /** Along the loop, both ends; a closed run repeats its first vertex. */
  vertices: number[];
  closed: boolean;
  /** The line of the mesh that covers it, null where none does. */
  line: SurfaceLine | null;
  /** Every side of it lies in a run of three or more fixed vertices. */
  held: boolean;
  tear: boolean;
}

/** What cutting a loop needs to know. */
export interface LoopWords {
  xyz: Float64Array<ArrayBuffer>;
  /** Line of each side by sideKey of its two vertices. */
  lineOfSide: Map<string, SurfaceLine>;
  held: Map<number, HeldPoint>;
  /** Positions in the loop. */
  corners: number[];
  tear: boolean;
}

/** Least number of consecutive fixed vertices that is a clamped edge (job.md, "Rules"). */
const CLAMPED_RUN = 3;

/** Name of a side for maps. */
export function sideKey(a: number, b: number): string {
  return a < b ? `${a}-${b}` : `${b}-${a}`;
}

/** 1 for every side (i, i+1) inside a run of at least three consecutive vertices that the mesh fixes. */
function findHeldSides(loop: readonly number[], held: Map<number, HeldPoint>): Uint8Array<ArrayBuffer> {
  const n = loop.length;
  const out = new Uint8Array(n);
  const is = loop.map((v) => held.get(v) !== undefined);
  const gap = is.indexOf(false);
  if (gap < 0) return out.fill(1);
  for (let k = 1; k <= n; ) {
    if (!is[(gap + k) % n]) {
      k++;
      continue;
    }
    let last = k;
    while (is[(gap + last + 1) % n]) last++;
    if (last - k + 1 >= CLAMPED_RUN) for (let i = k; i < last; i++) out[(gap + i) % n] = 1;
    k = last + 1;
  }
  return out;
}

/** Lowest vertex of a loop by z, then x, then y; heights closer than a millionth of the loop's extent are one. */
function findLowest(xyz: Float64Array<ArrayBuffer>, loop: readonly number[]): number {
  let extent = 0;
  for (const v of loop)
    for (let k = 0; k < 3; k++) extent = Math.max(extent, Math.abs(xyz[3 * v + k] - xyz[3 * loop[0] + k]));
  let best = 0;
  for (let i = 1; i < loop.length; i++)
    for (const k of [2, 0, 1]) {
      const d = xyz[3 * loop[i] + k] - xyz[3 * loop[best] + k];
      if (Math.abs(d) <= 1e-6 * extent) continue;
      if (d < 0) best = i;
      break;
    }
  return best;
}

/**
 * Runs of one loop in order, and its anchors: isolated fixed points, corners, ends of fixed runs.
 * The first run starts at the first anchor (job, then file, then vertex number), else at the first break from the lowest vertex.
 */
export function cutLoop(
  loop: readonly number[],
  loopIndex: number,
  words: LoopWords,
): { runs: BoundaryRun[]; anchors: number[] } {
  const { xyz, held, tear } = words;
  const n = loop.length;
  const side = loop.map((v, i) => words.lineOfSide.get(sideKey(v, loop[(i + 1) % n])) ?? null);
  const heldSide = findHeldSides(loop, held);
  const corner = new Set(tear ? [] : words.corners);
  const anchorAt: number[] = [];
  const breaks: number[] = [];
  for (let i = 0; i < n && !tear; i++) {
    const before = (i + n - 1) % n;
    const point = held.get(loop[i]);
    const runEnd = heldSide[before] !== heldSide[i];
    const isolated = point !== undefined && (point.byJob || (!heldSide[before] && !heldSide[i]));
    const anchor = corner.has(i) || runEnd || isolated;
    if (anchor) anchorAt.push(i);
    if (anchor || side[before] !== side[i]) breaks.push(i);
  }
  const rank = (i: number) => held.get(loop[i])?.order ?? Infinity;
  const first = anchorAt.toSorted((i, j) => {
    const d = rank(i) - rank(j);
    return d < 0 || d > 0 ? d : loop[i] - loop[j];
  })[0];
  const start = first ?? findLowest(xyz, loop);
  const fromStart = (i: number) => (i - start + n) % n;
  const order = breaks.toSorted((i, j) => fromStart(i) - fromStart(j));
  if (order.length === 0) order.push(start);
  const runs = order.map((from, k): BoundaryRun => {
    const to = order[(k + 1) % order.length];
    const sides = (to - from + n) % n || n;
    const vertices = Array.from({ length: sides + 1 }, (_, i) => loop[(from + i) % n]);
    let all = true;
    for (let i = 0; i < sides; i++) all &&= heldSide[(from + i) % n] === 1;
    return { loop: loopIndex, vertices, closed: sides === n, line: side[from], held: all, tear };
  });
  return { runs, anchors: anchorAt.toSorted((i, j) => fromStart(i) - fromStart(j)).map((i) => loop[i]) };
}
