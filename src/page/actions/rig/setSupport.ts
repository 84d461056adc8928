// A figure of a strut or a stay of the job: stiffness, force, breaking force, kN.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act; `index`: its place in the job's list. */
export function setSupport(
  project: Project,
  args: {
    list: "struts" | "stays";
    index: number;
    key: "EA" | "force" | "minBreakingForce";
    value: number | undefined;
  },
): Project {
  return placeInJob(project, ["rig", args.list, args.index, args.key], args.value);
}
