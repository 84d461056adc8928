// Letters of a face: which it has, how far each moves the pen, which glyphs stand for a line. Letters that stand alone are asked of the
// face once each: asking it for every line takes most of the time that sheets take.
import type { PDFFont } from "pdf-lib";
import { plainText } from "../../words/plainText.ts";
import { isTurned, type LineRun, lineRuns } from "./lineOrder.ts";

interface Face {
  /** Code points it can draw. */
  drawable: Set<number>;
  /** Advance of each letter at 1 pt. */
  advances: Map<string, number>;
  /** Glyphs of each letter, in hexadecimal. */
  glyphs: Map<string, string>;
  /** Names of the job that run from right to left, the longest first. */
  turnedNames: string[];
}

const faces = new WeakMap<PDFFont, Face>();

function faceOf(font: PDFFont): Face {
  let face = faces.get(font);
  if (!face) {
    face = { drawable: new Set(font.getCharacterSet()), advances: new Map(), glyphs: new Map(), turnedNames: [] };
    faces.set(font, face);
  }
  return face;
}

/** Tells a face the names that will stand in its lines. */
export function tellNames(font: PDFFont, names: readonly string[]): void {
  const turned = [...new Set(names.map(plainText))].filter(isTurned);
  // As they are drawn, so that they are found in lines of which letters are replaced.
  faceOf(font).turnedNames = turned.map((name) => drawnText(name, font)).sort((a, b) => b.length - a.length);
}

/** Letters whose shape does not depend on their neighbours: the faces are set without ligatures and kerning. */
const ALONE = /^[\p{Script=Latin}\p{Script=Greek}\p{Script=Cyrillic}\p{Script=Common}\p{Nd}]*$/u;

/** Letters of a text that a face has not, each once. */
export function lettersMissing(text: string, font: PDFFont): string[] {
  const { drawable } = faceOf(font);
  return [...new Set(plainText(text))].filter((letter) => !drawable.has(letter.codePointAt(0) ?? 0));
}

/** The text as a face can draw it: "?" for a letter it has not, where an empty box would look like a mark to be ticked. */
function drawnText(text: string, font: PDFFont): string {
  const { drawable } = faceOf(font);
  let drawn = "";
  for (const letter of text) drawn += drawable.has(letter.codePointAt(0) ?? 0) ? letter : "?";
  return drawn;
}

function advanceOf(letter: string, font: PDFFont): number {
  const { advances } = faceOf(font);
  let advance = advances.get(letter);
  if (advance === undefined) {
    advance = font.widthOfTextAtSize(drawnText(letter, font), 1);
    advances.set(letter, advance);
  }
  return advance;
}

function runsOf(line: string, font: PDFFont): LineRun[] {
  return lineRuns(drawnText(line, font), faceOf(font).turnedNames);
}

/** How far a line moves the pen at 1 pt. */
export function lineAdvance(line: string, font: PDFFont): number {
  let sum = 0;
  if (ALONE.test(line)) {
    for (const letter of line) sum += advanceOf(letter, font);
    return sum;
  }
  for (const { text, turned } of runsOf(line, font)) {
    if (turned || !ALONE.test(text)) sum += font.widthOfTextAtSize(text, 1);
    else for (const letter of text) sum += advanceOf(letter, font);
  }
  return sum;
}

function glyphsOf(letter: string, font: PDFFont): string {
  const { glyphs } = faceOf(font);
  let glyph = glyphs.get(letter);
  if (glyph === undefined) {
    glyph = font.encodeText(letter).asString();
    glyphs.set(letter, glyph);
  }
  return glyph;
}

/** The glyphs of a line from left to right, in hexadecimal. */
export function lineGlyphs(line: string, font: PDFFont): string {
  let hex = "";
  for (const { text, turned } of runsOf(line, font)) {
    if (turned || !ALONE.test(text)) hex += font.encodeText(text).asString();
    else for (const letter of text) hex += glyphsOf(letter, font);
  }
  return hex;
}
