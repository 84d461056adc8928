// What the seams station hands on: the surface cut into strips, and the seams between them. Types only.
import type { Surface } from "../surface/surface.ts";

/** One side of a strip: the run of its outline that belongs to one seam or one edge of the form. */
export interface StripSide {
  kind: "seam" | "cable" | "clamped" | "free";
  /** Seam id or edge id. */
  id: string;
  /** Vertices of the cut surface, counter-clockwise around the strip on its outer face, both ends included. */
  vertices: number[];
}

/** A strip of the surface that becomes one panel. */
export interface Strip {
  /** P1, P2, … in reading order from one side of the roof to the other. */
  id: string;
  /** Triangles of the cut surface. */
  triangles: number[];
  /** Sides in order, counter-clockwise; each begins where the one before ends; together the whole outline. */
  sides: StripSide[];
  /** The strip's two ends: all vertices of the sides there, corners too, or the one vertex of a pointed end. */
  from: number[];
  to: number[];
}

/** A seam: exactly two strip sides that share all their points. */
export interface Seam {
  /** S1, S2, … */
  id: string;
  /** Id of the continuous weld it is part of: the first seam's id. */
  weld: string;
  /** Inner cable that lies on it, or null. */
  cable: string | null;
  /** Vertices of the cut surface along it. */
  vertices: number[];
  /** The two strips, the upper one (water runs off it) first is not promised: see upper. */
  strips: [string, string];
  upper: string;
  /** m */
  length: number;
}

/** What was laid out on one region (piece between inner cables), in words and numbers for the papers. */
export interface LayoutChoice {
  /** "region 1", … in reading order. */
  region: string;
  /** Its strips, in order. */
  panels: string[];
  layout: "bands" | "gores" | "pairs" | "whole";
  from: string;
  to: string;
  /** Strips side by side; panels may be more where strips are cut across. */
  count: number;
  why: string;
  /** Estimated flat width of each strip without allowances, m, in the order of `panels`; empty for pairs. */
  widths: number[];
}

/** What a strip was thought to be, so that the plan can correct the estimate by the flat cloth. */
export interface StripEstimate {
  /** Its panels from start to finish; more than one where it is cut across. */
  panels: string[];
  /** Share of the way across its region, at its middle. */
  at: number;
  /** Flat size before any correction, m. */
  width: number;
  length: number;
}

/** The estimates of one region. */
export interface LayoutEstimate {
  region: string;
  /** Names the way its strips run: see wayKey. */
  way: string;
  strips: StripEstimate[];
}

/** One line of the table in which layouts of a region are compared. */
export interface LayoutRow {
  region: string;
  layout: "bands" | "gores";
  from: string;
  to: string;
  /** Strips side by side, and panels they are cut into. */
  strips: number;
  panels: number;
  /** Metres of seam inside the region. */
  seams: number;
  /** Least cloth, m2: cut area where measured, else area of the region and of the seams' laps. */
  cloth: number;
  /** Flat width of the narrowest and widest strip, m; without allowances. */
  least: number;
  greatest: number;
  /** Greatest rms stress error of a panel as a share of its target; estimated from curvature and width unless measured (0.8 to 2 times what comes out). */
  stressError: number;
  /** True where the layout was cut and flattened. */
  measured: boolean;
  /** True for the one the plan stands on. */
  taken: boolean;
}

/** Output of the seams station. */
export interface StripLayout {
  /** The form's surface with all seam crossings inserted: its first vertices are the form's own, same indices. */
  surface: Surface;
  seams: Seam[];
  strips: Strip[];
  choices: LayoutChoice[];
  /** One for each region that was laid out; none for seams given one by one. */
  estimates?: LayoutEstimate[];
  /** Ways that were weighed against each other, estimates. */
  compared?: LayoutRow[];
}
