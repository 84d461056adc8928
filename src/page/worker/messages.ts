// What the page and its worker say to each other. Types only.
import type { PaperChoice } from "../../core/papers/choosePapers.ts";
import type { CorrectedPlan } from "../../core/plan/correctPlan.ts";
import type { Grip, MadeRoof, SeenPanel } from "../../core/plan/dragSeam.ts";
import type { ComparedLayout } from "../../core/plan/measureLayout.ts";
import type { KeptRound } from "../../core/plan/partLog.ts";
import type { Finding, Station } from "../../core/problem.ts";
import type { Facts, FactsSeam } from "../../core/records/facts.ts";
import type { EdgePlace, Job, SeamDecision } from "../../core/records/job.ts";
import type { Added } from "./growingFacts.ts";
import type { Slice } from "./inParts.ts";

/** A PlanError, or a fault of the program, as a plain record. */
export interface PlanFault {
  code: string;
  message: string;
  where: string[];
}

export type Request =
  | {
      kind: "plan";
      run: number;
      given: unknown;
      mesh: { name: string; bytes: Uint8Array<ArrayBuffer> } | null;
      /** Takes the roof once its panels are made, for who drags its seams. */
      roofs: MessagePort;
    }
  /** facts null: of the plan this worker made last; `name`: the file the facts came in from, null: they were planned here. */
  | { kind: "papers"; run: number; facts: Facts | null; choice: readonly PaperChoice[]; name: string | null }
  | {
      kind: "correct";
      run: number;
      given: unknown;
      mesh: { name: string; bytes: Uint8Array<ArrayBuffer> } | null;
      /** The readings file, and the stage at whose end was read in per cent; null: the finished roof. */
      text: string;
      percent: number | null;
      /** Rounds read before at the same place, and what was turned after each. */
      kept: KeptRound[];
    };

export type Reply =
  | { kind: "read"; run: number; job: Job; revision: string }
  | { kind: "progress"; run: number; share: number; words: string; station: Station }
  /** Some of what the next `soFar` or `planned` adds. */
  | { kind: "slice"; run: number; slice: Slice }
  /** As far as the plan has come: the work of `station` stands in it. */
  | { kind: "soFar"; run: number; station: Station; added: Added }
  | { kind: "planned"; run: number; added: Added }
  | { kind: "papers"; run: number; files: { path: string; bytes: Uint8Array<ArrayBuffer> }[]; added: Finding[] }
  | { kind: "corrected"; run: number; corrected: CorrectedPlan }
  | { kind: "failed"; run: number; fault: PlanFault };

/** Two places that a seam runs between. */
export type SeamPlaces = [EdgePlace, EdgePlace];

/** A made roof on its way from the plan's worker to the one that drags. */
export interface SentRoof {
  run: number;
  roof: MadeRoof;
}

/** One layout asked for: its answers carry the turn; `stop` turns 1 once it is no longer wanted, null: no memory is shared here. */
export interface WeighAsk {
  turn: number;
  asked: Partial<SeamDecision>;
  stop: Int32Array<SharedArrayBuffer> | null;
}

export type DragRequest =
  /** Where roofs come from, from now on. */
  | { kind: "listen"; roofs: MessagePort }
  | { kind: "drag"; run: number; weld: string; to: SeamPlaces }
  /** Cuts and flattens one other layout of the roof's form. */
  | ({ kind: "weigh"; run: number } & WeighAsk)
  | { kind: "tie"; run: number; next: number; pairs: EdgePlace[][] };

export type DragReply =
  /** Welds that can be dragged; none where the roof cannot be taken up so. */
  | { kind: "grips"; run: number; grips: Grip[] }
  | { kind: "dragged"; run: number; weld: string; to: SeamPlaces; path: number[][]; panels: SeenPanel[]; ms: number }
  | { kind: "refused"; run: number; weld: string; to: SeamPlaces; fault: PlanFault }
  /** Asked of a roof that another one has followed: to be asked again. */
  | { kind: "outdated"; run: number }
  | { kind: "tied"; run: number; seams: FactsSeam[]; panels: SeenPanel[]; ms: number }
  | { kind: "weighing"; run: number; turn: number; share: number; words: string }
  | { kind: "weighed"; run: number; turn: number; layout: ComparedLayout }
  /** It could not be tied; its plan says why. */
  | { kind: "untied"; run: number };
