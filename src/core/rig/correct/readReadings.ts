// The crew's readings: CSV with a header, one row a reading. Says which row is wrong and why. Keeps nothing and changes nothing.
import { PlanError } from "../../problem.ts";
import type { Reading } from "../../records/rig.ts";
import { readTable, type TableRow } from "./readTable.ts";

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

/**
 * Readings in the order of the file.
 * @units as the column names say; a semicolon may stand in place of the comma, then a comma may stand in numbers
 * @throws PlanError readings-header, readings-number, readings-quote, readings-row, readings-mass, readings-empty; each names the row
 */
export function readReadings(text: string): Reading[] {
  const readings = readTable(text, readingColumns, "readings").map((row) => readReading(row, "readings"));
  if (readings.length === 0)
    throw new PlanError("readings-empty", "readings: the file has a header and no reading below it", []);
  return readings;
}

/**
 * One row of a table that has these columns, and maybe others. what: what the table is called
 * @throws PlanError readings-row, readings-mass, readings-number
 */
export function readReading({ row, cell, number }: TableRow<Column>, what: string): Reading {
  const where = `row ${row}`;
  const id = cell("id");
  const force = number("force_kN", 0);
  const [frequency, length, mass] = [number("frequency_Hz", 0), number("free_length_m", 0), number("mass_kg_m", 0)];
  const place = [number("x", -Infinity), number("y", -Infinity), number("z", -Infinity)];
  const surveyed = place.filter((q) => q !== null).length;
  const kinds = (force === null ? 0 : 1) + (frequency === null ? 0 : 1) + (surveyed > 0 ? 1 : 0);
  if (id === "" || kinds !== 1 || (surveyed > 0 && surveyed < 3))
    throw new PlanError(
      "readings-row",
      `${what}, ${where}${id === "" ? "" : ` (${id})`}: a row has an id and either force_kN, or frequency_Hz with free_length_m and mass_kg_m, or x, y and z; ${id === "" ? "the id is missing" : kinds > 1 ? "this one has more than one of them" : "this one has not"}`,
      where,
    );
  if (frequency !== null && (!length || !mass))
    throw new PlanError(
      "readings-mass",
      `${what}, ${where}: ${id} has a frequency without its ${length ? "mass (mass_kg_m)" : "free length (free_length_m)"}; a force follows only from all three`,
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
