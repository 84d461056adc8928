// Places of a roll that no piece may lie on: one more, one figure of one, one less. mm
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** One more flaw at the start of the roll, to be given its place. */
export function addFlaw(project: Project, args: { roll: number }): Project {
  const flaws = project.job.rolls?.[args.roll]?.flaws ?? [];
  return placeInJob(project, ["rolls", args.roll, "flaws", flaws.length], { x: 0, y: 0, length: 100, width: 100 });
}

/** One figure of a flaw, or the end it is measured from; a figure taken out stays as it was, a flaw has all four. */
export function setFlaw(
  project: Project,
  args:
    | { roll: number; flaw: number; key: "x" | "y" | "length" | "width"; value: number | undefined }
    | { roll: number; flaw: number; key: "from"; value: "start" | "end" },
): Project {
  const { roll, flaw, key, value } = args;
  return value === undefined ? project : placeInJob(project, ["rolls", roll, "flaws", flaw, key], value);
}

/** One flaw less. */
export function removeFlaw(project: Project, args: { roll: number; flaw: number }): Project {
  return placeInJob(project, ["rolls", args.roll, "flaws", args.flaw], undefined);
}
