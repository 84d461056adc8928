// Compensation of all cloth without a batch of its own: engineering strain from a biaxial test.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act; both ways stand together, so the other one is given too. null: what the stiffness gives. */
export function setCompensation(project: Project, args: { value: { warp: number; weft: number } | null }): Project {
  return placeInJob(project, ["compensation", "default"], args.value ?? undefined);
}
