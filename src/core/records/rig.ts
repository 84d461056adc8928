// What the rig station takes from the job and hands on: cables, adjusters, masts, the tensioning. Types only.
import type { Vec3 } from "../surface/surface.ts";
import type { ValueStatus } from "./fabric.ts";
import type { StressFigures } from "./flatPanel.ts";

/** A turnbuckle or jack as the catalogue or the job gives it; lengths pin to pin. */
export interface Turnbuckle {
  id: string;
  /** mm of travel a full turn of the body: 2P with right- and left-hand ends, P with one thread */
  perTurn: number;
  /** mm */
  shortest: number;
  longest: number;
  /** kN, null where not given */
  capacity: number | null;
  /** Nominal diameter of its thread, mm, where known. */
  thread?: number;
  /** both: right- and left-hand ends, turned together by the body; single: one thread. */
  ends?: "both" | "single";
  /** Thread in the body at each threaded end at its longest, mm, where known. */
  engagement?: number;
  status: Record<string, ValueStatus>;
}

/** A cable type: EA together with the area it belongs to. */
export interface CableType {
  id: string;
  /** kN */
  EA: number;
  /** kN, null where not given */
  minBreakingForce: number | null;
  /** mm */
  diameter: number | null;
  /** kg/m */
  mass: number | null;
  /** 1/K */
  alpha: number;
  status: Record<string, ValueStatus>;
}

/** How a cable or stay is made, as far as the job says. */
export interface CableMaking {
  /** What the end fittings take off at the first and the last end, system point to rope's end, mm. */
  terminals?: [number, number];
  /** Share of its length it grows for good; without it the usual allowance where it is not prestretched. */
  stretch?: number;
  /** Capacity of its end fittings, kN. */
  fitting?: number;
  /** Spacing of the clamps that hold it to the cloth, mm. */
  clamps?: number;
}

/** A place of the rig: an anchor's or node's name, or coordinates in m. */
export type RigPlace = string | Vec3;

/** An adjuster as the plan settles it: at an anchor, in the first or last link of a cable edge, or a jack that hauls a ring. */
export interface AdjusterDecision {
  name: string;
  anchor: string | null;
  edge: string | null;
  end: "first" | "last" | null;
  /** The closed clamped edge it hauls, and the far pin it hauls to, m; left out: outward along the pull. */
  ring?: string;
  support?: Vec3;
  turnbuckle: Turnbuckle;
  /** kN */
  EA: number;
  /** Capacity of its fittings and of its anchor, kN; left out: not given. */
  fitting?: number;
  anchorCapacity?: number;
}

export interface StrutDecision {
  name: string;
  from: RigPlace;
  to: RigPlace;
  EA: number;
}

export interface StayDecision {
  name: string;
  from: RigPlace;
  to: RigPlace;
  EA: number;
  /** kN; null: what balance asks */
  force: number | null;
  minBreakingForce: number | null;
  making?: CableMaking;
}

/** The job's word on the rig, defaults in place. */
export interface RigDecision {
  adjusters: AdjusterDecision[];
  struts: StrutDecision[];
  stays: StayDecision[];
  /** Shares of the target, ascending, the last one 1. */
  stages: number[];
  /** degC */
  temperature: number;
  /** 1/K of the frame that carries the anchors and moves them as it warms; 0: they stay where they are. */
  frameAlpha: number;
  /**
   * Share of a part's own capacity that it may carry at any step of the tensioning: a cable or stay of breaking force B may carry
   * limit·B, a turnbuckle of capacity C limit·C. It holds for every member by itself; parts without a capacity are not judged.
   */
  limit: number;
  /** Share by which a reading may be off. */
  readingError: number;
  /** Cloth and edge cables weigh on the roof. */
  selfWeight: boolean;
  /** Keys the schedule stands on that the job did not give: with any of them the schedule is not for issue. */
  defaults: string[];
}

export interface FactsCable {
  id: string;
  edge: string | null;
  type: string;
  EA: number;
  force: number;
  erectedLength: number;
  slackLength: number;
  cutLength: number;
  /** What end fittings took off the cut length at its first and last end, m; left out: nothing was deducted. */
  terminals?: [number, number];
  /** Share it is cut shorter for its growth for good; 0: prestretched. */
  stretch?: number;
  markAt: { force: number; temperature: number };
  minBreakingForce: number | null;
  /** Capacity of its end fittings, kN, where given. */
  fitting?: number;
  utilisation: number | null;
  stations: { at: number; for: string }[];
}

export interface FactsAdjuster {
  id: string;
  nodes: [number, number];
  EA: number;
  slackLength: number;
  pinLength: number;
  target: number;
  capacity: number | null;
  range: { shortest: number; longest: number };
  perTurn: number;
  /** Nominal diameter of its thread, mm, where known. */
  thread?: number;
  ends?: "both" | "single";
  engagement?: number;
  /** The part whose capacity is the least: that is `capacity`. */
  weakest?: "turnbuckle" | "fitting" | "anchor";
  /** Anchor it stands at. */
  anchor: string;
  turnbuckle: string;
}

export interface FactsRig {
  nodes: Vec3[];
  fixed: number[];
  /** layers: of cloth in the mean, where seams lap and their second layer is counted; 1 where left out. */
  cloth: { nodes: Vec3; flat: [number, number][]; panel: string; layers?: number }[];
  cables: { id: string; nodes: number[]; EA: number; slackLengths: number[] }[];
  /** brace: stiffening of a hauled ring, which stands for the ring itself. */
  struts: { id: string; nodes: [number, number]; EA: number; slackLength: number; brace?: true }[];
  /** Weight that hangs on the nodes, kN; left out: none was asked for. */
  selfWeight?: number;
  adjusters: FactsAdjuster[];
}

/** The roof as built where nothing can be turned, so that no rig is written: places of the nodes (m) and triangles of the panels. */
export type FactsAssembled = Pick<FactsRig, "nodes" | "cloth">;

/** How far the assembled roof may be from what was intended. */
export interface ProofLimits {
  /** Mean stress of the whole roof, share off the intended one. */
  mean: number;
  /** Root mean square stress error of a panel, share of the intended stress. */
  rms: number;
  /** Greatest way of a point from the form, mm; null: a share of the roof's size (reviewBuilt.ts). */
  moved: number | null;
  /** Force of a cable or adjuster, share off the intended one. */
  force: number;
  /** Share of the cloth that is not taut. */
  slack: number;
}

export interface FactsAsBuilt {
  displacementMax: number;
  forces: Record<string, number>;
  /** rmsError: against the intended stress, weighted by flat area. */
  stress: { warp: StressFigures; weft: StressFigures };
  compressedShare: number;
  /** What each figure is compared with. */
  intended: { stress: { warp: number; weft: number }; forces: Record<string, number> };
  /** Limits it was judged by; moved in m. */
  limits: ProofLimits & { moved: number };
  /** Greatest of the two rms errors of each panel as a share of the intended stress, by panel. */
  panels: Record<string, number>;
}

/** One move of one adjuster; moves of one step are made together and read after all of them. */
export interface FactsMove {
  step: number;
  adjuster: string;
  /** Slack lengths, m. */
  from: number;
  to: number;
  /** Pin to pin under load, m. */
  pinFrom: number;
  pinTo: number;
  /** mm, positive shortens */
  travel: number;
  turns: number;
  /** kN */
  expect: number;
  low: number;
  high: number;
  /**
   * Of all members, the one nearest what it may carry right after the step: its force, and share = force / (limit · its breaking
   * force or capacity), so that 1 is the limit itself. Where no member has a capacity: the greatest force, share 0.
   */
  greatest: { id: string; kN: number; share: number };
}

export interface FactsStage {
  name: string;
  fraction: number;
  moves: FactsMove[];
  forces: Record<string, number>;
  /** Share of the cloth that is wrinkled or slack at the end of the stage. */
  slackCloth?: number;
  /** Where the near end of each adjuster stands at the end of the stage, by adjuster, m. */
  corners?: Record<string, Vec3>;
  /** Travel left at the end of the stage by adjuster, and the thread still in the body at each threaded end where known. mm */
  travel?: Record<string, { toShorten: number; toLengthen: number; engaged: number | null }>;
  /** What every adjuster reads right after each step, moved or not, kN. */
  readings?: { step: number; forces: Record<string, number> }[];
}

/** One way of going through the stages, played on the full structure. */
export interface FactsWay {
  /** chosen: this plan; clockwise: one by one round the roof to the same lengths; by-force: one by one, each until its own gauge shows the stage's force. */
  way: "chosen" | "clockwise" | "by-force";
  /** Member nearest its limit at any step of any stage. */
  peak: { id: string; kN: number; share: number };
  /** The same member's like when the last step is done: no way can have a lower peak than what it ends with. */
  end: { id: string; kN: number; share: number };
  /** Visits to an adjuster, and steps (adjusters turned at once are one step). */
  visits: number;
  steps: number;
  /** Greatest |force − target| / target when the last step is done. */
  off: number;
}

/** What one error does to the final forces, to first order. */
export interface FactsSensitivity {
  /** cable-length: that cable too long; anchor: the far pin of that adjuster nearer the sail; compensation: all cloth cut smaller. */
  what: "cable-length" | "anchor" | "compensation";
  id: string;
  /** Size of the error. */
  change: number;
  unit: "mm" | "%";
  /** Change of the force of each adjuster and cable, kN. */
  forces: Record<string, number>;
  /** Member it changes most, as a share of that member's force. */
  greatest: { id: string; share: number };
  /** Error at which that member is a tenth off, in the same unit; null where nothing changes. */
  tolerance: number | null;
}

export interface FactsTensioning {
  referenceTemperature: number;
  stages: FactsStage[];
  /** 1/K of the frame the anchors move with in the table below; 0: they stay where they are. */
  frameAlpha?: number;
  temperatureTable: { temperature: number; forces: Record<string, number> }[];
  /** Share by which a reading may be off. */
  readingError: number;
  /** Share of a member's breaking force or capacity that it may carry at any step: RigDecision.limit. */
  limit: number;
  /** The order chosen beside the plain ways, where the rig has tension modes enough for the order to matter. */
  ways?: FactsWay[];
  /** True where every input the schedule stands on was given by the job. */
  issuable: boolean;
}

/** One row of the crew's readings: a force, or what a force follows from, or a place. */
export interface Reading {
  /** Line of the file, the header is 1. */
  row: number;
  time: string;
  by: string;
  /** Adjuster, cable, stay, anchor or corner. */
  id: string;
  /** degC; null: as the plan's reference */
  temperature: number | null;
  /** kN */
  force: number | null;
  /** First natural frequency (Hz) of a free span (m) with its mass (kg/m). */
  vibration: { frequency: number; length: number; mass: number } | null;
  /** m */
  at: Vec3 | null;
}

/** One turn the crew makes to set right what was read. */
export interface CorrectionMove {
  step: number;
  adjuster: string;
  /** mm, positive shortens */
  travel: number;
  turns: number;
  /** What its gauge will read right after, kN, with its window. */
  expect: number;
  low: number;
  high: number;
  greatest: FactsMove["greatest"];
}

/** What readings say of the roof, and what to do. */
export interface Correction {
  /** Stage whose end the readings are held against. */
  stage: string;
  /** The state that fits the readings best: how far each adjuster is from its planned length, mm (positive longer), how sure that is (one standard deviation, mm), and its force, kN. */
  fitted: { adjuster: string; off: number; sure: number; force: number }[];
  moves: CorrectionMove[];
  /** After the moves: forces of adjusters, cables and masts, kN, and where the corners stand, m. */
  forecast: { forces: Record<string, number>; corners: Record<string, Vec3> };
}
