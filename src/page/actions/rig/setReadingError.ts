// Share by which a reading may be off.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setReadingError(project: Project, args: { value: number | undefined }): Project {
  return placeInJob(project, ["rig", "reading", "error"], args.value);
}
