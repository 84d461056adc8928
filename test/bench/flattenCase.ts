// `bench flatten STRIP.obj`: a bare strip flattened as one panel of an isotropic cloth without prestress, and the time it takes, warm.
import { flattenPanels } from "../../src/core/panels/flatten/flattenPanels.ts";
import type { FlattenOptions } from "../../src/core/panels/flatten/panelTarget.ts";
import { buildRelaxedFlat } from "../../src/core/panels/proof/stressFigures.ts";
import type { FlatPanel } from "../../src/core/records/flatPanel.ts";
import type { StripLayout } from "../../src/core/records/stripLayout.ts";
import { buildErectedMetric, measureTriangleStrain } from "../../src/core/structure/cloth.ts";
import { buildAdjacency, findBoundaryLoops } from "../../src/core/surface/adjacency.ts";
import { measureAreas } from "../../src/core/surface/measures.ts";
import type { Surface } from "../../src/core/surface/surface.ts";

/** Shortest time spent on warming up, ms. */
const WARM_MS = 500;
const RUNS = 7;

/** Isotropic: G = E/(2(1 + ν)), so that the answer does not hang on where the warp lies. */
const OPTIONS: FlattenOptions = {
  fabric: { id: "bench", Ew: 600, Ef: 600, nuWf: 0.3, G: 600 / 2.6 },
  prestress: { warp: 0, weft: 0 },
  panels: {},
  compensation: {},
  decompensation: { clamped: null, ring: null, cable: null },
  rings: [],
};

/** Median ms of the warm runs; strains are those of the two principal stretches, |s − 1|, greatest and rms by erected area. */
export function benchFlatten(surface: Surface): { ms: number; strainMax: number; strainRms: number } {
  const layout = layOutWhole(surface);
  const run = () => flattenPanels(layout, OPTIONS, {}).output[0];
  const warmFrom = performance.now();
  let panel = run();
  while (performance.now() - warmFrom < WARM_MS) panel = run();
  const times: number[] = [];
  for (let i = 0; i < RUNS; i++) {
    const start = performance.now();
    panel = run();
    times.push(performance.now() - start);
  }
  times.sort((a, b) => a - b);
  return { ms: times[(RUNS - 1) / 2], ...measureStretch(panel) };
}

/** The whole surface as one strip, its axis between two far ends of its rim. */
function layOutWhole(surface: Surface): StripLayout {
  const [rim] = findBoundaryLoops(surface, buildAdjacency(surface));
  const from = farthest(surface, rim, rim[0]);
  const to = farthest(surface, rim, from);
  const triangles = Array.from({ length: surface.tri.length / 3 }, (_, t) => t);
  const side = { kind: "free" as const, id: "rim", vertices: [...rim, rim[0]] };
  return { surface, seams: [], strips: [{ id: "P1", triangles, sides: [side], from: [from], to: [to] }], choices: [] };
}

function farthest(surface: Surface, among: number[], from: number): number {
  const x = surface.xyz;
  const far = (v: number) => [0, 1, 2].reduce((s, k) => s + (x[3 * v + k] - x[3 * from + k]) ** 2, 0);
  return among.reduce((best, v) => (far(v) > far(best) ? v : best), among[0]);
}

function measureStretch(panel: FlatPanel): { strainMax: number; strainRms: number } {
  const metric = buildErectedMetric(panel.erected, panel.tri);
  const area = measureAreas({ xyz: panel.erected, tri: panel.tri });
  const xy = buildRelaxedFlat(panel.flat, panel.permanent);
  const e = new Float64Array(7);
  let strainMax = 0;
  let total = 0;
  let sum = 0;
  for (let t = 0; t < area.length; t++) {
    const [, , , , ww, ff, wf] = measureTriangleStrain(metric, xy, panel.tri, t, e);
    const half = Math.sqrt(((ww - ff) / 2) ** 2 + wf * wf);
    total += 2 * area[t];
    for (const square of [(ww + ff) / 2 + half, (ww + ff) / 2 - half]) {
      const off = Math.abs(Math.sqrt(square) - 1);
      strainMax = Math.max(strainMax, off);
      sum += area[t] * off * off;
    }
  }
  return { strainMax, strainRms: Math.sqrt(sum / total) };
}
