// What this plan's own numbers call for beyond the standing cautions: on the schedule, before any work, in the engineer's sight.
import type { Finding } from "../../../problem.ts";
import type { FactsJob } from "../../../records/facts.ts";
import type { RigFacts } from "../../tables/rigReadings.ts";
import { unitsInText } from "../../words/paperUnits.ts";
import { type Flow, flowGapInPlace, flowHeadingInPlace, flowTextInPlace, needInPlace } from "../layout/table.ts";

/** Findings a crew must know, with the word for the worst that can come of them, the gravest first. */
const CALLED = [
  ["limit-near", "WARNING"],
  ["travel-alone", "WARNING"],
  ["stage-slack", "WARNING"],
  ["mast-lean", "WARNING"],
  ["anchor-pull", "WARNING"],
  ["adjuster-slack", "CAUTION"],
  ["stay-slack", "CAUTION"],
  ["cloth-slack", "CAUTION"],
  ["travel-spent", "CAUTION"],
  ["turnbuckle-coarse", "NOTICE"],
] as const;

/** Most findings of one kind told in full. */
const MOST = 4;

function tell(job: FactsJob, word: string, findings: readonly Finding[]): string[] {
  const told = findings
    .slice(0, MOST)
    .map((f) => unitsInText(job, `${word}: ${sentence(f.text)} ${sentence(f.remedy)}`));
  const more = findings.slice(MOST).flatMap((f) => f.where);
  return more.length > 0 ? [...told, `${word}: the like holds for ${more.join(", ")} (findings sheets).`] : told;
}

function sentence(text: string): string {
  return `${text.charAt(0).toUpperCase()}${text.slice(1)}.`;
}

/** A paragraph for each; nothing where the numbers call for nothing. */
export function flowCalledInPlace(flow: Flow, rig: RigFacts, size: number): void {
  const words = CALLED.flatMap(([code, word]) =>
    tell(
      rig.facts.job,
      word,
      rig.facts.findings.filter((f) => f.code === code),
    ),
  );
  if (words.length === 0) return;
  flowHeadingInPlace(flow, "What the numbers of this plan call for");
  for (const text of words) {
    needInPlace(flow, 14);
    flowTextInPlace(flow, text, { size });
    flowGapInPlace(flow, 1);
  }
}
