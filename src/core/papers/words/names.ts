// All names that were typed or drawn and that stand on the papers.
import type { Facts } from "../../records/facts.ts";

/** The title and the names of panels, seams, rolls, pieces, edges, anchors and adjusters. */
export function namesOf(facts: Facts): string[] {
  const { panels, seams, rolls, pieces, form, rig } = facts;
  const lists = [panels, seams, rolls, pieces, form?.edges, form?.anchors, rig?.adjusters];
  return [facts.job.title, ...lists.flatMap((list) => (list ?? []).map((e) => e.id))];
}
