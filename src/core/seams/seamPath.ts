// What is handed from laying out to cutting: the seam lines of all regions, and what the outline is to each strip. Types only.
import type { Region } from "./region.ts";
import type { SeamLine } from "./seamLine.ts";

/** A seam line to be cut. */
export interface SeamPath {
  /** Index of the region. */
  region: number;
  line: SeamLine;
  /** Lines of one continuous weld share it. */
  weld: string;
  /** Panels of its region to the left and to the right of its way, in the region's order; -1 where that is not known beforehand. */
  left: number;
  right: number;
  /** A seam across: the end (1 from, 2 to) that it is to the panel on its left and on its right. */
  across?: { left: 1 | 2; right: 1 | 2 };
}

/** A region and its outline's part in its strips. */
export interface RegionPlan {
  region: Region;
  /** Panels expected, or null where the seams were given one by one. */
  strips: number | null;
  /** End of the panel (1 from, 2 to) of each outline segment, by directed form key; others are flanks. */
  endOf: Map<number, 1 | 2>;
}
