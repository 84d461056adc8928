// Which layouts are worth comparing with the one that stands. Works nothing out, so that the page can ask it at once.
import type { Job, SeamDecision } from "../records/job.ts";
import type { LayoutRow } from "../records/stripLayout.ts";

/** Layouts shown side by side at most. */
const MOST_ASKS = 6;

/**
 * Layouts worth looking at beside the one that stands: what the plan would take by itself, the ways it weighed that a job can name,
 * and one and two strips more or one fewer of the way that stands. Each says everything a layout is decided by.
 */
export function listAsks(job: Job, rows: readonly LayoutRow[]): Partial<SeamDecision>[] {
  const open = { layout: "auto", from: null, to: null, count: "auto", pairs: [] } as const;
  const out: Partial<SeamDecision>[] = [{ ...open, pairs: [] }];
  const add = (ask: Partial<SeamDecision>) => {
    if (out.length < MOST_ASKS && !out.some((o) => JSON.stringify(o) === JSON.stringify(ask))) out.push(ask);
  };
  const [first] = rows;
  if (first === undefined) return out;
  const alone = rows.every((row) => row.region === first.region);
  const taken = rows.find((row) => row.taken) ?? first;
  const named = ({ from, to }: LayoutRow) => !from.includes(" + ") && !to.includes(" + ") && from !== to;
  const way = (row: LayoutRow) => (named(row) && alone ? { from: row.from, to: row.to } : { from: null, to: null });
  const layout = alone && named(taken) ? taken.layout : "auto";
  const nearby = alone ? [taken.strips + 1, taken.strips - 1] : [];
  for (const row of rows) {
    if (row.region !== first.region || row === taken || !named(row) || !alone) continue;
    if (row.from === taken.from && row.to === taken.to) continue;
    add({ layout: row.layout, ...way(row), count: "auto", pairs: [] });
  }
  for (const count of nearby) if (count > 1) add({ layout, ...way(taken), count, pairs: [] });
  if (job.seams.count !== "auto" && alone) add({ layout, ...way(taken), count: job.seams.count, pairs: [] });
  return out;
}
