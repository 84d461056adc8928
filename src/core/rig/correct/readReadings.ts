// The crew's readings: CSV with a header, one row a reading. Says which row is wrong and why. Keeps nothing and changes nothing.
import { PlanError } from "../../problem.ts";
import type { Reading } from "../../records/rig.ts";

/** Columns as the job's contract names them. */
export const readingColumns = [
  "time",
  "by",
  "id",
  "force_kN",
  "frequency_Hz",
  "free_length_m",
  "mass_kg_m",
  "temperature_C",
  "x",
  "y",
  "z",
] as const;

type Column = (typeof readingColumns)[number];

/** Cells of one line; quotes may hold the separator, a doubled quote is one. */
function splitLine(line: string, separator: string): string[] {
  const cells: string[] = [];
  let cell = "";
  let quoted = false;
  for (let i = 0; i < line.length; i++) {
    const c = line[i];
    if (c === '"') {
      if (quoted && line[i + 1] === '"') {
        cell += '"';
        i++;
      } else quoted = !quoted;
    } else if (c === separator && !quoted) {
      cells.push(cell.trim());
      cell = "";
    } else cell += c;
  }
  cells.push(cell.trim());
  return cells;
}

/**
 * Readings in the order of the file.
 * @units as the column names say; a semicolon may stand in place of the comma, then a comma may stand in numbers
 * @throws PlanError readings-header, readings-number, readings-row, readings-mass, readings-empty; each names the row
 */
export function readReadings(text: string): Reading[] {
  const lines = text.replace(/^\uFEFF/, "").split(/\r\n|\n|\r/);
  const head = lines[0] ?? "";
  const separator = head.includes(";") ? ";" : ",";
  const names = splitLine(head, separator);
  const unknown = names.filter((n) => !(readingColumns as readonly string[]).includes(n));
  if (unknown.length > 0 || !names.includes("id") || new Set(names).size !== names.length)
    throw new PlanError(
      "readings-header",
      `readings, row 1: ${unknown.length > 0 ? `there is no column "${unknown[0]}"` : "the header wants the column id, and each column once"}; the columns are ${readingColumns.join(",")}`,
      "row 1",
    );
  const readings: Reading[] = [];
  lines.forEach((line, k) => {
    if (k > 0 && line.trim() !== "") readings.push(readRow(splitLine(line, separator), names as Column[], k + 1));
  });
  if (readings.length === 0)
    throw new PlanError("readings-empty", "readings: the file has a header and no reading below it", []);
  return readings;
}

function readRow(cells: string[], names: Column[], row: number): Reading {
  const where = `row ${row}`;
  if (cells.length > names.length)
    throw new PlanError(
      "readings-row",
      `readings, ${where}: ${cells.length} cells under ${names.length} columns; put text with commas in quotes`,
      where,
    );
  const cell = (name: Column) => cells[names.indexOf(name)] ?? "";
  const number = (name: Column, low: number): number | null => {
    const words = cell(name);
    if (words === "") return null;
    const value = Number(/^[-+]?\d+,\d+$/.test(words) ? words.replace(",", ".") : words);
    if (!Number.isFinite(value) || value < low)
      throw new PlanError(
        "readings-number",
        `readings, ${where}: ${name} is "${words}"; it wants a number${low === 0 ? " of 0 or more" : ""}`,
        where,
      );
    return value;
  };
  const id = cell("id");
  const force = number("force_kN", 0);
  const [frequency, length, mass] = [number("frequency_Hz", 0), number("free_length_m", 0), number("mass_kg_m", 0)];
  const place = [number("x", -Infinity), number("y", -Infinity), number("z", -Infinity)];
  const surveyed = place.filter((q) => q !== null).length;
  const kinds = (force === null ? 0 : 1) + (frequency === null ? 0 : 1) + (surveyed > 0 ? 1 : 0);
  if (id === "" || kinds !== 1 || (surveyed > 0 && surveyed < 3))
    throw new PlanError(
      "readings-row",
      `readings, ${where}${id === "" ? "" : ` (${id})`}: a row has an id and either force_kN, or frequency_Hz with free_length_m and mass_kg_m, or x, y and z; ${id === "" ? "the id is missing" : kinds > 1 ? "this one has more than one of them" : "this one has not"}`,
      where,
    );
  if (frequency !== null && (!length || !mass))
    throw new PlanError(
      "readings-mass",
      `readings, ${where}: ${id} has a frequency without its ${length ? "mass (mass_kg_m)" : "free length (free_length_m)"}; a force follows only from all three`,
      where,
    );
  return {
    row,
    time: cell("time"),
    by: cell("by"),
    id,
    temperature: number("temperature_C", -273),
    force,
    vibration: frequency === null ? null : { frequency, length: length ?? 0, mass: mass ?? 0 },
    at: surveyed === 3 ? (place as [number, number, number]) : null,
  };
}

/**
 * Force of a free span from its first natural frequency.
 * @units Hz, m, kg/m -> kN
 * @source taut string: T = 4 m L² f²; bending at the ends left out, which overstates T by 26 % at xi = L·√(T/EI) = 20 and 4 % at 100
 */
export function measureVibrationForce(v: { frequency: number; length: number; mass: number }): number {
  return (4 * v.mass * v.length ** 2 * v.frequency ** 2) / 1000;
}
