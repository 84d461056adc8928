// What the page and its worker say to each other. Types only.
import type { CorrectedPlan } from "../../core/plan/correctPlan.ts";
import type { SurfaceFields } from "../../core/plan/measureFields.ts";
import type { Station } from "../../core/problem.ts";
import type { Facts } from "../../core/records/facts.ts";
import type { Job } from "../../core/records/job.ts";

export type SentFields = SurfaceFields;

/** A PlanError, or a fault of the program, as a plain record. */
export interface PlanFault {
  code: string;
  message: string;
  where: string[];
}

export type Request =
  | { kind: "plan"; run: number; given: unknown; mesh: { name: string; bytes: Uint8Array<ArrayBuffer> } | null }
  | { kind: "papers"; run: number; facts: Facts }
  | {
      kind: "correct";
      run: number;
      given: unknown;
      mesh: { name: string; bytes: Uint8Array<ArrayBuffer> } | null;
      /** The readings file, and the stage at whose end was read in per cent; null: the finished roof. */
      text: string;
      percent: number | null;
    };

export type Reply =
  | { kind: "read"; run: number; job: Job; revision: string }
  | { kind: "progress"; run: number; share: number; words: string; station: Station }
  | { kind: "planned"; run: number; facts: Facts; fields: SurfaceFields | null }
  | { kind: "papers"; run: number; files: { path: string; bytes: Uint8Array<ArrayBuffer> }[] }
  | { kind: "corrected"; run: number; corrected: CorrectedPlan }
  | { kind: "failed"; run: number; fault: PlanFault };
