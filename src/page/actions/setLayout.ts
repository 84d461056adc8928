// How the seams are laid out.
import type { Project } from "../store/project.ts";
import { placeInJob } from "./placeInJob.ts";

/** The act. */
export function setLayout(
  project: Project,
  args: { key: "layout" | "from" | "to" | "count" | "maxWidth" | "maxLength"; value: string | number | undefined },
): Project {
  return placeInJob(project, ["seams", args.key], args.value);
}
