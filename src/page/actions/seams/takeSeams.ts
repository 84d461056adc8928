// The seams as they lie now become the job's own: pairs of ends along edges, from then on moved, added and removed by hand.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

type Pairs = { edge: string; at: number }[][];

/** The act; an empty list gives the layout back to the plan. */
export function takeSeams(project: Project, args: { pairs: Pairs }): Project {
  if (args.pairs.length === 0) {
    const without = placeInJob(project, ["seams", "pairs"], undefined);
    return without.job.seams?.layout === "pairs" ? placeInJob(without, ["seams", "layout"], undefined) : without;
  }
  const { from: _from, to: _to, count: _count, why: _why, ...rest } = project.job.seams ?? {};
  return placeInJob(project, ["seams"], { ...rest, layout: "pairs", pairs: args.pairs });
}
