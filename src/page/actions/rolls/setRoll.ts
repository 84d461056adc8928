// One figure of a roll in store, mm, or a word on it.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setRoll(
  project: Project,
  args: {
    index: number;
    key: "id" | "width" | "selvedge" | "length" | "batch" | "start" | "outerFace" | "price";
    value: string | number | undefined;
  },
): Project {
  return placeInJob(project, ["rolls", args.index, args.key], args.value);
}
