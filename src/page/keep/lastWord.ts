// The last word on a job before its page goes. The store takes a moment and a page that is closed or loaded anew has none left, so
// what it has not taken is left where it can be written at once, and taken up when the job is opened again.
import type { JobFile } from "../../core/job/jobSchema.ts";
import { migrateJob } from "../../core/job/jobVersions.ts";
import type { Leaf } from "../store/bookStore.ts";
import type { Reading } from "../store/project.ts";
import { isSameLine, type Line } from "./timeline.ts";

interface LastWord {
  /** What the store counted when it last took the job. */
  count: number;
  /** How many states from the first on the store has; the others follow here. */
  base: number;
  states: { job: JobFile; log: Reading[]; words: string }[];
  at: number;
  leaf: Leaf;
}

const keyOf = (id: string) => `seamstay-last-word ${id}`;

/** Leaves the word: what `line` has beyond `before`, as the store took it last at `count`. A browser that keeps nothing is no fault here. */
export function leaveWord(line: Line, before: Line, count: number, leaf: Leaf): void {
  if (isSameLine(line, before)) return;
  const differs = line.states.findIndex(({ project }, i) => project !== before.states[i]?.project);
  const base = differs < 0 ? line.states.length : differs;
  const states = line.states.slice(base).map(({ project: { job, log }, words }) => ({ job, log, words }));
  const word: LastWord = { count, base, states, at: line.at, leaf };
  try {
    localStorage.setItem(keyOf(line.states[line.at].project.id), JSON.stringify(word));
  } catch {
    // full, or switched off: the page has said so already
  }
}

/** The store has taken all there is to say of a job. */
export function dropWord(id: string): void {
  try {
    localStorage.removeItem(keyOf(id));
  } catch {
    // see leaveWord
  }
}

function readWord(id: string): LastWord | null {
  try {
    return JSON.parse(localStorage.getItem(keyOf(id)) ?? "null");
  } catch {
    return null;
  }
}

/**
 * The line of a kept job with the last word on it, and the count it goes on from; null where the store has heard it.
 * @throws PlanError codes of migrateJob
 */
export function hearWord(id: string, kept: Line): { line: Line; count: number; leaf: Leaf } | null {
  const word = readWord(id);
  if (word === null || word.base > kept.states.length) return null;
  const { mesh } = kept.states[kept.at].project;
  const said = word.states.map(({ job, log, words }) => ({
    project: { id, job: migrateJob(job) as unknown as JobFile, mesh, log },
    words,
  }));
  const line: Line = { states: [...kept.states.slice(0, word.base), ...said], at: word.at };
  const text = ({ states, at }: Line) => JSON.stringify([at, states.map(({ project: { job, log } }) => [job, log])]);
  return line.states[line.at] === undefined || text(line) === text(kept)
    ? null
    : { line, count: word.count, leaf: word.leaf };
}
