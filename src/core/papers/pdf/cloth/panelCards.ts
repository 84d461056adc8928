// Panel cards: one panel a card, everything a welder needs to check it before it is joined, on paper that is filled in by hand.
// Then the assembly map and the seam schedule. Numbers come from the facts; nothing is judged here.
import type { Facts, FactsJob, FactsPanel, Vec2 } from "../../../records/facts.ts";
import { boxOf } from "../../drawing/flatGeometry.ts";
import { measurePanel, type PanelMeasures } from "../../drawing/panelMeasures.ts";
import { massOf, placesOf } from "../../tables/clothTables.ts";
import { decimal } from "../../words/decimal.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import { addSheet, type Book, closeBook, type FontFiles, openBook, type Sheet } from "../layout/book.ts";
import {
  type BoxArea,
  drawBox,
  drawRun,
  drawStencil,
  drawText,
  fitText,
  keepStencil,
  PITCH,
  SMALL,
  type Stencil,
  wrapText,
} from "../layout/pen.ts";
import { fitRoof, type RoofView, viewRoof } from "../layout/roofView.ts";
import { type Column, drawHalves, drawTable, tableHeight } from "../layout/table.ts";
import { drawAssemblyMap } from "./assemblyMap.ts";
import { flowAssemblyOrder } from "./assemblyOrder.ts";
import { cardScale, drawPanelFigure, figureHeight, sideMeets } from "./panelFigure.ts";
import { flowWeldingFirst } from "./weldingFirst.ts";

const FOOT = 27;
/** The figure never gets less of the sheet's height than this, mm, if it needs it; more sides go to a second sheet. */
const LEAST_FIGURE = 52;

/** Feet, inches and sixteenths take more room than millimetres: the columns of lengths are wider then. */
function sideColumns(job: FactsJob): readonly Column[] {
  const { flat, span } = paperUnits(job);
  const wide = isImperial(job) ? 25 : 0;
  return [
    { head: ["No."], width: 10 },
    { head: ["Seam", "or edge"], width: 26 },
    { head: ["Meets"], width: 27 },
    { head: ["Net,", flat.unit], width: wide || 15, align: "end", bold: true },
    { head: ["Edge,", flat.unit], width: wide || 15, align: "end" },
    { head: ["Chord,", flat.unit], width: wide || 16.5, align: "end" },
    { head: ["On the", `form, ${span.unit}`], width: wide || 18, align: "end" },
    { head: ["Allow-", `ance, ${flat.unit}`], width: wide ? 30 : 24, align: "end" },
    { head: ["Lap"], width: wide ? 17 : 14 },
    { head: ["Tape,", flat.unit], width: wide || 13.5 },
  ];
}

function checkColumns(job: FactsJob): readonly Column[] {
  const { flat } = paperUnits(job);
  const wide = isImperial(job) ? 25 : 0;
  return [
    { head: ["Diagonals,", "widths"], width: wide ? 41 : 33 },
    { head: ["Net,", flat.unit], width: wide || 17, align: "end", bold: true },
    { head: ["Cut,", flat.unit], width: wide || 17, align: "end" },
    { head: ["Tape,", flat.unit], width: 22 },
  ];
}

function isImperial(job: FactsJob): boolean {
  return job.units === "imperial";
}

/** The roof for the key plans, kept at the first card. */
interface Roof {
  view: RoofView;
  plan: KeyPlan | null;
}

/** The bytes of panel-cards.pdf. */
export async function writePanelCards(facts: Facts, fonts: FontFiles): Promise<Uint8Array> {
  const book = await openBook(facts, fonts, "panel cards", "cloth");
  flowWeldingFirst(book);
  const view = viewRoof(facts);
  const roof: Roof = { view, plan: null };
  for (const panel of facts.panels ?? []) drawCard(book, roof, panel);
  drawAssemblyMap(book, view);
  flowAssemblyOrder(book);
  return closeBook(book);
}

function lapOf(facts: Facts, panel: FactsPanel, index: number): string {
  const side = panel.sides[index];
  if (side.kind !== "seam") return "–";
  const seam = facts.seams?.find((s) => s.id === side.id);
  if (!seam) return "?";
  return seam.upper === panel.id ? "on top" : "below";
}

/** A set-back reads as such: cloth ends before the line. */
function allowanceText(job: FactsJob, mm: number): string {
  const { flat } = paperUnits(job);
  return mm < 0 ? `set back ${flat.of(-mm)}` : flat.of(mm);
}

/** A length that a tape can reach, or a dash. */
function reach(job: FactsJob, length: number | null): string {
  return length === null ? "–" : paperUnits(job).flat.of(length);
}

function sideRows(facts: Facts, panel: FactsPanel, measures: PanelMeasures): string[][] {
  const { job } = facts;
  const { flat, span } = paperUnits(job);
  return panel.sides.map((s, i) => [
    `${i + 1}`,
    s.id,
    sideMeets(facts, panel, i),
    flat.of(s.lengthFlat),
    reach(job, measures.sides[i].edge),
    reach(job, measures.sides[i].chord),
    span.of(s.lengthErected),
    allowanceText(job, s.allowance),
    lapOf(facts, panel, i),
    "",
  ]);
}

function checkRows(job: FactsJob, measures: PanelMeasures): string[][] {
  const { flat } = paperUnits(job);
  const diagonals = measures.diagonals.map((d) => [
    `${d.from.name} to ${d.to.name}`,
    flat.of(d.length),
    reach(job, d.cutLength),
    "",
  ]);
  const widths = measures.widths.map((w) => [
    `${w.name} at ${flat.of(w.station)}`,
    flat.of(w.netWidth),
    flat.of(w.cutWidth),
    "",
  ]);
  return [...diagonals, ...widths, ["Tolerance ±", "", "", ""]];
}

/** Words above the figure, each a paragraph. */
/** A compensation in words: what it makes of a metre, and how much of it does not spring back. */
function tellTaken(panel: FactsPanel, way: "warp" | "weft"): string {
  const e = panel.compensation[way];
  const permanent = panel.permanent[way];
  const kept = Math.abs(permanent) > 1e-9 ? `, ${decimal(100 * permanent, 2)} % of it permanent` : "";
  return `${way} ${decimal(100 * e, 2)} %: 1000 on the form are cut ${decimal(1000 / (1 + e), 2)}${kept}`;
}

function headTexts(facts: Facts, panel: FactsPanel, measures: PanelMeasures, scale: number): string[] {
  const { flat, span, area, mass: weights } = paperUnits(facts.job);
  const place = placesOf(facts).get(panel.id);
  const mass = massOf(facts, panel);
  const cut = boxOf(panel.cut);
  const [start, end] = place?.rotation === 180 ? [-cut.max[0], -cut.min[0]] : [cut.min[0], cut.max[0]];
  const lie = place
    ? `roll ${place.roll} from ${flat.of(place.x + start)} to ${flat.whole(place.x + end)}, turned ${place.rotation}°`
    : "not yet on a roll";
  const back = panel.decompensated.map(
    (d) => `along side ${d.side + 1} (${panel.sides[d.side]?.id ?? "?"}), fading over ${span.whole(d.fade)}`,
  );
  const found = facts.findings.filter((f) => [f.where].flat().includes(panel.id));
  const codes = [...new Set(found.map((f) => `${f.code} (${f.level})`))];
  const weight = mass === null ? "" : `, ${weights.whole(mass)}`;
  const stations = measures.start === "" ? "" : ` Widths: from ${measures.start}.`;
  return [
    `Scale 1:${scale}, outer face up, warp along the arrow. Fabric ${panel.fabric}, batch ${panel.batch ?? "not given"}, ${lie}. Cut area ${area.whole(panel.area.cut)}${weight}.`,
    `Thick: cut. Dashed: net. Ticks: match marks. Side n begins at Cn. Edge, chord: along and straight between ringed cut corners.${stations}`,
    `The flat is compensated (${(["warp", "weft"] as const).map((way) => tellTaken(panel, way)).join(", ")}${back.length > 0 ? `; taken back ${back.join("; ")}` : ""}): do not compensate again.`,
    ...(codes.length > 0 ? [`See the findings sheets for this panel: ${codes.join(", ")}.`] : []),
  ];
}

/** Lines of the head; a list of findings that grows too long is cut off, the sheets it names hold it whole. */
function headLines(book: Book, texts: readonly string[], width: number): string[] {
  return texts.flatMap((text, i) =>
    i < 3 ? wrapText(text, book.regular, SMALL, width) : [fitText(text, book.regular, SMALL, width)],
  );
}

function drawCard(book: Book, roof: Roof, panel: FactsPanel): void {
  const { facts } = book;
  const sheet = addSheet(book, `Panel card ${panel.id}`);
  const measures = measurePanel(panel);
  const sides: CardTable = { columns: sideColumns(facts.job), rows: sideRows(facts, panel, measures) };
  const checks: CardTable = { columns: checkColumns(facts.job), rows: checkRows(facts.job, measures) };
  // Feet and inches find no room beside each other: the checks then stand in two halves below the sides.
  const below = isImperial(facts.job);
  const width = sheet.right - sheet.left;
  let lines = headLines(book, headTexts(facts, panel, measures, 1000), width);
  const headBottom = sheet.top - lines.length * PITCH - 1;
  const checkHeight = tableHeight(checks.columns, below ? Math.ceil(checks.rows.length / 2) : checks.rows.length);
  const figureOf = (count: number): BoxArea => {
    const sideHeight = tableHeight(sides.columns, count);
    const tables = below ? sideHeight + 2 + checkHeight : Math.max(sideHeight, checkHeight);
    const y = sheet.bottom + FOOT + tables + 2;
    return { x: sheet.left, y, width, height: Math.max(headBottom - y, LEAST_FIGURE / 2) };
  };
  // All sides on one card are worth a smaller figure.
  const least = Math.min(below ? 0.7 * LEAST_FIGURE : LEAST_FIGURE, figureHeight(panel, width));
  let shown = sides.rows.length;
  // The table beside it is as high anyway: fewer rows than its rows would gain nothing.
  while (shown > (below ? 1 : checks.rows.length) && figureOf(shown).height < least) shown--;
  const box = figureOf(shown);
  const scale = cardScale(panel, box);
  // The words with the true scale are never longer than with the widest number.
  lines = headLines(book, headTexts(facts, panel, measures, scale), width);
  lines.forEach((text, i) => {
    drawText(sheet.page, text, { x: sheet.left, y: sheet.top - PITCH * (i + 1) + 1, size: SMALL, font: book.regular });
  });
  drawPanelFigure({ book, sheet, panel, measures, box, scale });
  const top = box.y - 2;
  const area = { left: sheet.left, width: below ? width : width * 0.7, y: top };
  const under = drawTable(book, sheet, sides.columns, sides.rows.slice(0, shown), area) - 2;
  if (below) drawHalves(book, sheet, checks.columns, checks.rows, under);
  else {
    const right = { left: sheet.left + width * 0.71, width: width * 0.29, y: top };
    drawTable(book, sheet, checks.columns, checks.rows, right);
  }
  drawFoot(book, sheet, roof, panel);
  drawMoreSides(book, panel, sides.columns, sides.rows.slice(shown));
}

interface CardTable {
  columns: readonly Column[];
  rows: string[][];
}

/** Sides that found no room on the card. */
function drawMoreSides(book: Book, panel: FactsPanel, columns: readonly Column[], rows: string[][]): void {
  let left = rows;
  while (left.length > 0) {
    const sheet = addSheet(book, `Panel card ${panel.id}, more sides`);
    let fits = left.length;
    while (tableHeight(columns, fits) > sheet.top - sheet.bottom) fits--;
    const area = { left: sheet.left, width: sheet.right - sheet.left, y: sheet.top };
    drawTable(book, sheet, columns, left.slice(0, fits), area);
    left = left.slice(fits);
  }
}

/** Boxes to tick, the weld trial of the day, and where the panel sits in the roof. */
function drawFoot(book: Book, sheet: Sheet, roof: Roof, panel: FactsPanel): void {
  const { page } = sheet;
  const width = sheet.right - sheet.left;
  const top = sheet.bottom + FOOT - 2;
  const line = (text: string, x: number, y: number, end: number) => {
    drawText(page, text, { x, y, size: SMALL, font: book.regular });
    drawRun(
      page,
      [
        [x + 19, y - 0.6],
        [end, y - 0.6],
      ],
      { width: 0.13 },
    );
  };
  ["Cut", "Marked", "Measured", "Welded"].forEach((step, i) => {
    const y = top - 4 - 5.9 * i;
    drawBox(page, { x: sheet.left, y: y - 0.6, width: 3.6, height: 3.6 }, { width: 0.3 });
    drawText(page, step, { x: sheet.left + 5.5, y, size: SMALL, font: book.bold });
    line("by, date", sheet.left + 25, y, sheet.left + width * 0.31);
  });
  const x = sheet.left + width * 0.34;
  drawText(page, "Weld trial of the day (fill in before welding)", { x, y: top - 4, size: SMALL, font: book.bold });
  ["Machine", "Settings", "Pull test", "By, date"].forEach((what, i) => {
    line(what, x, top - 9 - 5 * i, sheet.left + width * 0.66);
  });
  roof.plan ??= keepKeyPlan(book, roof.view, sheet);
  drawKeyPlan(book, sheet, roof.view, panel, roof.plan);
}

/** The roof drawn once for all cards, at a place of its own on each. */
interface KeyPlan {
  box: BoxArea;
  place: (p: Vec2) => Vec2;
  lines: Stencil;
}

/** Sheets of a book are all alike, so the plan stands on the same place of every card. */
function keepKeyPlan(book: Book, view: RoofView, sheet: Sheet): KeyPlan {
  const width = sheet.right - sheet.left;
  const box = { x: sheet.left + width * 0.69, y: sheet.bottom, width: width * 0.31, height: FOOT - 2 };
  const place = fitRoof(view, { x: box.x + 2, y: box.y + 1, width: box.width - 4, height: box.height - 7 });
  const lines = keepStencil(book.doc, box, [
    ...view.panels.flatMap((p) =>
      p.outlines.map((o) => ({ points: o.map(place), options: { width: 0.15, closed: true } })),
    ),
    ...view.seams.map((s) => ({ points: s.run.map(place), options: { width: 0.35 } })),
  ]);
  return { box, place, lines };
}

function drawKeyPlan(book: Book, sheet: Sheet, view: RoofView, panel: FactsPanel, plan: KeyPlan): void {
  const { box, place } = plan;
  const title = { x: box.x, y: box.y + box.height - 4, size: SMALL, font: book.regular };
  drawText(sheet.page, `Key plan, ${view.name}`, title);
  for (const outline of view.panels.find((p) => p.id === panel.id)?.outlines ?? []) {
    drawRun(sheet.page, outline.map(place), { width: 0.15, closed: true, fill: 0.55 });
  }
  drawStencil(sheet.page, plan.lines);
}
