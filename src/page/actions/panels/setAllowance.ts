// An allowance beyond the net line, mm, or how it is made.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setAllowance(
  project: Project,
  args: {
    key: "seam" | "seamOn" | "pocket" | "pocketStrip" | "cover" | "clamp" | "hem";
    value: string | number | boolean | undefined;
  },
): Project {
  return placeInJob(project, ["allowances", args.key], args.value);
}
