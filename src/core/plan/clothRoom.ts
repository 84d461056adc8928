// What the cloth has room for: the widest and longest panel, and how the seams station is asked before anything is flat.
import type { CutPanel, Ring } from "../records/flatPanel.ts";
import type { Job } from "../records/job.ts";
import type { SeamOptions } from "../seams/runSeams.ts";

/** Sizes the cloth sets, m. */
export interface ClothRoom {
  /** Usable width of the narrowest roll, or the job's own limit if that is less. */
  width: number;
  /** Longest piece a roll or the table takes; null: no limit. */
  length: number | null;
}

/** Least share of the cloth's width that is left beside the allowances; where more is asked for, the rolls station names the panels. */
const LEAST_SHARE = 0.2;

/** Sizes of the job's rolls, or of the fabric's full roll, mm. */
function listRolls({ rolls, fabric }: Job): { width: number; selvedge: number; length: number; start: number }[] {
  return rolls ?? [{ width: fabric.rollWidth, selvedge: fabric.selvedge, length: fabric.rollLength, start: 0 }];
}

/** The narrowest of the job's rolls by what is left between its selvedges, mm. */
export function findNarrowest(job: Job): { usable: number; selvedge: number } {
  const all = listRolls(job).map(({ width, selvedge }) => ({ usable: width - 2 * selvedge, selvedge }));
  return all.reduce((a, b) => (b.usable < a.usable ? b : a));
}

/** The cloth's room: the narrowest of the job's rolls, or the fabric's full roll. */
export function measureRoom(job: Job): ClothRoom {
  const rolls = listRolls(job);
  const width = Math.min(findNarrowest(job).usable, job.seams.maxWidth ?? Infinity) / 1000;
  const bite = job.nest.pastBite === "feed" ? Infinity : (job.nest.bite ?? Infinity);
  const longest = Math.max(...rolls.map((r) => r.length - r.start));
  const length = Math.min(longest, job.seams.maxLength ?? Infinity, bite) / 1000;
  return { width, length: Number.isFinite(length) ? length : null };
}

/** Options before anything is flat: the cloth's size less one finished overlap, since most strips have two seams. */
export function firstOptions(room: ClothRoom, lap: number): SeamOptions {
  return {
    usableWidth: Math.max(room.width - lap, LEAST_SHARE * room.width),
    maxLength: room.length === null ? null : Math.max(room.length - lap, LEAST_SHARE * room.length),
  };
}

/** Extent of a ring along the warp and across it, m. */
export function measureExtent(ring: Ring): { length: number; width: number } {
  const low = [Infinity, Infinity];
  const high = [-Infinity, -Infinity];
  for (let i = 0; i < ring.length; i++) {
    low[i % 2] = Math.min(low[i % 2], ring[i]);
    high[i % 2] = Math.max(high[i % 2], ring[i]);
  }
  return { length: (high[0] - low[0]) / 1000, width: (high[1] - low[1]) / 1000 };
}

/** True for a panel whose warp the job turns: its size on the cloth says nothing of the strip. */
export function isTurned(panel: { axis: Pick<CutPanel["axis"], "turn"> }): boolean {
  return Math.abs(panel.axis.turn) > 1e-9;
}
