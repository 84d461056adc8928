// Title or issue letter of the job.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setHead(project: Project, args: { key: "title" | "issue"; value: string | undefined }): Project {
  return placeInJob(project, [args.key], args.value);
}
