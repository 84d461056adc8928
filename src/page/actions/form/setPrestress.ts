// Prestress of the cloth one way, kN/m.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setPrestress(project: Project, args: { way: "warp" | "weft"; value: number | undefined }): Project {
  return placeInJob(project, ["prestress", args.way], args.value);
}
