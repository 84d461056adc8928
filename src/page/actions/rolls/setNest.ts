// How panels are laid on the rolls.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setNest(
  project: Project,
  args: {
    key: "steps" | "seconds" | "seed" | "gap" | "turn" | "bite" | "pastBite" | "sharedEdges";
    value: number | boolean | string | undefined;
  },
): Project {
  return placeInJob(project, ["nest", args.key], args.value);
}
