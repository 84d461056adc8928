// Prestress of the cloth one way, kN/m, and whether the form is asked for it.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setPrestress(project: Project, args: { way: "warp" | "weft"; value: number | undefined }): Project {
  return placeInJob(project, ["prestress", args.way], args.value);
}

/** Has the form asked for the stress it was found with, or the job's own word taken. */
export function askPrestress(project: Project, args: { from: "balance" | undefined }): Project {
  return placeInJob(project, ["prestress", "from"], args.from);
}
