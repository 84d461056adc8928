// Panel cards: one panel a card, everything a welder needs to check it before it is joined, on paper that is filled in by hand.
// Then the assembly map and the seam schedule. Numbers come from the facts; nothing is judged here.
import type { Facts, FactsJob, FactsPanel } from "../../../records/facts.ts";
import { batchOf } from "../../drawing/clothBatch.ts";
import { boxOf } from "../../drawing/flatGeometry.ts";
import { measurePanel, nearestSide, type PanelMeasures } from "../../drawing/panelMeasures.ts";
import { massOf, placesOf } from "../../tables/clothTables.ts";
import { orderWelds } from "../../tables/weldOrder.ts";
import { decimal } from "../../words/decimal.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import { addSheet, type Book, closeBook, type FontFiles, openBook } from "../layout/book.ts";
import { type BoxArea, drawText, fitText, PITCH, SMALL, wrapText } from "../layout/pen.ts";
import { viewRoof } from "../layout/roofView.ts";
import { type Column, drawHalves, drawTable, rowsShortened, tableHeight } from "../layout/table.ts";
import { drawAssemblyMap } from "./assemblyMap.ts";
import { flowAssemblyOrder } from "./assemblyOrder.ts";
import { drawFoot, FOOT, type PanelLaps, type Roof } from "./cardFoot.ts";
import { cardScale, drawPanelFigure, figureHeight, sideMeets } from "./panelFigure.ts";
import { flowWeldingFirst } from "./weldingFirst.ts";

/** The figure never gets less of the sheet's height than this, mm, if it needs it; more sides go to a second sheet. */
const LEAST_FIGURE = 52;

/** Feet, inches and sixteenths take more room than millimetres: the columns of lengths are wider then. */
function sideColumns(job: FactsJob): readonly Column[] {
  const { flat, span } = paperUnits(job);
  const wide = isImperial(job) ? 25 : 0;
  return [
    { head: ["No."], width: 9.5 },
    { head: ["Seam", "or edge"], width: wide ? 20 : 22 },
    { head: ["Meets"], width: wide ? 20 : 20.7 },
    { head: ["Net,", flat.unit], width: wide ? 27 : 15, align: "end", bold: true },
    { head: ["Edge,", flat.unit], width: wide || 15, align: "end" },
    { head: ["Chord,", flat.unit], width: wide || 15.5, align: "end" },
    { head: ["On the", `form, ${span.unit}`], width: wide || 18.5, align: "end" },
    { head: ["Allow-", `ance, ${flat.unit}`], width: wide ? 30 : 22, align: "end" },
    { head: ["Lap"], width: 14 },
    { head: ["Weld", "order"], width: 13, align: "end" },
    { head: ["Tape", "before"], width: wide ? 18 : 15 },
    { head: ["Tape", "after"], width: wide ? 18 : 14 },
  ];
}

function checkColumns(job: FactsJob): readonly Column[] {
  const { flat } = paperUnits(job);
  const wide = isImperial(job) ? 25 : 0;
  return [
    { head: ["Diagonals,", "widths"], width: wide ? 41 : 26 },
    { head: ["Net,", flat.unit], width: wide || 15, align: "end", bold: true },
    { head: ["Cut,", flat.unit], width: wide || 15, align: "end" },
    { head: ["Tape", "before"], width: wide ? 22 : 16 },
  ];
}

function isImperial(job: FactsJob): boolean {
  return job.units === "imperial";
}

/** The bytes of panel-cards.pdf. */
export async function writePanelCards(facts: Facts, fonts: FontFiles): Promise<Uint8Array> {
  const book = await openBook(facts, fonts, "panel cards", "cloth");
  flowWeldingFirst(book);
  const view = viewRoof(facts);
  const roof: Roof = { view, plan: null };
  const orders = weldOrders(facts);
  for (const panel of facts.panels ?? []) drawCard(book, roof, panel, orders);
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

/** Seams with their place in the order of welding. */
function weldOrders(facts: Facts): Map<string, string> {
  return new Map(orderWelds(facts).steps.flatMap((step, k) => step.seams.map((id) => [id, `${k + 1}`] as const)));
}

function lapsOf(facts: Facts, panel: FactsPanel): PanelLaps {
  const at = (lap: string) => panel.sides.flatMap((s, i) => (lapOf(facts, panel, i) === lap ? [s.id] : []));
  return { top: at("on top"), below: at("below") };
}

/** How many slits the flap of each side gets; they are on the cut layer, told here because they are easily overlooked. */
function slitWords(panel: FactsPanel): string {
  const slits = panel.marks.filter((m) => m.kind === "slit" && m.points && m.points.length > 1);
  if (slits.length === 0) return "";
  const counts = new Map<number, number>();
  for (const { points } of slits) {
    const side = nearestSide(panel, (points ?? [])[0]);
    counts.set(side, (counts.get(side) ?? 0) + 1);
  }
  const told = [...counts].sort((a, b) => a[0] - b[0]).map(([side, n]) => `${n} in the flap of side ${side + 1}`);
  return ` Slits: ${told.join(", ")}.`;
}

function sideRows(
  facts: Facts,
  panel: FactsPanel,
  measures: PanelMeasures,
  orders: ReadonlyMap<string, string>,
): string[][] {
  const { job } = facts;
  const { flat, span } = paperUnits(job);
  return panel.sides.map((s, i) => [
    `${i + 1}`,
    s.id,
    sideMeets(facts, panel, i).replace(/ edge$|^edge /, ""),
    flat.of(s.lengthFlat),
    reach(job, measures.sides[i].edge),
    reach(job, measures.sides[i].chord),
    span.of(s.lengthErected),
    allowanceText(job, s.allowance),
    lapOf(facts, panel, i),
    orders.get(s.id) ?? "–",
    "",
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
  const weight = mass === null ? "" : `, ${weights.whole(mass)}`;
  const stations = measures.start === "" ? "" : ` Widths: from ${measures.start}.`;
  return [
    `Scale 1:${scale}, outer face up, warp along the arrow. Fabric ${panel.fabric}, batch ${batchOf(facts, panel) ?? "not given"}, ${lie}. Cut area ${area.whole(panel.area.cut)}${weight}.`,
    `Thick: cut line. Dashed: net line. Ticks: match marks. Square: corner of the net line; ring: of the cut line. Side n begins at Cn. Tape edge and chord from ring to ring before welding, net after it.${stations}${slitWords(panel)}`,
    `The flat is compensated (${(["warp", "weft"] as const).map((way) => tellTaken(panel, way)).join(", ")}${back.length > 0 ? `; taken back ${back.join("; ")}` : ""}): do not compensate again.`,
  ];
}

/** What somebody must decide about this panel; the words of notes, which all panels share, stand on the findings sheets alone. */
function foundText(facts: Facts, panel: FactsPanel): string {
  const found = facts.findings.filter((f) => f.level !== "note" && [f.where].flat().includes(panel.id));
  const codes = [...new Set(found.map((f) => `${f.code} (${f.level})`))];
  return codes.length > 0 ? `See the findings sheets for this panel: ${codes.join(", ")}.` : "";
}

const KEY_LINES = 3;

/** Names that the table of sides has to shorten, whole: as many as three lines hold. */
function keyLines(book: Book, shortened: readonly string[][], width: number): string[] {
  if (shortened.length === 0) return [];
  for (let n = shortened.length; n > 0; n--) {
    const more = n < shortened.length ? ` and ${shortened.length - n} more on the assembly map` : "";
    const names = shortened.slice(0, n).map((row) => `side ${row[0]} ${row[1]}`);
    const lines = wrapText(`Names in full: ${names.join(", ")}${more}.`, book.regular, SMALL, width);
    if (lines.length <= KEY_LINES) return lines;
  }
  return [];
}

function drawCard(book: Book, roof: Roof, panel: FactsPanel, orders: ReadonlyMap<string, string>): void {
  const { facts } = book;
  const sheet = addSheet(book, `Panel card ${panel.id}`);
  const measures = measurePanel(panel);
  const sides: CardTable = { columns: sideColumns(facts.job), rows: sideRows(facts, panel, measures, orders) };
  const checks: CardTable = { columns: checkColumns(facts.job), rows: checkRows(facts.job, measures) };
  // Feet and inches find no room beside each other: the checks then stand in two halves below the sides.
  const below = isImperial(facts.job);
  const width = sheet.right - sheet.left;
  const sideArea = { left: sheet.left, width: below ? width : width * 0.735 };
  const key = keyLines(book, rowsShortened(book, sides.columns, sides.rows, { ...sideArea, y: 0 }, 1), width);
  // A list of findings that grows too long is cut off, the sheets it names hold it whole.
  const found = foundText(facts, panel);
  const foot = [...key, ...(found === "" ? [] : [fitText(found, book.regular, SMALL, width)])];
  const head = (scale: number) =>
    headTexts(facts, panel, measures, scale).flatMap((text) => wrapText(text, book.regular, SMALL, width));
  let lines = [...head(1000), ...foot];
  const headBottom = sheet.top - lines.length * PITCH - 1;
  const checkHeight = tableHeight(checks.columns, below ? Math.ceil(checks.rows.length / 2) : checks.rows.length);
  const figureOf = (count: number): BoxArea => {
    const sideHeight = tableHeight(sides.columns, count);
    const tables = below ? sideHeight + 2 + checkHeight : Math.max(sideHeight, checkHeight);
    const y = sheet.bottom + FOOT + tables + 2;
    return { x: sheet.left, y, width, height: Math.max(headBottom - y, LEAST_FIGURE / 2) };
  };
  // All sides on one card are worth a smaller figure.
  const least = Math.min(below ? 0.55 * LEAST_FIGURE : LEAST_FIGURE, figureHeight(panel, width));
  let shown = sides.rows.length;
  // The table beside it is as high anyway: fewer rows than its rows would gain nothing.
  while (shown > (below ? 1 : checks.rows.length) && figureOf(shown).height < least) shown--;
  const box = figureOf(shown);
  const scale = cardScale(panel, box);
  // The words with the true scale are never longer than with the widest number.
  lines = [...head(scale), ...foot];
  lines.forEach((text, i) => {
    drawText(sheet.page, text, { x: sheet.left, y: sheet.top - PITCH * (i + 1) + 1, size: SMALL, font: book.regular });
  });
  drawPanelFigure({ book, sheet, panel, measures, box, scale });
  const top = box.y - 2;
  const area = { ...sideArea, y: top };
  const under = drawTable(book, sheet, sides.columns, sides.rows.slice(0, shown), area) - 2;
  if (below) drawHalves(book, sheet, checks.columns, checks.rows, under);
  else {
    const right = { left: sheet.left + width * 0.745, width: width * 0.255, y: top };
    drawTable(book, sheet, checks.columns, checks.rows, right);
  }
  drawFoot(book, sheet, roof, panel, lapsOf(facts, panel));
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
