// From a flat panel to what is cut: net outline, cut outline with allowances and set-backs, marks, measures. mm.
// Does not: flatten, nest, draw, judge flaps on curves (slitFlaps.ts). Laps, pockets and set-backs are common practice.
import type { Check, Finding, StationResult } from "../../problem.ts";
import { PlanError } from "../../problem.ts";
import type { CutPanel, FlatPanel, PanelSide, Ring } from "../../records/flatPanel.ts";
import type { Allowances } from "../../records/job.ts";
import { isSimpleRing, ringArea, ringBox, ringDistance } from "../../surface/ring.ts";
import { placeMarks } from "../marks/placeMarks.ts";
import { FLAP_LIMIT, isFolded, measureShortage } from "../marks/slitFlaps.ts";
import { measureControl } from "./controlLengths.ts";
import { buildNetOutline, type NetOutline } from "./netOutline.ts";
import { offsetOutline } from "./offsetOutline.ts";
import type { PanelPlace } from "./panelPlace.ts";
import { buildSideLine, listPoints, middlePoints } from "./sideLine.ts";

/** How often flaps that do not fold are made narrower: one that gives way makes its neighbours' ends longer. */
const SHORT_ROUNDS = 3;
/** The cut line must lie at its allowance within this, mm. */
const ALLOWANCE_MM = 1;

/** Allowance of a side, mm: a set-back is negative. */
export function sideAllowance(panel: string, side: PanelSide, place: PanelPlace, allowances: Allowances): number {
  if (side.kind === "clamped") return -allowances.clamp;
  if (side.kind === "free") return allowances.hem;
  if (side.kind === "cable") return allowances.pocketStrip ? 0 : allowances.pocket;
  if (allowances.seamOn === "both") return allowances.seam / 2;
  const seam = place.seams.find((s) => s.id === side.id);
  if (!seam)
    throw new PlanError(
      "outline-seam",
      `Panel ${panel} has a side on seam ${side.id}, which the layout does not list: it is unknown which panel lies on top.`,
      [panel, side.id],
    );
  return seam.upper === panel && seam.strips[0] !== seam.strips[1] ? 0 : allowances.seam;
}

function finding(code: string, level: Finding["level"], where: string[], value: number, limit: number): Finding {
  return { code, level, station: "panels", where, value, limit, text: "", remedy: "", basis: "own argument" };
}

/** How far the cut line is from each side's allowance, mm: median over the middle 80 %; 0 for set-backs, which are not asked. */
function measureMisses(panel: FlatPanel, cut: Ring, allowances: readonly number[]): number[] {
  return panel.sides.map((side, k) => {
    if (allowances[k] < 0 || cut.length === 0) return 0;
    const off = middlePoints(buildSideLine(listPoints(panel, side.vertices)), 17).map(([x, y]) =>
      ringDistance(cut, x, y),
    );
    return off.sort((p, q) => p - q)[8] - allowances[k];
  });
}

/** The cut line lies at each side's allowance. */
function checkAllowances(panel: CutPanel, misses: readonly number[]): { checks: Check[]; findings: Finding[] } {
  const findings: Finding[] = [];
  panel.sides.forEach((side, k) => {
    const miss = Math.abs(misses[k]);
    if (miss > ALLOWANCE_MM)
      findings.push({
        ...finding("allowance-missed", "caution", [panel.id, side.id], miss, ALLOWANCE_MM),
        text: `Along side ${side.id} of panel ${panel.id} the cut line misses its allowance of ${panel.outlines[k].allowance} mm by ${miss.toFixed(1)} mm: the side is too short for it.`,
        remedy: "Make the allowance smaller, or merge the short side with its neighbour in the layout.",
      });
  });
  const worst = Math.max(0, ...misses.map(Math.abs));
  const text = `panel ${panel.id}: the cut line lies at its allowance, mm off`;
  return {
    checks: [{ station: "panels", text, value: worst, limit: ALLOWANCE_MM, holds: worst <= ALLOWANCE_MM }],
    findings,
  };
}

/** Outlines that cross themselves, in words. */
function checkRings(panel: FlatPanel, net: Ring, cut: Ring): { checks: Check[]; findings: Finding[] } {
  const findings: Finding[] = [];
  const simple = { net: isSimpleRing(net), cut: isSimpleRing(cut) };
  for (const which of ["net", "cut"] as const) {
    if (simple[which]) continue;
    findings.push({
      ...finding("outline-crossing", "stop", [panel.id], 0, 1),
      text: `The ${which} outline of panel ${panel.id} crosses or touches itself: it cannot be cut.`,
      remedy:
        which === "net" ? "Lay the seams so that the panel unfolds flat: narrower strips." : "Use smaller allowances.",
    });
  }
  const text = `panel ${panel.id}: net and cut outlines are simple`;
  const holds = simple.net && simple.cut;
  return { checks: [{ station: "panels", text, value: holds ? 1 : 0, limit: 1, holds }], findings };
}

/** Flaps that are not cut as asked, because their side is too short or too tightly bent. */
function listShortFlaps(panel: CutPanel, wanted: readonly number[]): Finding[] {
  return panel.sides.flatMap((side, k) => {
    const { allowance } = panel.outlines[k];
    if (allowance === wanted[k]) return [];
    const instead =
      side.kind === "cable" ? "its pocket is a separate strip" : `it is cut ${allowance.toFixed(0)} mm wide`;
    const shortage = measureShortage(panel, side, wanted[k]);
    if (shortage > FLAP_LIMIT) {
      const radius = (2 * wanted[k]) / shortage / 1000;
      return [
        {
          ...finding("flap-tight", "note", [panel.id, side.id], 100 * shortage, 100 * FLAP_LIMIT),
          text:
            `Side ${side.id} of panel ${panel.id} is bent on a radius down to ${radius.toFixed(2)} m: the rim of a flap of ${wanted[k]} mm ` +
            `would be ${(100 * shortage).toFixed(0)} % out of length, more than slits take up (${100 * FLAP_LIMIT} %): ${instead}.`,
          remedy: "Give a narrower flap, or let the edge be found with less sag.",
        },
      ];
    }
    return [
      {
        ...finding("flap-short", "note", [panel.id, side.id], side.lengthFlat, wanted[k]),
        text: `Side ${side.id} of panel ${panel.id}, ${side.lengthFlat.toFixed(0)} mm long, is too short to fold a flap of ${wanted[k]} mm: ${instead}.`,
        remedy: "Lay the seams so that the side is longer, or make the flap narrower.",
      },
    ];
  });
}

/** The cut outline with these allowances. */
function cutOutline(panel: FlatPanel, net: NetOutline, allowances: readonly number[], place: PanelPlace): Ring {
  const discs = place.anchors.flatMap((a) =>
    [...panel.surfaceVertex.keys()]
      .filter((v) => panel.surfaceVertex[v] === a.vertex)
      .map((v) => ({ x: panel.flat[2 * v], y: panel.flat[2 * v + 1], radius: a.cutBack })),
  );
  const offsets = panel.sides
    .map((side, k) => ({
      from: net.runs[k].netFrom,
      to: net.runs[k].netTo,
      distance: allowances[k],
      fold: isFolded(side),
    }))
    .filter((s) => panel.sides.length === 1 || s.from !== s.to);
  return offsetOutline(net.net, offsets, discs);
}

/** Width of a flap that its side's bend lets it fold with slits: a pocket all of it or none, a hem as much as goes. */
function foldableWidth(panel: FlatPanel, side: PanelSide, wanted: number): number {
  if (wanted <= 0 || !isFolded(side)) return wanted;
  let width = wanted;
  while (width > 1 && measureShortage(panel, side, width) > FLAP_LIMIT) width = side.kind === "cable" ? 0 : 0.8 * width;
  return width > 1 ? width : 0;
}

/**
 * Cut outline and the allowances it has. A flap that its side is too short or too tightly bent to fold is not cut: a pocket there
 * becomes a separate strip (cutPieces.ts), a hem as narrow as its side lets it be.
 */
function chooseOutline(
  panel: FlatPanel,
  net: NetOutline,
  wanted: readonly number[],
  place: PanelPlace,
): { cut: Ring; allowances: number[]; misses: number[] } {
  const allowances = wanted.map((width, k) => foldableWidth(panel, panel.sides[k], width));
  for (let round = 0; ; round++) {
    const cut = cutOutline(panel, net, allowances, place);
    const misses = measureMisses(panel, cut, allowances);
    const short = [...panel.sides.keys()].filter(
      (k) => misses[k] < -ALLOWANCE_MM && isFolded(panel.sides[k]) && allowances[k] > 0,
    );
    if (short.length === 0 || round === SHORT_ROUNDS) return { cut, allowances, misses };
    for (const k of short)
      allowances[k] = panel.sides[k].kind === "cable" ? 0 : Math.max(0, 0.8 * (allowances[k] + misses[k]));
  }
}

/**
 * The panel ready to be cut: outlines, allowances, marks, area and size, with what a person must know about them.
 * @units mm, areas m2; warp along x, outer face up
 * @throws PlanError outline-sides: sides do not close; outline-seam: a seam the layout does not list;
 *   outline-winding: the net outline runs clockwise or encloses nothing; outline-empty: set-backs leave no cloth
 */
export function outlinePanel(panel: FlatPanel, place: PanelPlace, allowances: Allowances): StationResult<CutPanel> {
  const outline = buildNetOutline(panel, place);
  const { net, runs } = outline;
  if (!(ringArea(net) > 0))
    throw new PlanError("outline-winding", `The net outline of panel ${panel.id} runs clockwise or encloses no area.`, [
      panel.id,
    ]);
  const here = { ...place, anchors: place.anchors.filter((a) => panel.surfaceVertex.includes(a.vertex)) };
  const wanted = panel.sides.map((side) => sideAllowance(panel.id, side, place, allowances));
  const chosen = chooseOutline(panel, outline, wanted, here);
  const { cut } = chosen;
  if (cut.length === 0)
    throw new PlanError(
      "outline-empty",
      `Set-backs of ${allowances.clamp} mm and corner cut-backs leave no cloth of panel ${panel.id}. Make them smaller, or the panel wider.`,
      [panel.id],
      { clamp: allowances.clamp },
    );
  const box = ringBox(cut);
  const output: CutPanel = {
    ...panel,
    net,
    cut,
    outlines: runs.map((run, k) => ({ ...run, allowance: chosen.allowances[k] })),
    marks: [],
    area: { net: ringArea(net) / 1e6, cut: ringArea(cut) / 1e6 },
    size: { length: box.x1 - box.x0, width: box.y1 - box.y0 },
    control: { sides: [], diagonals: [], widths: [] },
  };
  output.marks = placeMarks(output, here);
  output.control = measureControl(output);
  const rings = checkRings(panel, net, cut);
  const offs = checkAllowances(output, chosen.misses);
  const short = listShortFlaps(output, wanted);
  return {
    output,
    findings: [...short, ...rings.findings, ...offs.findings],
    checks: [...rings.checks, ...offs.checks],
  };
}
