// The turns of a correction, made as they were told, at the end of the log: what is read after them is another state of the roof.
import type { Project, Reading } from "../../store/project.ts";

const nothingRead = {
  force: null,
  frequency: null,
  freeLength: null,
  massPerMetre: null,
  temperature: null,
  at: null,
};

/** The act; `step`: step of the schedule after which they were made; travel in mm, positive shortens. */
export function addTurns(
  project: Project,
  args: { moves: readonly { adjuster: string; travel: number }[]; step: number; time: string },
): Project {
  const { time, step } = args;
  const lines: Reading[] = args.moves.map(({ adjuster: id, travel: turned }) => {
    return { time, by: "", id, ...nothingRead, step, turned };
  });
  return { ...project, log: [...project.log, ...lines] };
}
