// What is drawn on the cloth inside its cut outline: seam and fold lines, match marks, warp arrow, names. mm, panel axes.
// Does not: write files or choose fonts. Match marks stand at the same points of the surface on both panels of a seam, since
// they are chosen from the seam's own vertices and lengths on the form; unequal steps, one to three ticks and a running
// number keep a panel from being joined shifted or the wrong way round (common practice; the step rule is own).
import type { CutPanel, PanelMark, PanelSide, Ring } from "../records/flatPanel.ts";
import type { Seam } from "../records/stripLayout.ts";
import { ringBox, ringDistance, ringHolds } from "../surface/ring.ts";

type Point = [number, number];

/** What a panel must know of the roof round it. */
export interface PanelPlace {
  seams: Pick<Seam, "id" | "vertices" | "strips" | "upper">[];
  /** Anchors by vertex of the cut surface; cutBack in mm keeps the cloth that far from the system point. */
  anchors: { id: string; vertex: number; cutBack: number }[];
}

/** Mean distance of match marks on the form, m. */
const STEP_M = 1;
/** Distance between the ticks of one mark, mm. */
const TICK_GAP = 6;
/** Longest tick, and the tick where there is no allowance to draw it in, mm. */
const TICK_LONGEST = 25;
const TICK_INWARD = 10;
/** Text on sides: greatest height, mm; least height that is written on cloth at all. */
const SIDE_TEXT = 12;
const LEAST_TEXT = 3;

/**
 * Which vertices of a seam carry a match mark, from its lengths on the form.
 * @shape arc: m from the seam's first vertex, rising -> indices into the seam's vertices, rising, ends left out
 */
export function chooseMatchPoints(arc: number[]): number[] {
  const total = arc[arc.length - 1];
  const chosen: number[] = [];
  const golden = (Math.sqrt(5) - 1) / 2;
  const step = Math.min(STEP_M, total / 2.2);
  let target = 0.7 * step;
  for (let k = 1; target < total - 0.2 * step; k++) {
    let best = 0;
    for (let i = 1; i + 1 < arc.length; i++)
      if (best === 0 || Math.abs(arc[i] - target) < Math.abs(arc[best] - target)) best = i;
    if (best > 0 && (chosen.length === 0 || best > chosen[chosen.length - 1])) chosen.push(best);
    target += step * (0.75 + 0.5 * ((k * golden) % 1));
  }
  return chosen;
}

/** A side as a line with arc lengths; reversed where it runs against its seam. */
interface SideLine {
  points: Point[];
  arc: number[];
  /** +1 where the cloth's outside lies to the right of the line's run, −1 to the left. */
  outside: number;
}

function buildSideLine(panel: CutPanel, vertices: number[], reversed: boolean): SideLine {
  const run = reversed ? [...vertices].reverse() : vertices;
  const points = run.map((v): Point => [panel.flat[2 * v], panel.flat[2 * v + 1]]);
  const arc = [0];
  for (let i = 1; i < points.length; i++)
    arc.push(arc[i - 1] + Math.hypot(points[i][0] - points[i - 1][0], points[i][1] - points[i - 1][1]));
  return { points, arc, outside: reversed ? -1 : 1 };
}

/** The point at arc length s of a line, and the unit normal to the outside there. */
function atArc(line: SideLine, s: number): { point: Point; out: Point } {
  let i = 1;
  while (i < line.arc.length - 1 && line.arc[i] <= s) i++;
  const [a, b] = [line.points[i - 1], line.points[i]];
  const length = line.arc[i] - line.arc[i - 1] || 1;
  const t = (s - line.arc[i - 1]) / length;
  const u: Point = [(b[0] - a[0]) / length, (b[1] - a[1]) / length];
  return {
    point: [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])],
    out: [line.outside * u[1], -line.outside * u[0]],
  };
}

const shift = (p: Point, u: Point, s: number): Point => [p[0] + s * u[0], p[1] + s * u[1]];

/** Pieces of a line that lie inside a ring. */
export function clipLine(points: Point[], ring: Ring): Point[][] {
  const pieces: Point[][] = [];
  let piece: Point[] = [];
  for (let i = 0; i + 1 < points.length; i++) {
    const [a, b] = [points[i], points[i + 1]];
    const u: Point = [b[0] - a[0], b[1] - a[1]];
    const cuts = [0, 1];
    for (let k = 0, j = ring.length - 2; k < ring.length; j = k, k += 2) {
      const v: Point = [ring[k] - ring[j], ring[k + 1] - ring[j + 1]];
      const det = u[0] * v[1] - u[1] * v[0];
      if (det === 0) continue;
      const w: Point = [ring[j] - a[0], ring[j + 1] - a[1]];
      const s = (w[0] * v[1] - w[1] * v[0]) / det;
      const t = (w[0] * u[1] - w[1] * u[0]) / det;
      if (s > 0 && s < 1 && t >= 0 && t <= 1) cuts.push(s);
    }
    cuts.sort((p, q) => p - q);
    for (let c = 0; c + 1 < cuts.length; c++) {
      if (cuts[c + 1] - cuts[c] < 1e-12) continue;
      const middle = shift(a, u, (cuts[c] + cuts[c + 1]) / 2);
      if (!ringHolds(ring, middle[0], middle[1])) {
        if (piece.length > 1) pieces.push(piece);
        piece = [];
      } else {
        if (piece.length === 0) piece.push(shift(a, u, cuts[c]));
        piece.push(shift(a, u, cuts[c + 1]));
      }
    }
  }
  if (piece.length > 1) pieces.push(piece);
  return pieces;
}

/** Inner point with the most cloth round it, to about a hundredth of the panel's width (grid, then halving steps). */
function roomiestPoint(ring: Ring): { x: number; y: number; room: number } {
  const box = ringBox(ring);
  const room = (x: number, y: number) => (ringHolds(ring, x, y) ? ringDistance(ring, x, y) : -1);
  const best = { x: 0, y: 0, room: -1 };
  const tryAt = (x: number, y: number) => {
    const r = room(x, y);
    if (r > best.room) Object.assign(best, { x, y, room: r });
  };
  const nx = 24;
  const ny = 12;
  for (let i = 0; i < nx; i++)
    for (let j = 0; j < ny; j++)
      tryAt(box.x0 + ((i + 0.5) / nx) * (box.x1 - box.x0), box.y0 + ((j + 0.5) / ny) * (box.y1 - box.y0));
  let stepX = (box.x1 - box.x0) / nx;
  let stepY = (box.y1 - box.y0) / ny;
  for (let k = 0; k < 8; k++) {
    const { x, y } = best;
    for (const dx of [-stepX, 0, stepX]) for (const dy of [-stepY, 0, stepY]) tryAt(x + dx, y + dy);
    stepX /= 2;
    stepY /= 2;
  }
  return best;
}

function readingAngle(out: Point): number {
  const degrees = (Math.atan2(out[0], -out[1]) * 180) / Math.PI;
  if (degrees > 90) return degrees - 180;
  return degrees <= -90 ? degrees + 180 : degrees;
}

/** Ticks and number of the match marks on one seam side. */
function matchMarks(panel: CutPanel, side: PanelSide, allowance: number, place: PanelPlace): PanelMark[] {
  const seam = place.seams.find((s) => s.id === side.id);
  if (!seam || side.vertices.length < 3) return [];
  const of = (k: number) => panel.surfaceVertex[side.vertices[k]];
  const n = side.vertices.length;
  const reversed = of(0) !== seam.vertices[0] || of(1) !== seam.vertices[1];
  const run = reversed ? [...side.vertices].reverse() : side.vertices;
  const arc = [0];
  for (let i = 1; i < n; i++) {
    const [a, b] = [3 * run[i - 1], 3 * run[i]];
    const { erected: e } = panel;
    arc.push(arc[i - 1] + Math.hypot(e[b] - e[a], e[b + 1] - e[a + 1], e[b + 2] - e[a + 2]));
  }
  const line = buildSideLine(panel, side.vertices, reversed);
  const length = allowance > 0 ? Math.min(allowance, TICK_LONGEST) : -TICK_INWARD;
  const marks: PanelMark[] = [];
  chooseMatchPoints(arc).forEach((index, k) => {
    for (let tick = 0; tick <= k % 3; tick++) {
      const { point, out } = atArc(line, line.arc[index] + tick * TICK_GAP);
      if (!ringHolds(panel.cut, ...shift(point, out, -0.5))) continue;
      const [drawn] = clipLine([shift(point, out, length < 0 ? -0.01 : 0), shift(point, out, length)], panel.cut);
      if (!drawn) continue;
      const mark: PanelMark = { kind: "match", points: drawn };
      if (tick === 0) {
        const angle = readingAngle(out);
        Object.assign(mark, { at: shift(point, out, -14), text: `${seam.id}.${k + 1}`, height: 7, angle });
      }
      marks.push(mark);
    }
  });
  return marks;
}

/** Seam line or fold line of a side, where cloth stands beyond it. */
function lineMarks(panel: CutPanel, side: PanelSide, allowance: number): PanelMark[] {
  if (allowance <= 0) return [];
  const kind = side.kind === "seam" ? "seam-line" : "fold-line";
  return clipLine(buildSideLine(panel, side.vertices, false).points, panel.cut).map((points) => ({ kind, points }));
}

/** A text of about this many letters fits round a point, as a share of its height. */
const halfWidth = (text: string) => 0.32 * text.length + 0.5;

/** What the side is joined to, written along its middle. */
function sideName(panel: CutPanel, side: PanelSide, place: PanelPlace): PanelMark[] {
  const seam = side.kind === "seam" ? place.seams.find((s) => s.id === side.id) : undefined;
  const other = seam ? (seam.strips[0] === panel.id ? seam.strips[1] : seam.strips[0]) : null;
  const text = other === null ? side.id : `${side.id} to ${other}`;
  const line = buildSideLine(panel, side.vertices, false);
  const total = line.arc[line.arc.length - 1];
  for (const share of [0.5, 0.35, 0.65, 0.2, 0.8]) {
    const { point, out } = atArc(line, share * total);
    for (let height = SIDE_TEXT; height >= LEAST_TEXT; height /= 2) {
      if (2 * halfWidth(text) * height > total) continue;
      for (const depth of [26, 40, 12]) {
        const at = shift(point, out, -depth - height);
        if (ringHolds(panel.cut, ...at) && ringDistance(panel.cut, ...at) > height)
          return [{ kind: "side-name", at, text, height, angle: readingAngle(out) }];
      }
    }
  }
  return [];
}

/** Warp arrow, panel name and face, where the cloth is widest. */
function nameBlock(panel: CutPanel): PanelMark[] {
  const { x, y, room } = roomiestPoint(panel.cut);
  if (room <= 0) return [];
  const h = Math.min(40, room / 5);
  const half = 3.5 * h;
  const yArrow = y - 0.7 * h;
  const arrow: Point[] = [
    [x - half, yArrow],
    [x + half, yArrow],
    [x + half - 0.6 * h, yArrow + 0.25 * h],
    [x + half - 0.6 * h, yArrow - 0.25 * h],
    [x + half, yArrow],
  ];
  return [
    { kind: "warp", points: arrow, at: [x, y + 0.2 * h], text: "warp", height: 0.7 * h, angle: 0 },
    { kind: "name", at: [x, y + 1.8 * h], text: panel.id, height: 1.4 * h, angle: 0 },
    { kind: "face", at: [x, y - 1.9 * h], text: "outer face up", height: 0.8 * h, angle: 0 },
  ];
}

/** Anchor names, as near their corner as the cloth allows, on the way to the widest place. */
function cornerNames(panel: CutPanel, place: PanelPlace): PanelMark[] {
  const marks: PanelMark[] = [];
  const goal = roomiestPoint(panel.cut);
  for (const anchor of place.anchors) {
    const v = panel.surfaceVertex.indexOf(anchor.vertex);
    if (v < 0) continue;
    const from: Point = [panel.flat[2 * v], panel.flat[2 * v + 1]];
    const far = Math.hypot(goal.x - from[0], goal.y - from[1]);
    const u: Point = [(goal.x - from[0]) / (far || 1), (goal.y - from[1]) / (far || 1)];
    for (let s = 20 + anchor.cutBack; s < far; s += 20) {
      const at = shift(from, u, s);
      if (ringHolds(panel.cut, ...at) && ringDistance(panel.cut, ...at) > 1.2 * SIDE_TEXT) {
        marks.push({ kind: "corner", at, text: anchor.id, height: SIDE_TEXT, angle: 0 });
        break;
      }
    }
  }
  return marks;
}

/**
 * Everything to be drawn on a panel that has its outlines.
 * @units mm; points inside the cut outline, or on it where a tick ends there
 */
export function placeMarks(panel: CutPanel, place: PanelPlace): PanelMark[] {
  const marks: PanelMark[] = [];
  panel.sides.forEach((side, k) => {
    marks.push(...lineMarks(panel, side, panel.outlines[k].allowance));
    if (side.kind === "seam") marks.push(...matchMarks(panel, side, panel.outlines[k].allowance, place));
  });
  marks.push(...nameBlock(panel));
  for (const side of panel.sides) marks.push(...sideName(panel, side, place));
  marks.push(...cornerNames(panel, place));
  return marks;
}
