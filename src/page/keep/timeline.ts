// The states undo and redo lead through as one line, oldest first, with the place the job stands at. Pure.
import type { ProjectSlice } from "../store/bookStore.ts";
import type { Project } from "../store/project.ts";

/** States in order; `words`: what was done to come to a state, nothing for the first. */
export interface Line {
  states: { project: Project; words: string }[];
  at: number;
}

/** The line of a book with a project open. */
export function lineOf(book: Pick<ProjectSlice, "past" | "future"> & { project: Project }): Line {
  const { project, past, future } = book;
  const projects = [...past.map((p) => p.project), project, ...future.map((f) => f.project)];
  const words = ["", ...past.map((p) => p.words), ...future.map((f) => f.words)];
  return { states: projects.map((p, i) => ({ project: p, words: words[i] })), at: past.length };
}

/** Past, project and future of a line. */
export function readLine({ states, at }: Line): Pick<ProjectSlice, "past" | "future"> & { project: Project } {
  return {
    project: states[at].project,
    past: states.slice(0, at).map(({ project }, i) => ({ project, words: states[i + 1].words })),
    future: states.slice(at + 1),
  };
}

/** The same line under another name, the job it stands at changed. */
export function renameLine(line: Line, id: string, change: (project: Project) => Project): Line {
  const states = line.states.map(({ project, words }, i) => ({
    project: i === line.at ? change({ ...project, id }) : { ...project, id },
    words,
  }));
  return { states, at: line.at };
}

/** Whether two lines hold the same states and stand at the same one. */
export function isSameLine(a: Line, b: Line): boolean {
  return (
    a.at === b.at &&
    a.states.length === b.states.length &&
    a.states.every(({ project }, i) => project === b.states[i].project)
  );
}
