// What a welder checks with a tape before a panel is joined: the control lengths the panels station has measured, with the names
// the cards give them, and what a tape can reach where cloth is set back and the net corner lies off it: lengths between the
// corners of the cut line. Does not judge: the tolerance is the office's.
import type { FactsPanel, Vec2 } from "../../records/facts.ts";
import type { ControlLengths } from "../../records/flatPanel.ts";
import { chordAcross, distance, runDistance, sideRun } from "./flatGeometry.ts";

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
  /** Where the figure shows it: its two ends on the net line; null where the line misses it. */
  net: [Vec2, Vec2] | null;
  netWidth: number;
  cutWidth: number;
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

/** Where the widths are shown on the figure: square to the axis, from the middle of its first end. */
function placeWidths(panel: FactsPanel, widths: ControlLengths["widths"]): Width[] {
  const from = mean(panel.axis.from.map((v) => panel.flat[v]));
  const to = mean(panel.axis.to.map((v) => panel.flat[v]));
  const length = distance(from, to);
  const along: Vec2 = [(to[0] - from[0]) / length, (to[1] - from[1]) / length];
  return widths.map((w): Width => {
    const p: Vec2 = [from[0] + w.at * along[0], from[1] + w.at * along[1]];
    const net = chordAcross(panel.net, p, [-along[1], along[0]]);
    return { name: `W${Math.round(4 * w.share)}`, station: w.at, net, netWidth: w.net, cutWidth: w.cut };
  });
}

/** Corners, lengths on the cloth, and the panel's control lengths by name (none where the facts have none). @units mm */
export function measurePanel(panel: FactsPanel): PanelMeasures {
  const corners = panel.sides.map(
    (s, i): Corner => ({
      name: `C${i + 1}`,
      at: panel.net[s.netFrom],
      cut: findCutCorner(panel.cut, panel.net[s.netFrom]),
    }),
  );
  const sides = corners.map((c, i) => measureSide(panel.cut, c.cut, corners[(i + 1) % corners.length].cut));
  const control = panel.control ?? { diagonals: [], widths: [] };
  const diagonals = control.diagonals.map((d): Diagonal => {
    const [from, to] = [corners[d.from], corners[d.to]];
    const onCloth = from.cut >= 0 && to.cut >= 0 && from.cut !== to.cut;
    const cutLength = onCloth ? distance(panel.cut[from.cut], panel.cut[to.cut]) : null;
    return { from, to, length: d.length, cutLength };
  });
  const widths = placeWidths(panel, control.widths);
  return { corners, sides, diagonals, widths, start: widths.length > 0 ? startOf(panel) : "" };
}

/** Index of the side whose net line comes nearest to a point. */
export function nearestSide(panel: FactsPanel, at: Vec2): number {
  const gaps = panel.sides.map((s) => runDistance(sideRun(panel, s), at));
  return gaps.indexOf(Math.min(...gaps));
}
