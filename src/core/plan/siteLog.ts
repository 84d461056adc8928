// The log of a site as a whole: what was read, what was turned, and what was struck, line by line. Goes out as two files and comes back:
// the readings that count, as the contract has them, and the log itself, of which nothing is left out. Pure.
import { PlanError } from "../problem.ts";
import type { Reading } from "../records/rig.ts";
import { readingColumns, readReading, readReadings } from "../rig/correct/readReadings.ts";
import { readTable, type TableRow, writeCell } from "../rig/correct/readTable.ts";
import { type KeptRound, partLog } from "./partLog.ts";

/** One line of the site log: a reading, or an adjuster turned. */
export interface SiteLine {
  time: string;
  by: string;
  /** Adjuster, cable or anchor. */
  id: string;
  /** kN */
  force: number | null;
  /** Hz, m, kg/m: a plucked free span. */
  frequency: number | null;
  freeLength: number | null;
  massPerMetre: number | null;
  /** degC */
  temperature: number | null;
  /** m, a surveyed position. */
  at: [number, number, number] | null;
  /** Step of the schedule after which it was read or turned; left out: not known. */
  step?: number;
  /** mm by which an adjuster was turned, as it was told; positive shortens. Then nothing was read. */
  turned?: number;
  /** Taken back, but kept to be read. */
  struck?: true;
}

const logColumns = [...readingColumns, "step", "travel_mm", "struck"] as const;

type LogColumn = (typeof logColumns)[number];

const cellsOf = (r: SiteLine) => [
  r.time,
  r.by,
  r.id,
  r.force,
  r.frequency,
  r.freeLength,
  r.massPerMetre,
  r.temperature,
  ...(r.at ?? [null, null, null]),
];

const writeTable = (head: readonly string[], rows: readonly (string | number | null)[][]) =>
  `${[head.join(","), ...rows.map((r) => r.map(writeCell).join(","))].join("\r\n")}\r\n`;

/** Text of readings.csv: the readings that count, as the command line reads them. */
export function writeReadings(log: readonly SiteLine[]): string {
  return writeTable(readingColumns, log.filter((r) => r.turned === undefined && !r.struck).map(cellsOf));
}

/** Text of site-log.csv: every line. */
export function writeSiteLog(log: readonly SiteLine[]): string {
  return writeTable(
    logColumns,
    log.map((r) => [...cellsOf(r), r.step ?? null, r.turned ?? null, r.struck ? "yes" : null]),
  );
}

/** What counts of the log for the state after a step: what was read since the last turn, and the rounds before. */
export function partSiteLog(log: readonly SiteLine[], step: number): { text: string | null; kept: KeptRound[] } {
  const lines = log
    .filter((r) => !r.struck)
    .map((r) => ({
      step: r.step ?? null,
      what: r.turned === undefined ? { reading: r } : { adjuster: r.id, travel: r.turned },
    }));
  const { now, earlier } = partLog(lines, step);
  return {
    text: now.length === 0 ? null : writeReadings(now),
    kept: earlier.flatMap((r) =>
      r.readings.length === 0 ? [] : [{ text: writeReadings(r.readings), travel: r.travel }],
    ),
  };
}

type Marks = Pick<SiteLine, "step" | "struck">;

function readLine(line: TableRow<LogColumn>): SiteLine {
  const { row, cell, number } = line;
  const [step, turned] = [number("step", 0), number("travel_mm", -Infinity)];
  const struck = cell("struck");
  if (struck !== "" && struck !== "yes")
    throw new PlanError(
      "readings-row",
      `site log, row ${row}: struck is "${struck}"; it wants yes, or nothing`,
      `row ${row}`,
    );
  const marks: Marks = { ...(step === null ? {} : { step }), ...(struck === "" ? {} : { struck: true }) };
  if (turned === null) return { ...oneLine(readReading(line, "site log")), ...marks };
  const nothing = { force: null, frequency: null, freeLength: null, massPerMetre: null, temperature: null, at: null };
  return { time: cell("time"), by: cell("by"), id: cell("id"), ...nothing, turned, ...marks };
}

function oneLine({ time, by, id, temperature, force, vibration, at }: Reading): SiteLine {
  const [frequency, freeLength, massPerMetre] = vibration
    ? [vibration.frequency, vibration.length, vibration.mass]
    : [null, null, null];
  return { time, by, id, force, frequency, freeLength, massPerMetre, temperature, at: at && [at[0], at[1], at[2]] };
}

/**
 * The lines of either file.
 * @returns whole: the file is a log of its own, with steps, turns and what was struck; else it holds readings that count
 * @throws PlanError readings-header, readings-row, readings-number, readings-quote, readings-mass; each names the row
 */
export function readSiteLog(text: string): { whole: boolean; lines: SiteLine[] } {
  const [head = ""] = text.split(/\r?\n|\r/, 1);
  if (/\b(travel_mm|struck|step)\b/.test(head))
    return { whole: true, lines: readTable(text, logColumns, "site log").map(readLine) };
  try {
    return { whole: false, lines: readReadings(text).map(oneLine) };
  } catch (error) {
    // a log whose readings are all struck leaves none that count
    if (error instanceof PlanError && error.code === "readings-empty") return { whole: false, lines: [] };
    throw error;
  }
}
