// What the rig station takes from the job and hands on: cables, adjusters, masts, the tensioning. Types only.
import type { Vec3 } from "../surface/surface.ts";
import type { ValueStatus } from "./fabric.ts";

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

/** A place of the rig: an anchor's or node's name, or coordinates in m. */
export type RigPlace = string | Vec3;

/** An adjuster as the plan settles it: at an anchor, or in the first or last link of a cable edge. */
export interface AdjusterDecision {
  name: string;
  anchor: string | null;
  edge: string | null;
  end: "first" | "last" | null;
  turnbuckle: Turnbuckle;
  /** kN */
  EA: number;
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
  /** Share of the weakest of cable, turnbuckle, fitting and anchor that no step may pass. */
  limit: number;
  /** Share by which a reading may be off. */
  readingError: number;
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
  markAt: { force: number; temperature: number };
  minBreakingForce: number | null;
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
  /** Anchor it stands at. */
  anchor: string;
  turnbuckle: string;
}

export interface FactsRig {
  nodes: Vec3[];
  fixed: number[];
  cloth: { nodes: Vec3; flat: [number, number][]; panel: string }[];
  cables: { id: string; nodes: number[]; EA: number; slackLengths: number[] }[];
  struts: { id: string; nodes: [number, number]; EA: number; slackLength: number }[];
  adjusters: FactsAdjuster[];
}

export interface FactsAsBuilt {
  displacementMax: number;
  forces: Record<string, number>;
  stress: { warp: { min: number; mean: number; max: number }; weft: { min: number; mean: number; max: number } };
  compressedShare: number;
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
  greatest: { id: string; kN: number; share: number };
}

export interface FactsStage {
  name: string;
  fraction: number;
  moves: FactsMove[];
  forces: Record<string, number>;
}

export interface FactsTensioning {
  referenceTemperature: number;
  stages: FactsStage[];
  temperatureTable: { temperature: number; forces: Record<string, number> }[];
  /** Share by which a reading may be off, and the share of the weakest part no step passes. */
  readingError: number;
  limit: number;
  /** True where every input the schedule stands on was given by the job. */
  issuable: boolean;
}
