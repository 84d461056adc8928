// Plane measures the papers need: lengths, nearest pieces, chords across an outline, a point well inside. Millimetres in,
// millimetres out; nothing here decides anything about the cloth.
import type { FactsPanel, FactsSide, Vec2 } from "../records/facts.ts";

export interface Box {
  min: Vec2;
  max: Vec2;
}

/** Smallest upright box round the points. */
export function boxOf(points: readonly Vec2[]): Box {
  const min: Vec2 = [Infinity, Infinity];
  const max: Vec2 = [-Infinity, -Infinity];
  for (const [x, y] of points) {
    min[0] = Math.min(min[0], x);
    min[1] = Math.min(min[1], y);
    max[0] = Math.max(max[0], x);
    max[1] = Math.max(max[1], y);
  }
  return { min, max };
}

/** Straight distance of two points. */
export function distance(a: Vec2, b: Vec2): number {
  return Math.hypot(b[0] - a[0], b[1] - a[1]);
}

/** Point at a share 0…1 of the length of an open run, and the run's direction there (unit). */
export function pointAlong(run: readonly Vec2[], share: number): { at: Vec2; along: Vec2 } {
  let total = 0;
  for (let i = 1; i < run.length; i++) total += distance(run[i - 1] as Vec2, run[i] as Vec2);
  let left = share * total;
  for (let i = 1; i < run.length; i++) {
    const a = run[i - 1] as Vec2;
    const b = run[i] as Vec2;
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
  return { at: run[0] ?? [0, 0], along: [1, 0] };
}

function distanceToPiece(p: Vec2, a: Vec2, b: Vec2): number {
  const dx = b[0] - a[0];
  const dy = b[1] - a[1];
  const l2 = dx * dx + dy * dy;
  const t = l2 > 0 ? Math.min(1, Math.max(0, ((p[0] - a[0]) * dx + (p[1] - a[1]) * dy) / l2)) : 0;
  return Math.hypot(p[0] - a[0] - t * dx, p[1] - a[1] - t * dy);
}

/** Nearest piece of a closed outline: its distance and its direction (unit). */
export function nearestPiece(outline: readonly Vec2[], p: Vec2): { distance: number; along: Vec2 } {
  let best = { distance: Infinity, along: [1, 0] as Vec2 };
  for (let i = 0; i < outline.length; i++) {
    const a = outline[i] as Vec2;
    const b = outline[(i + 1) % outline.length] as Vec2;
    const d = distanceToPiece(p, a, b);
    const l = distance(a, b);
    if (d < best.distance && l > 0) best = { distance: d, along: [(b[0] - a[0]) / l, (b[1] - a[1]) / l] };
  }
  return best;
}

/** Whether the point lies inside the closed outline (even-odd). */
export function isInside(outline: readonly Vec2[], p: Vec2): boolean {
  let inside = false;
  for (let i = 0, j = outline.length - 1; i < outline.length; j = i++) {
    const a = outline[i] as Vec2;
    const b = outline[j] as Vec2;
    if (a[1] > p[1] !== b[1] > p[1] && p[0] < ((b[0] - a[0]) * (p[1] - a[1])) / (b[1] - a[1]) + a[0]) inside = !inside;
  }
  return inside;
}

/** Point of an 11 × 11 grid over the box that lies farthest inside the outline, and how far. @source own: good enough for a label */
export function insidePoint(outline: readonly Vec2[]): { at: Vec2; clear: number } {
  const box = boxOf(outline);
  let best = { at: outline[0] ?? ([0, 0] as Vec2), clear: 0 };
  // The middle of the box is looked at first: labels sit centred wherever the cloth allows.
  for (const i of [6, 5, 7, 4, 8, 3, 9, 2, 10, 1, 11]) {
    for (const j of [6, 5, 7, 4, 8, 3, 9, 2, 10, 1, 11]) {
      const at: Vec2 = [
        box.min[0] + ((box.max[0] - box.min[0]) * i) / 12,
        box.min[1] + ((box.max[1] - box.min[1]) * j) / 12,
      ];
      if (!isInside(outline, at)) continue;
      const clear = nearestPiece(outline, at).distance;
      if (clear > best.clear * 1.02) best = { at, clear };
    }
  }
  return best;
}

/** Outermost crossings of a closed outline with the line through p along the unit direction d, or null where it misses. */
export function chordAcross(outline: readonly Vec2[], p: Vec2, d: Vec2): [Vec2, Vec2] | null {
  let low = Infinity;
  let high = -Infinity;
  for (let i = 0; i < outline.length; i++) {
    const a = outline[i] as Vec2;
    const b = outline[(i + 1) % outline.length] as Vec2;
    const sa = (a[0] - p[0]) * d[1] - (a[1] - p[1]) * d[0];
    const sb = (b[0] - p[0]) * d[1] - (b[1] - p[1]) * d[0];
    if (sa > 0 === sb > 0) continue;
    const t = sa / (sa - sb);
    const u = (a[0] + t * (b[0] - a[0]) - p[0]) * d[0] + (a[1] + t * (b[1] - a[1]) - p[1]) * d[1];
    low = Math.min(low, u);
    high = Math.max(high, u);
  }
  if (!(low < high)) return null;
  return [
    [p[0] + low * d[0], p[1] + low * d[1]],
    [p[0] + high * d[0], p[1] + high * d[1]],
  ];
}

/** The side's net line, counter-clockwise, both ends included. */
export function sideRun(panel: FactsPanel, side: FactsSide): Vec2[] {
  const n = panel.net.length;
  if (side.netFrom === side.netTo && panel.sides.length === 1) return [...panel.net, panel.net[0] as Vec2];
  const run: Vec2[] = [];
  for (let k = side.netFrom; ; k = (k + 1) % n) {
    run.push(panel.net[k] as Vec2);
    if (k === side.netTo || run.length > n) return run;
  }
}
