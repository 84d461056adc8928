// Roll sheets: the cloth list for the store and the cautions, which are read before the first cut; then each roll as it is laid, its
// pieces numbered in the order of cutting, a list to tick.
import type { Facts, Vec2 } from "../../../records/facts.ts";
import type { NestedRoll } from "../../../records/roll.ts";
import { type PlacedCloth, placedInOrder, type TableBite, tableBites } from "../../drawing/placedCloth.ts";
import { cautionsOf } from "../../words/cautions.ts";
import { decimal } from "../../words/decimal.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import { addSheet, type Book, closeBook, drawParagraph, type FontFiles, openBook } from "../layout/book.ts";
import { flowCautionsInPlace } from "../layout/cautionBlock.ts";
import {
  type Column,
  drawTable,
  type Flow,
  flowGapInPlace,
  flowTableInPlace,
  flowTextInPlace,
  openFlow,
  tableHeight,
} from "../layout/table.ts";
import { drawRollFigure } from "./rollFigure.ts";

/** Size of tables, pt. */
const TABLE = 10;
/** Share of the sheet a list of pieces may take under the figure. */
const BELOW = 0.45;

/** The bytes of roll-sheets.pdf. */
export async function writeRollSheets(facts: Facts, fonts: FontFiles): Promise<Uint8Array> {
  const book = await openBook(facts, fonts, "roll sheets", "cloth");
  flowClothList(book);
  for (const roll of facts.rolls ?? []) drawRoll(book, roll);
  return closeBook(book);
}

function drawRoll(book: Book, roll: NestedRoll): void {
  const { facts } = book;
  const { flat } = paperUnits(facts.job);
  const sheet = addSheet(book, `Roll ${roll.id}`);
  const cloth = placedInOrder(facts, roll);
  const bites = tableBites(facts, roll);
  const feeds = roll.feeds ?? [];
  const table =
    bites.length > 0
      ? ` The table takes ${flat.whole(roll.bite ?? 0)} at once: ${feeds.length} feeds, until it begins at ${feeds.map((x) => flat.of(x)).join(", ")} ${flat.unit} from the start of the roll (dashed: feed 2, 3 …).`
      : "";
  const over = (100 * (roll.used - roll.lowerBound)) / Math.max(roll.lowerBound, 1e-9);
  const bound = ` No nest of these pieces needs less than ${flat.whole(roll.lowerBound)} of it (${decimal(over, 1)} % over).`;
  const turned = roll.outerFace === "down" ? "This roll shows its inner face: turn the cloth over lengthwise. " : "";
  const left = roll.remnant === undefined ? "" : ` Left on the roll: ${flat.whole(roll.remnant)}.`;
  const words = [
    `Fabric ${roll.fabric}, batch ${roll.batch ?? "not given"}. Width ${flat.whole(roll.width)}, usable ${flat.whole(roll.usableWidth)}, used ${flat.whole(roll.used)} of ${flat.whole(roll.length)}: ${decimal(100 * roll.utilisation, 0)} % of the cloth used.${bound}${left}${moneyWords(roll.cost, roll.currency)} ${cloth.length} pieces, ${roll.gap > 0 ? `at least ${flat.whole(roll.gap)} apart` : "edges shared where they touch and then cut once"}.${table}`,
    `${turned}OUTER FACE UP, warp along the roll, start of the roll at the left. Numbers in the order of cutting, in their pieces or at the end of a line that begins on them.${roll.flaws.length > 0 ? " Crossed: flaw." : ""} The cut file rules, this figure does not: no measure is taken from it.`,
  ];
  let y = sheet.top;
  for (const text of words) y = drawParagraph(book, sheet, text, y);
  // A short list of pieces stands below the figure, a long one on sheets of its own.
  const list = pieceTable(book, cloth, bites);
  const height = tableHeight(list.columns, list.rows.length, TABLE);
  const below = height < BELOW * (y - sheet.bottom) ? height + 3 : 0;
  const width = sheet.right - sheet.left;
  const box = { x: sheet.left, y: sheet.bottom + below, width, height: y - sheet.bottom - below - 3 };
  drawRollFigure(book, sheet, roll, cloth, box);
  if (below > 0) {
    drawTable(book, sheet, list.columns, list.rows, { left: sheet.left, width, y: sheet.bottom + height, size: TABLE });
  } else {
    const flow = openFlow(book, `Roll ${roll.id}: pieces in the order of cutting`);
    flowTableInPlace(flow, list.columns, list.rows, { size: TABLE });
  }
}

function pieceTable(
  book: Book,
  cloth: readonly PlacedCloth[],
  bites: readonly TableBite[],
): { columns: readonly Column[]; rows: string[][] } {
  const { flat, area } = paperUnits(book.facts.job);
  // Feet, inches and sixteenths take more than millimetres; what is left goes to the words.
  const place = book.facts.job.units === "imperial" ? 35 : 26;
  const columns: readonly Column[] = [
    { head: ["No."], width: 14, bold: true },
    ...(bites.length > 0 ? [{ head: ["Table", "length"], width: 20 }] : []),
    { head: ["Piece"], width: 46, bold: true },
    { head: ["What"], width: (bites.length > 0 ? 94 : 100) - 2 * place },
    { head: ["From,", flat.unit], width: place, align: "end" },
    { head: ["To,", flat.unit], width: place, align: "end" },
    { head: ["Turned"], width: 20, align: "end" },
    { head: ["Cut area,", area.unit], width: 24, align: "end" },
    { head: ["Cut"], width: 15 },
    { head: ["Marked"], width: 22 },
    { head: ["By, date"], width: 30 },
  ];
  const biteOf = (id: string) => bites.findIndex((b) => b.roll.placements.some((p) => p.panel === id)) + 1;
  const rows = cloth.map((c, n) => [
    `${n + 1}`,
    ...(bites.length > 0 ? [`${biteOf(c.p.panel)}`] : []),
    c.p.panel,
    c.panel ? "panel" : `${c.piece?.kind ?? ""} for ${c.piece?.for ?? ""}`,
    flat.of(c.start),
    flat.of(c.end),
    `${c.p.rotation}°`,
    area.of(Math.abs(ringArea(c.cut)) / 1e6),
    "",
    "",
    "",
  ]);
  return { columns, rows };
}

function ringArea(ring: readonly Vec2[]): number {
  return ring.reduce((sum, p, i) => {
    const q = ring[(i + 1) % ring.length];
    return sum + (p[0] * q[1] - q[0] * p[1]) / 2;
  }, 0);
}

/** What cloth costs, where a price is given. */
function moneyWords(cost: number | null | undefined, currency: string | null | undefined): string {
  if (cost === null || cost === undefined) return "";
  return ` Its cloth costs ${decimal(cost, 2)}${currency ? ` ${currency}` : ""}.`;
}

/** All rolls together, against what no nest can do without. */
function totalWords(facts: Facts): string {
  const { cloth } = facts;
  if (!cloth || !(cloth.bound > 0)) return "";
  const { span, area } = paperUnits(facts.job);
  const over = decimal(100 * (cloth.used / cloth.bound - 1), 1);
  return `All rolls: ${area.of(cloth.area)} ${area.unit} of pieces on ${area.of(cloth.taken)} ${area.unit} of cloth, ${decimal(100 * cloth.utilisation, 1)} % used; ${span.of(cloth.used)} ${span.unit} taken off, and no nest on the widest roll needs less than ${span.of(cloth.bound)} ${span.unit} (${over} % over).${moneyWords(cloth.cost, cloth.currency)}`;
}

/** What the store lays out: every roll, then what each fabric comes to. */
function flowClothList(book: Book): void {
  const { facts } = book;
  const { span, flat, area, mass } = paperUnits(facts.job);
  const rolls = facts.rolls ?? [];
  const flow: Flow = openFlow(book, "Cloth list");
  const columns: readonly Column[] = [
    { head: ["Roll"], width: 36, bold: true },
    { head: ["Fabric"], width: 46 },
    { head: ["Batch"], width: 34 },
    { head: ["Width,", flat.unit], width: 33, align: "end" },
    { head: ["Used,", span.unit], width: 36, align: "end", bold: true },
    { head: ["On the roll,", span.unit], width: 36, align: "end" },
    { head: ["Left over,", span.unit], width: 34, align: "end" },
    { head: ["Pieces"], width: 22, align: "end" },
    { head: ["Cloth", "used"], width: 20, align: "end" },
    { head: ["Given out"], width: 36 },
  ];
  const rows = rolls.map((r) => [
    r.id,
    r.fabric,
    r.batch ?? "not given",
    flat.of(r.width),
    span.of(r.used / 1000),
    span.of(r.length / 1000),
    span.of((r.remnant ?? Math.max(0, r.length - r.used)) / 1000),
    `${r.placements.length}`,
    `${decimal(100 * r.utilisation, 0)} %`,
    "",
  ]);
  flowTableInPlace(flow, columns, rows, { size: TABLE });
  flowGapInPlace(flow, 4);
  for (const fabric of [...new Set(rolls.map((r) => r.fabric))]) {
    const own = rolls.filter((r) => r.fabric === fabric);
    const cloth = own.reduce((s, r) => s + r.used * r.width, 0) / 1e6;
    const weight = facts.fabrics[fabric]?.mass;
    const length = own.reduce((s, r) => s + r.used, 0) / 1000;
    const kilos = weight === undefined ? "" : `, ${mass.whole(weight * cloth)}`;
    const words = `${fabric}: ${span.whole(length)} of cloth, ${area.whole(cloth)}${kilos}, from ${own.length} ${own.length === 1 ? "roll" : "rolls"}. Leader, trim at the start, test pieces and waste of the table come on top.`;
    flowTextInPlace(flow, words, { size: TABLE });
  }
  const total = totalWords(facts);
  if (total !== "") flowTextInPlace(flow, total, { size: TABLE });
  flowGapInPlace(flow, 4);
  flowCautionsInPlace(flow, cautionsOf(facts, "rolls"));
}
