// What stands in the title blocks, and on which sheet.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setPapers(
  project: Project,
  args: { key: "date" | "drawnBy" | "checkedBy" | "supersedes" | "sheet" | "units"; value: string | undefined },
): Project {
  return placeInJob(project, ["papers", args.key], args.value);
}
