// The door every job file comes in by: is it a job, of which version, and how an older one becomes the present one.
import { PlanError } from "../problem.ts";

/** The version this program writes and reads. */
export const JOB_VERSION = 1;

/** migrations[k] turns a job of version k + 1 into one of version k + 2. Version 1 is the first, so there are none yet. */
const migrations: ((job: Record<string, unknown>) => Record<string, unknown>)[] = [];

/**
 * The job as one of the present version, still unchecked beyond format and version.
 * @throws PlanError job-format: not a job file; job-version: no version this program can name; job-version-newer
 */
export function migrateJob(value: unknown): Record<string, unknown> {
  if (value === null || typeof value !== "object" || Array.isArray(value)) {
    throw new PlanError(
      "job-format",
      'the job is not an object; a job file begins { "format": "seamstay-job", "version": 1, …',
      "format",
    );
  }
  let job = value as Record<string, unknown>;
  const format = Object.hasOwn(job, "format") ? job.format : undefined;
  if (format !== "seamstay-job") {
    const found = format === undefined ? "is missing" : `is ${JSON.stringify(format)}`;
    throw new PlanError("job-format", `format ${found}; a job file says "format": "seamstay-job"`, "format");
  }
  const version = Object.hasOwn(job, "version") ? job.version : undefined;
  if (typeof version !== "number" || !Number.isInteger(version) || version < 1) {
    const found = version === undefined ? "is missing" : `is ${JSON.stringify(version)}`;
    throw new PlanError("job-version", `version ${found}; write "version": ${JOB_VERSION}`, "version");
  }
  if (version > JOB_VERSION) {
    throw new PlanError(
      "job-version-newer",
      `version ${version} of the job file is newer than this program, which reads up to version ${JOB_VERSION}; open it with the Seamstay it was written for, or a newer one`,
      "version",
      { version, limit: JOB_VERSION },
    );
  }
  for (const migrate of migrations.slice(version - 1)) job = migrate(job);
  return job;
}
