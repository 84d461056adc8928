// How wide a panel may be to lie on the cloth of the job.
import { useBook } from "./useBook.ts";

/** Widest panel the rolls take, mm; null before the job is read. */
export function useRoom(): number | null {
  const job = useBook((b) => b.job);
  if (job === null) return null;
  const rolls = job.rolls ?? [{ width: job.fabric.rollWidth, selvedge: job.fabric.selvedge }];
  return Math.min(...rolls.map((r) => r.width - 2 * r.selvedge));
}
