// A PDF as a row of sheets: size, frame, title block, stamp. Knows what must stand on every sheet and nothing of what the
// sheets are about. All lengths in mm, origin at the lower left of the sheet. Sheet sizes and frame: ISO 216, ISO 5457
// (check-values 8.3); title block fields after ISO 7200. The date is the job's; nothing here reads a clock.
import fontkit from "@pdf-lib/fontkit";
import { PDFDocument, type PDFFont, PDFHexString, PDFName, type PDFPage, PDFString } from "pdf-lib";
import type { Facts, FactsJob } from "../../../records/facts.ts";
import { namesOf } from "../../words/names.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import { plainText } from "../../words/plainText.ts";
import { holdReason, type PaperKind, stampOf } from "../../words/stamp.ts";
import { tellNames } from "./glyphs.ts";
import { drawBox, drawText, fitText, MM, pitchOf, SMALL, textWidth, wrapText } from "./pen.ts";

/** TTF bytes of the two faces every sheet is set in. */
export interface FontFiles {
  regular: Uint8Array;
  bold: Uint8Array;
}

export interface Sheet {
  page: PDFPage;
  /** What this sheet is, for its title block. */
  paper: string;
  /** Where content may stand. */
  left: number;
  right: number;
  bottom: number;
  top: number;
}

export interface Book {
  facts: Facts;
  /** Which rule of issue its sheets stand under. */
  kind: PaperKind;
  doc: PDFDocument;
  regular: PDFFont;
  bold: PDFFont;
  sheets: Sheet[];
}

/** Landscape, mm. */
const SIZES: Readonly<Record<FactsJob["sheet"], [number, number]>> = {
  A4: [297, 210],
  A3: [420, 297],
  Letter: [279.4, 215.9],
  Tabloid: [431.8, 279.4],
};
const BINDING = 20;
const EDGE = 10;
const PADDING = 3;
const ROW = 10.5;
const STAMP = 12.5;
const HEAD = STAMP + 1.5;

/** An empty book in the given faces. */
export async function openBook(facts: Facts, fonts: FontFiles, title: string, kind: PaperKind): Promise<Book> {
  const doc = await PDFDocument.create({ updateMetadata: false });
  doc.registerFontkit(fontkit);
  // Without ligatures and kerning a line is as long as the sum of its letters, and reads back letter by letter.
  const features = { liga: false, kern: false };
  const regular = await doc.embedFont(fonts.regular, { subset: true, customName: "SEAMRG+DejaVuSans", features });
  const bold = await doc.embedFont(fonts.bold, { subset: true, customName: "SEAMBD+DejaVuSans-Bold", features });
  for (const font of [regular, bold]) tellNames(font, namesOf(facts));
  // Written by hand: no version of a library and no clock may show in the bytes.
  const info: Record<string, PDFHexString | PDFString> = {
    Title: PDFHexString.fromText(plainText(`${facts.job.title}: ${title}, issue ${facts.job.issue}`)),
    Creator: PDFString.of("Seamstay"),
    Producer: PDFString.of("Seamstay"),
  };
  const day = /^(\d{4})-(\d{2})-(\d{2})$/.exec(facts.job.date);
  if (day) {
    info.CreationDate = PDFString.of(`D:${day[1]}${day[2]}${day[3]}000000Z`);
    info.ModDate = PDFString.of(`D:${day[1]}${day[2]}${day[3]}000000Z`);
  }
  doc.context.trailerInfo.Info = doc.context.register(doc.context.obj(info));
  doc.catalog.set(PDFName.of("Lang"), PDFString.of("en"));
  return { facts, kind, doc, regular, bold, sheets: [] };
}

/** A new sheet with its frame, its heading and the stamp; the title block follows when the count of sheets is known. */
export function addSheet(book: Book, paper: string): Sheet {
  const [width, height] = SIZES[book.facts.job.sheet] ?? SIZES.A4;
  const page = book.doc.addPage([width * MM, height * MM]);
  const sheet: Sheet = {
    page,
    paper,
    left: BINDING + PADDING,
    right: width - EDGE - PADDING,
    bottom: EDGE + 2 * ROW + PADDING,
    top: height - EDGE - PADDING - HEAD,
  };
  drawBox(page, { x: BINDING, y: EDGE, width: width - BINDING - EDGE, height: height - 2 * EDGE }, { width: 0.5 });
  const stampWidth = drawStamp(book, sheet);
  const room = sheet.right - sheet.left - stampWidth - 6;
  const text = fitText(paper, book.bold, 16, room);
  drawText(page, text, { x: sheet.left, y: sheet.top + HEAD - 7, size: 16, font: book.bold });
  book.sheets.push(sheet);
  return sheet;
}

/** Framed, upper right, over nothing: NOT FOR ISSUE and why. Returns its width. */
function drawStamp(book: Book, sheet: Sheet): number {
  const stamp = stampOf(book.facts, book.kind);
  if (stamp === "") return 0;
  const reason = fitText(holdReason(book.facts, book.kind), book.regular, SMALL, 80);
  const width = Math.max(textWidth(stamp, book.bold, 18), textWidth(reason, book.regular, SMALL)) + 6;
  const x = sheet.right - width;
  const y = sheet.top + 1.5;
  drawBox(sheet.page, { x, y, width, height: STAMP }, { width: 1 });
  drawText(sheet.page, stamp, { x: x + width / 2, y: y + 5.6, size: 18, font: book.bold, align: "middle" });
  drawText(sheet.page, reason, { x: x + width / 2, y: y + 1.6, size: SMALL, font: book.regular, align: "middle" });
  return width;
}

interface Field {
  label: string;
  value: string;
  /** Share of the row's width. */
  share: number;
}

function titleRows(book: Book, sheet: Sheet, n: number): Field[][] {
  const { job } = book.facts;
  const given = (text: string) => plainText(text) || "not given";
  const { words, temperature } = paperUnits(job);
  const reference = book.facts.tensioning?.referenceTemperature;
  const at = reference === undefined ? "not stated" : `${temperature.whole(reference)}`;
  return [
    [
      { label: "Title", value: given(job.title), share: job.supersedes ? 0.31 : 0.36 },
      { label: "Paper", value: sheet.paper.replace(/ \(continued\)$/, ""), share: 0.3 },
      job.supersedes
        ? { label: "Issue, supersedes", value: `${given(job.issue)}, ${plainText(job.supersedes)}`, share: 0.13 }
        : { label: "Issue", value: given(job.issue), share: 0.08 },
      { label: "Revision", value: given(job.revision), share: 0.14 },
      { label: "Sheet", value: `${n} of ${book.sheets.length}`, share: 0.12 },
    ],
    [
      { label: "Drawn by", value: given(job.drawnBy), share: 0.17 },
      { label: "Checked by", value: given(job.checkedBy), share: 0.17 },
      { label: "Date", value: given(job.date), share: 0.13 },
      { label: "Units", value: words, share: 0.35 },
      { label: "Reference temperature", value: at, share: 0.18 },
    ],
  ];
}

function drawTitleBlock(book: Book, sheet: Sheet, n: number): void {
  const { page } = sheet;
  const left = BINDING;
  const total = sheet.right + PADDING - BINDING;
  titleRows(book, sheet, n).forEach((row, i) => {
    const y = EDGE + ROW * (1 - i);
    let x = left;
    for (const field of row) {
      const width = total * field.share;
      drawBox(page, { x, y, width, height: ROW }, { width: 0.25 });
      drawText(page, field.label, { x: x + 1.5, y: y + ROW - 4, size: SMALL, font: book.regular });
      const value = fitText(field.value, book.bold, SMALL, width - 3);
      drawText(page, value, { x: x + 1.5, y: y + 2, size: SMALL, font: book.bold });
      x += width;
    }
  });
}

/** Lines of a paragraph set on a sheet from `y` (top of the first line) downward; returns the y below. */
export function drawParagraph(
  book: Book,
  sheet: Sheet,
  text: string,
  y: number,
  options: { bold?: boolean; width?: number; size?: number } = {},
): number {
  const font = options.bold ? book.bold : book.regular;
  const size = options.size ?? SMALL;
  let at = y;
  for (const line of wrapText(text, font, size, options.width ?? sheet.right - sheet.left)) {
    at -= pitchOf(size);
    drawText(sheet.page, line, { x: sheet.left, y: at + 1, size, font });
  }
  return at;
}

/** Title blocks on every sheet, then the bytes; equal books give equal bytes. */
export async function closeBook(book: Book): Promise<Uint8Array> {
  book.sheets.forEach((sheet, i) => {
    drawTitleBlock(book, sheet, i + 1);
  });
  return book.doc.save({ addDefaultPage: false, updateFieldAppearances: false });
}
