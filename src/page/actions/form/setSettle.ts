// Whether the mesh is moved into balance.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setSettle(project: Project, args: { value: boolean | undefined }): Project {
  return placeInJob(project, ["settle"], args.value);
}
