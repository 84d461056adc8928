// Fixes a panel at a place of a roll, or lets it go.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act; place null lets the panel go. mm */
export function setPin(
  project: Project,
  args: { panel: string; place: { roll: string; x: number; y: number; rotation: 0 | 180 } | null },
): Project {
  const others = (project.job.nest?.pins ?? []).filter((p) => p.panel !== args.panel);
  const pins = args.place === null ? others : [...others, { panel: args.panel, ...args.place }];
  return placeInJob(project, ["nest", "pins"], pins.length > 0 ? pins : undefined);
}
