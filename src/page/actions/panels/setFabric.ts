// Cloth of the catalogue by its id.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setFabric(project: Project, args: { value: string | undefined }): Project {
  return placeInJob(project, ["fabric"], args.value);
}
