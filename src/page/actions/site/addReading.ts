// A reading of the site, at the end of the log.
import type { Project, Reading } from "../../store/project.ts";

/** The act. */
export function addReading(project: Project, args: { reading: Reading }): Project {
  return { ...project, log: [...project.log, args.reading] };
}
