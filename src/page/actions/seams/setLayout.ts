// How the seams are laid out.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act; the reason for a layout goes with the layout it was given for. */
export function setLayout(
  project: Project,
  args: {
    key: "layout" | "from" | "to" | "count" | "maxWidth" | "minWidth" | "maxLength" | "why" | "doubleCloth";
    value: string | number | boolean | undefined;
  },
): Project {
  const other = ["layout", "from", "to", "count"].includes(args.key);
  const next = placeInJob(project, ["seams", args.key], args.value);
  return other && next !== project ? placeInJob(next, ["seams", "why"], undefined) : next;
}
