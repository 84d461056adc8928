// From what width of roll one strip fewer would do. Works nothing out anew, so that the page can ask it at once.
// Source: own; the strips of a region share its width, the relation by which the plan itself looks for a number (askedCount.ts).
import type { Job } from "../records/job.ts";
import type { LayoutChoice } from "../records/stripLayout.ts";
import { findNarrowest, measureRoom } from "./clothRoom.ts";

/** One strip fewer on a region. */
export interface FewerStrips {
  region: string;
  /** Strips as they stand; the layout told of has one less. */
  strips: number;
  /**
   * Width of the widest of the fewer, with allowances, mm: about. On the three starters and four meshes of differing shape it was
   * 1 % less to 2 % more than the widest panel of a layout that was cut and flattened; strips of unlike width err by more. The boat
   * shed is told 4.06 m of roll and takes two strips from between 4.08 and 4.12 m.
   */
  widest: number;
  /** Width of roll that takes them, selvedges of the narrowest roll counted in, mm: about. */
  roll: number;
  /** What keeps them from being fewer: the cloth's width, the job's own limit of it, or null where neither does. */
  limit: "cloth" | "asked" | null;
}

/** Size of a panel as it is cut, mm. */
export interface PanelWidth {
  id: string;
  width: number;
  /** True where the job turns its warp: its width says nothing of the strip. */
  turned: boolean;
}

/**
 * For each region of two strips or more that the plan laid out: one strip fewer. None for seams given one by one.
 * @param panels as cut
 */
export function tellFewerStrips(
  job: Job,
  layouts: readonly LayoutChoice[],
  panels: readonly PanelWidth[],
): FewerStrips[] {
  const { usable, selvedge } = findNarrowest(job);
  const limit = 1000 * measureRoom(job).width;
  const lap = job.allowances.seam;
  return layouts.flatMap(({ region, layout, count, panels: ids }): FewerStrips[] => {
    const mine = panels.filter((p) => ids.includes(p.id));
    if ((layout !== "bands" && layout !== "gores") || count < 2 || mine.length === 0) return [];
    if (mine.some((p) => p.turned)) return [];
    const now = Math.max(...mine.map((p) => p.width));
    const widest = ((now - lap) * count) / (count - 1) + lap;
    const held = limit < usable ? "asked" : "cloth";
    return [{ region, strips: count, widest, roll: widest + 2 * selvedge, limit: widest > limit ? held : null }];
  });
}
