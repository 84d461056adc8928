// Tables as CSV after RFC 4180: CRLF, quotes doubled, UTF-8, decimal point. Text that a spreadsheet would run as a formula is
// disarmed with a leading apostrophe; numbers stay numbers.
import { decimal } from "../words/decimal.ts";
import { plainText } from "../words/plainText.ts";

/** A cell: text, nothing, or a number with its decimals. */
export type Cell = string | null | { value: number; decimals: number };

/** A number for a cell. */
export function numberCell(value: number, decimals: number): Cell {
  return { value, decimals };
}

function cellText(cell: Cell): string {
  if (cell === null) return "";
  if (typeof cell === "object") return decimal(cell.value, cell.decimals);
  const text = plainText(cell);
  const safe = /^[=+\-@]/.test(text) ? `'${text}` : text;
  return /[",]/.test(safe) ? `"${safe.replace(/"/g, '""')}"` : safe;
}

/** A header line and one line for each row. */
export function writeCsv(header: readonly string[], rows: readonly (readonly Cell[])[]): string {
  return [header, ...rows].map((row) => `${row.map(cellText).join(",")}\r\n`).join("");
}
