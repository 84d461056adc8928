// Fade over which compensation is taken back along one kind of edge, m.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setDecompensation(
  project: Project,
  args: { key: "clamped" | "ring" | "cable"; value: number | undefined },
): Project {
  return placeInJob(project, ["decompensation", args.key], args.value);
}
