// Adjusters of the job: turnbuckle and stiffness of one, one more, one less. The first word writes down all that stand by the rules.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

type Adjuster = NonNullable<NonNullable<Project["job"]["rig"]>["adjusters"]>[number];
/** The adjusters of the plan with their anchors. */
export type Standing = readonly { id: string; anchor: string }[];

function listAdjusters(project: Project, standing: Standing): Adjuster[] {
  return project.job.rig?.adjusters ?? standing.map(({ id, anchor }) => ({ name: id, anchor }));
}

/**
 * Turnbuckle of one adjuster, of the catalogue or its own; its stiffness EA, or what its fitting or its anchor carries, kN; undefined:
 * the default, or not given.
 */
export function setAdjuster(
  project: Project,
  args: {
    adjuster: string;
    key: "turnbuckle" | "EA" | "fitting" | "anchorCapacity";
    value: Adjuster["turnbuckle"] | Adjuster["EA"];
    standing: Standing;
  },
): Project {
  const next = listAdjusters(project, args.standing).map((a) => {
    if (a.name !== args.adjuster) return a;
    const { [args.key]: _former, ...rest } = a;
    return args.value === undefined ? rest : { ...rest, [args.key]: args.value };
  });
  return placeInJob(project, ["rig", "adjusters"], next);
}

/** One more adjuster, at an anchor. */
export function addAdjuster(project: Project, args: { anchor: string; standing: Standing }): Project {
  const given = listAdjusters(project, args.standing);
  const taken = new Set(given.map((a) => a.name));
  let name = `T-${args.anchor}`;
  for (let n = 2; taken.has(name); n++) name = `T${n}-${args.anchor}`;
  return placeInJob(project, ["rig", "adjusters"], [...given, { name, anchor: args.anchor }]);
}

/** One adjuster less: its corner is fixed where it stands. */
export function removeAdjuster(project: Project, args: { adjuster: string; standing: Standing }): Project {
  const next = listAdjusters(project, args.standing).filter((a) => a.name !== args.adjuster);
  return placeInJob(project, ["rig", "adjusters"], next);
}
