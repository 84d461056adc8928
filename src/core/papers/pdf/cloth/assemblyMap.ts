// The whole roof on one sheet with the names of panels, seams, edges and corners, then the seam schedule and the other cloth.
import type { Facts, FactsJob, FactsPiece, Vec2 } from "../../../records/facts.ts";
import { batchOf } from "../../drawing/clothBatch.ts";
import { boxOf, insidePoint, pointAlong } from "../../drawing/flatGeometry.ts";
import { stripPlace } from "../../drawing/stripPlace.ts";
import { placesOf, seamSide } from "../../tables/clothTables.ts";
import { decimal } from "../../words/decimal.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import { addSheet, type Book, drawParagraph, type Sheet } from "../layout/book.ts";
import { type LabelField, setNameInPlace } from "../layout/labelField.ts";
import { type BoxArea, drawBox, drawRun } from "../layout/pen.ts";
import { fitRoof, type RoofView } from "../layout/roofView.ts";
import { type Column, flowGapInPlace, flowTableInPlace, flowTextInPlace, openFlow } from "../layout/table.ts";
import { drawUnrolled } from "./unrolledMap.ts";

function seamColumns(job: FactsJob): readonly Column[] {
  const { span, flat, fine } = paperUnits(job);
  const wide = job.units === "imperial" ? 29 : 0;
  return [
    { head: ["Seam"], width: 20 },
    { head: ["Weld"], width: 20 },
    { head: ["Panel on", "top"], width: 25, bold: true },
    { head: ["Panel", "below"], width: 25 },
    { head: ["On the", `form, ${span.unit}`], width: wide || 20, align: "end" },
    { head: ["Flat,", "on top,", flat.unit], width: wide || 24, align: "end" },
    { head: ["Flat,", "below,", flat.unit], width: wide || 24, align: "end" },
    { head: ["Differ-", "ence,", fine.unit], width: 20, align: "end" },
    { head: ["Allowance,", "top / below,", flat.unit], width: 38, align: "end" },
    { head: ["Cable"], width: 18 },
    { head: ["Welded by,", "date"], width: 30 },
  ];
}

/** Adds the map, the seam schedule and the list of other cloth to the book. */
export function drawAssemblyMap(book: Book, view: RoofView): void {
  const sheet = addSheet(book, "Assembly map");
  const words = `The roof ${view.name}, not to scale; x of the mesh to the right. Thick lines: seams, with the panel that lies on top so that water runs off it.`;
  const top = drawParagraph(book, sheet, words, sheet.top) - 2;
  const box = { x: sheet.left, y: sheet.bottom, width: sheet.right - sheet.left, height: top - sheet.bottom };
  drawMap(book, sheet, view, box);
  drawUnrolled(book);
  drawSchedule(book);
  drawPieces(book);
}

function drawMap(book: Book, sheet: Sheet, view: RoofView, box: BoxArea): void {
  const inner = { x: box.x + 24, y: box.y + 8, width: box.width - 48, height: box.height - 16 };
  const place = fitRoof(view, inner);
  const field: LabelField = { within: box, outlines: [], taken: [] };
  for (const p of view.panels) {
    for (const o of p.outlines) drawRun(sheet.page, o.map(place), { width: 0.18, closed: true });
  }
  for (const s of view.seams) drawRun(sheet.page, s.run.map(place), { width: 0.6 });
  for (const p of view.panels) {
    const outline = (p.outlines[0] ?? []).map(place);
    if (outline.length < 3) continue;
    const { at } = insidePoint(outline);
    const spots = [0, 4, -4, 8, -8].flatMap((dy) => [0, 8, -8, 16, -16].map((dx): Vec2 => [at[0] + dx, at[1] + dy]));
    setNameInPlace(book, sheet, field, p.id, spots, { bold: true, size: 11 });
  }
  for (const s of view.seams) {
    const run = s.run.map(place);
    const spots = [0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8, 0.12, 0.88].map((f) => pointAlong(run, f).at);
    if (!setNameInPlace(book, sheet, field, `${s.id}: ${s.upper} on top`, spots))
      setNameInPlace(book, sheet, field, s.id, spots);
  }
  const middle: Vec2 = [inner.x + inner.width / 2, inner.y + inner.height / 2];
  for (const e of view.edges) {
    const run = e.run.map(place);
    const spots = [0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8].flatMap((f) =>
      [4, 7, 11].map((r) => outward(pointAlong(run, f).at, middle, r)),
    );
    setNameInPlace(book, sheet, field, e.id, spots);
  }
  for (const a of view.anchors) {
    const p = place(a.at);
    drawBox(sheet.page, { x: p[0] - 0.7, y: p[1] - 0.7, width: 1.4, height: 1.4 }, { width: 0.1, fill: 0 });
    setNameInPlace(
      book,
      sheet,
      field,
      a.id,
      [5, 7, 10, 14].map((r) => outward(p, middle, r)),
    );
  }
}

function outward(p: Vec2, middle: Vec2, reach: number): Vec2 {
  const d: Vec2 = [p[0] - middle[0], p[1] - middle[1]];
  const l = Math.hypot(d[0], d[1]) || 1;
  return [p[0] + (reach * d[0]) / l, p[1] + (reach * d[1]) / l];
}

function seamRows(facts: Facts): string[][] {
  const { span, flat, fine } = paperUnits(facts.job);
  return (facts.seams ?? []).map((s) => {
    const sides = [seamSide(facts, s, 0), seamSide(facts, s, 1)];
    const [top, below] = sides[0].panel === s.upper ? sides : [sides[1], sides[0]];
    const length = (v: number | null) => (v === null ? "" : flatTenths(facts.job, v));
    const short = (v: number | null) => (v === null ? "" : flat.of(v));
    return [
      s.id,
      s.weld,
      top.panel,
      below.panel,
      span.of(s.length),
      length(top.flat),
      length(below.flat),
      top.flat === null || below.flat === null ? "" : fine.of(Math.abs(top.flat - below.flat)),
      `${short(top.allowance)} / ${short(below.allowance)}`,
      s.cable ?? "",
      "",
    ];
  });
}

/** Two sides that are to be equal are told to the tenth of a millimetre. */
function flatTenths(job: FactsJob, mm: number): string {
  return job.units === "imperial" ? paperUnits(job).flat.of(mm) : decimal(mm, 1);
}

function drawSchedule(book: Book): void {
  const rows = seamRows(book.facts);
  if (rows.length === 0) return;
  const flow = openFlow(book, "Seam schedule");
  flowTableInPlace(flow, seamColumns(book.facts.job), rows);
  flow.y -= 2;
  const words =
    "Seams with the same weld are one continuous weld. Join match mark to match mark, the same number on both panels; never stretch one side to meet the other. The lengths are along the net line.";
  flowTextInPlace(flow, words);
}

function drawPieces(book: Book): void {
  const { facts } = book;
  const pieces = facts.pieces ?? [];
  if (pieces.length === 0) return;
  const { flat } = paperUnits(facts.job);
  const clothOf = (p: FactsPiece) => `${p.fabric}, batch ${batchOf(facts, p) ?? "not given"}`;
  const one = new Set(pieces.map(clothOf)).size === 1;
  const columns: readonly Column[] = [
    { head: ["Piece"], width: 34 },
    { head: ["Kind, for"], width: 34 },
    ...(one ? [] : [{ head: ["Fabric, batch"], width: 32 }]),
    { head: ["Roll"], width: 20 },
    { head: ["Length,", flat.unit], width: 25, align: "end" },
    { head: ["Width,", flat.unit], width: 23, align: "end" },
    { head: ["Lies along its edge,", flat.unit], width: 58 },
    { head: ["Done by, date"], width: 34 },
  ];
  const places = placesOf(facts);
  const rows = pieces.map((p) => {
    const { min, max } = boxOf(p.cut);
    const strip = stripPlace(facts, p);
    return [
      p.id,
      `${p.kind}, ${p.for}`,
      ...(one ? [] : [clothOf(p)]),
      places.get(p.id)?.roll ?? "none",
      flat.of(max[0] - min[0]),
      flat.of(max[1] - min[1]),
      strip ? `${flat.of(strip.from)} to ${flat.of(strip.to)} from ${strip.start}` : "",
      "",
    ];
  });
  const flow = openFlow(book, "Patches, strips, covers and test pieces");
  if (one) flowTextInPlace(flow, `All of fabric ${clothOf(pieces[0])}.`);
  flowGapInPlace(flow, 1.5);
  flowTableInPlace(flow, columns, rows);
}
