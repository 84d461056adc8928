// The whole roof on one sheet with the names of panels, seams, edges and corners, then the seam schedule and the other cloth.
import type { Facts, FactsJob, Vec2 } from "../../../records/facts.ts";
import { insidePoint, pointAlong } from "../../drawing/flatGeometry.ts";
import { seamSide } from "../../tables/clothTables.ts";
import { decimal } from "../../words/decimal.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import { addSheet, type Book, drawParagraph, type Sheet } from "../layout/book.ts";
import { type LabelField, setNameInPlace } from "../layout/labelField.ts";
import { type BoxArea, drawBox, drawRun } from "../layout/pen.ts";
import { fitRoof, type RoofView } from "../layout/roofView.ts";
import { type Column, flowTableInPlace, flowTextInPlace, openFlow } from "../layout/table.ts";
import { flowOtherCloth } from "./otherCloth.ts";
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
  const words = `The roof ${view.name}, not to scale; x of the mesh to the right. Thick lines: seams, with the panel that lies on top so that water runs off it; S1/P2, where room is short, is seam S1 with P2 on top.`;
  const top = drawParagraph(book, sheet, words, sheet.top) - 2;
  const box = { x: sheet.left, y: sheet.bottom, width: sheet.right - sheet.left, height: top - sheet.bottom };
  drawMap(book, sheet, view, box);
  drawUnrolled(book, view);
  drawSchedule(book);
  flowOtherCloth(book);
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
  nameSeams(book, sheet, view, field, place);
  const middle: Vec2 = [inner.x + inner.width / 2, inner.y + inner.height / 2];
  for (const e of view.edges) {
    const run = e.run.map(place);
    const spots = [0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8].flatMap((f) =>
      [4, 7, 11, 15].map((r) => outward(pointAlong(run, f).at, middle, r)),
    );
    const clear = { ...field, outlines: view.edges.map((o) => openLine(o.run.map(place))) };
    if (!setNameInPlace(book, sheet, clear, e.id, spots)) setNameInPlace(book, sheet, field, e.id, spots);
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

/** A run as a closed outline that holds no cloth: there and back. */
function openLine(run: Vec2[]): Vec2[] {
  return [...run, ...[...run].reverse()];
}

/**
 * Each seam with the panel on top, on its own line and off all others, in few letters where there is no room for words: a name that
 * lies over two seams is read off the wrong one.
 */
function nameSeams(book: Book, sheet: Sheet, view: RoofView, field: LabelField, place: (p: Vec2) => Vec2): void {
  const edges = view.edges.map((e) => openLine(e.run.map(place)));
  const runs = view.seams.map((s) => s.run.map(place));
  view.seams.forEach((s, i) => {
    const run = runs[i];
    const spots = [0, 1, 2, 3, 4, 5, 6, 7, 8].flatMap((k) =>
      [0.5 + 0.05 * k, 0.5 - 0.05 * k].map((f) => pointAlong(run, f).at),
    );
    const off = [...edges, ...runs.flatMap((r, k) => (k === i ? [] : [openLine(r)]))];
    const clear = { ...field, outlines: off };
    if (setNameInPlace(book, sheet, clear, `${s.id}: ${s.upper} on top`, spots)) return;
    const brief = `${s.id}/${s.upper}`;
    if (setNameInPlace(book, sheet, clear, brief, spots)) return;
    for (const text of [`${s.id}: ${s.upper} on top`, brief, s.id])
      if (setNameInPlace(book, sheet, field, text, spots)) return;
  });
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
