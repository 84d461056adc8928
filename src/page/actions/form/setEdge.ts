// A word on one edge: its kind, the force of its cable (kN, null for best balance), the cable and how it is made.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function setEdge(
  project: Project,
  args: {
    edge: string;
    key: "kind" | "force" | "cable" | "prestretched" | "stretch" | "fitting" | "clamps";
    value: unknown;
  },
): Project {
  return placeInJob(project, ["edges", args.edge, args.key], args.value);
}

/** What the end fittings take off a cable, mm, at its first or last end; with nothing at either end the word goes. */
export function setTerminal(project: Project, args: { edge: string; end: 0 | 1; value: number | undefined }): Project {
  const { edge, end, value = 0 } = args;
  const both = (project.job.edges?.[edge]?.terminals ?? [0, 0]).map((mm, k) => (k === end ? value : mm));
  return placeInJob(project, ["edges", edge, "terminals"], both.some((mm) => mm > 0) ? both : undefined);
}
