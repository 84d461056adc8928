import { expect, test } from "vitest";
import { flattenPanels } from "../../../src/core/panels/flatten/flattenPanels.ts";
import {
  checkFlatPanels,
  listBrokenChecks,
  listPanelFindings,
  measureAxisError,
} from "../../../src/core/panels/proof/checkFlatPanels.ts";
import type { FlatPanel } from "../../../src/core/records/flatPanel.ts";
import { cutGrid, gridSurface, PLAIN } from "../stripFixtures.ts";

const layout = cutGrid(
  gridSurface(4, 6, (i, j) => [0.5 * i, 0.5 * j, 0]),
  4,
  6,
  [0, 2, 4],
);
const sound = flattenPanels(layout, PLAIN, {}).output;

/** The sound panels with the first one's points moved. */
function moved(change: (flat: FlatPanel["flat"]) => void): FlatPanel[] {
  const flat = sound[0].flat.slice();
  change(flat);
  return [{ ...sound[0], flat }, sound[1]];
}
const broken = (panels: FlatPanel[]) => checkFlatPanels(panels, layout).map((c) => c.holds);

test("sound panels pass", () => {
  expect(broken(sound)).toEqual([true, true, true, true]);
  expect(listBrokenChecks(checkFlatPanels(sound, layout), sound)).toEqual([]);
  expect(listPanelFindings(sound)).toEqual([]);
});

test("a seam side 0.6 mm longer is seen, as a whole and in its piece, and stops the papers", () => {
  // The last vertex of the seam on the first panel: local 20 of rows of three.
  const panels = moved((flat) => {
    flat[2 * 20] += 0.6;
  });
  expect(broken(panels)).toEqual([true, false, false, true]);
  const findings = listBrokenChecks(checkFlatPanels(panels, layout), panels);
  expect(findings.map((f) => [f.code, f.level])).toEqual([
    ["flatten-check", "stop"],
    ["flatten-check", "stop"],
  ]);
  expect(findings[0].value).toBeCloseTo(0.6, 3);
});

test("a triangle turned over is counted", () => {
  const panels = moved((flat) => {
    flat[2 * 4] += 2000;
  });
  expect(checkFlatPanels(panels, layout)[0].value).toBeGreaterThan(0);
  expect(broken(panels)[0]).toBe(false);
});

test("a panel turned by 0.2 degrees is seen, whichever way its turn is written", () => {
  const a = (0.2 * Math.PI) / 180;
  const panels = moved((flat) => {
    for (let i = 0; i < flat.length; i += 2) {
      const [x, y] = [flat[i], flat[i + 1]];
      flat[i] = Math.cos(a) * x - Math.sin(a) * y;
      flat[i + 1] = Math.sin(a) * x + Math.cos(a) * y;
    }
  });
  expect(measureAxisError(panels[0])).toBeCloseTo(0.2, 6);
  expect(broken(panels)).toEqual([true, true, true, false]);
  const turned = { ...panels[0], axis: { ...panels[0].axis, turn: -359.8 } };
  expect(measureAxisError(turned)).toBeLessThan(1e-6);
});

test("a quarter of the target as rms error is the limit, per way", () => {
  const stress = { ...sound[0].stress, warp: { ...sound[0].stress.warp, rmsError: 0.51 } };
  const [finding, ...rest] = listPanelFindings([{ ...sound[0], stress }, sound[1]]);
  expect(rest).toEqual([]);
  expect([finding.code, finding.where, finding.value, finding.limit]).toEqual(["panel-stress", "P1", 0.51, 0.5]);
  const compressed = listPanelFindings([{ ...sound[0], stress: { ...sound[0].stress, compressedShare: 0.021 } }]);
  expect(compressed.map((f) => f.code)).toEqual(["panel-compressed"]);
});
