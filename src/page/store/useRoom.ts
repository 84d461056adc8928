// How wide a panel may be to lie on the cloth of the job, as the plan itself judges it.
import { firstOptions, measureRoom } from "../../core/plan/clothRoom.ts";
import { useBook } from "./useBook.ts";

/** Widest cut panel, and widest strip before its allowances, that the job's cloth takes, m; null before the job is read. */
export function useRoom(): { cut: number; strip: number } | null {
  const job = useBook((b) => b.job);
  if (job === null) return null;
  const room = measureRoom(job);
  return { cut: room.width, strip: firstOptions(room, job.allowances.seam / 1000).usableWidth };
}
