// A word on one anchor: where its far pin is (m), how far the cloth is cut back there (mm), where it stands (m).
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

export type Point = [number, number, number];

/** The act; the first word on an anchor of the mesh names it in the job, the last one taken out removes it again. */
export function setAnchor(
  project: Project,
  args:
    | { anchor: string; key: "support" | "at"; value: Point | undefined }
    | { anchor: string; key: "cutBack"; value: number | undefined },
): Project {
  const { anchor, key, value } = args;
  const anchors = project.job.anchors ?? [];
  const found = anchors.findIndex((a) => a.name === anchor);
  const { [key]: _former, ...rest } = anchors[found] ?? { name: anchor };
  const next = value === undefined ? rest : { ...rest, [key]: value };
  if (Object.keys(next).length === 1) return found < 0 ? project : removeAnchor(project, { anchor });
  return placeInJob(project, ["anchors", found < 0 ? anchors.length : found], next);
}

/** Makes the vertex nearest to a place an anchor. */
export function addAnchor(project: Project, args: { anchor: string; at: Point }): Project {
  return setAnchor(project, { anchor: args.anchor, key: "at", value: args.at });
}

/** Takes the job's word on an anchor back: what the mesh says holds again. */
export function removeAnchor(project: Project, args: { anchor: string }): Project {
  const index = project.job.anchors?.findIndex((a) => a.name === args.anchor) ?? -1;
  return index < 0 ? project : placeInJob(project, ["anchors", index], undefined);
}
