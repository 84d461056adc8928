// Reference temperature (degC), or the share of the weakest part that no step may pass.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setRigFigure(
  project: Project,
  args: { key: "temperature" | "limit"; value: number | undefined },
): Project {
  return placeInJob(project, ["rig", args.key], args.value);
}
