// Takes a reading out of the log: a slip of the finger. Undo brings it back.
import type { Project } from "../store/project.ts";

/** The act. */
export function removeReading(project: Project, args: { index: number }): Project {
  return { ...project, log: project.log.filter((_, i) => i !== args.index) };
}
