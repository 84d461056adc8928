// Tables that flow: cells wrap, rows stay whole where they can, a new sheet repeats the head. And the flow itself: a place on
// a sheet that moves down and turns the page.
import type { PDFFont } from "pdf-lib";
import { plainText } from "../../words/plainText.ts";
import { addSheet, type Book, type Sheet } from "./book.ts";
import { drawBox, drawText, fitText, pitchOf, SMALL, textWidth, wrapText } from "./pen.ts";

export interface Column {
  /** Lines of the head. */
  head: string[];
  /** Width, mm; a table is scaled to the width it is given. */
  width: number;
  align?: "start" | "end";
  bold?: boolean;
}

/** Text that wraps, or lines that are each set on their own and wrap where they must. */
export type TableCell = string | readonly string[];

export interface Flow {
  book: Book;
  sheet: Sheet;
  /** Top of what comes next. */
  y: number;
  /** Heading of the sheets that follow. */
  paper: string;
}

const PAD = 1.3;

/** A flow at the top of a new sheet. */
export function openFlow(book: Book, paper: string): Flow {
  const sheet = addSheet(book, paper);
  return { book, sheet, y: sheet.top, paper };
}

/** Turns the page unless the height is still free. */
export function needInPlace(flow: Flow, height: number): void {
  if (flow.y - height >= flow.sheet.bottom) return;
  const sheet = addSheet(flow.book, `${flow.paper} (continued)`);
  flow.sheet = sheet;
  flow.y = sheet.top;
}

/** Height under a heading that what follows may ask for before it turns the page itself: head and first row of a table, a caution. */
const BELOW_HEADING = 32;

/** A heading that is never left alone at the foot of a sheet. */
export function flowHeadingInPlace(flow: Flow, text: string): void {
  needInPlace(flow, 8 + BELOW_HEADING);
  flow.y -= 8;
  const room = flow.sheet.right - flow.sheet.left;
  const line = fitText(text, flow.book.bold, 12, room);
  drawText(flow.sheet.page, line, { x: flow.sheet.left, y: flow.y + 1.5, size: 12, font: flow.book.bold });
}

export interface TextStyle {
  bold?: boolean;
  /** All lines set in by so much, mm. */
  indent?: number;
  /** pt */
  size?: number;
}

/** A paragraph, line by line over sheets. */
export function flowTextInPlace(flow: Flow, text: string, style: TextStyle = {}): void {
  const font = style.bold ? flow.book.bold : flow.book.regular;
  const indent = style.indent ?? 0;
  const size = style.size ?? SMALL;
  for (const line of wrapText(text, font, size, flow.sheet.right - flow.sheet.left - indent)) {
    needInPlace(flow, pitchOf(size));
    flow.y -= pitchOf(size);
    drawText(flow.sheet.page, line, { x: flow.sheet.left + indent, y: flow.y + 1, size, font });
  }
}

/** Free height in the flow. */
export function flowGapInPlace(flow: Flow, height: number): void {
  flow.y -= height;
}

interface Layout {
  x: number[];
  width: number[];
}

function layOut(columns: readonly Column[], left: number, total: number): Layout {
  const sum = columns.reduce((s, c) => s + c.width, 0);
  const width = columns.map((c) => (c.width * total) / sum);
  let at = left;
  const x = width.map((w) => {
    at += w;
    return at - w;
  });
  return { x, width };
}

interface Area {
  left: number;
  width: number;
  /** Top of the row. */
  y: number;
  /** pt, the least size where not given */
  size?: number;
}

function drawRow(sheet: Sheet, cells: string[][], columns: readonly Column[], fonts: PDFFont[], area: Area): number {
  const { x, width } = layOut(columns, area.left, area.width);
  const size = area.size ?? SMALL;
  const pitch = pitchOf(size);
  const height = Math.max(...cells.map((c) => c.length)) * pitch + PAD;
  cells.forEach((lines, k) => {
    drawBox(sheet.page, { x: x[k], y: area.y - height, width: width[k], height }, { width: 0.18 });
    lines.forEach((line, i) => {
      const right = columns[k].align === "end";
      drawText(sheet.page, line, {
        x: right ? x[k] + width[k] - PAD : x[k] + PAD,
        y: area.y - PAD / 2 - pitch * (i + 1) + 0.25 * pitch,
        size,
        font: fonts[k],
        align: right ? "end" : "start",
      });
    });
  });
  return height;
}

/** Height of a table whose cells take one line each, mm. */
export function tableHeight(columns: readonly Column[], rows: number, size = SMALL): number {
  const pitch = pitchOf(size);
  return Math.max(...columns.map((c) => c.head.length)) * pitch + PAD + rows * (pitch + PAD);
}

function drawHead(book: Book, sheet: Sheet, columns: readonly Column[], area: Area): number {
  const { width } = layOut(columns, area.left, area.width);
  const size = area.size ?? SMALL;
  const cells = columns.map((c, k) => c.head.map((h) => fitText(h, book.bold, size, width[k] - 2 * PAD)));
  return drawRow(
    sheet,
    cells,
    columns,
    columns.map(() => book.bold),
    area,
  );
}

/** Share of the room to spare that columns give up for names. */
const GIVEN = 0.35;

/**
 * Columns in which every head and every number fits: where one does not, its column takes room from those of names, which may be
 * shortened. Nobody cuts or turns by a number with its middle left out.
 */
function fitColumns(book: Book, columns: readonly Column[], rows: readonly string[][], area: Area): readonly Column[] {
  const { width } = layOut(columns, area.left, area.width);
  const size = area.size ?? SMALL;
  const hard = columns.map((c, k) => {
    const heads = c.head.map((h) => textWidth(h, book.bold, size));
    const cells = rows.map((row) => textWidth(row[k], c.bold ? book.bold : book.regular, size));
    return Math.max(...heads, ...(c.align === "end" ? cells : [])) + 2 * PAD + 0.1;
  });
  const shortOf = (wanted: readonly number[]) => wanted.reduce((sum, n, k) => sum + Math.max(0, n - width[k]), 0);
  const spareOf = (wanted: readonly number[]) => wanted.map((n, k) => Math.max(0, width[k] - n));
  const sum = (list: readonly number[]) => list.reduce((a, b) => a + b, 0);
  // Names too, where others have room enough that what is written by hand keeps most of its own.
  const whole = columns.map((c, k) => {
    const cells = rows.map((row) => textWidth(plainText(row[k]), c.bold ? book.bold : book.regular, size));
    return Math.max(hard[k], ...cells.map((w) => w + 2 * PAD + 0.1));
  });
  const need = shortOf(whole) <= GIVEN * sum(spareOf(whole)) ? whole : hard;
  const short = shortOf(need);
  if (short === 0) return columns;
  const spare = spareOf(need);
  const all = sum(spare);
  const given = Math.min(1, short / Math.max(all, 1e-9));
  return columns.map((c, k) => ({ ...c, width: Math.max(need[k], width[k] - given * spare[k]) }));
}

/** Rows whose cell in column k such a table would shorten. */
export function rowsShortened(
  book: Book,
  given: readonly Column[],
  rows: readonly string[][],
  area: Area,
  k: number,
): string[][] {
  const columns = fitColumns(book, given, rows, area);
  const width = layOut(columns, area.left, area.width).width[k] - 2 * PAD;
  const font = columns[k].bold ? book.bold : book.regular;
  const size = area.size ?? SMALL;
  return rows.filter((row) => fitText(row[k], font, size, width) !== plainText(row[k]));
}

/** A table on one spot, each cell one line; names are shortened where they must be, numbers only where no room is left at all. */
export function drawTable(
  book: Book,
  sheet: Sheet,
  given: readonly Column[],
  rows: readonly string[][],
  area: Area,
): number {
  const columns = fitColumns(book, given, rows, area);
  const { width } = layOut(columns, area.left, area.width);
  const size = area.size ?? SMALL;
  const fonts = columns.map((c) => (c.bold ? book.bold : book.regular));
  let y = area.y - drawHead(book, sheet, columns, area);
  for (const row of rows) {
    const cells = row.map((text, k) => [fitText(text, fonts[k], size, width[k] - 2 * PAD)]);
    y -= drawRow(sheet, cells, columns, fonts, { ...area, y });
  }
  return y;
}

export interface TableStyle {
  /** pt */
  size?: number;
  /** Count of rows of each group that stays on one sheet where a sheet can hold it; every row alone where not given. */
  groups?: readonly number[];
}

/** A table over the whole width of the flow, cells wrapped, head repeated on every sheet; a row longer than a sheet is split. */
export function flowTableInPlace(
  flow: Flow,
  columns: readonly Column[],
  rows: readonly (readonly TableCell[])[],
  style: TableStyle = {},
): void {
  const { book } = flow;
  const size = style.size ?? SMALL;
  const pitch = pitchOf(size);
  const fonts = columns.map((c) => (c.bold ? book.bold : book.regular));
  const total = flow.sheet.right - flow.sheet.left;
  const { width } = layOut(columns, flow.sheet.left, total);
  const areaNow = (): Area => ({ left: flow.sheet.left, width: total, y: flow.y, size });
  const headHeight = tableHeight(columns, 0, size);
  const linesOf = (row: readonly TableCell[]) =>
    row.map((cell, k) => [cell].flat().flatMap((text) => wrapText(text, fonts[k], size, width[k] - 2 * PAD)));
  const whole = flow.sheet.top - flow.sheet.bottom - headHeight;
  const turn = () => {
    needInPlace(flow, Infinity);
    flow.y -= drawHead(book, flow.sheet, columns, areaNow());
  };
  needInPlace(flow, headHeight + 3 * pitch);
  flow.y -= drawHead(book, flow.sheet, columns, areaNow());
  let next = 0;
  for (const count of style.groups ?? rows.map(() => 1)) {
    const group = rows.slice(next, next + count).map(linesOf);
    next += count;
    const height = group.reduce((sum, cells) => sum + Math.max(...cells.map((c) => c.length)) * pitch + PAD, 0);
    if (height > flow.y - flow.sheet.bottom && height <= whole) turn();
    for (let cells of group) {
      while (cells.some((c) => c.length > 0)) {
        const lines = Math.max(...cells.map((c) => c.length));
        const fits = Math.floor((flow.y - flow.sheet.bottom - PAD) / pitch);
        if (lines > fits && (lines * pitch + PAD <= whole || fits < 3)) {
          turn();
          continue;
        }
        const now = cells.map((c) => c.slice(0, fits));
        flow.y -= drawRow(flow.sheet, now, columns, fonts, areaNow());
        cells = cells.map((c) => c.slice(fits));
      }
    }
  }
}

/** A table of one-line rows in two halves side by side over the whole width, read down the left half first; returns the y below. */
export function drawHalves(
  book: Book,
  sheet: Sheet,
  columns: readonly Column[],
  rows: readonly string[][],
  y: number,
  size = SMALL,
): number {
  const half = Math.ceil(rows.length / 2);
  const width = 0.49 * (sheet.right - sheet.left);
  const area = { left: sheet.left, width, y, size };
  drawTable(book, sheet, columns, rows.slice(0, half), area);
  if (rows.length > half) drawTable(book, sheet, columns, rows.slice(half), { ...area, left: sheet.right - width });
  return y - tableHeight(columns, half, size);
}

/** Such halves in the flow, over sheets where they are long. */
export function flowHalvesInPlace(
  flow: Flow,
  columns: readonly Column[],
  rows: readonly string[][],
  style: { size?: number } = {},
): void {
  const size = style.size ?? SMALL;
  const head = tableHeight(columns, 0, size);
  const row = tableHeight(columns, 1, size) - head;
  for (let left = rows; left.length > 0; ) {
    needInPlace(flow, head + Math.min(3, left.length) * row);
    const fits = Math.floor((flow.y - flow.sheet.bottom - head) / row);
    const now = left.slice(0, 2 * fits);
    flow.y = drawHalves(flow.book, flow.sheet, columns, now, flow.y, size);
    left = left.slice(2 * fits);
  }
}
