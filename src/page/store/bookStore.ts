// The one store of the page, in three slices: project (undone by snapshots), result (the latest plan), look (not undone).
// Knows no React and no worker.
import { createStore } from "zustand/vanilla";
import { DEFAULT_PAPERS, type PaperChoice } from "../../core/papers/choosePapers.ts";
import type { CorrectedPlan } from "../../core/plan/correctPlan.ts";
import type { Finding, Station } from "../../core/problem.ts";
import type { Facts } from "../../core/records/facts.ts";
import type { Job } from "../../core/records/job.ts";
import type { Grown, SentFields } from "../worker/growingFacts.ts";
import type { PlanFault } from "../worker/messages.ts";
import type { Grips, Hand, Tied, Weighed } from "./hand.ts";
import type { PlanTotals } from "./planTotals.ts";
import type { Project } from "./project.ts";

export const LEAVES = ["form", "seams", "panels", "rolls", "rig", "papers", "site"] as const;
export type Leaf = (typeof LEAVES)[number];
/** What the surface is coloured by. */
export type FieldName = "none" | "residual" | "curvature" | "warp" | "weft" | "builtWarp" | "builtWeft";
export type Theme = "system" | "light" | "dark";

export interface ProjectSlice {
  project: Project | null;
  past: { project: Project; words: string }[];
  future: { project: Project; words: string }[];
}

export interface PaperFile {
  path: string;
  bytes: Uint8Array<ArrayBuffer>;
}

/** Papers, and what writing them added to the findings. */
export interface WrittenPapers {
  files: PaperFile[];
  added: Finding[];
}

export interface ResultSlice {
  status: "none" | "running" | "done" | "failed" | "stopped";
  progress: { share: number; words: string; station: Station };
  /** Every decision in place; of the last job that could be read. */
  job: Job | null;
  facts: Facts | null;
  fields: SentFields | null;
  /** What the plan before this one came to, where that was another one. */
  before: PlanTotals | null;
  /** What a plan under way has worked out, by the station it goes up to; each leaf is drawn once from the part that shows it. */
  soFar: Partial<Record<Station, Grown>>;
  /** The project the facts are of. */
  planned: Project | null;
  fault: PlanFault | null;
  /** The papers of some facts as they were chosen, and what writing them added to the findings. */
  papers: ({ of: Facts; choice: readonly PaperChoice[] } & WrittenPapers) | null;
  papersFault: PlanFault | null;
  writing: boolean;
  /** What to turn after the readings, and the project they are of. */
  corrected: { of: Project; plan: CorrectedPlan } | null;
  correcting: boolean;
  correctFault: PlanFault | null;
  /** Welds whose ends can be slid; the one in hand; whose roof is being tied again after it; that roof tied. */
  grips: Grips | null;
  hand: Hand | null;
  tying: Project | null;
  tied: Tied | null;
  /** Layouts compared side by side; null: not asked for. */
  weighed: Weighed | null;
}

export interface LookSlice {
  leaf: Leaf;
  /** Id of what is chosen, and of what is under the pointer: edge, seam, panel, roll, cable, adjuster. */
  chosen: string | null;
  pointed: string | null;
  field: FieldName;
  /** Step of the tensioning that is looked at; 0 before the first. */
  step: number;
  sheet: "none" | "keys" | "findings" | "jobs" | "facts";
  /** Which papers are written. */
  choice: readonly PaperChoice[];
  /** Facts opened for their papers, beside whatever job is on the desk. */
  loose: { name: string; facts: Facts } | null;
  theme: Theme;
  /** Said once, until closed. */
  notices: { id: string; text: string; grave: boolean }[];
  /** When the job was last kept; null: not yet. */
  kept: string | null;
  /** Whether there is something that is not kept yet and will be in a moment. */
  keeping: boolean;
}

export interface Book extends ProjectSlice, ResultSlice, LookSlice {}

const NO_RESULT: ResultSlice = {
  status: "none",
  progress: { share: 0, words: "", station: "job" },
  job: null,
  facts: null,
  fields: null,
  before: null,
  soFar: {},
  planned: null,
  fault: null,
  papers: null,
  papersFault: null,
  writing: false,
  corrected: null,
  correcting: false,
  correctFault: null,
  grips: null,
  hand: null,
  tying: null,
  tied: null,
  weighed: null,
};

export const bookStore = createStore<Book>(() => ({
  project: null,
  past: [],
  future: [],
  ...NO_RESULT,
  leaf: "form",
  chosen: null,
  pointed: null,
  field: "none",
  step: 0,
  sheet: "none",
  choice: DEFAULT_PAPERS,
  loose: null,
  theme: "system",
  notices: [],
  kept: null,
  keeping: false,
}));

/** Puts another job on the desk, with what can be undone and done again of it: nothing of the former one stays. */
export function openProject(line: ProjectSlice, leaf: Leaf = "form"): void {
  bookStore.setState({
    ...line,
    ...NO_RESULT,
    leaf,
    chosen: null,
    step: 0,
    sheet: "none",
    kept: null,
    keeping: false,
  });
}

/**
 * Does one act on the project and remembers what was before.
 * @param words what was done, as undo names it
 */
export function act<A>(action: (project: Project, args: A) => Project, args: A, words: string): void {
  const { project, past } = bookStore.getState();
  if (project === null) return;
  const next = action(project, args);
  if (next === project) return;
  bookStore.setState({ project: next, past: [...past, { project, words }], future: [] });
}

export function undo(): void {
  const { project, past, future } = bookStore.getState();
  const last = past.at(-1);
  if (project === null || last === undefined) return;
  bookStore.setState({
    project: last.project,
    past: past.slice(0, -1),
    future: [{ project, words: last.words }, ...future],
  });
}

export function redo(): void {
  const { project, past, future } = bookStore.getState();
  const [next, ...rest] = future;
  if (project === null || next === undefined) return;
  bookStore.setState({ project: next.project, past: [...past, { project, words: next.words }], future: rest });
}

/** Says something once; the same id replaces what it said before. */
export function notify(id: string, text: string, grave = false): void {
  bookStore.setState((s) => ({ notices: [...s.notices.filter((n) => n.id !== id), { id, text, grave }] }));
}

export function dismiss(id: string): void {
  bookStore.setState((s) => ({ notices: s.notices.filter((n) => n.id !== id) }));
}
