// A roll as it is laid, in rows on as many sheets as it takes for every piece to carry its number inside its own outline, or beside it
// at the end of a line: a number that stands on another piece would have the wrong one cut, marked and welded.
import type { Vec2 } from "../../../records/facts.ts";
import type { NestedRoll } from "../../../records/roll.ts";
import { insidePlaces, insidePoint } from "../../drawing/flatGeometry.ts";
import type { PlacedCloth } from "../../drawing/placedCloth.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import { addSheet, type Book, type Sheet } from "../layout/book.ts";
import { type LabelField, leaderStart, setNameInPlace } from "../layout/labelField.ts";
import { type BoxArea, drawBox, drawClipped, drawRing, drawRun, drawText, SMALL } from "../layout/pen.ts";

/** Rows on one sheet and sheets of one roll at most, and the gap between rows, mm. */
const MOST_ROWS = 6;
const MOST_SHEETS = 4;
const ROW_GAP = 9;
/** So many pieces may have their numbers beside them without a larger figure. */
const BESIDE = 3;
/** Room a number asks for across its piece, mm. */
const NUMBER_ROOM = 3.6;
/** Height of figures alone, share of the height of letters with their tails. */
const FIGURES = 0.75;

interface Rows {
  /** Rows in all, and on one sheet. */
  count: number;
  sheet: number;
  /** mm of the sheet to mm of the roll */
  scale: number;
}

/**
 * The fewest sheets at which all pieces but a few hold their numbers, those being numbered beside; where none does, the largest figure
 * on the most sheets.
 */
function chooseRows(roll: NestedRoll, cloth: readonly PlacedCloth[], box: BoxArea): Rows {
  const used = Math.max(roll.used, 1);
  const rooms = cloth.map((c) => 2 * insidePoint(c.cut).clear).sort((a, b) => a - b);
  const narrowest = rooms[Math.min(BESIDE, rooms.length - 1)] ?? roll.width;
  const wanted = NUMBER_ROOM / Math.max(narrowest, 1e-9);
  let best: Rows = { count: 1, sheet: 1, scale: 0 };
  for (let sheets = 1; sheets <= MOST_SHEETS; sheets++) {
    for (let sheet = 1; sheet <= MOST_ROWS; sheet++) {
      for (let count = (sheets - 1) * sheet + 1; count <= sheets * sheet; count++) {
        const scale = Math.min((count * box.width) / used, (box.height / sheet - ROW_GAP) / roll.width);
        if (scale > best.scale) best = { count, sheet, scale };
      }
    }
    if (best.scale >= wanted) return best;
  }
  return best;
}

/** The roll drawn into the box of its first sheet and of sheets after it. */
export function drawRollFigure(
  book: Book,
  first: Sheet,
  roll: NestedRoll,
  cloth: readonly PlacedCloth[],
  box: BoxArea,
): void {
  const rows = chooseRows(roll, cloth, box);
  let sheet = first;
  for (let k = 0; k < rows.count; k++) {
    const onSheet = k % rows.sheet;
    if (k > 0 && onSheet === 0) sheet = addSheet(book, `Roll ${roll.id} (continued)`);
    const top = sheet === first ? box.y + box.height : sheet.top;
    drawRow(book, sheet, roll, cloth, {
      from: (k * roll.used) / rows.count,
      to: ((k + 1) * roll.used) / rows.count,
      scale: rows.scale,
      left: box.x,
      base: top - (onSheet + 1) * (rows.scale * roll.width + ROW_GAP) + 4,
    });
  }
}

interface Row {
  /** mm along the roll */
  from: number;
  to: number;
  scale: number;
  /** mm on the sheet: lower left corner */
  left: number;
  base: number;
}

function drawRow(book: Book, sheet: Sheet, roll: NestedRoll, cloth: readonly PlacedCloth[], row: Row): void {
  const { from, to, scale, left, base } = row;
  const selvedge = (roll.width - roll.usableWidth) / 2;
  const place = ([x, y]: Vec2): Vec2 => [left + scale * (x - from), base + scale * (y + selvedge)];
  const frame = { x: left, y: base, width: scale * (to - from), height: scale * roll.width };
  drawBox(sheet.page, frame, { width: 0.3 });
  const here = cloth.map((c, n) => ({ ...c, n })).filter((c) => c.end > from && c.start < to);
  drawClipped(sheet.page, frame, () => {
    for (const flaw of roll.flaws) {
      const [a, b] = [place([flaw.x, flaw.y]), place([flaw.x + flaw.length, flaw.y + flaw.width])];
      drawBox(sheet.page, { x: a[0], y: a[1], width: b[0] - a[0], height: b[1] - a[1] }, { width: 0.25 });
      drawRun(sheet.page, [a, b], { width: 0.25 });
    }
    for (const c of here) drawRun(sheet.page, c.cut.map(place), { width: 0.3, closed: true });
  });
  drawScale(book, sheet, roll, row, frame);
  const outlines = here.map((c) => c.cut.map(place));
  const field: LabelField = { within: frame, outlines, taken: [] };
  // A piece cut by the end of a row is named where its middle lies.
  const named = here.filter((c) => {
    const [x] = insidePoint(c.cut).at;
    return x >= from && x < to;
  });
  // Those with least room come first, so that no longer name takes their place.
  const byRoom = named.map((c) => ({ c, clear: insidePoint(c.cut).clear })).sort((a, b) => a.clear - b.clear);
  for (const { c } of byRoom) {
    const inside = insidePlaces(c.cut).map(place);
    const number = `${c.n + 1}`;
    if (setNameInPlace(book, sheet, field, `${number}: ${c.p.panel}`, inside)) continue;
    if (setNameInPlace(book, sheet, field, number, inside, { height: FIGURES })) continue;
    drawBeside(book, sheet, field, number, place(insidePoint(c.cut).at));
  }
}

/** A number that found no room in its piece: beside it, at the end of a line that begins in a ring on the piece. */
function drawBeside(book: Book, sheet: Sheet, field: LabelField, number: string, at: Vec2): void {
  const around = [5, 8, 11, 15, 20, 26].flatMap((r) =>
    Array.from({ length: 16 }, (_, k): Vec2 => {
      const a = (k * Math.PI) / 8;
      return [at[0] + r * Math.cos(a), at[1] + r * Math.sin(a)];
    }),
  );
  const before = field.taken.length;
  const found =
    setNameInPlace(book, sheet, field, number, around, { height: FIGURES }) ||
    setNameInPlace(book, sheet, { ...field, outlines: [] }, number, around, { height: FIGURES });
  if (!found) return;
  drawRun(sheet.page, [leaderStart(field.taken[before], at), at], { width: 0.13 });
  drawRing(sheet.page, at, 0.5, { width: 0.2, fill: 1 });
}

/** Where the row begins and ends, and where the table is fed on to, below it. */
function drawScale(book: Book, sheet: Sheet, roll: NestedRoll, row: Row, frame: BoxArea): void {
  const { flat } = paperUnits(book.facts.job);
  const y = row.base - 4;
  const field: LabelField = { within: { ...frame, y: y - 2, height: 6 }, outlines: [], taken: [] };
  const ends: [number, "start" | "end"][] = [
    [row.from, "start"],
    [row.to, "end"],
  ];
  for (const [x, align] of ends) {
    const at = align === "start" ? frame.x : frame.x + frame.width;
    const text = flat.whole(x);
    drawText(sheet.page, text, { x: at, y, size: SMALL, font: book.regular, align });
    const width = 2.2 * text.length + 4;
    field.taken.push({ x: align === "start" ? at : at - width, y: y - 2, width, height: 6 });
  }
  (roll.feeds ?? []).forEach((x, k) => {
    if (x <= row.from || x >= row.to) return;
    const at = frame.x + row.scale * (x - row.from);
    const line: Vec2[] = [
      [at, frame.y - 1.5],
      [at, frame.y + frame.height + 1.5],
    ];
    drawRun(sheet.page, line, { width: 0.25, dash: [2, 1] });
    const spots = [0, 6, -6, 12, -12, 18, -18, 26, -26].map((d): Vec2 => [at + d, y + 1.2]);
    setNameInPlace(book, sheet, field, `feed ${k + 1}`, spots);
  });
}
