// Whether panels with decompensated sides carry the intended stress where nothing was taken back. Changes nothing.
// Source: own argument: what is taken back beside a rigid part must not be paid for by the rest of the panel.
import type { Check, Finding } from "../../problem.ts";
import type { FlatPanel } from "../../records/flatPanel.ts";
import type { ClothStiffness } from "../../structure/cloth.ts";
import { measureAreas } from "../../surface/measures.ts";
import { pointSegmentSquared } from "../../surface/ring.ts";
import { measurePatternedStress } from "./stressFigures.ts";

/** Mean stress beyond the fade may be off by this share of the target. */
const FADE_LIMIT = 0.25;

/** Whether a point lies within `reach` of a side in the flat, mm. */
function isNear(panel: FlatPanel, side: number, [x, y]: [number, number], reach: number): boolean {
  const { flat } = panel;
  const { vertices } = panel.sides[side];
  for (let i = 1; i < vertices.length; i++) {
    const [a, b] = [2 * vertices[i - 1], 2 * vertices[i]];
    if (pointSegmentSquared(x, y, flat[a], flat[a + 1], [flat[b], flat[b + 1]]) <= reach * reach) return true;
  }
  return false;
}

/** Mean stress over the erected area beyond every fade of a panel; null where none is left. @units kN/m */
export function measureBeyondFade(panel: FlatPanel, d: ClothStiffness): { warp: number; weft: number } | null {
  const { flat, tri, erected } = panel;
  const stress = measurePatternedStress(panel, d);
  const areas = measureAreas({ xyz: erected, tri });
  let total = 0;
  const sum = { warp: 0, weft: 0 };
  for (let t = 0; t < areas.length; t++) {
    const [a, b, c] = [2 * tri[3 * t], 2 * tri[3 * t + 1], 2 * tri[3 * t + 2]];
    const middle: [number, number] = [(flat[a] + flat[b] + flat[c]) / 3, (flat[a + 1] + flat[b + 1] + flat[c + 1]) / 3];
    if (panel.decompensated.some(({ side, fade }) => isNear(panel, side, middle, 1000 * fade))) continue;
    total += areas[t];
    sum.warp += areas[t] * stress[3 * t];
    sum.weft += areas[t] * stress[3 * t + 1];
  }
  return total > 0 ? { warp: sum.warp / total, weft: sum.weft / total } : null;
}

/** The check, where any panel is decompensated, and a caution for each panel that fails it. */
export function checkBeyondFade(
  panels: readonly FlatPanel[],
  d: ClothStiffness,
): { checks: Check[]; findings: Finding[] } {
  let worst = -1;
  const findings: Finding[] = [];
  for (const p of panels) {
    const mean = p.decompensated.length > 0 ? measureBeyondFade(p, d) : null;
    if (mean === null) continue;
    for (const way of ["warp", "weft"] as const) {
      const off = Math.abs(mean[way] - p.target[way]) / Math.max(Math.abs(p.target[way]), 1e-9);
      worst = Math.max(worst, off);
      if (off <= FADE_LIMIT) continue;
      findings.push({
        code: "panel-fade",
        level: "caution",
        station: "panels",
        where: p.id,
        value: off,
        limit: FADE_LIMIT,
        text: `panel ${p.id}: beyond the fade of its decompensated sides the mean ${way} stress as patterned is ${mean[way].toFixed(2)} kN/m, intended ${p.target[way].toFixed(2)}; ${(100 * FADE_LIMIT).toFixed(0)} % off is allowed`,
        remedy: "a longer fade (decompensation), or no decompensation along the longer sides of narrow panels",
        basis: "own argument",
      });
    }
  }
  if (worst < 0) return { checks: [], findings };
  const text = "mean stress beyond the fade of decompensated sides, share off the intended one";
  return {
    checks: [{ station: "panels", text, value: worst, limit: FADE_LIMIT, holds: worst <= FADE_LIMIT }],
    findings,
  };
}
