// Where points really are, m: one more, one moved, one less; and whether the cloth is cut already.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** A surveyed point of the job. */
export type Surveyed = NonNullable<Project["job"]["survey"]>[number];

/** One more point; a point surveyed anew takes the place of the former one. */
export function addSurveyed(project: Project, args: { point: Surveyed }): Project {
  const { point } = args;
  const survey = project.job.survey ?? [];
  const same = (p: Surveyed) =>
    "anchor" in point
      ? "anchor" in p && p.anchor === point.anchor
      : "edge" in p && p.edge === point.edge && p.along === point.along;
  const at = survey.findIndex(same);
  return placeInJob(project, ["survey", at < 0 ? survey.length : at], point);
}

/** One point moved; taken out, it is gone. */
export function moveSurveyed(
  project: Project,
  args: { index: number; at: [number, number, number] | undefined },
): Project {
  const { index, at } = args;
  return placeInJob(project, at === undefined ? ["survey", index] : ["survey", index, "at"], at);
}

/** Cut cloth: a survey of clamped edges changes the stress, no longer the panels. */
export function setClothCut(project: Project, args: { value: boolean }): Project {
  return placeInJob(project, ["clothCut"], args.value ? true : undefined);
}
