// Stages of the tensioning, shares of the target.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setStages(project: Project, args: { value: number[] | undefined }): Project {
  return placeInJob(project, ["rig", "stages"], args.value);
}
