// A roll of the store, after those that are there.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. mm */
export function addRoll(project: Project, args: { width: number; length: number }): Project {
  const rolls = project.job.rolls ?? [];
  const taken = new Set(rolls.map((r) => r.id));
  let n = rolls.length + 1;
  while (taken.has(`R${n}`)) n++;
  return placeInJob(project, ["rolls"], [...rolls, { id: `R${n}`, width: args.width, length: args.length }]);
}
