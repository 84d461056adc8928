// The cloth that is no panel: pocket strips, patches, covers, test pieces, each with the place it belongs to. Parts of one strip that
// are alike and lie one after the other take one row.
import type { Facts, FactsPiece } from "../../../records/facts.ts";
import { batchOf } from "../../drawing/clothBatch.ts";
import { patchPlace } from "../../drawing/cornerAnchors.ts";
import { boxOf } from "../../drawing/flatGeometry.ts";
import { stripPlace } from "../../drawing/stripPlace.ts";
import { placesOf } from "../../tables/clothTables.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import type { Book } from "../layout/book.ts";
import { type Column, flowGapInPlace, flowTableInPlace, flowTextInPlace, openFlow } from "../layout/table.ts";

interface Run {
  pieces: FactsPiece[];
  /** What must be alike for pieces to share a row. */
  key: string;
}

function clothOf(facts: Facts, piece: FactsPiece): string {
  return `${piece.fabric}, batch ${batchOf(facts, piece) ?? "not given"}`;
}

function sizeOf(facts: Facts, piece: FactsPiece): [string, string] {
  const { flat } = paperUnits(facts.job);
  const { min, max } = boxOf(piece.cut);
  return [flat.of(max[0] - min[0]), flat.of(max[1] - min[1])];
}

/** Pieces in runs of alike ones that follow on each other; only parts of a strip or cover are ever put together. */
function runsOf(facts: Facts): Run[] {
  const places = placesOf(facts);
  const runs: Run[] = [];
  for (const piece of facts.pieces ?? []) {
    const parts = piece.kind === "strip" || piece.kind === "cover";
    const roll = places.get(piece.id)?.roll ?? "none";
    const like = [piece.kind, piece.for, roll, clothOf(facts, piece), ...sizeOf(facts, piece)];
    const key = JSON.stringify(parts ? like : [...like, piece.id]);
    const last = runs[runs.length - 1];
    if (last?.key === key) last.pieces.push(piece);
    else runs.push({ pieces: [piece], key });
  }
  return runs;
}

/** Where the cloth of a row belongs. */
function whereText(facts: Facts, { pieces }: Run): string {
  const { flat } = paperUnits(facts.job);
  const [first, last] = [pieces[0], pieces[pieces.length - 1]];
  const order = pieces.length > 1 ? ", butted in the order of their numbers" : "";
  if (first.kind === "patch") return `at ${patchPlace(facts, first) ?? first.for}`;
  if (first.kind === "test") return "for the weld trial, before the first seam";
  if (first.kind === "cover") return `over ${first.for}${order}`;
  const [from, to] = [stripPlace(facts, first), stripPlace(facts, last)];
  return from && to ? `${flat.of(from.from)} to ${flat.of(to.to)} from ${from.start}${order}` : "";
}

/** How each kind is laid, where the plan has it. */
function layTexts(pieces: readonly FactsPiece[]): string[] {
  const has = (kind: FactsPiece["kind"]) => pieces.some((p) => p.kind === kind);
  return [
    ...(has("strip")
      ? ["Pocket strips: folded in the middle over the cable, one leaf on each face of the panel."]
      : []),
    ...(has("patch")
      ? [
          "Patches: on the corner named, outer face up, warp on warp; above or beneath the panel as the engineer's detail says.",
        ]
      : []),
  ];
}

/** The list, unless the plan has no such cloth. */
export function flowOtherCloth(book: Book): void {
  const { facts } = book;
  const pieces = facts.pieces ?? [];
  if (pieces.length === 0) return;
  const { flat } = paperUnits(facts.job);
  const one = new Set(pieces.map((p) => clothOf(facts, p))).size === 1;
  const columns: readonly Column[] = [
    { head: ["Piece"], width: 46, bold: true },
    { head: ["Kind, for"], width: 38 },
    { head: ["Pieces"], width: 16, align: "end" },
    ...(one ? [] : [{ head: ["Fabric, batch"], width: 32 }]),
    { head: ["Roll"], width: 18 },
    { head: ["Length", `each, ${flat.unit}`], width: 25, align: "end" },
    { head: ["Width,", flat.unit], width: 23, align: "end" },
    { head: ["Where it lies,", flat.unit], width: 62 },
    { head: ["Done by, date"], width: 32 },
  ];
  const places = placesOf(facts);
  const rows = runsOf(facts).map((run) => {
    const [first, last] = [run.pieces[0], run.pieces[run.pieces.length - 1]];
    return [
      run.pieces.length > 1 ? `${first.id} to ${last.id}` : first.id,
      `${first.kind}, ${first.for}`,
      `${run.pieces.length}`,
      ...(one ? [] : [clothOf(facts, first)]),
      places.get(first.id)?.roll ?? "none",
      ...sizeOf(facts, first),
      whereText(facts, run),
      "",
    ];
  });
  const flow = openFlow(book, "Patches, strips, covers and test pieces");
  if (one) flowTextInPlace(flow, `All of fabric ${clothOf(facts, pieces[0])}.`);
  for (const text of layTexts(pieces)) flowTextInPlace(flow, text);
  flowGapInPlace(flow, 1.5);
  flowTableInPlace(flow, columns, rows);
}
