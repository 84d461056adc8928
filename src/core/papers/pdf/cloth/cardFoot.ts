// Foot of a panel card: boxes to tick, the weld trial of the day, the laps of this panel in section, where it sits in the roof.
import type { FactsPanel, Vec2 } from "../../../records/facts.ts";
import type { Book, Sheet } from "../layout/book.ts";
import {
  type BoxArea,
  drawBox,
  drawRun,
  drawStencil,
  drawText,
  fitText,
  keepStencil,
  SMALL,
  type Stencil,
} from "../layout/pen.ts";
import { fitRoof, type RoofView } from "../layout/roofView.ts";

/** Height of the foot, mm. */
export const FOOT = 27;
/** Shares of the width: what stands where. */
const TRIAL = [0.32, 0.53] as const;
const LAPS = [0.55, 0.77] as const;
const PLAN = 0.8;

/** The roof for the key plans, kept at the first card. */
export interface Roof {
  view: RoofView;
  plan: KeyPlan | null;
}

/** Seams of a panel by how it lies at them. */
export interface PanelLaps {
  top: string[];
  below: string[];
}

/** The foot of a card. */
export function drawFoot(book: Book, sheet: Sheet, roof: Roof, panel: FactsPanel, laps: PanelLaps): void {
  const { page } = sheet;
  const width = sheet.right - sheet.left;
  const top = sheet.bottom + FOOT - 2;
  const line = (text: string, x: number, y: number, end: number) => {
    drawText(page, text, { x, y, size: SMALL, font: book.regular });
    drawRun(
      page,
      [
        [x + 17, y - 0.6],
        [end, y - 0.6],
      ],
      { width: 0.13 },
    );
  };
  ["Cut", "Marked", "Measured", "Welded"].forEach((step, i) => {
    const y = top - 4 - 5.9 * i;
    drawBox(page, { x: sheet.left, y: y - 0.6, width: 3.6, height: 3.6 }, { width: 0.3 });
    drawText(page, step, { x: sheet.left + 5.5, y, size: SMALL, font: book.bold });
    line("by, date", sheet.left + 25, y, sheet.left + width * 0.3);
  });
  const x = sheet.left + width * TRIAL[0];
  drawText(page, "Weld trial of the day, first", { x, y: top - 4, size: SMALL, font: book.bold });
  ["Machine", "Settings", "Pull test", "By, date"].forEach((what, i) => {
    line(what, x, top - 9 - 5 * i, sheet.left + width * TRIAL[1]);
  });
  drawLaps(book, sheet, laps);
  roof.plan ??= keepKeyPlan(book, roof.view, sheet);
  drawKeyPlan(book, sheet, roof.view, panel, roof.plan);
}

/** Each way this panel laps, in section with the outer face up: the panel thick, its neighbour thin, the weld grey. */
function drawLaps(book: Book, sheet: Sheet, laps: PanelLaps): void {
  const width = sheet.right - sheet.left;
  const [from, to] = LAPS.map((share) => sheet.left + share * width);
  const top = sheet.bottom + FOOT - 2;
  const text = (words: string, y: number, font = book.regular) =>
    drawText(sheet.page, fitText(words, font, SMALL, to - from), { x: from, y, size: SMALL, font });
  if (laps.top.length + laps.below.length === 0) return;
  text("Laps (this panel thick)", top - 4, book.bold);
  const ways = [
    { seams: laps.top, words: "on top", mine: 1.6, other: 0 },
    { seams: laps.below, words: "below", mine: 0, other: 1.6 },
  ].filter((way) => way.seams.length > 0);
  ways.forEach(({ seams, words, mine, other }, i) => {
    const y = top - 8.6 - 10 * i;
    text(`${words} at ${seams.join(", ")}`, y, book.regular);
    const at = y - 5;
    const [a, b, end] = [from + 14, from + 24, from + 38];
    drawBox(sheet.page, { x: a, y: at + 0.4, width: b - a, height: 0.8 }, { width: 0, fill: 0.7, outline: false });
    const run = (x0: number, x1: number, dy: number, thick: number) => {
      const points: Vec2[] = [
        [x0, at + dy],
        [x1, at + dy],
      ];
      drawRun(sheet.page, points, { width: thick });
    };
    run(from, b, mine, 0.8);
    run(a, end, other, 0.25);
  });
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
  const box = { x: sheet.left + width * PLAN, y: sheet.bottom, width: width * (1 - PLAN), height: FOOT - 2 };
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
  drawText(sheet.page, fitText(`Key plan, ${view.name}`, book.regular, SMALL, box.width), title);
  for (const outline of view.panels.find((p) => p.id === panel.id)?.outlines ?? []) {
    drawRun(sheet.page, outline.map(place), { width: 0.15, closed: true, fill: 0.55 });
  }
  drawStencil(sheet.page, plan.lines);
}
