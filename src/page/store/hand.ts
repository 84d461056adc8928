// A seam's end in hand: what the store knows of it while it is slid along its edge.
import type { Grip, SeenPanel } from "../../core/plan/dragSeam.ts";
import type { ComparedLayout } from "../../core/plan/measureLayout.ts";
import type { FactsSeam } from "../../core/records/facts.ts";
import type { SeamDecision } from "../../core/records/job.ts";
import type { SeamPlaces } from "../worker/messages.ts";
import type { Project } from "./project.ts";

/** Welds whose ends can be slid, and the project whose roof they are of. */
export interface Grips {
  of: Project;
  welds: Grip[];
}

/** The weld in hand. */
export interface Hand {
  weld: string;
  /** Which end is slid. */
  end: 0 | 1;
  /** Where it began, where it is, and the newest place it was drawn at. */
  from: SeamPlaces;
  to: SeamPlaces;
  drawn: SeamPlaces;
  path: number[][] | null;
  panels: SeenPanel[];
  /** Why it cannot be where it is. */
  fault: string | null;
  /** Let go, and the project it made. */
  laid: Project | null;
}

/** True while a weld in hand lies elsewhere than it began. */
export function isSliding(hand: Hand | null): boolean {
  if (hand === null || hand.laid !== null) return false;
  const [from, to] = [hand.from[hand.end], hand.to[hand.end]];
  return from.edge !== to.edge || from.at !== to.at;
}

/** Layouts side by side: those asked for, and those worked out so far, in that order. */
export interface Weighed {
  of: Project;
  asks: Partial<SeamDecision>[];
  /** Which others there are is known with the first one only. */
  open: boolean;
  done: ComparedLayout[];
  /** How far the next one has come; null: stopped, or all are done. */
  doing: { share: number; words: string } | null;
}

/** The whole roof tied again; its plan says the same and more. */
export interface Tied {
  of: Project;
  seams: FactsSeam[];
  panels: SeenPanel[];
  /** What it took, ms. */
  ms: number;
}

/** True where two projects give one plan: the same job on the same mesh, whatever the log says. */
export function isSameWork(a: Project | null | undefined, b: Project | null | undefined): boolean {
  return a != null && b != null && a.job === b.job && a.mesh === b.mesh;
}
