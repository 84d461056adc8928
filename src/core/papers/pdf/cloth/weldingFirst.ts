// First sheet of the panel cards: how the laps lie, in section, and what can hurt people or lose cloth, read before the first weld.
import type { Facts, Vec2 } from "../../../records/facts.ts";
import { seamSide } from "../../tables/clothTables.ts";
import { cautionsOf } from "../../words/cautions.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import type { Book } from "../layout/book.ts";
import { flowCautionsInPlace } from "../layout/cautionBlock.ts";
import { drawBox, drawRun, drawText, SMALL } from "../layout/pen.ts";
import {
  type Flow,
  flowGapInPlace,
  flowHeadingInPlace,
  flowTextInPlace,
  needInPlace,
  openFlow,
} from "../layout/table.ts";
import { flowPocketInPlace } from "./pocketSection.ts";

/** More kinds of lap than this are told in words only. */
const DRAWN = 3;
const LISTED = 10;

interface Lap {
  /** Allowances of the panel on top and of the one below, mm. */
  top: number;
  below: number;
  seams: string[];
}

/** Seams by the allowances of their two sides. */
function lapsOf(facts: Facts): Lap[] {
  const laps = new Map<string, Lap>();
  for (const seam of facts.seams ?? []) {
    const sides = [seamSide(facts, seam, 0), seamSide(facts, seam, 1)];
    const [top, below] = sides[0].panel === seam.upper ? sides : [sides[1], sides[0]];
    if (top.allowance === null || below.allowance === null) continue;
    const lap = { top: top.allowance, below: below.allowance, seams: [] as string[] };
    const key = `${lap.top} ${lap.below}`;
    laps.set(key, laps.get(key) ?? lap);
    laps.get(key)?.seams.push(seam.id);
  }
  return [...laps.values()];
}

/** The sheet, unless nothing is welded. */
export function flowWeldingFirst(book: Book): void {
  const { facts } = book;
  const laps = lapsOf(facts);
  if (laps.length === 0) return;
  const flow = openFlow(book, "Before welding: laps and cautions");
  flowHeadingInPlace(flow, "Laps in section, outer face up");
  laps.forEach((lap, i) => {
    flowLapInPlace(flow, lap, i < DRAWN);
  });
  flowTextInPlace(
    flow,
    "Which panel is on top stands on every card, in the column Lap, and in the seam schedule. Seam line to seam line, match mark to match mark; the width of the weld itself is set by the weld trial.",
  );
  flowPocketInPlace(flow);
  flowHeadingInPlace(flow, "Cautions");
  flowCautionsInPlace(flow, cautionsOf(facts, "panels"));
}

function flowLapInPlace(flow: Flow, lap: Lap, drawn: boolean): void {
  const { flat } = paperUnits(flow.book.facts.job);
  const all = lap.seams.length === (flow.book.facts.seams ?? []).length;
  const more = lap.seams.length > LISTED ? ` and ${lap.seams.length - LISTED} more` : "";
  const seams = all ? "All seams" : `${lap.seams.slice(0, LISTED).join(", ")}${more}`;
  const reaches = (mm: number) =>
    mm === 0 ? "ends at it" : mm > 0 ? `reaches ${flat.whole(mm)} beyond it` : `ends ${flat.whole(-mm)} before it`;
  if (drawn) drawLap(flow, lap);
  flowTextInPlace(
    flow,
    `Lap ${flat.whole(lap.top + lap.below)} about the seam line: the panel on top ${reaches(lap.top)}, the panel below ${reaches(lap.below)}. ${seams}.`,
  );
  flowGapInPlace(flow, 2);
}

/** Half a metre of each panel would dwarf the lap: lengths beyond it are cut off, thicknesses are not to scale. */
function drawLap(flow: Flow, lap: Lap): void {
  const height = 20;
  needInPlace(flow, height + 6);
  const { sheet, book } = flow;
  const x = sheet.left + 75;
  const y = flow.y - 12;
  const scale = 22 / Math.max(lap.top, lap.below, 1);
  const [right, left] = [x + scale * lap.top, x - scale * lap.below];
  drawBox(
    sheet.page,
    { x: left, y: y + 0.4, width: Math.max(0.1, right - left), height: 1.4 },
    { width: 0, fill: 0.7, outline: false },
  );
  const top: Vec2[] = [
    [x - 45, y + 2.2],
    [right, y + 2.2],
  ];
  const below: Vec2[] = [
    [left, y],
    [x + 45, y],
  ];
  const seam: Vec2[] = [
    [x, y - 4],
    [x, y + 7],
  ];
  drawRun(sheet.page, top, { width: 0.8 });
  drawRun(sheet.page, below, { width: 0.8 });
  drawRun(sheet.page, seam, { width: 0.2, dash: [1.5, 1] });
  const text = (words: string, at: Vec2, align: "start" | "middle" | "end") =>
    drawText(sheet.page, words, { x: at[0], y: at[1], size: SMALL, font: book.regular, align });
  text("panel on top", [x - 46, y + 1.2], "end");
  text("panel below", [x + 46, y - 1], "start");
  text("seam line", [x, y + 8], "middle");
  text("weld (grey)", [x, y - 7.5], "middle");
  flow.y -= height;
}
