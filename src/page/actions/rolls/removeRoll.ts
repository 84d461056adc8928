// Takes a roll out of the store, and the pins that lie on it; without any roll the catalogue's width holds.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act. */
export function removeRoll(project: Project, args: { index: number }): Project {
  const gone = project.job.rolls?.[args.index]?.id;
  const pins = project.job.nest?.pins?.filter((p) => p.roll !== gone);
  const without = placeInJob(project, ["rolls", args.index], undefined);
  return pins?.length === project.job.nest?.pins?.length
    ? without
    : placeInJob(without, ["nest", "pins"], pins?.length ? pins : undefined);
}
