// A job as read: every decision resolved, defaults in place. Types only; reading stands in job/.
import type { Vec3 } from "../surface/surface.ts";
import type { Fabric, ValueStatus } from "./fabric.ts";
import type { EdgeKind } from "./foundForm.ts";
import type { CableMaking, ProofLimits, RigPlace, Turnbuckle } from "./rig.ts";
import type { Flaw } from "./roll.ts";

/** A mesh as a program wrote it, before any check: polygons of any size, names kept, its own unit and axis. */
export interface MeshSource {
  /** 3*nV */
  xyz: Float64Array<ArrayBuffer>;
  /** Polygons, 0-based, flat: corners of face f are faceVertex[faceStart[f] … faceStart[f+1]). */
  faceStart: Uint32Array<ArrayBuffer>;
  faceVertex: Uint32Array<ArrayBuffer>;
  /** Named polylines; name null where the file gives none. */
  lines: { name: string | null; vertices: number[] }[];
  /** Named points (fixed points). */
  points: { name: string | null; vertices: number[] }[];
  unit: "m" | "mm" | "cm" | "ft" | "in";
  up: "z" | "y";
  outside: "up" | "down" | "normals";
}

export interface CableSpec {
  /** Catalogue id, or "job". */
  id: string;
  /** kN */
  EA: number | null;
  minBreakingForce: number | null;
  /** mm */
  diameter: number | null;
  /** kg/m */
  mass: number | null;
  alpha: number | null;
}

export interface EdgeDecision {
  kind?: EdgeKind;
  /** kN; null: best balance */
  force?: number | null;
  cable?: CableSpec;
  prestretched?: boolean;
  making?: CableMaking;
}

export interface AnchorDecision {
  name: string;
  vertex?: number;
  at?: Vec3;
  support?: Vec3;
  cutBack?: number;
}

/** A seam end or a point a seam runs through: a place along an edge of the form, 0…1 by arc length. */
export interface EdgePlace {
  edge: string;
  at: number;
}

export interface SeamDecision {
  layout: "auto" | "bands" | "gores" | "pairs";
  from: string | null;
  to: string | null;
  count: number | "auto";
  pairs: EdgePlace[][];
  /** mm, flat width with allowances; null: the roll's usable width */
  maxWidth: number | null;
  /** mm, flat width without allowances that no panel should fall below; null: 750 where strips are narrowed for the stress. An addition to job.md. */
  minWidth?: number | null;
  /** Why this layout was taken among those compared, in the office's words; an addition to job.md. */
  why?: string | null;
  /** mm; null: no limit but the roll's length */
  maxLength: number | null;
  /** The cloth is counted double where seams lap. */
  doubleCloth: boolean;
}

/** mm */
export interface Allowances {
  /** Finished overlap of a seam. */
  seam: number;
  seamOn: "both" | "one";
  pocket: number;
  pocketStrip: boolean;
  /** Width of a strip laid over every cable between panels; 0: none. */
  cover: number;
  /** Set-back, positive takes cloth away. */
  clamp: number;
  hem: number;
}

export interface RollDecision {
  id: string;
  width: number;
  selvedge: number;
  length: number;
  batch: string | null;
  start: number;
  /** From the roll's start, outer face up. */
  flaws: Flaw[];
  outerFace: "up" | "down";
  /** Money a m2; null: not given. */
  price: number | null;
}

export interface NestDecision {
  steps: number;
  seconds: number | null;
  seed: number;
  gap: number;
  turn: boolean;
  bite: number | null;
  /** What becomes of a piece longer than the bite: a stop, or it is fed on at marks. Left out: refused. */
  pastBite?: "refuse" | "feed";
  /** Money a m2 of cloth that has no price of its own, and what the money is called. */
  price?: number | null;
  currency?: string | null;
  pins: { panel: string; roll: string; x: number; y: number; rotation: 0 | 180 }[];
}

export interface PapersDecision {
  date: string;
  drawnBy: string;
  checkedBy: string;
  /** Issue letter this one takes the place of. */
  supersedes?: string;
  sheet: "A4" | "A3" | "Letter" | "Tabloid";
  units: "metric" | "imperial";
  /** What the engineer of the site has set; null: nothing. */
  site: Record<string, number | string | boolean> | null;
}

/** The rig as the job gives it: null where it leaves a thing to the rules. */
export interface RigJob {
  /** null: one at every isolated anchor */
  adjusters:
    | {
        name: string;
        anchor: string | null;
        edge: string | null;
        /** "first", "last", or the anchor at that end. */
        end: string | null;
        /** A closed clamped edge that it hauls, and its far pin, m. */
        ring?: string;
        support?: Vec3;
        turnbuckle: Turnbuckle | null;
        EA: number | null;
        /** kN; left out: not given */
        fitting?: number;
        anchorCapacity?: number;
      }[]
    | null;
  struts: { name: string; from: RigPlace; to: RigPlace; EA: number | null }[];
  stays: {
    name: string;
    from: RigPlace;
    to: RigPlace;
    EA: number | null;
    force: number | null;
    minBreakingForce: number | null;
    making?: CableMaking;
  }[];
  stages: number[];
  /** degC */
  temperature: number;
  /** 1/K of the frame the anchors move with; 0: they stay where they are. */
  frameAlpha: number;
  limit: number;
  readingError: number;
  selfWeight: boolean;
  /** Paths of what is not the job's own word. */
  defaults: string[];
  defaultCable: CableSpec & { status: Record<string, ValueStatus> };
  defaultTurnbuckle: Turnbuckle;
}

/**
 * Where a point really is, m: at an anchor with an adjuster its far pin, at any other the anchor itself; or a point of a clamped
 * edge, `along` its length as a share of the whole.
 */
export type SurveyPoint =
  | { anchor: string; edge?: undefined; at: Vec3 }
  | { anchor?: undefined; edge: string; along: number; at: Vec3 };

/** Everything a plan needs but the mesh itself. */
export interface Job {
  title: string;
  issue: string;
  /** File name of the mesh as the job names it, or "inline". */
  meshName: string;
  /** kN/m; from "balance": the form is asked for it, and what it says takes the place of the numbers. */
  prestress: { warp: number; weft: number; from?: "balance" };
  /** Warp direction before seams exist; null: along the strips. */
  warp: Vec3 | null;
  settle: boolean;
  fabric: Fabric;
  edges: Record<string, EdgeDecision>;
  anchors: AnchorDecision[];
  seams: SeamDecision;
  panels: Record<string, { batch?: string; warp?: number }>;
  /** Engineering strain of the whole compensation by batch, or "default". */
  compensation: Record<string, { warp: number; weft: number }>;
  /** Fade in m; null: not decompensated. */
  decompensation: { clamped: number | null; ring: number | null; cable: number | null };
  allowances: Allowances;
  /** null: as many rolls as needed of the fabric's width and length. */
  rolls: RollDecision[] | null;
  nest: NestDecision;
  rig: RigJob;
  survey: SurveyPoint[];
  /** The cloth is cut already: a survey of clamped edges no longer changes the panels. */
  clothCut: boolean;
  /** How far the assembled roof may be from what was intended. */
  proof: ProofLimits;
  papers: PapersDecision;
}
