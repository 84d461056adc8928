// The panel on its card, drawn at a round scale: cut and net line, sides with number, name and neighbour, corners, diagonals,
// width lines, match marks, warp arrow, face. Nothing is lettered over anything else; what finds no room is left to the table.
import type { Facts, FactsPanel, Vec2 } from "../../../records/facts.ts";
import { cornerAnchors } from "../../drawing/cornerAnchors.ts";
import { boxOf, insidePoint, pointAlong, sideRun } from "../../drawing/flatGeometry.ts";
import type { PanelMeasures } from "../../drawing/panelMeasures.ts";
import type { Book, Sheet } from "../layout/book.ts";
import { type LabelField, takePlaceInPlace } from "../layout/labelField.ts";
import { type BoxArea, drawBox, drawRing, drawRun, drawText, fitText, SMALL, textWidth } from "../layout/pen.ts";

/** Scales a rule can be laid on: drawing scales of ISO 5455 and the 1:25, 1:75, 1:125 of scale rules (common practice). */
const SCALES = [1, 2, 5, 10, 20, 25, 50, 75, 100, 125, 200, 250, 500, 1000];
const MARGIN_X = 22;
const MARGIN_Y = 7;
const LABEL_HEIGHT = 3.6;
const LONGEST_LABEL = 58;
const MANY_SIDES = 6;
/** Names keep this from the number of a match mark beside them, mm: "W1" next to "2" is read as twelve. */
const APART = 2.2;

/** Greatest round scale, as 1:n, at which the panel and its labels fit the box. */
export function cardScale(panel: FactsPanel, box: BoxArea): number {
  const cut = boxOf(panel.cut);
  const need = Math.max(
    (cut.max[0] - cut.min[0]) / (box.width - 2 * MARGIN_X),
    (cut.max[1] - cut.min[1]) / (box.height - 2 * MARGIN_Y),
  );
  return SCALES.find((s) => s >= need) ?? Math.ceil(need / 1000) * 1000;
}

/** Height of the figure where the width of the sheet alone sets its scale, mm. */
export function figureHeight(panel: FactsPanel, width: number): number {
  const cut = boxOf(panel.cut);
  return (cut.max[1] - cut.min[1]) / cardScale(panel, { x: 0, y: 0, width, height: Infinity }) + 2 * MARGIN_Y;
}

interface Figure {
  book: Book;
  sheet: Sheet;
  panel: FactsPanel;
  field: LabelField;
  /** mm of the panel to mm of the sheet */
  place: (p: Vec2) => Vec2;
  scale: number;
}

/** What the side meets: the neighbour over a seam, else what the edge is. */
export function sideMeets(facts: Facts, panel: FactsPanel, index: number): string {
  const side = panel.sides[index];
  if (side.kind !== "seam") return { cable: "edge cable", clamped: "clamped edge", free: "free edge" }[side.kind];
  const seam = facts.seams?.find((s) => s.id === side.id);
  if (!seam) return "panel not known";
  const other = seam.sides.find((s) => s.panel !== panel.id)?.panel ?? panel.id;
  return `panel ${other}`;
}

/** What a figure is made of. */
export interface PanelFigure {
  book: Book;
  sheet: Sheet;
  panel: FactsPanel;
  measures: PanelMeasures;
  /** mm on the sheet */
  box: BoxArea;
  /** 1:scale */
  scale: number;
}

/** Draws the panel into the box at the scale. */
export function drawPanelFigure({ book, sheet, panel, measures, box, scale }: PanelFigure): void {
  const cut = boxOf(panel.cut);
  const dx = box.x + (box.width - (cut.max[0] - cut.min[0]) / scale) / 2 - cut.min[0] / scale;
  const dy = box.y + (box.height - (cut.max[1] - cut.min[1]) / scale) / 2 - cut.min[1] / scale;
  const place = (p: Vec2): Vec2 => [dx + p[0] / scale, dy + p[1] / scale];
  const field: LabelField = { within: box, outlines: [panel.cut.map(place)], taken: [] };
  const figure: Figure = { book, sheet, panel, field, place, scale };
  drawRun(sheet.page, panel.cut.map(place), { width: 0.5, closed: true });
  for (const side of panel.sides) drawRun(sheet.page, sideRun(panel, side).map(place), { width: 0.2, dash: [2, 1] });
  for (const d of measures.diagonals) {
    drawRun(sheet.page, [place(d.from.at), place(d.to.at)], { width: 0.1, dash: [6, 1.5, 0.8, 1.5] });
  }
  for (const w of measures.widths) {
    if (w.net) drawRun(sheet.page, w.net.map(place), { width: 0.13, dash: [1, 1] });
  }
  for (const m of panel.marks) {
    if (m.kind === "slit" && m.points) drawRun(sheet.page, m.points.map(place), { width: 0.4 });
  }
  drawSideLabels(figure);
  drawCorners(figure, measures);
  drawMatchMarks(figure);
  drawWidthNames(figure, measures);
  drawNameBlock(figure, measures);
}

/** Sets a label on a white ground at the first free middle; tells whether it found one. */
function setLabel(
  figure: Figure,
  text: string,
  middles: Iterable<Vec2>,
  options: { bold?: boolean; size?: number; off?: Vec2[][]; apart?: number } = {},
): Vec2 | null {
  const font = options.bold ? figure.book.bold : figure.book.regular;
  const size = options.size ?? SMALL;
  const shown = fitText(text, font, size, LONGEST_LABEL);
  const height = (LABEL_HEIGHT * size) / SMALL;
  const width = textWidth(shown, font, size);
  const { off = [] } = options;
  const field = { ...figure.field, outlines: [...figure.field.outlines, ...off] };
  const at = takePlaceInPlace(field, { width: width + 2 * (options.apart ?? 0), height }, middles);
  if (!at) return null;
  const ground = { x: at[0] - width / 2 - 0.3, y: at[1] - height / 2, width: width + 0.6, height };
  drawBox(figure.sheet.page, ground, { width: 0, fill: 1, outline: false });
  drawText(figure.sheet.page, shown, { x: at[0], y: at[1] - height * 0.32, size, font, align: "middle" });
  return at;
}

/** Name, face and warp arrow where the cloth is roomiest, off the middle where the width line runs. */
function drawNameBlock(figure: Figure, measures: PanelMeasures): void {
  const { panel, place, sheet, book } = figure;
  const box = boxOf(panel.net);
  const { at } = insidePoint(panel.cut);
  const middleY = at[1];
  const spots = [0.375, 0.625, 0.5, 0.3, 0.7, 0.45, 0.55, 0.2, 0.8, 0.12, 0.88].flatMap((f) =>
    [0, 0.1, -0.1, 0.2, -0.2].map(
      (g): Vec2 => place([box.min[0] + f * (box.max[0] - box.min[0]), middleY + g * (box.max[1] - box.min[1])]),
    ),
  );
  // Off the width lines where there is such a place: letters on a dashed line are hard to tell.
  const off = measures.widths.flatMap((w) => (w.net ? [w.net.map(place)] : []));
  const style = { bold: true, size: 14, apart: APART };
  const anywhere = [...spots, place(at)];
  // Rather near a number than not there at all.
  for (const [places, options] of [
    [spots, { ...style, off }],
    [anywhere, style],
    [anywhere, { ...style, apart: 0 }],
  ] as const)
    if (setLabel(figure, panel.id, places, options)) break;
  const arrow = { width: 24, height: 5.5 };
  const beside = [0.625, 0.375, 0.55, 0.7, 0.3, 0.2, 0.8].flatMap((f) =>
    [0, 0.2, -0.2].map(
      (g): Vec2 => place([box.min[0] + f * (box.max[0] - box.min[0]), middleY + g * (box.max[1] - box.min[1])]),
    ),
  );
  // Narrow cloth has its arrow beside it; without one the card says nothing of the warp.
  const { x: fx, y: fy, width, height } = figure.field.within;
  const corners = [0.1, 0.9].flatMap((g) =>
    [0.08, 0.92, 0.25, 0.75].map((f): Vec2 => [fx + f * width, fy + g * height]),
  );
  const spot = takePlaceInPlace(figure.field, arrow, [...beside, ...corners]);
  if (!spot) return;
  const [x, y] = spot;
  drawBox(sheet.page, { x: x - 12, y: y - 2.7, width: 24, height: 5.4 }, { width: 0, fill: 1, outline: false });
  const head: Vec2[] = [
    [x + 8, y + 0.9],
    [x + 12, y],
    [x + 8, y - 0.9],
  ];
  drawRun(
    sheet.page,
    [
      [x - 12, y],
      [x - 10, y],
    ],
    { width: 0.35 },
  );
  drawText(sheet.page, "warp", { x: x - 9, y: y - 1.1, size: SMALL, font: book.regular });
  drawRun(
    sheet.page,
    [
      [x, y],
      [x + 8, y],
    ],
    { width: 0.35 },
  );
  drawRun(sheet.page, head, { width: 0.2, closed: true, fill: 0 });
}

/** Outward places for a label along a side, from its middle to its ends and from near to far. */
function* outwardPlaces(figure: Figure, run: Vec2[], allowance: number, size: { width: number; height: number }) {
  const beyond = Math.max(0, allowance) / figure.scale;
  for (const gap of [1.2, 4, 8, 13, 19]) {
    for (const share of [0.5, 0.44, 0.56, 0.38, 0.62, 0.3, 0.7, 0.2, 0.8, 0.1, 0.9]) {
      const { at, along } = pointAlong(run, share);
      const out: Vec2 = [along[1], -along[0]];
      const reach = gap + beyond + (Math.abs(out[0]) * size.width + Math.abs(out[1]) * size.height) / 2;
      const p = figure.place(at);
      yield [p[0] + reach * out[0], p[1] + reach * out[1]] as Vec2;
    }
  }
}

function drawSideLabels(figure: Figure): void {
  const { panel, book } = figure;
  panel.sides.forEach((side, i) => {
    const run = sideRun(panel, side);
    const meets = sideMeets(book.facts, panel, i);
    const texts = [`${i + 1}: ${side.id}, ${meets}`, `${i + 1}: ${side.id}`, `${i + 1}`];
    // Where sides are many, the long label of one would take the place of its neighbours.
    for (const text of panel.sides.length > MANY_SIDES ? texts.slice(1) : texts) {
      const shown = fitText(text, book.bold, SMALL, LONGEST_LABEL);
      const size = { width: textWidth(shown, book.bold, SMALL), height: LABEL_HEIGHT };
      const at = setLabel(figure, text, outwardPlaces(figure, run, side.allowance, size), { bold: true });
      if (!at) continue;
      leader(figure, run, at, size);
      return;
    }
  });
}

/** A thin line to the side where its label had to move away. */
function leader(figure: Figure, run: Vec2[], at: Vec2, size: { width: number; height: number }): void {
  let foot = figure.place(run[0]);
  for (let k = 0; k <= 20; k++) {
    const p = figure.place(pointAlong(run, k / 20).at);
    if (Math.hypot(p[0] - at[0], p[1] - at[1]) < Math.hypot(foot[0] - at[0], foot[1] - at[1])) foot = p;
  }
  const d: Vec2 = [foot[0] - at[0], foot[1] - at[1]];
  const t = Math.min(
    1,
    1 / Math.max(Math.abs(d[0]) / (size.width / 2 + 0.6), Math.abs(d[1]) / (size.height / 2 + 0.6)),
  );
  const start: Vec2 = [at[0] + t * d[0], at[1] + t * d[1]];
  if (Math.hypot(foot[0] - start[0], foot[1] - start[1]) > 4)
    drawRun(figure.sheet.page, [start, foot], { width: 0.13 });
}

function drawCorners(figure: Figure, measures: PanelMeasures): void {
  const box = boxOf(figure.panel.cut);
  const middle = figure.place([(box.min[0] + box.max[0]) / 2, (box.min[1] + box.max[1]) / 2]);
  const anchors = cornerAnchors(figure.book.facts, figure.panel);
  measures.corners.forEach((corner, k) => {
    const p = figure.place(corner.at);
    drawBox(figure.sheet.page, { x: p[0] - 0.4, y: p[1] - 0.4, width: 0.8, height: 0.8 }, { width: 0.1, fill: 0 });
    if (corner.cut >= 0) drawRing(figure.sheet.page, figure.place(figure.panel.cut[corner.cut]), 1, { width: 0.2 });
    const sx = p[0] < middle[0] ? -1 : 1;
    const sy = p[1] < middle[1] ? -1 : 1;
    const around = [4, 6, 8, 11].flatMap((r): Vec2[] => [
      [p[0] + sx * r, p[1] + sy * r * 0.5],
      [p[0] + sx * r, p[1]],
      [p[0], p[1] + sy * r],
      [p[0] - sx * r, p[1] + sy * r],
      [p[0] + sx * r, p[1] - sy * r],
      [p[0] - sx * r, p[1] - sy * r * 0.7],
    ]);
    const anchor = anchors[k];
    const full = `${corner.name}, ${anchor}`;
    const half = textWidth(full, figure.book.regular, SMALL) / 2;
    const wide = [2, 4, 6, 8].flatMap((r): Vec2[] => [
      [p[0] + sx * (r + half), p[1] + sy * r * 0.5],
      [p[0] + sx * (r + half), p[1]],
      [p[0] + sx * half, p[1] + sy * (r + 2)],
    ]);
    if (anchor !== null && 2 * half <= LONGEST_LABEL && setLabel(figure, full, wide)) return;
    setLabel(figure, corner.name, around);
  });
}

function drawWidthNames(figure: Figure, measures: PanelMeasures): void {
  for (const w of measures.widths) {
    if (!w.net) continue;
    const [a, b] = w.net.map(figure.place);
    const along = [0.2, 0.8, 0.3, 0.7, 0.12, 0.88, 0.4, 0.6, 0.5, 0.45, 0.55, 0.35, 0.65].map(
      (f): Vec2 => [a[0] + f * (b[0] - a[0]), a[1] + f * (b[1] - a[1])],
    );
    // A strip too narrow for its letters has them beyond its line.
    const l = Math.hypot(b[0] - a[0], b[1] - a[1]) || 1;
    const beyond = [4, 6, 9].flatMap((r): Vec2[] => [
      [b[0] + (r * (b[0] - a[0])) / l, b[1] + (r * (b[1] - a[1])) / l],
      [a[0] - (r * (b[0] - a[0])) / l, a[1] - (r * (b[1] - a[1])) / l],
    ]);
    if (!setLabel(figure, w.name, [...along, ...beyond], { apart: APART }))
      setLabel(figure, w.name, [...along, ...beyond]);
  }
}

/** A match mark is a tick of 25 mm on the cloth: on the card it is drawn longer, across the net line, with its number inside. */
function drawMatchMarks(figure: Figure): void {
  for (const mark of figure.panel.marks) {
    if (mark.kind !== "match" || !mark.points || mark.text === undefined) continue;
    const a = figure.place(mark.points[0]);
    const b = figure.place(mark.points[mark.points.length - 1]);
    const l = Math.hypot(b[0] - a[0], b[1] - a[1]);
    if (!(l > 0)) continue;
    const u: Vec2 = [(b[0] - a[0]) / l, (b[1] - a[1]) / l];
    const from: Vec2 = [(a[0] + b[0]) / 2 - 1.2 * u[0], (a[1] + b[1]) / 2 - 1.2 * u[1]];
    const to: Vec2 = [(a[0] + b[0]) / 2 + 1.2 * u[0], (a[1] + b[1]) / 2 + 1.2 * u[1]];
    drawRun(figure.sheet.page, [from, to], { width: 0.3 });
    if (!mark.at) continue;
    // The number lies to the side where the cloth's own lettering has it: inside.
    const t = figure.place(mark.at);
    const v: Vec2 = [t[0] - a[0], t[1] - a[1]];
    const inward = v[0] * u[0] + v[1] * u[1] >= 0 ? 1 : -1;
    const number = mark.text.slice(mark.text.lastIndexOf(".") + 1);
    const middle: Vec2 = [(a[0] + b[0]) / 2, (a[1] + b[1]) / 2];
    const spots = [4, 5, 6.5].map((r): Vec2 => [middle[0] + inward * r * u[0], middle[1] + inward * r * u[1]]);
    setLabel(figure, number, spots);
  }
}
