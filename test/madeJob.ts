// A job for tests: the least job, read by the project's own reader with its catalogues, then changed by hand.

import { readCatalogues } from "../src/core/job/catalogues.ts";
import { leastJob } from "../src/core/job/leastJob.ts";
import { readJob } from "../src/core/job/readJob.ts";
import type { Job } from "../src/core/records/job.ts";
import cables from "../templates/cables.json";
import cautions from "../templates/cautions.json";
import fabrics from "../templates/fabrics.json";
import turnbuckles from "../templates/turnbuckles.json";

/** The least job with some decisions replaced. */
export function makeJob(changes: Partial<Job> = {}): Job {
  const { job } = readJob(leastJob("form.obj", "Test"), readCatalogues({ fabrics, cables, turnbuckles, cautions }));
  return { ...job, ...changes };
}
