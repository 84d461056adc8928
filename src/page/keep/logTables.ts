// The log of a site from the tables it is kept in: one whole log, or as an older page wrote it: readings.csv that count,
// readings-struck.csv beside it, turns.csv for what was turned. Then one log is made of them, in the order of time, so that readings
// before and after a turn stay two states of the roof.
import { holdsTurns, readTurns } from "../../core/plan/olderLog.ts";
import { readSiteLog, type SiteLine } from "../../core/plan/siteLog.ts";
import { PlanError } from "../../core/problem.ts";

/** One of the files, by its name. */
export interface LogFile {
  name: string;
  text: string;
}

/** A time that tells no zone. The older page wrote its own in UTC so; taken as the machine's own time it would lie hours off its turn. */
const UNZONED = /^(\d{4}-\d\d-\d\d)[T ](\d\d:\d\d(?::\d\d(?:\.\d+)?)?)$/;
const zoned = (time: string) => time.replace(UNZONED, "$1T$2Z");

/** Work on one file; what is wrong there is told with its name. */
function inFile<T>(name: string, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (error instanceof PlanError) throw new PlanError(error.code, `${name}: ${error.message}`, error.where);
    throw error;
  }
}

/** When a line was written, ms; NaN where that cannot be told. */
const timeOf = ({ time }: SiteLine) => Date.parse(zoned(time));

/** The line with its zone told: beside lines that tell theirs it keeps its place. */
const marked = (line: SiteLine): SiteLine => ({ ...line, time: zoned(line.time) });

function tellUntimed(name: string, { time, id }: SiteLine): PlanError {
  return new PlanError(
    "readings-row",
    `${name}: a line of ${id} has ${time === "" ? "no time" : `the time "${time}"`}; without it nobody can tell which readings were taken before a turn. Write it as 2026-03-04T15:16:17Z`,
    name,
  );
}

/**
 * The log that the files hold: a whole one as it stands, else readings, struck readings and turns in the order of time.
 * @returns whole: one file is the log itself; null where there is no file
 * @throws PlanError files-log: two whole logs that differ; codes of readSiteLog; each names the file, and the row
 */
export function readLogFiles(files: readonly LogFile[]): { whole: boolean; lines: SiteLine[] } | null {
  const once = files.filter((f, i) => files.findIndex((other) => other.text === f.text) === i);
  if (once.length === 0) return null;
  const read = once.map(({ name, text }) => {
    if (holdsTurns(text)) return { name, whole: false, turns: true, lines: inFile(name, () => readTurns(text)) };
    const { whole, lines } = inFile(name, () => readSiteLog(text));
    const struck = !whole && /struck/i.test(name);
    return { name, whole, turns: false, lines: struck ? lines.map((r) => ({ ...r, struck: true as const })) : lines };
  });
  const [whole, second] = read.filter((r) => r.whole);
  if (second !== undefined)
    throw new PlanError(
      "files-log",
      `${whole.name} and ${second.name} are each a whole log and differ; open the one that counts`,
      [whole.name, second.name],
    );
  if (whole !== undefined) return { whole: true, lines: whole.lines };
  const parts = read.filter((r) => r.lines.length > 0).sort((a, b) => Number(a.turns) - Number(b.turns));
  if (parts.length < 2) return { whole: false, lines: parts.flatMap((r) => r.lines) };
  const lines = parts.flatMap((part) => part.lines.map((line) => ({ name: part.name, line, at: timeOf(line) })));
  const untimed = lines.find(({ at }) => !Number.isFinite(at));
  if (untimed === undefined) lines.sort((a, b) => a.at - b.at);
  else if (parts.some((r) => r.turns)) throw tellUntimed(untimed.name, untimed.line);
  return { whole: false, lines: lines.map(({ line }) => marked(line)) };
}
