// Tables that flow: cells wrap, rows stay whole where they can, a new sheet repeats the head. And the flow itself: a place on
// a sheet that moves down and turns the page.
import type { PDFFont } from "pdf-lib";
import { addSheet, type Book, type Sheet } from "./book.ts";
import { drawBox, drawText, fitText, PITCH, SMALL, wrapText } from "./pen.ts";

export interface Column {
  /** Lines of the head. */
  head: string[];
  /** Width, mm; a table is scaled to the width it is given. */
  width: number;
  align?: "start" | "end";
  bold?: boolean;
}

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

/** A heading with room for at least two lines under it. */
export function flowHeadingInPlace(flow: Flow, text: string): void {
  needInPlace(flow, 20);
  flow.y -= 8;
  const room = flow.sheet.right - flow.sheet.left;
  const line = fitText(text, flow.book.bold, 12, room);
  drawText(flow.sheet.page, line, { x: flow.sheet.left, y: flow.y + 1.5, size: 12, font: flow.book.bold });
}

/** A paragraph, line by line over sheets; `indent` sets all its lines in. */
export function flowTextInPlace(flow: Flow, text: string, options: { bold?: boolean; indent?: number } = {}): void {
  const font = options.bold ? flow.book.bold : flow.book.regular;
  const indent = options.indent ?? 0;
  for (const line of wrapText(text, font, SMALL, flow.sheet.right - flow.sheet.left - indent)) {
    needInPlace(flow, PITCH);
    flow.y -= PITCH;
    drawText(flow.sheet.page, line, { x: flow.sheet.left + indent, y: flow.y + 1, size: SMALL, font });
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
}

function drawRow(sheet: Sheet, cells: string[][], columns: readonly Column[], fonts: PDFFont[], area: Area): number {
  const { x, width } = layOut(columns, area.left, area.width);
  const height = Math.max(...cells.map((c) => c.length)) * PITCH + PAD;
  cells.forEach((lines, k) => {
    drawBox(sheet.page, { x: x[k], y: area.y - height, width: width[k], height }, { width: 0.18 });
    lines.forEach((line, i) => {
      const right = columns[k].align === "end";
      drawText(sheet.page, line, {
        x: right ? x[k] + width[k] - PAD : x[k] + PAD,
        y: area.y - PAD / 2 - PITCH * (i + 1) + 1.1,
        size: SMALL,
        font: fonts[k],
        align: right ? "end" : "start",
      });
    });
  });
  return height;
}

/** Height of a table whose cells take one line each, mm. */
export function tableHeight(columns: readonly Column[], rows: number): number {
  return Math.max(...columns.map((c) => c.head.length)) * PITCH + PAD + rows * (PITCH + PAD);
}

function drawHead(book: Book, sheet: Sheet, columns: readonly Column[], area: Area): number {
  const { width } = layOut(columns, area.left, area.width);
  const cells = columns.map((c, k) => c.head.map((h) => fitText(h, book.bold, SMALL, width[k] - 2 * PAD)));
  return drawRow(
    sheet,
    cells,
    columns,
    columns.map(() => book.bold),
    area,
  );
}

/** A table on one spot, each cell one line, shortened where it must be; returns the y below. */
export function drawTable(
  book: Book,
  sheet: Sheet,
  columns: readonly Column[],
  rows: readonly string[][],
  area: Area,
): number {
  const { width } = layOut(columns, area.left, area.width);
  const fonts = columns.map((c) => (c.bold ? book.bold : book.regular));
  let y = area.y - drawHead(book, sheet, columns, area);
  for (const row of rows) {
    const cells = row.map((text, k) => [fitText(text, fonts[k], SMALL, width[k] - 2 * PAD)]);
    y -= drawRow(sheet, cells, columns, fonts, { ...area, y });
  }
  return y;
}

/** A table over the whole width of the flow, cells wrapped, head repeated on every sheet; a row longer than a sheet is split. */
export function flowTableInPlace(flow: Flow, columns: readonly Column[], rows: readonly string[][]): void {
  const { book } = flow;
  const fonts = columns.map((c) => (c.bold ? book.bold : book.regular));
  const areaNow = (): Area => ({ left: flow.sheet.left, width: flow.sheet.right - flow.sheet.left, y: flow.y });
  const headHeight = tableHeight(columns, 0);
  const head = () => {
    flow.y -= drawHead(book, flow.sheet, columns, areaNow());
  };
  needInPlace(flow, headHeight + 3 * PITCH);
  head();
  for (const row of rows) {
    const { width } = layOut(columns, flow.sheet.left, flow.sheet.right - flow.sheet.left);
    let cells = row.map((text, k) => wrapText(text, fonts[k], SMALL, width[k] - 2 * PAD));
    for (;;) {
      const lines = Math.max(...cells.map((c) => c.length));
      const fits = Math.floor((flow.y - flow.sheet.bottom - PAD) / PITCH);
      const whole = Math.floor((flow.sheet.top - flow.sheet.bottom - headHeight - PAD) / PITCH);
      if (lines > fits && (lines <= whole || fits < 3)) {
        needInPlace(flow, Infinity);
        head();
        continue;
      }
      const now = cells.map((c) => c.slice(0, fits));
      flow.y -= drawRow(flow.sheet, now, columns, fonts, areaNow());
      cells = cells.map((c) => c.slice(fits));
      if (cells.every((c) => c.length === 0)) break;
    }
  }
}
