// A caution on a sheet: signal word in a frame, hazard, consequence and remedy beside it, kept together.

import { cautionText } from "../../words/cautions.ts";
import type { Caution } from "../../words/cautionTexts.ts";
import { drawBox, drawText, pitchOf, SMALL, textWidth, wrapText } from "./pen.ts";
import { type Flow, flowGapInPlace, flowTextInPlace, needInPlace } from "./table.ts";

/** Sets the cautions one under the other; a gap follows. */
export function flowCautionsInPlace(flow: Flow, cautions: readonly Caution[], size = SMALL): void {
  const { book } = flow;
  const pitch = pitchOf(size);
  const indent = (28 * size) / SMALL;
  for (const caution of cautions) {
    const text = cautionText(book.facts, caution);
    const lines = wrapText(text, book.regular, size, flow.sheet.right - flow.sheet.left - indent);
    needInPlace(flow, Math.min(lines.length, 12) * pitch + 3);
    const { page, left } = flow.sheet;
    const width = Math.max(indent - 4, textWidth(caution.signal, book.bold, size) + 4);
    const top = flow.y;
    drawBox(page, { x: left, y: top - pitch - 1.4, width, height: pitch + 0.8 }, { width: 0.5 });
    const at = { x: left + width / 2, y: top - pitch + 0.2, size, font: book.bold };
    drawText(page, caution.signal, { ...at, align: "middle" });
    flowTextInPlace(flow, text, { indent, size });
    flowGapInPlace(flow, lines.length === 1 ? 3 : 2);
  }
}
