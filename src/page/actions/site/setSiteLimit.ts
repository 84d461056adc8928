// A limit of the site set by the engineer.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setSiteLimit(project: Project, args: { key: string; value: number | string | undefined }): Project {
  return placeInJob(project, ["papers", "site", args.key], args.value);
}
