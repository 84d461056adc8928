// What the seams and panels stations make of one layout, for those that lay out again and again. Types only.
import type { StationResult } from "../problem.ts";
import type { CutPanel } from "../records/flatPanel.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import type { SeamOptions } from "../seams/runSeams.ts";

/** What both stations made of one layout. */
export interface Fitted {
  seams: StationResult<StripLayout>;
  panels: StationResult<CutPanel[]>;
  /** What the seams station was asked. */
  options: SeamOptions;
}

/** Runs both stations once. */
export type RunBoth = (options: SeamOptions) => Fitted;
