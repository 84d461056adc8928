// The roof unrolled: every panel flat, outer face up, one below the other in the order of the roof, so that who lays out or welds sees
// which panel comes next and along which seam. Never mirrored; turned by half where its seam would else lie on the far side.
import type { Facts, FactsPanel, Vec2 } from "../../../records/facts.ts";
import { boxOf, insidePoint } from "../../drawing/flatGeometry.ts";
import { panelRow, type RowPanel, seamAbove } from "../../tables/panelOrder.ts";
import { addSheet, type Book, drawParagraph, type Sheet } from "../layout/book.ts";
import { type LabelField, setNameInPlace } from "../layout/labelField.ts";
import { type BoxArea, drawRun } from "../layout/pen.ts";

/** Room between panels for the name of a seam, and least height of a panel for its own, mm. */
const GAP = 5.2;
const LEAST = 4.6;
const MOST_COLUMNS = 8;
const MOST_SHEETS = 8;

interface Grid {
  columns: number;
  rows: number;
  sheets: number;
  /** mm of the sheet to mm of the cloth */
  scale: number;
}

/** The fewest sheets on which the narrowest panel still holds its name; the greatest scale on them. */
function chooseGrid(panels: readonly FactsPanel[], box: BoxArea): Grid {
  const boxes = panels.map((p) => boxOf(p.cut));
  const long = Math.max(...boxes.map((b) => b.max[0] - b.min[0]), 1);
  const wide = Math.max(...boxes.map((b) => b.max[1] - b.min[1]), 1);
  let best: Grid = { columns: 1, rows: 1, sheets: panels.length, scale: 0 };
  for (let sheets = 1; sheets <= MOST_SHEETS; sheets++) {
    for (let columns = 1; columns <= MOST_COLUMNS; columns++) {
      const rows = Math.ceil(panels.length / (columns * sheets));
      const scale = Math.min((box.width / columns - 8) / long, (box.height / rows - GAP) / wide);
      if (scale > best.scale) best = { columns, rows, sheets, scale };
    }
    if (best.scale * wide >= LEAST) return best;
  }
  return best;
}

/** Seams that the row does not show: they join panels that do not follow on each other. */
function otherSeams(facts: Facts, row: readonly RowPanel[]): string[] {
  const shown = new Set(row.map((r) => r.seam));
  return (facts.seams ?? []).flatMap((s) =>
    shown.has(s.id) ? [] : [`${s.id} (${s.sides.map((side) => side.panel).join(", ")})`],
  );
}

const LISTED = 16;

/** The sheets of the unrolled roof. */
export function drawUnrolled(book: Book): void {
  const { facts } = book;
  const row = panelRow(facts);
  if (row.length < 2) return;
  const others = otherSeams(facts, row);
  const more = others.length > LISTED ? ` and ${others.length - LISTED} more` : "";
  const rest = others.length > 0 ? ` Seams not shown: ${others.slice(0, LISTED).join(", ")}${more}.` : "";
  const words = `Every panel flat and outer face up, in the order of the roof: it meets the one above it along the seam named between them; at the head of a column that is the last of the column before. Arrow: warp. Not to scale.${rest}`;
  const open = (paper: string): { sheet: Sheet; box: BoxArea } => {
    const sheet = addSheet(book, paper);
    const top = drawParagraph(book, sheet, words, sheet.top) - 2;
    return {
      sheet,
      box: { x: sheet.left, y: sheet.bottom, width: sheet.right - sheet.left, height: top - sheet.bottom },
    };
  };
  let { sheet, box } = open("Assembly map, unrolled");
  const panels = new Map((facts.panels ?? []).map((p) => [p.id, p]));
  const grid = chooseGrid([...panels.values()], box);
  row.forEach((step, n) => {
    const cell = n % (grid.columns * grid.rows);
    if (n > 0 && cell === 0) ({ sheet, box } = open("Assembly map, unrolled (continued)"));
    const panel = panels.get(step.panel);
    if (!panel) return;
    const [column, line] = [Math.floor(cell / grid.rows), cell % grid.rows];
    const width = box.width / grid.columns;
    const height = box.height / grid.rows;
    const area = { x: box.x + column * width, y: box.y + box.height - (line + 1) * height, width, height };
    drawPanel(book, sheet, panel, { step, next: row[n + 1]?.seam ?? null }, area, grid.scale);
  });
}

/** A panel with the seam to the one before above it; one that begins a row has the seam to the next below it. */
function drawPanel(
  book: Book,
  sheet: Sheet,
  panel: FactsPanel,
  { step, next }: { step: RowPanel; next: string | null },
  area: BoxArea,
  scale: number,
): void {
  const right = step.seam === null ? next === null || !seamAbove(panel, next) : seamAbove(panel, step.seam);
  const turn = right ? 1 : -1;
  const { min, max } = boxOf(panel.cut);
  const middle: Vec2 = [area.x + area.width / 2, area.y + (area.height - GAP) / 2];
  const place = ([x, y]: Vec2): Vec2 => [
    middle[0] + turn * scale * (x - (min[0] + max[0]) / 2),
    middle[1] + turn * scale * (y - (min[1] + max[1]) / 2),
  ];
  const outline = panel.cut.map(place);
  drawRun(sheet.page, outline, { width: 0.35, closed: true });
  const { at } = insidePoint(outline);
  const field: LabelField = { within: area, outlines: [], taken: [] };
  const style = { bold: true, longest: area.width - 8 };
  setNameInPlace(book, sheet, field, panel.id, [at, middle], style);
  const reach = (scale * (max[0] - min[0])) / 2;
  const x = middle[0] + 0.6 * reach;
  const label = field.taken[0];
  if (label === undefined || x - 4 > label.x + label.width) drawArrow(sheet, [x, at[1]], turn);
  if (step.seam === null) return;
  const top: Vec2 = [middle[0], area.y + area.height - GAP / 2];
  setNameInPlace(book, sheet, field, step.seam, [top], { longest: area.width - 4 });
}

function drawArrow(sheet: Sheet, [x, y]: Vec2, turn: 1 | -1): void {
  const end = x + turn * 3;
  drawRun(
    sheet.page,
    [
      [x - turn * 3, y],
      [end, y],
    ],
    { width: 0.25 },
  );
  const head: Vec2[] = [
    [end - turn * 1.6, y + 0.6],
    [end, y],
    [end - turn * 1.6, y - 0.6],
  ];
  drawRun(sheet.page, head, { width: 0.1, closed: true, fill: 0 });
}
