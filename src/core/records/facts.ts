// facts.json: the one machine-readable result of a plan. Papers and views are drawn from it alone. Types only.
import type { Check, Finding } from "../problem.ts";
import type { Vec3 } from "../surface/surface.ts";
import type { Fabric } from "./fabric.ts";
import type { ControlLengths, PanelMark, StressFigures } from "./flatPanel.ts";
import type { EdgeKind, Residual } from "./foundForm.ts";
import type { FactsAsBuilt, FactsAssembled, FactsCable, FactsRig, FactsSensitivity, FactsTensioning } from "./rig.ts";
import type { ClothTotal, NestedRoll } from "./roll.ts";
import type { LayoutChoice, LayoutRow } from "./stripLayout.ts";

/** Point in the flat, mm. */
export type Vec2 = [number, number];

/** What stands in every title block. */
export interface FactsJob {
  title: string;
  issue: string;
  /** Short hash of the job and everything it reads. */
  revision: string;
  /** As the job gives it, or "" where it gives none. */
  date: string;
  drawnBy: string;
  checkedBy: string;
  sheet: "A4" | "A3" | "Letter" | "Tabloid";
  units: "metric" | "imperial";
  /** File name of the mesh. */
  mesh: string;
  /** What the engineer of the site has set, as the job gives it: see papers/siteLimits.ts for the keys that are read. */
  site?: Record<string, number | string | boolean>;
  /** Issue letter this one takes the place of. */
  supersedes?: string;
}

export interface FactsForm {
  vertices: Vec3[];
  triangles: Vec3[];
  stress: { warp: number; weft: number };
  /** Where the stress was found from best balance, kN/m. */
  stressSpread?: { warp: number; weft: number };
  edges: {
    id: string;
    kind: EdgeKind;
    vertices: number[];
    force: number | null;
    reaction: { resultant: Vec3; greatest: number } | null;
    forceFrom: string;
    length: number;
    /** Standard spread of a force from best balance, kN. */
    spread?: number;
  }[];
  anchors: { id: string; vertex: number; isolated: boolean }[];
  residual: Residual;
  area: number;
  reactions: { anchor: string; force: Vec3 }[];
  relief?: FactsRelief;
}

/** How curved and how steep the form is; places are vertices of the form. */
export interface FactsRelief {
  /** Gaussian curvature by angle defect, 1/m²; null where cloth alone is nowhere curved. */
  curvature: { least: number; leastAt: number; greatest: number; greatestAt: number } | null;
  /** Width of a strip whose edges are 0.5 % longer or shorter than its middle at the greatest |curvature|, m; null where flat. */
  stripWidth: number | null;
  /** Least slope against level, degrees, and where. */
  slope: { least: number; leastAt: number };
  /** Share of the area that slopes less than 2 degrees. */
  flatShare: number;
  pits: number;
}

export interface FactsSeam {
  id: string;
  path: Vec3[];
  length: number;
  weld: string;
  cable: string | null;
  upper: string;
  sides: { panel: string; vertices: number[] }[];
}

export interface FactsSide {
  kind: "seam" | "cable" | "clamped" | "free";
  id: string;
  vertices: number[];
  netFrom: number;
  netTo: number;
  lengthErected: number;
  lengthFlat: number;
  allowance: number;
}

export interface FactsPanel {
  id: string;
  fabric: string;
  batch: string | null;
  erected: Vec3[];
  flat: Vec2[];
  triangles: Vec3[];
  axis: { from: number[]; to: number[]; turn: number };
  target: { warp: number; weft: number };
  compensation: { warp: number; weft: number };
  permanent: { warp: number; weft: number };
  decompensated: { side: number; fade: number }[];
  stress: { warp: StressFigures; weft: StressFigures; compressedShare: number; warpDeviation: number };
  net: Vec2[];
  cut: Vec2[];
  sides: FactsSide[];
  marks: PanelMark[];
  area: { net: number; cut: number };
  size: { length: number; width: number };
  /** Lengths to check with a tape. */
  control?: ControlLengths;
}

/** Cloth that is no panel of the form. */
export interface FactsPiece {
  id: string;
  kind: "patch" | "strip" | "cover" | "test";
  for: string;
  fabric: string;
  batch: string | null;
  cut: Vec2[];
}

/** The whole file; a station that was not run leaves its key out. */
export interface Facts {
  format: "seamstay-facts";
  version: 1;
  job: FactsJob;
  fabrics: Record<string, Fabric>;
  form?: FactsForm;
  layouts?: LayoutChoice[];
  /** Layouts weighed against the one taken. */
  compared?: LayoutRow[];
  seams?: FactsSeam[];
  panels?: FactsPanel[];
  pieces?: FactsPiece[];
  rolls?: NestedRoll[];
  /** All rolls together. */
  cloth?: ClothTotal;
  cables?: FactsCable[];
  rig?: FactsRig;
  assembled?: FactsAssembled;
  asBuilt?: FactsAsBuilt;
  tensioning?: FactsTensioning;
  /** What errors of making and setting out do to the final forces. */
  sensitivity?: FactsSensitivity[];
  checks: Check[];
  findings: Finding[];
}
