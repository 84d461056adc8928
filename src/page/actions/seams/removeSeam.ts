// Takes one seam out of the job's own pairs.
import type { Project } from "../../store/project.ts";
import { takeSeams } from "./takeSeams.ts";

/** The act. */
export function removeSeam(project: Project, args: { seam: number }): Project {
  const pairs = project.job.seams?.pairs ?? [];
  return takeSeams(project, { pairs: pairs.filter((_, i) => i !== args.seam) });
}
