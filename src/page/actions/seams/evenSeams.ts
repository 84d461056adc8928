// Spaces the seams that run between the same two edges evenly between the first and the last of them.
import type { Project } from "../../store/project.ts";
import { takeSeams } from "./takeSeams.ts";

/** The act; whole shares along each edge, in the order the seams stand in. */
export function evenSeams(project: Project, _args: Record<string, never>): Project {
  const pairs = project.job.seams?.pairs ?? [];
  const groups = new Map<string, number[]>();
  pairs.forEach((pair, i) => {
    const key = pair.map((p) => p.edge).join("\n");
    groups.set(key, [...(groups.get(key) ?? []), i]);
  });
  const next = [...pairs];
  for (const members of groups.values()) {
    const [first, last] = [pairs[members[0] ?? 0], pairs[members.at(-1) ?? 0]];
    if (members.length < 3 || first === undefined || last === undefined) continue;
    members.forEach((i, n) => {
      const share = n / (members.length - 1);
      next[i] = (pairs[i] ?? []).map((p, k) => ({
        edge: p.edge,
        at: Math.round(((1 - share) * (first[k]?.at ?? 0) + share * (last[k]?.at ?? 1)) * 1e4) / 1e4,
      }));
    });
  }
  return takeSeams(project, { pairs: next });
}
