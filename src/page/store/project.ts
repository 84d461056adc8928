// What a person works on: a job as it stands in the file, its mesh, and the log of the site. Types only.
import type { JobFile } from "../../core/job/jobSchema.ts";

/** A mesh file beside the job; its bytes never change. */
export interface MeshFile {
  name: string;
  bytes: Uint8Array<ArrayBuffer>;
}

/** One line of the site log: a reading, as the readings file has it, or an adjuster turned. */
export interface Reading {
  time: string;
  by: string;
  /** Adjuster, cable or anchor. */
  id: string;
  /** kN */
  force: number | null;
  /** Hz, m, kg/m: a plucked free span. */
  frequency: number | null;
  freeLength: number | null;
  massPerMetre: number | null;
  /** degC */
  temperature: number | null;
  /** m, a surveyed position. */
  at: [number, number, number] | null;
  /** Step of the schedule after which it was read or turned; left out: not known. */
  step?: number;
  /** mm by which an adjuster was turned, as it was told; positive shortens. Then nothing was read. */
  turned?: number;
  /** Taken back, but kept to be read. */
  struck?: true;
}

/** One job with everything that can be undone. */
export interface Project {
  /** Name in the browser's store. */
  id: string;
  job: JobFile;
  mesh: MeshFile | null;
  log: Reading[];
}
