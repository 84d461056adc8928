// Plane measures the papers need beside those of surface/ring.ts: runs of an outline, chords across it, the roomiest place in
// it. Millimetres; nothing here decides anything about the cloth.
import type { FactsPanel, FactsSide, Vec2 } from "../../records/facts.ts";
import { pointSegmentSquared, ringBox, ringDistance, ringHolds } from "../../surface/ring.ts";

export interface Box {
  min: Vec2;
  max: Vec2;
}

/** Smallest upright box round the points. */
export function boxOf(points: readonly Vec2[]): Box {
  const box = ringBox(Float64Array.from(points.flat()));
  return { min: [box.x0, box.y0], max: [box.x1, box.y1] };
}

/** Straight distance of two points. */
export function distance(a: Vec2, b: Vec2): number {
  return Math.hypot(b[0] - a[0], b[1] - a[1]);
}

/** Least distance of a point from an open run. */
export function runDistance(run: readonly Vec2[], p: Vec2): number {
  const squares = run.slice(1).map((b, i) => pointSegmentSquared(...p, ...run[i], b));
  return Math.sqrt(Math.min(...squares));
}

/** Point at a share 0…1 of the length of an open run, and the run's direction there (unit). */
export function pointAlong(run: readonly Vec2[], share: number): { at: Vec2; along: Vec2 } {
  let total = 0;
  for (let i = 1; i < run.length; i++) total += distance(run[i - 1], run[i]);
  let left = share * total;
  for (let i = 1; i < run.length; i++) {
    const [a, b] = [run[i - 1], run[i]];
    const d = distance(a, b);
    if (d > 0 && (left <= d || i === run.length - 1)) {
      const t = Math.min(left / d, 1);
      return {
        at: [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])],
        along: [(b[0] - a[0]) / d, (b[1] - a[1]) / d],
      };
    }
    left -= d;
  }
  return { at: run[0], along: [1, 0] };
}

/** A place counts as roomy when it has this share of the room of the roomiest. */
const ROOMY = 0.75;

interface InsidePlace {
  at: Vec2;
  /** Distance to the outline. */
  clear: number;
  /** Steps of the grid from the middle of the box. */
  off: number;
}

/** The points of an 11 × 11 grid over the box that lie inside the outline. */
function gridInside(outline: readonly Vec2[]): InsidePlace[] {
  const ring = Float64Array.from(outline.flat());
  const box = ringBox(ring);
  const places: InsidePlace[] = [];
  for (let i = 1; i < 12; i++) {
    for (let j = 1; j < 12; j++) {
      const x = box.x0 + ((box.x1 - box.x0) * i) / 12;
      const y = box.y0 + ((box.y1 - box.y0) * j) / 12;
      if (ringHolds(ring, x, y))
        places.push({ at: [x, y], clear: ringDistance(ring, x, y), off: Math.hypot(i - 6, j - 6) });
    }
  }
  return places;
}

/**
 * Of the points of an 11 × 11 grid over the box that lie roomily inside the outline, the one nearest to the box's middle, and
 * its distance to the outline. Good enough for a label. @source own
 */
export function insidePoint(outline: readonly Vec2[]): { at: Vec2; clear: number } {
  const places = gridInside(outline);
  const room = places.reduce((most, p) => Math.max(most, p.clear), 0);
  let best: InsidePlace = { at: outline[0], clear: 0, off: Infinity };
  for (const p of places) if (p.clear >= ROOMY * room && p.off < best.off) best = p;
  return best;
}

/** Places inside the outline for a label: the one of insidePoint, then the others from the roomiest on. */
export function insidePlaces(outline: readonly Vec2[]): Vec2[] {
  const rest = gridInside(outline).sort((a, b) => b.clear - a.clear || a.off - b.off);
  return [insidePoint(outline).at, ...rest.map((p) => p.at)];
}

/** Outermost crossings of a closed outline with the line through p along the unit direction d, or null where it misses. */
export function chordAcross(outline: readonly Vec2[], p: Vec2, d: Vec2): [Vec2, Vec2] | null {
  let low = Infinity;
  let high = -Infinity;
  outline.forEach((a, i) => {
    const b = outline[(i + 1) % outline.length];
    const sa = (a[0] - p[0]) * d[1] - (a[1] - p[1]) * d[0];
    const sb = (b[0] - p[0]) * d[1] - (b[1] - p[1]) * d[0];
    if (sa > 0 === sb > 0) return;
    const t = sa / (sa - sb);
    const u = (a[0] + t * (b[0] - a[0]) - p[0]) * d[0] + (a[1] + t * (b[1] - a[1]) - p[1]) * d[1];
    low = Math.min(low, u);
    high = Math.max(high, u);
  });
  if (!(low < high)) return null;
  return [
    [p[0] + low * d[0], p[1] + low * d[1]],
    [p[0] + high * d[0], p[1] + high * d[1]],
  ];
}

/** The side's net line, counter-clockwise, both ends included. */
export function sideRun(panel: FactsPanel, side: FactsSide): Vec2[] {
  const n = panel.net.length;
  if (side.netFrom === side.netTo && panel.sides.length === 1) return [...panel.net, panel.net[0]];
  const run: Vec2[] = [];
  for (let k = side.netFrom; run.length <= n; k = (k + 1) % n) {
    run.push(panel.net[k]);
    if (k === side.netTo) break;
  }
  return run;
}
