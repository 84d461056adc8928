// Slits in flaps that are folded back along a curve: a flap of width p along a bend of radius R is 2p/R out of length at its rim.
// A slit lets it gape (hollow edge) or lap over itself (bulging edge). mm. Does not: cut, make separate strips (cutPieces.ts).
// Source: own argument from the rim against the line it comes to lie on; spacing and depth are common practice.
import type { Finding } from "../../problem.ts";
import type { CutPanel, FlatPanel, PanelMark, PanelSide } from "../../records/flatPanel.ts";
import { atArc, buildSideLine, listPoints, measureBends, type Point } from "../outline/sideLine.ts";
import { clipLine } from "./clipLine.ts";

/** A flap folded along a curve may be this share out of length before it is slit. */
export const FLAP_SHORTAGE = 0.005;
/** What one slit takes up at the rim, mm. */
const GAPE_MM = 10;
/** A flap with this share out of length is no flap any more: slits would stand closer than a third of its width. */
export const FLAP_LIMIT = 0.2;
/** A slit keeps this share of the flap's width away from the fold line. */
const SLIT_FOOT = 0.2;

/** Whether cloth beyond this side is folded back. */
export const isFolded = (side: PanelSide): boolean => side.kind === "cable" || side.kind === "free";

/** Bend of a side at each of its vertices, taken over four widths of the flap, so that no single piece decides. */
function measureSideBends(panel: FlatPanel, side: PanelSide, width: number): Float64Array<ArrayBuffer> {
  return measureBends(listPoints(panel, side.vertices), 4 * width);
}

/** Greatest bend of a side in the flat, 1/mm, left or right. */
export function sideCurvature(panel: FlatPanel, side: PanelSide, reach: number): number {
  return measureBends(listPoints(panel, side.vertices), reach).reduce((most, b) => Math.max(most, Math.abs(b)), 0);
}

/** Share of its length by which the rim of a flap of this width is out, at the side's tightest bend: 2p/R. */
export function measureShortage(panel: FlatPanel, side: PanelSide, width: number): number {
  return 2 * width * sideCurvature(panel, side, 4 * width);
}

/**
 * Where a flap of this width is slit: arc lengths from the side's first vertex, with the bend there.
 * As many as share the flap's whole difference in length into steps of about 10 mm, each in the middle of its step.
 */
export function chooseSlits(panel: FlatPanel, side: PanelSide, width: number): { s: number; bend: number }[] {
  const bends = measureSideBends(panel, side, width);
  const { arc } = buildSideLine(listPoints(panel, side.vertices));
  const gape = [0];
  for (let i = 1; i < arc.length; i++) {
    const share = width * (Math.abs(bends[i - 1]) + Math.abs(bends[i]));
    gape.push(gape[i - 1] + (share > FLAP_SHORTAGE ? share * (arc[i] - arc[i - 1]) : 0));
  }
  const total = gape[gape.length - 1];
  const count = total < GAPE_MM / 2 ? 0 : Math.max(1, Math.round(total / GAPE_MM));
  const slits: { s: number; bend: number }[] = [];
  for (let k = 0, i = 1; k < count; k++) {
    const want = ((k + 0.5) * total) / count;
    while (i < gape.length - 1 && gape[i] < want) i++;
    const t = (want - gape[i - 1]) / (gape[i] - gape[i - 1] || 1);
    slits.push({ s: arc[i - 1] + t * (arc[i] - arc[i - 1]), bend: (bends[i - 1] + bends[i]) / 2 });
  }
  return slits;
}

/** Slits of one side, from where the flap is short by no more than its limit out to its rim. */
export function slitMarks(panel: CutPanel, side: PanelSide, allowance: number): PanelMark[] {
  if (allowance <= 0 || !isFolded(side)) return [];
  const line = buildSideLine(listPoints(panel, side.vertices));
  const marks: PanelMark[] = [];
  for (const { s, bend } of chooseSlits(panel, side, allowance)) {
    const { point, out } = atArc(line, s);
    const foot = Math.max(FLAP_SHORTAGE / 2 / Math.abs(bend), SLIT_FOOT * allowance);
    if (foot > 0.9 * allowance) continue;
    const at = (d: number): Point => [point[0] + d * out[0], point[1] + d * out[1]];
    const [points] = clipLine([at(foot), at(allowance + 1)], panel.cut);
    if (points) marks.push({ kind: "slit", points });
  }
  return marks;
}

/** What must be known of flaps folded on curves, one finding an edge. Flaps too tight for slits are not cut (outlinePanel.ts). */
export function listFoldFindings(panels: readonly CutPanel[]): Finding[] {
  const edges = new Map<string, { panels: string[]; width: number; shortage: number; slits: number }>();
  for (const panel of panels)
    panel.sides.forEach((side, k) => {
      const width = panel.outlines[k].allowance;
      if (width <= 0 || !isFolded(side)) return;
      const shortage = measureShortage(panel, side, width);
      if (shortage <= FLAP_SHORTAGE) return;
      const edge = edges.get(side.id) ?? { panels: [], width, shortage: 0, slits: 0 };
      edge.panels.push(panel.id);
      edge.shortage = Math.max(edge.shortage, shortage);
      edge.slits += slitMarks(panel, side, width).length;
      edges.set(side.id, edge);
    });
  return [...edges].map(([id, edge]): Finding => {
    const radius = (2 * edge.width) / edge.shortage / 1000;
    return {
      code: "pocket-curve",
      level: "note",
      station: "panels",
      where: [id, ...new Set(edge.panels)],
      value: 100 * edge.shortage,
      limit: 100 * FLAP_SHORTAGE,
      text:
        `edge ${id}: the ${edge.width.toFixed(0)} mm flap is folded on a radius down to ${radius.toFixed(2)} m, so its rim is up to ` +
        `${(100 * edge.shortage).toFixed(2)} % out of length (${100 * FLAP_SHORTAGE} % folds flat); ` +
        (edge.slits > 0
          ? `${edge.slits === 1 ? "1 slit is" : `${edge.slits} slits are`} cut, each taking up about ${GAPE_MM} mm`
          : "too short a run for a slit"),
      remedy: "Slits are cut with the outline; a pocket of separate strips needs none (allowances.pocketStrip).",
      basis: "own argument",
    };
  });
}
