// From a flat panel to what is cut: net outline, cut outline with allowances and set-backs, marks, measures. mm.
// Does not: flatten, nest, draw. Sources: laps, pockets and set-backs are common practice; the limit for a flap folded along
// a curve (2p/R) is own argument from the flap's outer rim against the line it comes to lie on.
import type { Check, Finding, StationResult } from "../problem.ts";
import { PlanError } from "../problem.ts";
import type { CutPanel, FlatPanel, PanelSide, Ring } from "../records/flatPanel.ts";
import type { Allowances } from "../records/job.ts";
import { isSimpleRing, ringArea, ringBox, ringDistance } from "../surface/ring.ts";
import { offsetOutline } from "./offsetOutline.ts";
import { type PanelPlace, placeMarks } from "./placeMarks.ts";

/** A flap folded along a curve may be this share too short before it must be slit. */
const FLAP_SHORTAGE = 0.005;
/** The cut line must lie at its allowance within this, mm. */
const ALLOWANCE_MM = 1;
/** Points of the net closer than this are one, mm. */
const SAME_MM = 1e-6;

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

/** The net ring through all boundary points, and where each side lies in it. */
function netOutline(panel: FlatPanel): { net: Ring; runs: { netFrom: number; netTo: number }[] } {
  const points: number[] = [];
  const runs: { netFrom: number; netTo: number }[] = [];
  panel.sides.forEach((side, k) => {
    const next = panel.sides[(k + 1) % panel.sides.length];
    const last = side.vertices[side.vertices.length - 1];
    if (side.vertices.length < 2 || last !== next.vertices[0])
      throw new PlanError(
        "outline-sides",
        `Side ${k + 1} (${side.id}) of panel ${panel.id} does not end where the next one begins: the outline is open.`,
        [panel.id, side.id],
      );
    const netFrom = points.length / 2;
    for (const v of side.vertices.slice(0, -1)) {
      const x = panel.flat[2 * v];
      const y = panel.flat[2 * v + 1];
      const m = points.length;
      if (m === 0 || Math.hypot(x - points[m - 2], y - points[m - 1]) > SAME_MM) points.push(x, y);
    }
    runs.push({ netFrom, netTo: 0 });
  });
  const m = points.length;
  if (m > 2 && Math.hypot(points[0] - points[m - 2], points[1] - points[m - 1]) <= SAME_MM) points.length = m - 2;
  const n = Math.max(1, points.length / 2);
  for (const run of runs) run.netFrom %= n;
  for (const [k, run] of runs.entries()) run.netTo = runs[(k + 1) % runs.length].netFrom;
  return { net: Float64Array.from(points), runs };
}

/** Points at equal steps of arc length over the middle 80 % of a side. */
function middlePoints(panel: FlatPanel, side: PanelSide, count: number): [number, number][] {
  const xy = side.vertices.map((v): [number, number] => [panel.flat[2 * v], panel.flat[2 * v + 1]]);
  const arc = [0];
  for (let i = 1; i < xy.length; i++)
    arc.push(arc[i - 1] + Math.hypot(xy[i][0] - xy[i - 1][0], xy[i][1] - xy[i - 1][1]));
  const total = arc[arc.length - 1];
  return Array.from({ length: count }, (_, k) => {
    const s = total * (0.1 + (0.8 * k) / (count - 1));
    let i = 1;
    while (i < arc.length - 1 && arc[i] < s) i++;
    const t = (s - arc[i - 1]) / (arc[i] - arc[i - 1] || 1);
    return [xy[i - 1][0] + t * (xy[i][0] - xy[i - 1][0]), xy[i - 1][1] + t * (xy[i][1] - xy[i - 1][1])];
  });
}

/** Greatest curvature of a side in the flat, 1/mm, from circles through points of it about `reach` apart. */
export function sideCurvature(panel: FlatPanel, side: PanelSide, reach: number): number {
  const xy = side.vertices.map((v): [number, number] => [panel.flat[2 * v], panel.flat[2 * v + 1]]);
  const away = (i: number, j: number) => Math.hypot(xy[j][0] - xy[i][0], xy[j][1] - xy[i][1]);
  let greatest = 0;
  for (let i = 1; i + 1 < xy.length; i++) {
    let before = i - 1;
    let after = i + 1;
    while (before > 0 && away(before, i) < reach) before--;
    while (after + 1 < xy.length && away(i, after) < reach) after++;
    if (Math.min(away(before, i), away(i, after)) < reach / 2) continue;
    const [a, b, c] = [xy[before], xy[i], xy[after]];
    const double = (b[0] - a[0]) * (c[1] - b[1]) - (b[1] - a[1]) * (c[0] - b[0]);
    const scale = away(before, i) * away(i, after) * away(before, after);
    if (scale > 0) greatest = Math.max(greatest, (2 * Math.abs(double)) / scale);
  }
  return greatest;
}

function finding(code: string, level: Finding["level"], where: string[], value: number, limit: number): Finding {
  return { code, level, station: "panels", where, value, limit, text: "", remedy: "", basis: "own argument" };
}

/** A flap that is folded along a curve is 2p/R too short or too long. */
function checkFolds(panel: FlatPanel, allowances: number[]): Finding[] {
  const found: Finding[] = [];
  panel.sides.forEach((side, k) => {
    const p = allowances[k];
    if (p <= 0 || (side.kind !== "cable" && side.kind !== "free")) return;
    const curvature = sideCurvature(panel, side, 4 * p);
    const shortage = 2 * p * curvature;
    if (shortage <= FLAP_SHORTAGE) return;
    found.push({
      ...finding("pocket-curve", "caution", [panel.id, side.id], 100 * shortage, 100 * FLAP_SHORTAGE),
      text:
        `The ${p} mm flap of panel ${panel.id} along ${side.id} is folded on a radius of ${(1 / curvature / 1000).toFixed(2)} m: ` +
        `its rim is ${(100 * shortage).toFixed(2)} % out of length, more than ${100 * FLAP_SHORTAGE} %.`,
      remedy: "Slit the flap, or make the pocket of a separate strip (allowances.pocketStrip).",
    });
  });
  return found;
}

/** The cut line lies at each side's allowance (median over the middle 80 %; set-backs are not asked). */
function checkAllowances(panel: CutPanel): { checks: Check[]; findings: Finding[] } {
  let worst = 0;
  const findings: Finding[] = [];
  panel.sides.forEach((side, k) => {
    const want = panel.outlines[k].allowance;
    if (want < 0 || panel.cut.length === 0) return;
    const off = middlePoints(panel, side, 17).map(([x, y]) => ringDistance(panel.cut, x, y));
    const miss = Math.abs([...off].sort((a, b) => a - b)[8] - want);
    worst = Math.max(worst, miss);
    if (miss > ALLOWANCE_MM)
      findings.push({
        ...finding("allowance-missed", "caution", [panel.id, side.id], miss, ALLOWANCE_MM),
        text: `Along side ${side.id} of panel ${panel.id} the cut line misses its allowance of ${want} mm by ${miss.toFixed(1)} mm: the side is too short for it.`,
        remedy: "Make the allowance smaller, or merge the short side with its neighbour in the layout.",
      });
  });
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

/**
 * The panel ready to be cut: outlines, allowances, marks, area and size, with what a person must know about them.
 * @units mm, areas m2; warp along x, outer face up
 * @throws PlanError outline-sides: sides do not close; outline-seam: a seam the layout does not list;
 *   outline-winding: the net outline runs clockwise or encloses nothing; outline-empty: set-backs leave no cloth
 */
export function outlinePanel(panel: FlatPanel, place: PanelPlace, allowances: Allowances): StationResult<CutPanel> {
  const { net, runs } = netOutline(panel);
  if (!(ringArea(net) > 0))
    throw new PlanError("outline-winding", `The net outline of panel ${panel.id} runs clockwise or encloses no area.`, [
      panel.id,
    ]);
  const distance = panel.sides.map((side) => sideAllowance(panel.id, side, place, allowances));
  const anchors = place.anchors.filter((a) => panel.surfaceVertex.includes(a.vertex));
  const discs = anchors.flatMap((a) =>
    [...panel.surfaceVertex.keys()]
      .filter((v) => panel.surfaceVertex[v] === a.vertex)
      .map((v) => ({ x: panel.flat[2 * v], y: panel.flat[2 * v + 1], radius: a.cutBack })),
  );
  const offsets = panel.sides
    .map((side, k) => ({
      from: runs[k].netFrom,
      to: runs[k].netTo,
      distance: distance[k],
      fold: side.kind === "cable" || side.kind === "free",
    }))
    .filter((s) => panel.sides.length === 1 || s.from !== s.to);
  const cut = offsetOutline(net, offsets, discs);
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
    outlines: runs.map((run, k) => ({ ...run, allowance: distance[k] })),
    marks: [],
    area: { net: ringArea(net) / 1e6, cut: ringArea(cut) / 1e6 },
    size: { length: box.x1 - box.x0, width: box.y1 - box.y0 },
  };
  output.marks = placeMarks(output, { ...place, anchors });
  const rings = checkRings(panel, net, cut);
  const offs = checkAllowances(output);
  return {
    output,
    findings: [...checkFolds(panel, distance), ...rings.findings, ...offs.findings],
    checks: [...rings.checks, ...offs.checks],
  };
}
