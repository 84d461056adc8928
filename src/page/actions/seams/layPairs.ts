// All seams one by one between places on edges, as they were slid there.
import type { Project } from "../../store/project.ts";
import { takeSeams } from "./takeSeams.ts";

/** The act; shares are kept to a hundred-thousandth, so that seams that were not touched stay where they are. */
export function layPairs(project: Project, args: { pairs: { edge: string; at: number }[][] }): Project {
  if (args.pairs.length === 0) return project;
  const keep = (at: number) => Math.min(Math.max(Math.round(at * 1e6) / 1e6, 0), 1);
  return takeSeams(project, { pairs: args.pairs.map((pair) => pair.map(({ edge, at }) => ({ edge, at: keep(at) }))) });
}
