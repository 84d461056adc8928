// All names that were typed or drawn and that stand on the papers.
import type { Facts } from "../../records/facts.ts";

/** The words of the title block, and the names of cloths, batches, panels, seams, rolls, pieces, edges, anchors, cables, struts and adjusters. */
export function namesOf(facts: Facts): string[] {
  const { job, panels, seams, rolls, pieces, cables, form, rig } = facts;
  const lists = [panels, seams, rolls, pieces, form?.edges, form?.anchors, cables, rig?.struts, rig?.adjusters];
  const batches = [panels, rolls, pieces].flatMap((list) => (list ?? []).flatMap((e) => e.batch ?? []));
  const ids = lists.flatMap((list) => (list ?? []).map((e) => e.id));
  const typed = [job.title, job.issue, job.supersedes ?? "", job.drawnBy, job.checkedBy];
  return [...new Set([...typed, ...Object.keys(facts.fabrics), ...batches, ...ids])];
}
