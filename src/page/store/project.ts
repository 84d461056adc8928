// What a person works on: a job as it stands in the file, its mesh, and the log of the site. Types only.
import type { JobFile } from "../../core/job/jobSchema.ts";
import type { SiteLine } from "../../core/plan/siteLog.ts";

/** A mesh file beside the job; its bytes never change. */
export interface MeshFile {
  name: string;
  bytes: Uint8Array<ArrayBuffer>;
}

/** One line of the site log. */
export type Reading = SiteLine;

/** One job with everything that can be undone. */
export interface Project {
  /** Name in the browser's store. */
  id: string;
  job: JobFile;
  mesh: MeshFile | null;
  log: Reading[];
}
