// Unit, up axis or outer face of the mesh, which its file cannot say.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setMeshWord(
  project: Project,
  args: { key: "unit" | "up" | "outside"; value: string | undefined },
): Project {
  return placeInJob(project, ["mesh", args.key], args.value);
}
