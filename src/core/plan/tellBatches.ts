// Panels patterned for no named batch that come to lie on cloth of one: a word where that batch has a test of its own, or the store
// holds several. Does not: choose a batch (the job does; rolls/splitBatches.ts proposes). Source: own argument.
import type { Finding } from "../problem.ts";
import type { CutPanel } from "../records/flatPanel.ts";
import type { Job } from "../records/job.ts";
import type { NestedRoll } from "../records/roll.ts";

/** A caution for each batch that panels of no batch lie on. */
export function tellBatches(rolls: NestedRoll[], panels: CutPanel[], job: Job): Finding[] {
  const open = new Set(panels.filter((p) => p.batch === null).map((p) => p.id));
  const several = new Set((job.rolls ?? []).map((r) => r.batch)).size > 1;
  const lying = new Map<string, string[]>();
  for (const { batch, placements } of rolls) {
    if (batch === null || !(several || batch in job.compensation)) continue;
    const ids = placements.map((p) => p.panel).filter((id) => open.has(id));
    if (ids.length > 0) lying.set(batch, [...(lying.get(batch) ?? []), ...ids]);
  }
  return [...lying].map(([batch, ids]) => ({
    code: "batch-open",
    level: "caution",
    station: "rolls",
    where: ids,
    value: batch,
    limit: null,
    text: `${ids.join(", ")}: patterned for no named batch, and laid on cloth of batch ${batch}${batch in job.compensation ? ", which has a test of its own" : ""}.`,
    remedy: `Set panels.NAME.batch to "${batch}" in the job: they are then patterned by its test and stay on its cloth.`,
    basis: "own argument",
  }));
}
