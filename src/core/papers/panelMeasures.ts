// What a welder checks with a tape before a panel is joined: corners, diagonals, widths at the quarter points, all from the
// panel's own flat outline. Does not judge: the tolerance is the office's.
import type { FactsPanel, Vec2 } from "../records/facts.ts";
import { chordAcross, distance, sideRun } from "./flatGeometry.ts";

export interface Corner {
  /** C1, C2, … in the order of the sides: corner k is where side k begins. */
  name: string;
  at: Vec2;
}

export interface Diagonal {
  from: Corner;
  to: Corner;
  /** mm */
  length: number;
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

export interface SideMeasure {
  /** Straight from corner to corner, mm. */
  straight: number;
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
  const corners = panel.sides.map((s, i): Corner => ({ name: `C${i + 1}`, at: panel.net[s.netFrom] }));
  const sides = panel.sides.map((s) => {
    const run = sideRun(panel, s);
    return { straight: distance(run[0], run[run.length - 1]) };
  });
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
  const diagonals = pairs.map(([p, q]) => ({ from: p, to: q, length: distance(p.at, q.at) }));
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
