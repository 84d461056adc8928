// The lines of a log that comes in as a file. A whole log takes the place of the one there is; readings alone are added to it, each once.
import type { Project, Reading } from "../../store/project.ts";

/** What makes two lines the same: all that was read or turned, not when of the schedule. */
function nameLine({ step: _, struck: __, ...read }: Reading): string {
  return JSON.stringify(Object.entries(read).sort(([a], [b]) => (a < b ? -1 : 1)));
}

/** In the order of time, where every line tells its own; else as they stand. */
function inTime(log: Reading[]): Reading[] {
  const times = new Map(log.map((r) => [r, Date.parse(r.time)]));
  const at = (r: Reading) => times.get(r) ?? Number.NaN;
  return log.every((r) => Number.isFinite(at(r))) ? log.sort((a, b) => at(a) - at(b)) : log;
}

/** The act; `whole`: the lines are a log of their own. */
export function takeLog(project: Project, args: { lines: readonly Reading[]; whole: boolean }): Project {
  if (args.whole) return { ...project, log: [...args.lines] };
  const there = new Set(project.log.map(nameLine));
  const fresh = args.lines.filter((r) => !there.has(nameLine(r)));
  return fresh.length === 0 ? project : { ...project, log: inTime([...project.log, ...fresh]) };
}
