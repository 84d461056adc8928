// The roof unrolled: every panel flat, outer face up, one below the other in the order of the roof, so that who lays out or welds sees
// which panel comes next and along which seam. Never mirrored; turned by half where its seam would else lie on the far side.
import type { Facts, FactsPanel, Vec2 } from "../../../records/facts.ts";
import { ringHolds } from "../../../surface/ring.ts";
import { boxOf, insidePoint, pointAlong, sideRun } from "../../drawing/flatGeometry.ts";
import { panelRow, type RowPanel, seamAbove } from "../../tables/panelOrder.ts";
import { addSheet, type Book, drawParagraph, type Sheet } from "../layout/book.ts";
import { type LabelField, setNameInPlace } from "../layout/labelField.ts";
import { type BoxArea, drawRun, SMALL, textWidth } from "../layout/pen.ts";
import type { RoofView } from "../layout/roofView.ts";

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
/** Longest name of an edge that is set into a panel, mm. */
const LONGEST = 40;

/** The sheets of the unrolled roof. */
export function drawUnrolled(book: Book, view: RoofView): void {
  const { facts } = book;
  const row = asInPlan(facts, view, panelRow(facts));
  if (row.length < 2) return;
  const others = otherSeams(facts, row);
  const more = others.length > LISTED ? ` and ${others.length - LISTED} more` : "";
  const rest = others.length > 0 ? ` Seams not shown: ${others.slice(0, LISTED).join(", ")}${more}.` : "";
  const words = `Every panel flat and outer face up, in the order of the roof: it meets the one above it along the seam named between them; at the head of a column that is the last of the column before. Along its sides: the edges. Arrow: warp. Not to scale.${rest}`;
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

/** Whether a panel stands in the row as its flat cloth has it, or turned by half, so that its seams lie where the row wants them. */
function standsRight(panel: FactsPanel, step: RowPanel, next: string | null): boolean {
  return step.seam === null ? next === null || !seamAbove(panel, next) : seamAbove(panel, step.seam);
}

/** From this share of agreement on a row lies the other way round than the plan. */
const AGAINST = -0.3;

/** The row from its other end where the panels would else stand upside down beside the plan of the roof. */
function asInPlan(facts: Facts, view: RoofView, row: readonly RowPanel[]): readonly RowPanel[] {
  const panels = new Map((facts.panels ?? []).map((p) => [p.id, p]));
  let [along, all] = [0, 0];
  row.forEach((step, n) => {
    const panel = panels.get(step.panel);
    if (!panel) return;
    const plan = panel.erected.map(view.project);
    const mean = (points: readonly Vec2[], k: 0 | 1) =>
      points.reduce((s, p) => s + p[k], 0) / Math.max(1, points.length);
    const [p0, p1, f0, f1] = [mean(plan, 0), mean(plan, 1), mean(panel.flat, 0), mean(panel.flat, 1)];
    const turn = standsRight(panel, step, row[n + 1]?.seam ?? null) ? 1 : -1;
    panel.flat.forEach(([x, y], v) => {
      const [u, w] = [plan[v][0] - p0, plan[v][1] - p1];
      along += turn * ((x - f0) * u + (y - f1) * w);
      all += Math.hypot(x - f0, y - f1) * Math.hypot(u, w);
    });
  });
  if (along >= AGAINST * all) return row;
  return row.map((_, n) => {
    const k = row.length - 1 - n;
    return { panel: row[k].panel, seam: row[k + 1]?.seam ?? null };
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
  const turn = standsRight(panel, step, next) ? 1 : -1;
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
  if (label === undefined || x - 4 > label.x + label.width) {
    drawArrow(sheet, [x, at[1]], turn);
    field.taken.push({ x: x - 3.4, y: at[1] - 1, width: 6.8, height: 2 });
  }
  nameEdges(book, sheet, panel, { ...field, outlines: [outline] }, place);
  if (step.seam === null) return;
  const top: Vec2 = [middle[0], area.y + area.height - GAP / 2];
  setNameInPlace(book, sheet, field, step.seam, [top], { longest: area.width - 4 });
}

/** The edges a panel has, inside it along their sides; what finds no room stands on the card. */
function nameEdges(book: Book, sheet: Sheet, panel: FactsPanel, field: LabelField, place: (p: Vec2) => Vec2): void {
  const ring = Float64Array.from(panel.cut.flatMap(place));
  for (const side of panel.sides) {
    const width = textWidth(side.id, book.regular, SMALL);
    if (side.kind === "seam" || width > LONGEST) continue;
    const run = sideRun(panel, side).map(place);
    const spots = [0.5, 0.42, 0.58, 0.34, 0.66, 0.26, 0.74].flatMap((f) => {
      const { at, along } = pointAlong(run, f);
      const [nx, ny] = [-along[1], along[0]];
      const reach = (Math.abs(nx) * width + Math.abs(ny) * 3.6) / 2;
      return [1.5, 3, 5].map((gap): Vec2 => [at[0] + (gap + reach) * nx, at[1] + (gap + reach) * ny]);
    });
    // Beyond the panel a name would be taken for that of the side it lies next to.
    const own = spots.filter(([x, y]) => ringHolds(ring, x, y));
    setNameInPlace(book, sheet, field, side.id, own);
  }
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
