// What the pen writes on a panel, as large as it can be read at arm's length: the panels station says where a text stands and how large
// it is at least; here it grows, and gives way sideways, while it stays on the cloth, off every line and off every other text.
import type { FactsPanel, Vec2 } from "../../records/facts.ts";
import type { PanelMark } from "../../records/flatPanel.ts";
import { textLength } from "./drawing.ts";

/** Capital height that is read at arm's length over a table, mm (common practice: 20 to 25). */
export const READ_AT_ARMS_LENGTH = 20;
const HEIGHTS = [READ_AT_ARMS_LENGTH, 17, 14, 12];
const USUAL = 10;
/** Room round a text, as a share of its height. */
const CLEAR = 0.15;

export interface PenText {
  at: Vec2;
  /** mm */
  height: number;
  /** Degrees. */
  angle: number;
  text: string;
}

type Quad = [Vec2, Vec2, Vec2, Vec2];

function quadOf(text: PenText): Quad {
  const a = (text.angle * Math.PI) / 180;
  const [c, s] = [Math.cos(a), Math.sin(a)];
  const half = textLength(text.text, text.height) / 2;
  const high = (0.5 + CLEAR) * text.height;
  const corner = (u: number, v: number): Vec2 => [text.at[0] + c * u - s * v, text.at[1] + s * u + c * v];
  return [corner(-half, -high), corner(half, -high), corner(half, high), corner(-half, high)];
}

function side(a: Vec2, b: Vec2, p: Vec2): number {
  return (b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0]);
}

/** Whether the segment meets the box: one end inside, or a side crossed. */
function segmentMeets(quad: Quad, p: Vec2, q: Vec2): boolean {
  // Most lie wholly beyond one side.
  for (let i = 0; i < 4; i++) {
    const [a, b] = [quad[i], quad[(i + 1) % 4]];
    if (side(a, b, p) < 0 && side(a, b, q) < 0) return false;
  }
  const sides = quad.map((c) => side(p, q, c));
  return !(sides.every((s) => s > 0) || sides.every((s) => s < 0));
}

function quadsMeet(a: Quad, b: Quad): boolean {
  const beyond = (u: Quad, v: Quad) => u.some((_, i) => v.every((p) => side(u[i], u[(i + 1) % 4], p) < 0));
  return !beyond(a, b) && !beyond(b, a);
}

/** Runs a text must keep off: the cut line, closed, and every line that is drawn on the cloth. */
function linesOf(panel: FactsPanel): Vec2[][] {
  return [
    [...panel.cut, panel.cut[0]],
    ...panel.marks.flatMap((m) => (m.points && m.points.length > 1 ? [m.points] : [])),
  ];
}

function isClear(quad: Quad, lines: readonly Vec2[][], others: readonly Quad[]): boolean {
  if (others.some((o) => quadsMeet(o, quad))) return false;
  return lines.every((run) => run.every((p, i) => i === 0 || !segmentMeets(quad, run[i - 1], p)));
}

function asText(mark: PanelMark): PenText | null {
  if (!mark.at || mark.text === undefined) return null;
  return { at: mark.at, height: mark.height ?? USUAL, angle: mark.angle ?? 0, text: mark.text };
}

/** The texts of a panel's marks, in their order, each as large as its place allows up to what is read at arm's length. */
export function penTexts(panel: FactsPanel): PenText[] {
  const lines = linesOf(panel);
  const texts = panel.marks.flatMap((m) => asText(m) ?? []);
  const quads = texts.map(quadOf);
  return texts.map((text, i) => {
    const others = quads.filter((_, k) => k !== i);
    for (const height of HEIGHTS) {
      if (height <= text.height) break;
      // Growing in place, or away from the line it stands on.
      const a = (text.angle * Math.PI) / 180;
      for (const share of [0, 0.5, -0.5, 1, -1]) {
        const move = share * (height - text.height);
        const at: Vec2 = [text.at[0] - move * Math.sin(a), text.at[1] + move * Math.cos(a)];
        const grown = { ...text, height, at };
        const quad = quadOf(grown);
        if (!isClear(quad, lines, others)) continue;
        quads[i] = quad;
        return grown;
      }
    }
    return text;
  });
}
