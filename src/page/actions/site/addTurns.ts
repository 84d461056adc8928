// The turns of a correction, made as they were told, at the end of the log: what is read after them is another state of the roof.
import type { Project, Reading } from "../../store/project.ts";

/** A line of the log that says a turn, mm, positive shortens; nothing was read. */
export function writeTurn(turn: Pick<Reading, "time" | "by" | "id" | "step">, turned: number): Reading {
  const nothing = { force: null, frequency: null, freeLength: null, massPerMetre: null, temperature: null, at: null };
  return { ...turn, ...nothing, turned };
}

/** The act; `step`: step of the schedule after which they were made. */
export function addTurns(
  project: Project,
  args: { moves: readonly { adjuster: string; travel: number }[]; step: number; time: string },
): Project {
  const { time, step } = args;
  const lines = args.moves.map((m) => writeTurn({ time, by: "", id: m.adjuster, step }, m.travel));
  return { ...project, log: [...project.log, ...lines] };
}
