// The job of somebody who has only a mesh.
import { JOB_VERSION } from "./jobVersions.ts";

/** The least job for a mesh file: nothing decided. A value for readJob, and what `revision` is measured on. */
export function leastJob(meshFile: string, title: string): unknown {
  return { format: "seamstay-job", version: JOB_VERSION, title, mesh: { file: meshFile } };
}
