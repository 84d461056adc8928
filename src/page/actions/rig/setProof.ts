// How far the assembled roof may be from what was intended: a limit as a share, or mm for the way a point moves.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setProof(
  project: Project,
  args: { key: "mean" | "rms" | "moved" | "force" | "slack"; value: number | undefined },
): Project {
  return placeInJob(project, ["proof", args.key], args.value);
}
