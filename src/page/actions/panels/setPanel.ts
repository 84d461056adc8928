// A decision about a single panel: warp turned (degrees), batch of cloth.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setPanel(
  project: Project,
  args: { panel: string; key: "warp" | "batch"; value: string | number | undefined },
): Project {
  return placeInJob(project, ["panels", args.panel, args.key], args.value);
}
