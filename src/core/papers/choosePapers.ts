// Which papers are asked for: words of a list, as the command line and the page give them.
import { PlanError } from "../problem.ts";

/** A group of papers that is written or not. */
export type PaperChoice =
  | "cut-files"
  | "dxf2000"
  | "arcs"
  | "roll-sheets"
  | "panel-cards"
  | "lists"
  | "rig"
  | "findings"
  | "index"
  | "bundle";

/** All groups, with what each holds. */
export const PAPER_CHOICES: Readonly<Record<PaperChoice, string>> = {
  "cut-files": "DXF R12 and SVG per roll, table length and panel",
  dxf2000: "the same cut files as DXF 2000",
  arcs: "the same with arcs for curves, within 0.1 mm, beside the straight ones",
  "roll-sheets": "roll sheets and cloth list (PDF)",
  "panel-cards": "panel cards, assembly map, seam schedule (PDF)",
  lists: "rolls, panels, seams, cables, moves, hardware (CSV)",
  rig: "tensioning schedule, cables and hardware (PDF)",
  findings: "findings sheets (PDF)",
  index: "index sheet (PDF)",
  bundle: "all of the above that are asked for, in one zip",
};

/** What is written when nothing is said: everything but arcs, which not every table runs, and the zip. */
export const DEFAULT_PAPERS: readonly PaperChoice[] = (Object.keys(PAPER_CHOICES) as PaperChoice[]).filter(
  (c) => c !== "bundle" && c !== "arcs",
);

/**
 * The groups named in a list with commas: "roll-sheets,rig". "all" stands for everything, the zip too.
 * @throws PlanError "papers-choice" for a word that names no group, or an empty list
 */
export function choosePapers(list: string): PaperChoice[] {
  const words = list
    .split(",")
    .map((w) => w.trim().toLowerCase())
    .filter((w) => w !== "");
  const all = Object.keys(PAPER_CHOICES) as PaperChoice[];
  const wrong = words.find((w) => w !== "all" && !Object.hasOwn(PAPER_CHOICES, w));
  if (words.length === 0 || wrong !== undefined) {
    const what = wrong === undefined ? "no paper is named" : `"${wrong}" names no paper`;
    throw new PlanError("papers-choice", `${what}; choose of: all, ${all.join(", ")}`, "papers");
  }
  return words.includes("all") ? all : all.filter((c) => words.includes(c));
}
