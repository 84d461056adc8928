// Keys of the job file that are read and checked in shape but that no station uses yet. Each is said once, so that nobody
// counts on them. A key leaves this list in the change that puts it to use.
import type { Finding } from "../problem.ts";
import { writePath } from "./jobProblems.ts";

/** "*" stands for any name or number. */
const KEYS: string[][] = [["rig", "struts", "*", "pinned"]];

/** One note for each such key that the job gives. */
export function noteKeysWithoutEffect(job: unknown): Finding[] {
  return KEYS.flatMap((path): Finding[] => {
    const found = findPaths(job, path, []);
    if (found.length === 0) return [];
    const where = found.map(writePath);
    return [
      {
        code: "job-key-without-effect",
        level: "note",
        station: "job",
        where: where.length === 1 ? where[0] : where,
        value: null,
        limit: null,
        text: `${path.join(".").replace(/\.\*/g, ".…")} is accepted, without effect yet`,
        remedy: "nothing to do; do not count on it in this plan",
        basis: "own argument",
      },
    ];
  });
}

/** Paths in a value that fit the pattern. */
function findPaths(value: unknown, pattern: string[], before: PropertyKey[]): PropertyKey[][] {
  if (pattern.length === 0) return [before];
  if (value === null || typeof value !== "object") return [];
  const [step, ...rest] = pattern;
  if (step !== "*") {
    if (!Object.hasOwn(value, step)) return [];
    return findPaths((value as Record<string, unknown>)[step], rest, [...before, step]);
  }
  const entries: [PropertyKey, unknown][] = Array.isArray(value) ? value.map((v, i) => [i, v]) : Object.entries(value);
  return entries.flatMap(([key, inner]) => findPaths(inner, rest, [...before, key]));
}
