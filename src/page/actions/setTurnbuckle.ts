// Turnbuckle of one adjuster, from the catalogue. The first such word writes down all adjusters that stand by the rules.
import type { Project } from "../store/project.ts";
import { placeInJob } from "./placeInJob.ts";

/** The act; `standing`: the adjusters of the plan with their anchors. */
export function setTurnbuckle(
  project: Project,
  args: { adjuster: string; value: string | undefined; standing: { id: string; anchor: string }[] },
): Project {
  const given = project.job.rig?.adjusters ?? args.standing.map(({ id, anchor }) => ({ name: id, anchor }));
  const next = given.map((a) => {
    if (a.name !== args.adjuster) return a;
    const { turnbuckle: _former, ...rest } = a as typeof a & { turnbuckle?: unknown };
    return args.value === undefined ? rest : { ...rest, turnbuckle: args.value };
  });
  return placeInJob(project, ["rig", "adjusters"], next);
}
