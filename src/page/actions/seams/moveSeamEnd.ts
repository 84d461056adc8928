// Moves one end of a seam along its edge, or onto another edge.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act; `point`: index along the seam. Shares are kept to a millionth. */
export function moveSeamEnd(
  project: Project,
  args: { seam: number; point: number; edge: string; at: number },
): Project {
  const at = Math.min(Math.max(Math.round(args.at * 1e6) / 1e6, 0), 1);
  return placeInJob(project, ["seams", "pairs", args.seam, args.point], { edge: args.edge, at });
}
