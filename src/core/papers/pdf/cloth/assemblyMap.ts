// The whole roof on one sheet with the names of panels, seams, edges and corners, then the seam schedule and the other cloth.
import type { Facts, Vec2 } from "../../../records/facts.ts";
import { insidePoint, pointAlong } from "../../drawing/flatGeometry.ts";
import { placesOf, seamSide } from "../../tables/clothTables.ts";
import { decimal } from "../../words/decimal.ts";
import { addSheet, type Book, drawParagraph, type Sheet } from "../layout/book.ts";
import { type LabelField, setNameInPlace } from "../layout/labelField.ts";
import { type BoxArea, drawBox, drawRun } from "../layout/pen.ts";
import { fitRoof, type RoofView } from "../layout/roofView.ts";
import { type Column, flowTableInPlace, flowTextInPlace, openFlow } from "../layout/table.ts";

const SEAM_COLUMNS: readonly Column[] = [
  { head: ["Seam"], width: 20 },
  { head: ["Weld"], width: 20 },
  { head: ["Panel on", "top"], width: 28, bold: true },
  { head: ["Panel", "below"], width: 28 },
  { head: ["On the", "form, m"], width: 20, align: "end" },
  { head: ["Flat,", "on top,", "mm"], width: 24, align: "end" },
  { head: ["Flat,", "below,", "mm"], width: 24, align: "end" },
  { head: ["Differ-", "ence,", "mm"], width: 24, align: "end" },
  { head: ["Allowance,", "top / below,", "mm"], width: 34, align: "end" },
  { head: ["Cable"], width: 18 },
  { head: ["Welded by,", "date"], width: 36 },
];

const PIECE_COLUMNS: readonly Column[] = [
  { head: ["Piece"], width: 30 },
  { head: ["Kind"], width: 25 },
  { head: ["For"], width: 30 },
  { head: ["Fabric"], width: 30 },
  { head: ["Batch"], width: 25 },
  { head: ["Roll"], width: 30 },
  { head: ["Done by, date"], width: 50 },
];

/** Adds the map, the seam schedule and the list of other cloth to the book. */
export function drawAssemblyMap(book: Book, view: RoofView): void {
  const sheet = addSheet(book, "Assembly map");
  const words = `The roof ${view.name}, not to scale; x of the mesh to the right. Thick lines: seams, with the panel that lies on top so that water runs off it.`;
  const top = drawParagraph(book, sheet, words, sheet.top) - 2;
  const box = { x: sheet.left, y: sheet.bottom, width: sheet.right - sheet.left, height: top - sheet.bottom };
  drawMap(book, sheet, view, box);
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
  return (facts.seams ?? []).map((s) => {
    const sides = [seamSide(facts, s, 0), seamSide(facts, s, 1)];
    const [top, below] = sides[0].panel === s.upper ? sides : [sides[1], sides[0]];
    const mm = (v: number | null, digits: number) => (v === null ? "" : decimal(v, digits));
    return [
      s.id,
      s.weld,
      top.panel,
      below.panel,
      decimal(s.length, 3),
      mm(top.flat, 1),
      mm(below.flat, 1),
      top.flat === null || below.flat === null ? "" : decimal(Math.abs(top.flat - below.flat), 2),
      `${mm(top.allowance, 0)} / ${mm(below.allowance, 0)}`,
      s.cable ?? "",
      "",
    ];
  });
}

function drawSchedule(book: Book): void {
  const rows = seamRows(book.facts);
  if (rows.length === 0) return;
  const flow = openFlow(book, "Seam schedule");
  flowTableInPlace(flow, SEAM_COLUMNS, rows);
  flow.y -= 2;
  const words =
    "Seams with the same weld are one continuous weld. Join match mark to match mark, the same number on both panels; never stretch one side to meet the other. The lengths are along the net line.";
  flowTextInPlace(flow, words);
}

function drawPieces(book: Book): void {
  const pieces = book.facts.pieces ?? [];
  if (pieces.length === 0) return;
  const places = placesOf(book.facts);
  const rows = pieces.map((p) => [
    p.id,
    p.kind,
    p.for,
    p.fabric,
    p.batch ?? "not given",
    places.get(p.id)?.roll ?? "none",
    "",
  ]);
  flowTableInPlace(openFlow(book, "Patches, strips, covers and test pieces"), PIECE_COLUMNS, rows);
}
