// The starter jobs as they are shipped, planned until their cloth lies on the rolls: what papers are for.
import { readFileSync } from "node:fs";
import { readPlanInput } from "../../../src/core/plan/readPlanInput.ts";
import { runPlan } from "../../../src/core/plan/runPlan.ts";
import type { Station } from "../../../src/core/problem.ts";
import type { Facts } from "../../../src/core/records/facts.ts";
import { catalogues, readTemplate } from "../../job/catalogueFiles.ts";

export const STARTERS = ["market-hall", "boat-shed", "bandstand"] as const;

/** A starter with some decisions of its job replaced, its layout on the rolls not sought for long. */
export function starterFacts(
  name: (typeof STARTERS)[number],
  changes: Record<string, unknown> = {},
  until: Station = "rolls",
): Facts {
  const job = { ...(readTemplate(`${name}/job.json`) as object), nest: { steps: 2, gap: 10 }, ...changes };
  const load = (file: string) => ({ name: file, bytes: readFileSync(`templates/${name}/${file}`) });
  const input = readPlanInput({ value: job, findings: [] }, catalogues, load);
  const facts = runPlan(input.job, input.source, { until, revision: input.revision }, {});
  return { ...facts, findings: [...input.findings, ...facts.findings] };
}
