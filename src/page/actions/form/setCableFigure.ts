// One figure of an edge's cable of the job's own: EA and breaking force (kN), diameter (mm), mass (kg/m).
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act; a cable of the catalogue gives way to the job's own. */
export function setCableFigure(
  project: Project,
  args: { edge: string; key: "EA" | "minBreakingForce" | "diameter" | "mass"; value: number | undefined },
): Project {
  const former = project.job.edges?.[args.edge]?.cable;
  const { [args.key]: _former, ...rest } = typeof former === "object" ? former : {};
  const next = args.value === undefined ? rest : { ...rest, [args.key]: args.value };
  return placeInJob(project, ["edges", args.edge, "cable"], Object.keys(next).length === 0 ? undefined : next);
}
