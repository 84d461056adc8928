// Reference temperature (degC), the share of the weakest part that no step may pass, or how the frame of the anchors grows (1/K).
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setRigFigure(
  project: Project,
  args: { key: "temperature" | "limit" | "frameAlpha"; value: number | undefined },
): Project {
  return placeInJob(project, ["rig", args.key], args.value);
}
