// A pocket of separate strips in section, on the sheet read before the first weld: how the strip lies about cable and panel.
import type { Vec2 } from "../../../records/facts.ts";
import { boxOf } from "../../drawing/flatGeometry.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import { drawRing, drawRun, drawText, SMALL } from "../layout/pen.ts";
import { type Flow, flowGapInPlace, flowHeadingInPlace, flowTextInPlace, needInPlace } from "../layout/table.ts";

/** Radius of the fold, length of a leaf, of what is drawn of the panel, mm. */
const FOLD = 2.2;
const LEAF = 30;
const PANEL = 52;
const HEIGHT = 17;

/** The section and its words, where the plan has such strips. */
export function flowPocketInPlace(flow: Flow): void {
  const { facts } = flow.book;
  const { flat } = paperUnits(facts.job);
  const strips = (facts.pieces ?? []).filter((p) => p.kind === "strip");
  if (strips.length === 0) return;
  const widths = new Set(strips.map((p) => boxOf(p.cut)).map((b) => flat.whole(b.max[1] - b.min[1])));
  needInPlace(flow, HEIGHT + 24);
  flowHeadingInPlace(flow, "Pocket of separate strips, in section");
  drawPocket(flow);
  flowTextInPlace(
    flow,
    `Strip ${[...widths].join(" or ")} wide, folded in the middle over the cable, one leaf on each face of the panel, its parts butted end to end in the order of their numbers. Which edge and from which corner: see the list of patches and strips. The weld of the leaves is the engineer's detail.`,
  );
  flowGapInPlace(flow, 2);
}

function drawPocket(flow: Flow): void {
  const { sheet, book } = flow;
  const x = sheet.left + 75;
  const y = flow.y - 8;
  // Half round the cable, then along both faces of the panel.
  const fold = Array.from({ length: 13 }, (_, k): Vec2 => {
    const a = Math.PI / 2 - (k * Math.PI) / 12;
    return [x + FOLD * Math.cos(a), y + FOLD * Math.sin(a)];
  });
  drawRun(sheet.page, [[x - LEAF, y + 1], [x - 4, y + 1], ...fold, [x - 4, y - 1], [x - LEAF, y - 1]], { width: 0.4 });
  const panel: Vec2[] = [
    [x - PANEL, y],
    [x - 2.6, y],
  ];
  drawRun(sheet.page, panel, { width: 0.8 });
  drawRing(sheet.page, [x, y], 1.4, { width: 0.3, fill: 0.7 });
  const text = (words: string, at: Vec2, align: "start" | "middle" | "end") =>
    drawText(sheet.page, words, { x: at[0], y: at[1], size: SMALL, font: book.regular, align });
  text("panel", [x - PANEL - 1, y - 1], "end");
  text("cable (grey)", [x + FOLD + 2, y - 1], "start");
  text("leaf on the outer face", [x - LEAF / 2, y + 3], "middle");
  text("leaf on the inner face", [x - LEAF / 2, y - 5], "middle");
  flow.y -= HEIGHT;
}
