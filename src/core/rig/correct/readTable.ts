// A table that a person may have edited in a table program: CSV after RFC 4180, with a comma or a semicolon between cells, columns in
// any order, line breaks inside quotes. What is wrong is told with its row, as the program that opens it numbers lines.
import { PlanError } from "../../problem.ts";

/** One row below the header. */
export interface TableRow<C extends string> {
  /** Line of the file it begins on, the header is 1. */
  row: number;
  /** Text of a cell without blanks round it; "" where the column is not there. */
  cell: (name: C) => string;
  /** A cell as a number, null where it is empty. @throws PlanError readings-number */
  number: (name: C, low: number) => number | null;
}

/** A table program runs a cell that begins like this as a formula. */
const FORMULA = /^[=+\-@\t\r']/;

/** Text as a cell: quoted where it must be, with an apostrophe before what would be run. */
export function writeCell(value: string | number | null): string {
  if (value === null) return "";
  if (typeof value === "number") return String(value);
  const safe = FORMULA.test(value) ? `'${value}` : value;
  return /[",;\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** Takes the apostrophe away again that writeCell sets. */
function readCell(text: string): string {
  return text.startsWith("'") && FORMULA.test(text.slice(1)) ? text.slice(1) : text;
}

/** Cells of all lines, without blanks round them; an empty line is none. @throws PlanError readings-quote */
export function splitTable(text: string, separator: string, what: string): { row: number; cells: string[] }[] {
  const rows: { row: number; cells: string[] }[] = [];
  let [cells, cell, quoted, opened, line, row] = [[] as string[], "", false, 0, 1, 1];
  const endRow = () => {
    cells.push(cell);
    if (cells.length > 1 || cell.trim() !== "") rows.push({ row, cells: cells.map((c) => readCell(c.trim())) });
    [cells, cell] = [[], ""];
  };
  for (let i = 0; i < text.length; i++) {
    const c = text[i];
    const ends = c === "\n" || (c === "\r" && text[i + 1] !== "\n");
    if (ends) line++;
    if (c === '"') {
      if (quoted && text[i + 1] === '"') {
        cell += '"';
        i++;
      } else {
        quoted = !quoted;
        opened = line;
      }
    } else if (quoted) cell += c;
    else if (c === separator) {
      cells.push(cell);
      cell = "";
    } else if (ends) {
      endRow();
      row = line;
    } else if (c !== "\r") cell += c;
  }
  if (quoted)
    throw new PlanError(
      "readings-quote",
      `${what}, row ${opened}: a quote is opened and never closed; close it, or take it away`,
      `row ${opened}`,
    );
  endRow();
  return rows;
}

/**
 * Rows below the header.
 * @param columns those that may be there, in any order; the column id must
 * @units as the column names say; between semicolons a comma may stand in numbers
 * @throws PlanError readings-header, readings-row, readings-quote; each names the row
 */
export function readTable<C extends string>(text: string, columns: readonly C[], what: string): TableRow<C>[] {
  const plain = text.replace(/^\uFEFF/, "");
  const separator = (/^[^\r\n]*/.exec(plain)?.[0] ?? "").includes(";") ? ";" : ",";
  const [head, ...rows] = splitTable(plain, separator, what);
  const names = head?.cells ?? [];
  const unknown = names.filter((n) => !(columns as readonly string[]).includes(n));
  if (unknown.length > 0 || !names.includes("id") || new Set(names).size !== names.length)
    throw new PlanError(
      "readings-header",
      `${what}, row 1: ${unknown.length > 0 ? `there is no column "${unknown[0]}"` : "the header wants the column id, and each column once"}; the columns are ${columns.join(",")}`,
      "row 1",
    );
  return rows.map(({ row, cells }) => {
    const where = `row ${row}`;
    if (cells.length > names.length)
      throw new PlanError(
        "readings-row",
        `${what}, ${where}: ${cells.length} cells under ${names.length} columns; put text with commas in quotes`,
        where,
      );
    const cell = (name: C) => cells[names.indexOf(name)] ?? "";
    const number = (name: C, low: number): number | null => {
      const words = cell(name);
      if (words === "") return null;
      const value = Number(/^[-+]?\d+,\d+$/.test(words) ? words.replace(",", ".") : words);
      if (!Number.isFinite(value) || value < low)
        throw new PlanError(
          "readings-number",
          `${what}, ${where}: ${name} is "${words}"; it wants a number${low === 0 ? " of 0 or more" : ""}`,
          where,
        );
      return value;
    };
    return { row, cell, number };
  });
}
