// The few strokes all sheets are made of: text, lines, boxes, in mm; and how long a text is, how it wraps, how it is shortened.
import {
  clip,
  drawObject,
  endPath,
  type PDFDocument,
  type PDFFont,
  PDFOperator,
  type PDFOperatorNames,
  type PDFPage,
  type PDFRef,
  popGraphicsState,
  pushGraphicsState,
  rectangle,
} from "pdf-lib";
import { PlanError } from "../../../problem.ts";
import type { Vec2 } from "../../../records/facts.ts";
import { cutMiddle } from "../../words/cutMiddle.ts";
import { plainText } from "../../words/plainText.ts";
import { lineAdvance, lineGlyphs } from "./glyphs.ts";

/** Points in a millimetre. */
export const MM = 72 / 25.4;
/** Least size of anything written, pt. */
export const SMALL = 9;
/** Line pitch of the least size, mm. */
export const PITCH = 4.4;
/** Size of what is read at arm's length in gloves and rain, pt. */
export const LARGE = 11;

/** Line pitch of a size, mm. */
export function pitchOf(size: number): number {
  return (PITCH * size) / SMALL;
}

/** Width of a text in mm. */
export function textWidth(text: string, font: PDFFont, size: number): number {
  return (lineAdvance(text, font) * size) / MM;
}

/** So many letters of a text; three fifths of them are its end. */
function keepLetters(letters: readonly string[], kept: number): string {
  const tail = Math.ceil(0.6 * kept);
  return cutMiddle(letters, kept - tail, tail);
}

/**
 * The text, or as much of its beginning and end as fits round an ellipsis: names differ at their ends, so more of the end stays.
 */
export function fitText(text: string, font: PDFFont, size: number, width: number): string {
  const plain = plainText(text);
  if (textWidth(plain, font, size) <= width) return plain;
  const letters = [...plain];
  let low = 0;
  let high = letters.length - 1;
  while (low < high) {
    const half = Math.ceil((low + high) / 2);
    if (textWidth(keepLetters(letters, half), font, size) <= width) low = half;
    else high = half - 1;
  }
  return keepLetters(letters, low);
}

/** A number and its unit, a sign and its number: parted by the end of a line they are misread. */
const QUANTITY =
  /(?<=\d) (?=(?:%|°[CF]|mm|m²?|kN(?:\/m)?|kg|m\/s|in|ft|lbf?|kip|mph|N·m)(?![\p{L}\d]))|(?<=±) (?=\d)/gu;

/** Lines no longer than the width; a word that is longer is broken, a number keeps its unit. At least one line. */
export function wrapText(text: string, font: PDFFont, size: number, width: number): string[] {
  const lines: string[] = [];
  let line = "";
  for (const word of plainText(text).replace(QUANTITY, "\u00a0").split(" ")) {
    const longer = line === "" ? word : `${line} ${word}`;
    if (textWidth(longer, font, size) <= width) {
      line = longer;
      continue;
    }
    if (line !== "") lines.push(line);
    line = "";
    for (const letter of word) {
      if (line !== "" && textWidth(line + letter, font, size) > width) {
        // Broken after a joint of the word where it has one, so that names stay legible.
        const joint = Math.max(...[".", "-", "_", "/"].map((c) => line.lastIndexOf(c))) + 1;
        const end = joint > 1 ? joint : line.length;
        lines.push(line.slice(0, end));
        line = line.slice(end);
      }
      line += letter;
    }
  }
  lines.push(line);
  return lines;
}

export interface TextOptions {
  x: number;
  /** Base line. */
  y: number;
  size: number;
  font: PDFFont;
  align?: "start" | "middle" | "end";
  /** Degrees about the given point; only with align start. */
  turn?: number;
}

// Name of a face on a page, kept by page: a new one for every line is what a page is heavy with.
const faceNames = new WeakMap<PDFPage, Map<PDFFont, string>>();

function faceName(page: PDFPage, font: PDFFont): string {
  let names = faceNames.get(page);
  if (!names) {
    names = new Map();
    faceNames.set(page, names);
  }
  let name = names.get(font);
  if (name === undefined) {
    name = page.node.newFontDictionary(font.name, font.ref).toString();
    names.set(font, name);
  }
  return name;
}

/** One line of text. */
export function drawText(page: PDFPage, text: string, options: TextOptions): void {
  const plain = plainText(text);
  if (plain === "") return;
  const { font, size } = options;
  checkRun([[options.x, options.y]]);
  const width = options.align ? textWidth(plain, font, size) : 0;
  const shift = options.align === "middle" ? width / 2 : options.align === "end" ? width : 0;
  const turn = ((options.turn ?? 0) * Math.PI) / 180;
  const [c, s] = [Math.cos(turn), Math.sin(turn)].map(fine);
  const at = `${c} ${s} ${fine(-s)} ${c} ${fine((options.x - shift) * MM)} ${fine(options.y * MM)} Tm`;
  const words = `BT 0 g ${faceName(page, font)} ${size} Tf ${at} <${lineGlyphs(plain, font)}> Tj ET`;
  page.pushOperators(PDFOperator.of(words as PDFOperatorNames));
}

export interface LineOptions {
  /** mm */
  width: number;
  /** mm on, mm off */
  dash?: number[];
  closed?: boolean;
  /** 0 black … 1 white; filled where given. */
  fill?: number;
  /** false: filled without a line. */
  outline?: boolean;
}

/** Points nearer than this to the one before are not drawn, mm: an eye does not see them, a file feels them. */
const NEAR = 0.06;

/** Four decimals, without an exponent. */
function fine(value: number): number {
  return Math.round(value * 1e4) / 1e4 + 0;
}

function short(value: number): string {
  // Two decimals of a point are 0.004 mm; trailing zeros and "-0" say nothing.
  return String(Math.round(value * MM * 100) / 100 + 0);
}

/** The strokes of a run as they stand in a page: one string, because a run of objects takes a hundred times the room. */
function runText(points: readonly Vec2[], options: LineOptions): string {
  const words = ["q", short(options.width), "w 0 G"];
  words.push(`[${(options.dash ?? []).map(short).join(" ")}] 0 d`);
  if (options.fill !== undefined) words.push(`${options.fill} g`);
  let last: Vec2 | null = null;
  points.forEach((p, i) => {
    const ends = i === 0 || i === points.length - 1;
    if (!ends && last && Math.abs(p[0] - last[0]) + Math.abs(p[1] - last[1]) < NEAR) return;
    words.push(`${short(p[0])} ${short(p[1])} ${last ? "l" : "m"}`);
    last = p;
  });
  if (options.closed) words.push("h");
  words.push(options.fill === undefined ? "S" : options.outline === false ? "f" : "B");
  words.push("Q");
  return words.join(" ");
}

function checkRun(points: readonly Vec2[]): void {
  const wrong = points.find((p) => !Number.isFinite(p[0]) || !Number.isFinite(p[1]));
  if (wrong === undefined) return;
  throw new PlanError(
    "papers-number",
    `a sheet: the point (${wrong[0]}, ${wrong[1]}) cannot be drawn; plan again`,
    "papers",
  );
}

/** A run of straight pieces. */
export function drawRun(page: PDFPage, points: readonly Vec2[], options: LineOptions): void {
  if (points.length < 2) return;
  checkRun(points);
  page.pushOperators(PDFOperator.of(runText(points, options) as PDFOperatorNames));
}

/** Runs kept once in the document and shown on any number of its pages. */
export interface Stencil {
  ref: PDFRef;
  name: string;
}

/** Keeps runs for many pages. */
export function keepStencil(
  doc: PDFDocument,
  box: BoxArea,
  runs: readonly { points: readonly Vec2[]; options: LineOptions }[],
): Stencil {
  for (const r of runs) checkRun(r.points);
  const { x, y, width, height } = box;
  const text = runs
    .filter((r) => r.points.length > 1)
    .map((r) => runText(r.points, r.options))
    .join("\n");
  const stream = doc.context.flateStream(text, {
    Type: "XObject",
    Subtype: "Form",
    BBox: [x * MM, y * MM, (x + width) * MM, (y + height) * MM],
  });
  return { ref: doc.context.register(stream), name: "Stencil" };
}

/** Shows what was kept. */
export function drawStencil(page: PDFPage, stencil: Stencil): void {
  const key = page.node.newXObject(stencil.name, stencil.ref);
  page.pushOperators(pushGraphicsState(), drawObject(key), popGraphicsState());
}

/** A ring, drawn as a polygon of 24 sides. */
export function drawRing(page: PDFPage, at: Vec2, radius: number, options: LineOptions): void {
  const points = Array.from({ length: 24 }, (_, k): Vec2 => {
    const a = (k * Math.PI) / 12;
    return [at[0] + radius * Math.cos(a), at[1] + radius * Math.sin(a)];
  });
  drawRun(page, points, { ...options, closed: true });
}

export interface BoxArea {
  x: number;
  y: number;
  width: number;
  height: number;
}

/** A rectangle by its lower left corner. */
export function drawBox(page: PDFPage, box: BoxArea, options: LineOptions): void {
  const { x, y, width, height } = box;
  const corners: Vec2[] = [
    [x, y],
    [x + width, y],
    [x + width, y + height],
    [x, y + height],
  ];
  drawRun(page, corners, { ...options, closed: true });
}

/** Whatever is drawn shows only inside the rectangle. */
export function drawClipped(page: PDFPage, box: BoxArea, draw: () => void): void {
  const { x, y, width, height } = box;
  page.pushOperators(pushGraphicsState(), rectangle(x * MM, y * MM, width * MM, height * MM), clip(), endPath());
  draw();
  page.pushOperators(popGraphicsState());
}
