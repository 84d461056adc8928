// The readings file of the site, as the command line reads it: one row a reading, empty where nothing was read.
import { PlanError } from "../../core/problem.ts";
import type { Reading } from "../store/project.ts";

const HEAD = "time,by,id,force_kN,frequency_Hz,free_length_m,mass_kg_m,temperature_C,x,y,z";

function cell(value: string | number | null): string {
  if (value === null) return "";
  const text = String(value);
  // A cell that begins like a formula is run by table programs: a quote in front keeps it text.
  const safe = typeof value === "string" && /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** Bytes of readings.csv: the readings that count, or those that were struck. */
export function writeReadings(log: readonly Reading[], struck = false): Uint8Array<ArrayBuffer> {
  const rows = log
    .filter((r) => (r.struck ?? false) === struck)
    .map((r) =>
      [
        r.time,
        r.by,
        r.id,
        r.force,
        r.frequency,
        r.freeLength,
        r.massPerMetre,
        r.temperature,
        ...(r.at ?? [null, null, null]),
      ]
        .map(cell)
        .join(","),
    );
  return new TextEncoder().encode(`${[HEAD, ...rows].join("\r\n")}\r\n`);
}

function splitRow(line: string): string[] {
  const cells: string[] = [];
  for (const match of line.matchAll(/(?:^|,)(?:"((?:[^"]|"")*)"|([^,]*))/g)) {
    cells.push(match[1] === undefined ? (match[2] ?? "") : match[1].replaceAll('""', '"'));
  }
  return cells;
}

/**
 * Readings of a file this page wrote.
 * @throws PlanError readings-head, readings-number
 */
export function readReadings(text: string): Reading[] {
  const [head, ...rows] = text
    .replace(/^\uFEFF/, "")
    .split(/\r?\n/)
    .filter((line) => line !== "");
  if (head !== HEAD) {
    throw new PlanError(
      "readings-head",
      `the readings begin with ${JSON.stringify(head ?? "")}; the first row is ${HEAD}`,
      "readings",
    );
  }
  return rows.map((row, i) => {
    const c = splitRow(row);
    const number = (k: number): number | null => {
      if ((c[k] ?? "") === "") return null;
      const value = Number(c[k]);
      if (!Number.isFinite(value)) {
        throw new PlanError(
          "readings-number",
          `readings row ${i + 2}: ${JSON.stringify(c[k])} is no number; correct it`,
          `row ${i + 2}`,
        );
      }
      return value;
    };
    const [x, y, z] = [number(8), number(9), number(10)];
    return {
      time: c[0] ?? "",
      by: (c[1] ?? "").replace(/^'/, ""),
      id: (c[2] ?? "").replace(/^'/, ""),
      force: number(3),
      frequency: number(4),
      freeLength: number(5),
      massPerMetre: number(6),
      temperature: number(7),
      at: x === null || y === null || z === null ? null : [x, y, z],
    };
  });
}
