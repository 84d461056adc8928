// A way to lay a region as it is weighed against others, and the region as laid out in the end. Types only.
import type { Finding } from "../problem.ts";
import type { LayoutRow } from "../records/stripLayout.ts";
import type { Candidate } from "./candidate.ts";
import type { Comb } from "./comb.ts";
import type { Placement } from "./placeSeams.ts";
import type { Region } from "./region.ts";
import type { StripSize } from "./stripWidth.ts";

/** A way judged from a few traced seams. */
export interface Trial {
  candidate: Candidate;
  comb: Comb;
  count: number;
  /** Least count it may turn out to need. */
  hope: number;
  metres: number;
  key: number[];
  /** At even steps of both ends. */
  sizes: StripSize[];
  /** Where it was placed in full. */
  placed?: Placement;
}

/** A region laid out. */
export interface RegionLayout {
  region: Region;
  candidate: Candidate;
  placement: Placement;
  why: string;
  findings: Finding[];
  /** The ways that were weighed, the one taken first. */
  compared: LayoutRow[];
}
