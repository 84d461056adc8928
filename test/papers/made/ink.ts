// What a rendered page shows of each letter: how much ink lies in the box of each glyph, against what the letter lays down when it is
// drawn alone from the whole face. Text extraction does not see a letter that is missing from a face; eyes and this do.
import { spawnSync } from "node:child_process";
import fontkit from "@pdf-lib/fontkit";
import { PDFDocument, type PDFFont } from "pdf-lib";
import { fonts, MM, saved, type Word } from "./madePapers.ts";

/** Dots an inch. */
const DPI = 110;

interface Raster {
  width: number;
  height: number;
  /** 0 black … 255 white */
  grey: Uint8Array;
}

/** Pages of a PDF as pdftoppm draws them. */
export function rasterOf(bytes: Uint8Array, dpi = DPI): Raster[] {
  const out = spawnSync("pdftoppm", ["-r", `${dpi}`, "-gray", saved(bytes)], { maxBuffer: 1 << 30 }).stdout;
  const pages: Raster[] = [];
  for (let at = 0; at < out.length; ) {
    const head = /^P5\s+(\d+)\s+(\d+)\s+255\s/.exec(out.subarray(at, at + 40).toString("latin1"));
    if (!head) throw new Error("no picture");
    const [width, height] = [Number(head[1]), Number(head[2])];
    const from = at + head[0].length;
    pages.push({ width, height, grey: out.subarray(from, from + width * height) });
    at = from + width * height;
  }
  return pages;
}

/** Ink in a box: black pixels, grey ones by their share. @units mm from the upper left */
function inkIn(raster: Raster, x0: number, y0: number, x1: number, y1: number): number {
  const px = (v: number) => (v * MM * DPI) / 72;
  let sum = 0;
  for (let y = Math.max(0, Math.floor(px(y0))); y < Math.min(raster.height, Math.ceil(px(y1))); y++)
    for (let x = Math.max(0, Math.floor(px(x0))); x < Math.min(raster.width, Math.ceil(px(x1))); x++)
      sum += (255 - raster.grey[y * raster.width + x]!) / 255;
  return sum;
}

const SPECIMEN = 40;
const CELL = 80;
const ACROSS = 12;

interface Face {
  font: PDFFont;
  /** Ink of each letter at 1 pt. */
  ink: Map<string, number>;
}

const faces = [fonts.regular, fonts.bold].map(async (bytes): Promise<Face & { bytes: Uint8Array }> => {
  const doc = await PDFDocument.create({ updateMetadata: false });
  doc.registerFontkit(fontkit);
  const font = await doc.embedFont(bytes, { features: { liga: false, kern: false } });
  return { font, ink: new Map(), bytes };
});

/** Both faces, knowing the ink of these letters: each drawn in a cell of its own from the whole face, by its square. */
async function facesFor(letters: readonly string[]): Promise<Face[]> {
  const known = await Promise.all(faces);
  for (const { ink, bytes } of known) {
    const fresh = letters.filter((l) => !ink.has(l));
    if (fresh.length === 0) continue;
    const doc = await PDFDocument.create({ updateMetadata: false });
    doc.registerFontkit(fontkit);
    const font = await doc.embedFont(bytes, { subset: false });
    const height = CELL * Math.ceil(fresh.length / ACROSS);
    const page = doc.addPage([CELL * ACROSS, height]);
    const cell = (i: number) => [CELL * (i % ACROSS), CELL * Math.floor(i / ACROSS)] as const;
    fresh.forEach((letter, i) => {
      const [x, y] = cell(i);
      page.drawText(letter, { x: x + 15, y: height - y - CELL + 25, size: SPECIMEN, font });
    });
    const [raster] = rasterOf(await doc.save());
    fresh.forEach((letter, i) => {
      const [x, y] = cell(i);
      ink.set(letter, inkIn(raster!, x / MM, y / MM, (x + CELL) / MM, (y + CELL) / MM) / SPECIMEN ** 2);
    });
  }
  return known;
}

const advances = new WeakMap<PDFFont, Map<string, number>>();

/** Advance of a letter at 1 pt; asking the face each time takes most of the test. */
function advanceOf(font: PDFFont, letter: string): number {
  const known = advances.get(font) ?? new Map<string, number>();
  advances.set(font, known);
  const advance = known.get(letter) ?? font.widthOfTextAtSize(letter, 1);
  known.set(letter, advance);
  return advance;
}

/** Letters of a page that show less than this share of their ink are not there. */
const LEAST = 0.6;

/** Letters that are in the text of the pages but not to be seen on them. @shape words: upright ones, boxes of their face */
export async function unseenLetters(bytes: Uint8Array, words: readonly Word[]): Promise<string[]> {
  const letters = [...new Set(words.flatMap((w) => [...w.text]))].filter((l) => l.trim() !== "");
  const both = await facesFor(letters);
  const pages = rasterOf(bytes);
  const unseen: string[] = [];
  for (const word of words) {
    const width = (word.x1 - word.x0) * MM;
    const size = ((word.y1 - word.y0) * MM) / 1.164;
    // Which of the two faces a word is set in shows in its length.
    const off = both.map((f) => Math.abs([...word.text].reduce((s, l) => s + advanceOf(f.font, l), 0) * size - width));
    const { font, ink } = both[off[0]! <= off[1]! ? 0 : 1]!;
    let x = word.x0;
    for (const letter of word.text) {
      const next = x + (advanceOf(font, letter) * size) / MM;
      const wanted = (ink.get(letter) ?? 0) * size ** 2;
      const seen = inkIn(pages[word.page - 1]!, x - 0.15, word.y0, next + 0.15, word.y1);
      if (seen < LEAST * wanted) unseen.push(`sheet ${word.page}: "${letter}" of "${word.text}"`);
      x = next;
    }
  }
  return unseen;
}
