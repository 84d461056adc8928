// The stress where nothing is taken back, on a flat sheet whose stress can be set by hand.
import { expect, test } from "vitest";
import { flattenPanels } from "../../../src/core/panels/flatten/flattenPanels.ts";
import { checkBeyondFade, measureBeyondFade } from "../../../src/core/panels/proof/beyondFade.ts";
import { buildStiffness } from "../../../src/core/structure/cloth.ts";
import { CLOTH, cutGrid, gridSurface, PLAIN } from "../stripFixtures.ts";

const D = buildStiffness(CLOTH);
const layout = cutGrid(
  gridSurface(8, 24, (i, j) => [0.25 * i, 0.25 * j, 0]),
  8,
  24,
  [0, 8],
);

test("without decompensation there is nothing to check", () => {
  const { output, checks } = flattenPanels(layout, PLAIN, {});
  expect(checkBeyondFade(output, D)).toEqual({ checks: [], findings: [] });
  expect(checks.some((c) => c.text.includes("fade"))).toBe(false);
});

test("a sheet taken back along its clamps passes, and the station says so", () => {
  const options = { ...PLAIN, decompensation: { clamped: 0.6, ring: null, cable: null } };
  const { checks, findings } = flattenPanels(layout, options, {});
  const [row] = checks.filter((c) => c.text.includes("fade"));
  expect(row.holds).toBe(true);
  expect(findings.some((f) => f.code === "panel-fade")).toBe(false);
});

// By hand: beyond 1 m of the south side the sheet is cut k times shorter along the warp than erected: E = ½(k² − 1).
test("the mean is that of the cloth beyond the fade; a quarter off is a caution", () => {
  const [panel] = flattenPanels(layout, { ...PLAIN, prestress: { warp: 0, weft: 0 } }, {}).output;
  const stretch = (k: number) => {
    const flat = panel.flat.slice();
    for (let i = 0; i < flat.length; i += 2) if (flat[i] > 1000) flat[i] = 1000 + (flat[i] - 1000) / k;
    const target = { warp: 2, weft: 2 };
    const fade = panel.sides.findIndex((s) => s.id === "south");
    return { ...panel, flat, target, decompensated: [{ side: fade, fade: 1 }] };
  };
  const k = 1.005;
  const mean = measureBeyondFade(stretch(k), D);
  expect(mean?.warp).toBeCloseTo((D.ww * (k * k - 1)) / 2, 6);
  expect(mean?.weft).toBeCloseTo((D.wf * (k * k - 1)) / 2, 6);
  const { checks, findings } = checkBeyondFade([stretch(k)], D);
  expect(checks[0].holds).toBe(false);
  expect(findings.map((f) => [f.code, f.level])).toEqual([
    ["panel-fade", "caution"],
    ["panel-fade", "caution"],
  ]);
  expect(measureBeyondFade({ ...stretch(k), decompensated: [{ side: 0, fade: 100 }] }, D)).toBeNull();
});
