// What a welder checks with a tape before a panel is joined: corners, diagonals, widths at the quarter points, all from the
// panel's own flat outline. Where cloth is set back its net corner lies off the cloth: what a tape can reach is measured between
// the corners of the cut line. Does not judge: the tolerance is the office's.
import type { FactsPanel, Vec2 } from "../records/facts.ts";
import { chordAcross, distance } from "./flatGeometry.ts";

export interface Corner {
  /** C1, C2, … in the order of the sides: corner k is where side k begins. */
  name: string;
  /** Corner of the net line. */
  at: Vec2;
  /** Place in the cut outline of the corner that belongs to it, or -1 where the cut line has none there. */
  cut: number;
}

export interface Diagonal {
  from: Corner;
  to: Corner;
  /** mm, between the net corners */
  length: number;
  /** mm, between the cut corners; null where one is missing */
  cutLength: number | null;
}

export interface Width {
  /** W1, W2, W3 at 1/4, 1/2, 3/4 of the way between the two ends. */
  name: string;
  /** mm from the middle of the first end, along the axis. */
  station: number;
  /** Across the net line: its two ends and their distance, mm; null where the line misses it. */
  net: [Vec2, Vec2] | null;
  netWidth: number | null;
  cutWidth: number | null;
}

/** What can be measured on the cloth along a side, mm; null where the cut line has no corner at an end. */
export interface SideMeasure {
  /** Along the cut line from corner to corner. */
  edge: number | null;
  /** Straight between the same corners. */
  chord: number | null;
}

export interface PanelMeasures {
  corners: Corner[];
  sides: SideMeasure[];
  diagonals: Diagonal[];
  widths: Width[];
  /** The end that width stations are measured from, in words: "side 4" or "corner C1". */
  start: string;
}

/** The end of the panel its axis begins at: the side that lies in it, or the corner where it is pointed. */
function startOf(panel: FactsPanel): string {
  const end = new Set(panel.axis.from);
  const side = panel.sides.findIndex((s) => s.vertices.every((v) => end.has(v)));
  if (side >= 0) return `side ${side + 1}`;
  const corner = panel.sides.findIndex((s) => s.vertices.some((v) => end.has(v)));
  // A pointed end is shared by two sides; it is named after the one that begins there.
  const first = panel.sides.findIndex((s) => {
    const p = panel.net[s.netFrom];
    return panel.axis.from.some((v) => distance(panel.flat[v], p) < 1);
  });
  return `corner C${(first >= 0 ? first : Math.max(corner, 0)) + 1}`;
}

/** A bend of the cut line counts as a corner from this angle on; none is looked for farther than this from the net corner. */
const CORNER_SIN = Math.sin(Math.PI / 12);
const CORNER_REACH = 700;

function bend(outline: readonly Vec2[], i: number): number {
  const n = outline.length;
  const [a, b, c] = [outline[(i + n - 1) % n], outline[i], outline[(i + 1) % n]];
  const [u, v] = [distance(a, b), distance(b, c)];
  if (u === 0 || v === 0) return 0;
  const cross = ((b[0] - a[0]) * (c[1] - b[1]) - (b[1] - a[1]) * (c[0] - b[0])) / (u * v);
  const dot = ((b[0] - a[0]) * (c[0] - b[0]) + (b[1] - a[1]) * (c[1] - b[1])) / (u * v);
  // A bend sharper than a right angle is a corner whatever its sine.
  return dot < 0 ? 1 : Math.abs(cross);
}

/** The corner of the cut line nearest to a point, or -1. */
function findCutCorner(cut: readonly Vec2[], at: Vec2): number {
  let best = -1;
  let reach = CORNER_REACH;
  cut.forEach((p, i) => {
    const d = distance(p, at);
    if (d < reach && bend(cut, i) >= CORNER_SIN) [best, reach] = [i, d];
  });
  return best;
}

function measureSide(cut: readonly Vec2[], from: number, to: number): SideMeasure {
  if (from < 0 || to < 0 || from === to) return { edge: null, chord: null };
  let edge = 0;
  for (let i = from; i !== to; i = (i + 1) % cut.length) edge += distance(cut[i], cut[(i + 1) % cut.length]);
  return { edge, chord: distance(cut[from], cut[to]) };
}

function mean(points: Vec2[]): Vec2 {
  const n = Math.max(1, points.length);
  return [points.reduce((s, p) => s + p[0], 0) / n, points.reduce((s, p) => s + p[1], 0) / n];
}

/** The corners nearest to the outermost points of one end, left and right of the axis; one corner where the end is pointed. */
function endCorners(panel: FactsPanel, corners: Corner[], end: number[], across: Vec2): [Corner, Corner] {
  const points = end.map((v) => panel.flat[v]);
  const height = (p: Vec2) => p[0] * across[0] + p[1] * across[1];
  const sorted = [...points].sort((a, b) => height(a) - height(b));
  const nearest = (p: Vec2) =>
    corners.reduce((best, c) => (distance(c.at, p) < distance(best.at, p) ? c : best), corners[0]);
  return [nearest(sorted[0]), nearest(sorted[sorted.length - 1])];
}

/** Corners, straight lengths of sides, both diagonals and the widths at the quarter points. @units mm */
export function measurePanel(panel: FactsPanel): PanelMeasures {
  const corners = panel.sides.map(
    (s, i): Corner => ({
      name: `C${i + 1}`,
      at: panel.net[s.netFrom],
      cut: findCutCorner(panel.cut, panel.net[s.netFrom]),
    }),
  );
  const sides = corners.map((c, i) => measureSide(panel.cut, c.cut, corners[(i + 1) % corners.length].cut));
  if (corners.length === 0 || panel.axis.from.length === 0 || panel.axis.to.length === 0) {
    return { corners, sides, diagonals: [], widths: [], start: "" };
  }
  const from = mean(panel.axis.from.map((v) => panel.flat[v]));
  const to = mean(panel.axis.to.map((v) => panel.flat[v]));
  const length = distance(from, to);
  if (!(length > 0)) return { corners, sides, diagonals: [], widths: [], start: "" };
  const along: Vec2 = [(to[0] - from[0]) / length, (to[1] - from[1]) / length];
  const across: Vec2 = [-along[1], along[0]];
  const [a, b] = endCorners(panel, corners, panel.axis.from, across);
  const [c, d] = endCorners(panel, corners, panel.axis.to, across);
  // A pointed end has one corner: its diagonals are sides already listed.
  const pairs: [Corner, Corner][] =
    a === b || c === d
      ? []
      : [
          [a, d],
          [b, c],
        ];
  const diagonals = pairs.map(([p, q]) => ({
    from: p,
    to: q,
    length: distance(p.at, q.at),
    cutLength: p.cut < 0 || q.cut < 0 || p.cut === q.cut ? null : distance(panel.cut[p.cut], panel.cut[q.cut]),
  }));
  const widths = [1, 2, 3].map((k): Width => {
    const p: Vec2 = [from[0] + (length * k * along[0]) / 4, from[1] + (length * k * along[1]) / 4];
    const net = chordAcross(panel.net, p, across);
    const cut = chordAcross(panel.cut, p, across);
    return {
      name: `W${k}`,
      station: (length * k) / 4,
      net,
      netWidth: net && distance(net[0], net[1]),
      cutWidth: cut && distance(cut[0], cut[1]),
    };
  });
  return { corners, sides, diagonals, widths, start: startOf(panel) };
}
