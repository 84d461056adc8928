// Puts a seam midway between one seam and the next, or beside the last one.
import type { Project } from "../../store/project.ts";
import { takeSeams } from "./takeSeams.ts";

/** The act; both seams must end on the same edges, else the new one lies beside the first. */
export function addSeam(project: Project, args: { after: number }): Project {
  const pairs = project.job.seams?.pairs ?? [];
  const one = pairs[args.after];
  if (one === undefined) return project;
  const next = pairs[args.after + 1];
  const alike = next?.length === one.length && next.every((p, k) => p.edge === one[k]?.edge);
  const middle = one.map((p, k) => {
    const other = alike ? (next?.[k]?.at ?? 1) : p.at < 0.9 ? p.at + 0.2 : p.at - 0.2;
    return { edge: p.edge, at: Math.round(((p.at + other) / 2) * 1e4) / 1e4 };
  });
  return takeSeams(project, { pairs: [...pairs.slice(0, args.after + 1), middle, ...pairs.slice(args.after + 1)] });
}
