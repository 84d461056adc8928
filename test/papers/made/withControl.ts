// A made panel with its control lengths, measured as the panels station does.
import { measureControl } from "../../../src/core/panels/outline/controlLengths.ts";
import type { FactsPanel } from "../../../src/core/records/facts.ts";
import type { CutPanel } from "../../../src/core/records/flatPanel.ts";

/** The panel with `control` as measured from its net and cut line. */
export function withControl(panel: FactsPanel): FactsPanel {
  const ring = (points: readonly number[][]) => new Float64Array(points.flat());
  const { sides, axis } = panel;
  const read: Pick<CutPanel, "net" | "cut" | "flat" | "sides" | "axis" | "outlines"> = {
    net: ring(panel.net),
    cut: ring(panel.cut),
    flat: ring(panel.flat),
    sides,
    axis,
    outlines: sides,
  };
  return { ...panel, control: measureControl(read as CutPanel) };
}
