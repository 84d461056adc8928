// The readings file of the site, as the command line reads it: one row a reading, empty where nothing was read.
import { type KeptRound, partLog } from "../../core/plan/partLog.ts";
import { PlanError } from "../../core/problem.ts";
import { writeTurn } from "../actions/site/addTurns.ts";
import type { Reading } from "../store/project.ts";

const HEAD = "time,by,id,force_kN,frequency_Hz,free_length_m,mass_kg_m,temperature_C,x,y,z";

function cell(value: string | number | null): string {
  if (value === null) return "";
  const text = String(value);
  // A cell that begins like a formula is run by table programs: a quote in front keeps it text.
  const safe = typeof value === "string" && /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

const TURNS = "time,by,id,step,travel_mm";

/** Bytes of readings.csv: the readings that count, or those that were struck. */
export function writeReadings(log: readonly Reading[], struck = false): Uint8Array<ArrayBuffer> {
  const rows = log
    .filter((r) => r.turned === undefined && (r.struck ?? false) === struck)
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

/** Bytes of turns.csv: what was turned between the readings, and after which step of the schedule; travel in mm, positive shortens. */
export function writeTurns(log: readonly Reading[]): Uint8Array<ArrayBuffer> {
  const rows = log
    .filter((r) => r.turned !== undefined && !r.struck)
    .map((r) => [r.time, r.by, r.id, r.step ?? null, r.turned ?? null].map(cell).join(","));
  return new TextEncoder().encode(`${[TURNS, ...rows].join("\r\n")}\r\n`);
}

/** What counts of the log for the state after a step: what was read since the last turn, and the rounds before. */
export function partReadings(log: readonly Reading[], step: number): { text: string | null; kept: KeptRound[] } {
  const lines = log
    .filter((r) => !r.struck)
    .map((r) => ({
      step: r.step ?? null,
      what: r.turned === undefined ? { reading: r } : { adjuster: r.id, travel: r.turned },
    }));
  const { now, earlier } = partLog(lines, step);
  const text = (readings: readonly Reading[]) => new TextDecoder().decode(writeReadings(readings));
  return {
    text: now.length === 0 ? null : text(now),
    kept: earlier.flatMap((r) => (r.readings.length === 0 ? [] : [{ text: text(r.readings), travel: r.travel }])),
  };
}

function splitRow(line: string): string[] {
  const cells: string[] = [];
  for (const match of line.matchAll(/(?:^|,)(?:"((?:[^"]|"")*)"|([^,]*))/g)) {
    cells.push(match[1] === undefined ? (match[2] ?? "") : match[1].replaceAll('""', '"'));
  }
  return cells;
}

/** Cells of the rows below a header that must be this one. @throws PlanError readings-head */
function readRows(text: string, wanted: string, what: string): string[][] {
  const [head, ...rows] = text
    .replace(/^\uFEFF/, "")
    .split(/\r?\n/)
    .filter((line) => line !== "");
  if (head !== wanted) {
    throw new PlanError(
      "readings-head",
      `the ${what} begin with ${JSON.stringify(head ?? "")}; the first row is ${wanted}`,
      what,
    );
  }
  return rows.map(splitRow);
}

/** A cell as a number; null where it is empty. @throws PlanError readings-number */
function readCell(cells: readonly string[], k: number, row: string): number | null {
  if ((cells[k] ?? "") === "") return null;
  const value = Number(cells[k]);
  if (Number.isFinite(value)) return value;
  throw new PlanError("readings-number", `${row}: ${JSON.stringify(cells[k])} is no number; correct it`, row);
}

function readWho(c: readonly string[]): Pick<Reading, "time" | "by" | "id"> {
  return { time: c[0] ?? "", by: (c[1] ?? "").replace(/^'/, ""), id: (c[2] ?? "").replace(/^'/, "") };
}

/**
 * Readings of a file this page wrote.
 * @throws PlanError readings-head, readings-number
 */
export function readReadings(text: string): Reading[] {
  return readRows(text, HEAD, "readings").map((c, i) => {
    const number = (k: number) => readCell(c, k, `readings row ${i + 2}`);
    const [x, y, z] = [number(8), number(9), number(10)];
    return {
      ...readWho(c),
      force: number(3),
      frequency: number(4),
      freeLength: number(5),
      massPerMetre: number(6),
      temperature: number(7),
      at: x === null || y === null || z === null ? null : [x, y, z],
    };
  });
}

/**
 * Turns of a file this page wrote.
 * @throws PlanError readings-head, readings-number
 */
export function readTurns(text: string): Reading[] {
  return readRows(text, TURNS, "turns").map((c, i) => {
    const row = `turns row ${i + 2}`;
    const step = readCell(c, 3, row);
    return writeTurn({ ...readWho(c), ...(step === null ? {} : { step }) }, readCell(c, 4, row) ?? 0);
  });
}
