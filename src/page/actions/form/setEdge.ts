// A word on one edge: its kind, the force of its cable (kN, null for best balance), the cable.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setEdge(
  project: Project,
  args: { edge: string; key: "kind" | "force" | "cable" | "prestretched"; value: unknown },
): Project {
  return placeInJob(project, ["edges", args.edge, args.key], args.value);
}
