// What is drawn on the cloth inside its cut outline: seam and fold lines, slits, match marks, names. mm, panel axes.
// Does not: write files or choose fonts.
import type { CutPanel, PanelMark } from "../../records/flatPanel.ts";
import type { PanelPlace } from "../outline/panelPlace.ts";
import type { Point } from "../outline/sideLine.ts";
import { clipLine } from "./clipLine.ts";
import { matchMarks } from "./matchMarks.ts";
import { slitMarks } from "./slitFlaps.ts";
import { cornerNames, nameBlock, reserveText, sideName, type TextRoom } from "./textMarks.ts";

/** The net line of side k. */
function netLine(panel: CutPanel, k: number): Point[] {
  const { net } = panel;
  const { netFrom, netTo } = panel.outlines[k];
  const n = net.length / 2;
  const count = panel.sides.length > 1 ? (netTo - netFrom + n) % n : n;
  return Array.from({ length: count + 1 }, (_, i): Point => {
    const at = 2 * ((netFrom + i) % n);
    return [net[at], net[at + 1]];
  });
}

/** Seam line or fold line of side k, where cloth stands beyond it. */
function lineMarks(panel: CutPanel, k: number): PanelMark[] {
  if (panel.outlines[k].allowance <= 0) return [];
  const kind = panel.sides[k].kind === "seam" ? "seam-line" : "fold-line";
  return clipLine(netLine(panel, k), panel.cut).map((points) => ({ kind, points }));
}

/**
 * Everything to be drawn on a panel that has its outlines.
 * @units mm; points inside the cut outline, or on it where a tick ends there
 */
export function placeMarks(panel: CutPanel, place: PanelPlace): PanelMark[] {
  const room: TextRoom = { cut: panel.cut, taken: [] };
  const marks: PanelMark[] = [];
  const names = nameBlock(panel, room);
  panel.sides.forEach((side, k) => {
    const { allowance } = panel.outlines[k];
    marks.push(...lineMarks(panel, k), ...slitMarks(panel, side, allowance));
    if (side.kind !== "seam") return;
    for (const mark of matchMarks(panel, side, allowance, place)) {
      // A number without room is left out; its ticks still tell it from its neighbours.
      if (reserveText(room, mark)) marks.push(mark);
      else marks.push({ kind: mark.kind, points: mark.points as Point[] });
    }
  });
  marks.push(...names);
  for (const side of panel.sides) marks.push(...sideName(panel, side, place, room));
  marks.push(...cornerNames(panel, place, room));
  return marks;
}
