// The index sheet: which papers belong to this issue, what each is, for whom, and which of them may be built from.
import type { Facts } from "../../records/facts.ts";
import { holdReason, type PaperKind, stampOf } from "../words/stamp.ts";
import { closeBook, type FontFiles, openBook } from "./layout/book.ts";
import { type Column, flowGapInPlace, flowTableInPlace, flowTextInPlace, openFlow } from "./layout/table.ts";

interface Entry {
  /** Paths it stands for. */
  path: RegExp;
  name: string;
  what: string;
  who: string;
  kind: PaperKind;
}

const ENTRIES: readonly Entry[] = [
  {
    path: /^findings\.pdf$/,
    name: "findings.pdf",
    what: "What was checked, what is open, what the engineer must supply",
    who: "engineer, office",
    kind: "findings",
  },
  {
    path: /^rolls\/[^/]+$/,
    name: "rolls/",
    what: "Cut files of whole rolls, DXF R12 and SVG",
    who: "cutting table",
    kind: "cloth",
  },
  {
    path: /^bites\/[^/]+$/,
    name: "bites/",
    what: "Cut files of table lengths, DXF R12 and SVG",
    who: "cutting table",
    kind: "cloth",
  },
  {
    path: /^panels\/[^/]+$/,
    name: "panels/",
    what: "Cut files of single panels, DXF R12 and SVG",
    who: "cutting table",
    kind: "cloth",
  },
  {
    path: /\/arcs\//,
    name: "arcs/ in each",
    what: "The same with arcs for curves, within 0.1 mm: either these or the straight ones",
    who: "cutting table",
    kind: "cloth",
  },
  {
    path: /^[a-z]+\/dxf2000\//,
    name: "dxf2000/ in each",
    what: "The same cut files as DXF 2000",
    who: "cutting table",
    kind: "cloth",
  },
  {
    path: /^roll-sheets\.pdf$/,
    name: "roll-sheets.pdf",
    what: "Rolls as laid, pieces in the order of cutting, cloth list",
    who: "store, cutting table",
    kind: "cloth",
  },
  {
    path: /^panel-cards\.pdf$/,
    name: "panel-cards.pdf",
    what: "Panel cards, assembly map, seam schedule",
    who: "welding floor",
    kind: "cloth",
  },
  {
    path: /^(?:rolls|panels|seams|control-lengths)\.csv$/,
    name: "rolls, panels, seams, control-lengths .csv",
    what: "Lists of cloth and seams, metric",
    who: "office",
    kind: "cloth",
  },
  {
    path: /^cables\.pdf$/,
    name: "cables.pdf",
    what: "Cable schedule, stations, hardware list",
    who: "cable shop, store",
    kind: "rig",
  },
  {
    path: /^tensioning-schedule\.pdf$/,
    name: "tensioning-schedule.pdf",
    what: "Order of tensioning, forces to read, log",
    who: "rigging crew, engineer",
    kind: "rig",
  },
  {
    path: /^(?:cables|tensioning|hardware)\.csv$/,
    name: "cables, tensioning, hardware .csv",
    what: "Lists of the rig, metric",
    who: "office",
    kind: "rig",
  },
];

const COLUMNS: readonly Column[] = [
  { head: ["Paper"], width: 62, bold: true },
  { head: ["Files"], width: 16, align: "end" },
  { head: ["What it is"], width: 96 },
  { head: ["For"], width: 46 },
  { head: ["Status"], width: 46, bold: true },
];

/** The bytes of index.pdf. @shape paths: of all other files of the issue */
export async function writeIndexSheet(facts: Facts, fonts: FontFiles, paths: readonly string[]): Promise<Uint8Array> {
  const book = await openBook(facts, fonts, "index", "cloth");
  const flow = openFlow(book, "Index of papers");
  const rows = ENTRIES.flatMap((e) => {
    const count = paths.filter((p) => e.path.test(p)).length;
    const status = e.kind === "findings" ? "always issued" : stampOf(facts, e.kind) || "no stop open";
    return count === 0 ? [] : [[e.name, `${count}`, e.what, e.who, status]];
  });
  flowTableInPlace(flow, COLUMNS, rows, { size: 10 });
  flowGapInPlace(flow, 3);
  const { job } = facts;
  const text = (words: string, bold = false) => flowTextInPlace(flow, words, { size: 10, bold });
  const before = job.supersedes ? ` It takes the place of issue ${job.supersedes}: destroy those sheets.` : "";
  text(`These papers belong together by their revision ${job.revision}, issue ${job.issue}.${before}`, true);
  text(
    "The revision is a code of the job and everything it reads: two trades whose sheets carry the same code hold the same plan. Sheets of different codes must not be mixed, not even one panel or one cable.",
  );
  for (const kind of ["cloth", "rig"] as const) {
    const reason = holdReason(facts, kind);
    const written = ENTRIES.some((e) => e.kind === kind && paths.some((p) => e.path.test(p)));
    if (written && reason !== "")
      text(
        `${kind === "cloth" ? "Papers for cloth" : "Papers of the rig"}: NOT FOR ISSUE, ${reason}. See the findings sheets.`,
      );
  }
  text(
    "A status without a stamp means only that no stop was found here. Whether anything is built from these papers the licensed engineer and local law decide.",
  );
  return closeBook(book);
}
