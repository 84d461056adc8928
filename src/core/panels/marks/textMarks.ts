// What is written on a panel: name, warp arrow and face near its middle, what each side joins, corner names. mm, panel axes.
// No two texts lie over each other: what comes later gives way, grows smaller, or is left out. Does not choose fonts.
import type { CutPanel, PanelMark, PanelSide, Ring } from "../../records/flatPanel.ts";
import { ringBox, ringDistance, ringHolds } from "../../surface/ring.ts";
import type { PanelPlace } from "../outline/panelPlace.ts";
import { atArc, buildSideLine, listPoints, type Point } from "../outline/sideLine.ts";
import { readingAngle } from "./matchMarks.ts";

/** Text on sides: greatest height, mm; least height that is written on cloth at all. */
const SIDE_TEXT = 12;
const LEAST_TEXT = 3;
/** Greatest height unit of the name block, mm; its half diagonal in such units; what it leaves free to the marks on the sides, mm. */
const BLOCK = 40;
const BLOCK_REACH = 4.5;
const BLOCK_CLEAR = 45;

/** Half the width of a text, as a share of its height: about 0.64 a letter, and a letter's room. */
const halfWidth = (text: string) => 0.32 * text.length + 0.5;

/** A box on the cloth: middle, direction, half length and half height. */
interface TextBox {
  x: number;
  y: number;
  cos: number;
  sin: number;
  half: number;
  high: number;
}

/** Cloth that is written on: its outline and the boxes taken. */
export interface TextRoom {
  cut: Ring;
  taken: TextBox[];
}

function boxOf(at: Point, half: number, high: number, angle = 0): TextBox {
  const a = (angle * Math.PI) / 180;
  return { x: at[0], y: at[1], cos: Math.cos(a), sin: Math.sin(a), half, high };
}

/** Whether two boxes lie over each other: no axis of either parts them. */
function boxesMeet(a: TextBox, b: TextBox): boolean {
  const [dx, dy] = [b.x - a.x, b.y - a.y];
  const c = Math.abs(a.cos * b.cos + a.sin * b.sin);
  const s = Math.abs(a.cos * b.sin - a.sin * b.cos);
  const parted = (p: TextBox, q: TextBox) =>
    Math.abs(dx * p.cos + dy * p.sin) >= p.half + c * q.half + s * q.high ||
    Math.abs(dy * p.cos - dx * p.sin) >= p.high + s * q.half + c * q.high;
  return !parted(a, b) && !parted(b, a);
}

/** Takes the box if it lies on the cloth and over no other text. */
function takeBox(room: TextRoom, box: TextBox): boolean {
  if (room.taken.some((other) => boxesMeet(box, other))) return false;
  for (const u of [-1, 0, 1])
    for (const v of [-1, 1]) {
      const x = box.x + u * box.half * box.cos - v * box.high * box.sin;
      const y = box.y + u * box.half * box.sin + v * box.high * box.cos;
      if (!ringHolds(room.cut, x, y)) return false;
    }
  room.taken.push(box);
  return true;
}

/** Takes the room of a text that stands already. */
export function reserveText(room: TextRoom, mark: PanelMark): boolean {
  if (mark.at === undefined || mark.text === undefined) return true;
  const h = mark.height ?? SIDE_TEXT;
  return takeBox(room, boxOf(mark.at, halfWidth(mark.text) * h, 0.6 * h, mark.angle));
}

/** An inner point with room for the name: the nearest to the middle that has enough, else the roomiest (grid, then halving steps). */
function findNamePlace(ring: Ring): { x: number; y: number; room: number } {
  const box = ringBox(ring);
  const [mx, my] = [(box.x0 + box.x1) / 2, (box.y0 + box.y1) / 2];
  const room = (x: number, y: number) => (ringHolds(ring, x, y) ? ringDistance(ring, x, y) : -1);
  const enough = BLOCK_REACH * BLOCK + BLOCK_CLEAR;
  const spots = [{ x: mx, y: my, room: room(mx, my) }];
  const nx = 24;
  const ny = 12;
  for (let i = 0; i < nx; i++)
    for (let j = 0; j < ny; j++) {
      const x = box.x0 + ((i + 0.5) / nx) * (box.x1 - box.x0);
      const y = box.y0 + ((j + 0.5) / ny) * (box.y1 - box.y0);
      spots.push({ x, y, room: room(x, y) });
    }
  const off = (p: { x: number; y: number }) => Math.hypot(p.x - mx, p.y - my);
  const wide = spots.filter((p) => p.room >= enough).sort((p, q) => off(p) - off(q));
  if (wide.length > 0) return wide[0];
  let best = spots.reduce((p, q) => (q.room > p.room ? q : p));
  let [stepX, stepY] = [(box.x1 - box.x0) / nx, (box.y1 - box.y0) / ny];
  for (let k = 0; k < 8; k++) {
    const { x, y } = best;
    for (const dx of [-stepX, 0, stepX])
      for (const dy of [-stepY, 0, stepY]) {
        const here = room(x + dx, y + dy);
        if (here > best.room) best = { x: x + dx, y: y + dy, room: here };
      }
    stepX /= 2;
    stepY /= 2;
  }
  return best;
}

/** Warp arrow, panel name and face, near the panel's middle. */
export function nameBlock(panel: CutPanel, room: TextRoom): PanelMark[] {
  const spot = findNamePlace(panel.cut);
  if (spot.room <= 0) return [];
  const { x, y } = spot;
  const h = Math.min(BLOCK, Math.max((spot.room - BLOCK_CLEAR) / BLOCK_REACH, spot.room / 8));
  const half = 3.5 * h;
  const yArrow = y - 0.7 * h;
  const arrow: Point[] = [
    [x - half, yArrow],
    [x + half, yArrow],
    [x + half - 0.6 * h, yArrow + 0.25 * h],
    [x + half - 0.6 * h, yArrow - 0.25 * h],
    [x + half, yArrow],
  ];
  room.taken.push(boxOf([x, y + 0.1 * h], 3.8 * h, 2.5 * h));
  return [
    { kind: "warp", points: arrow, at: [x, y + 0.2 * h], text: "warp", height: 0.7 * h, angle: 0 },
    { kind: "name", at: [x, y + 1.8 * h], text: panel.id, height: 1.4 * h, angle: 0 },
    { kind: "face", at: [x, y - 1.9 * h], text: "outer face up", height: 0.8 * h, angle: 0 },
  ];
}

/** What a side is: the edge, or the seam with the panel it joins and which of the two lies on top. */
function sideText(panel: CutPanel, side: PanelSide, place: PanelPlace): string {
  const seam = side.kind === "seam" ? place.seams.find((s) => s.id === side.id) : undefined;
  if (!seam) return side.id;
  const other = seam.strips[0] === panel.id ? seam.strips[1] : seam.strips[0];
  if (other === panel.id) return `${side.id} to itself`;
  return `${side.id} ${seam.upper === panel.id ? "over" : "under"} ${other}`;
}

/** What the side is joined to, written along it, as near its middle as there is room. */
export function sideName(panel: CutPanel, side: PanelSide, place: PanelPlace, room: TextRoom): PanelMark[] {
  const text = sideText(panel, side, place);
  const line = buildSideLine(listPoints(panel, side.vertices));
  const total = line.arc[line.arc.length - 1];
  for (let height = SIDE_TEXT; height >= LEAST_TEXT; height /= 2) {
    if (2 * halfWidth(text) * height > total) continue;
    for (const share of [0.5, 0.47, 0.53, 0.44, 0.56, 0.35, 0.65, 0.2, 0.8]) {
      const { point, out } = atArc(line, share * total);
      for (const depth of [24, 40, 12]) {
        const d = depth + height;
        const mark: PanelMark = {
          kind: "side-name",
          at: [point[0] - d * out[0], point[1] - d * out[1]],
          text,
          height,
          angle: readingAngle(out),
        };
        if (reserveText(room, mark)) return [mark];
      }
    }
  }
  return [];
}

/** Anchor names, as near their corner as the cloth and the other texts allow, on the way to the middle. */
export function cornerNames(panel: CutPanel, place: PanelPlace, room: TextRoom): PanelMark[] {
  const marks: PanelMark[] = [];
  const box = ringBox(panel.cut);
  const goal: Point = [(box.x0 + box.x1) / 2, (box.y0 + box.y1) / 2];
  for (const anchor of place.anchors) {
    const v = panel.surfaceVertex.indexOf(anchor.vertex);
    if (v < 0) continue;
    const [x, y] = [panel.flat[2 * v], panel.flat[2 * v + 1]];
    const far = Math.hypot(goal[0] - x, goal[1] - y);
    for (let s = 20 + anchor.cutBack; s < far; s += 20) {
      const at: Point = [x + (s * (goal[0] - x)) / far, y + (s * (goal[1] - y)) / far];
      const mark: PanelMark = { kind: "corner", at, text: anchor.id, height: SIDE_TEXT, angle: 0 };
      if (ringDistance(panel.cut, ...at) > SIDE_TEXT && reserveText(room, mark)) {
        marks.push(mark);
        break;
      }
    }
  }
  return marks;
}
