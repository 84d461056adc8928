// The flattening station: strips of the form to flat, compensated panels with the stress they will carry. No outlines, no marks.
// Method: least strain energy of E − E0 over the flat points of all panels together, sides of seams cut equally long.
import { PlanError, type StationContext, type StationResult } from "../../problem.ts";
import type { FlatPanel } from "../../records/flatPanel.ts";
import type { StripLayout } from "../../records/stripLayout.ts";
import { buildStiffness, type ClothStiffness } from "../../structure/cloth.ts";
import { listLapLines, measureLapShares } from "../../structure/lapShares.ts";
import { measureAreas } from "../../surface/measures.ts";
import { checkBeyondFade } from "../proof/beyondFade.ts";
import { checkFlatPanels, listBrokenChecks, listPanelFindings } from "../proof/checkFlatPanels.ts";
import { measurePanelStress } from "../proof/stressFigures.ts";
import { buildFlattenProblem, listDrafts, type PanelDraft } from "./flattenProblem.ts";
import { FLATTEN_TOLERANCE, type FlattenTolerance, solveFlatten } from "./flattenSolve.ts";
import { buildFlattenStart } from "./flattenStart.ts";
import { buildRunDirections } from "./localStrip.ts";
import { buildTargetField, type FlattenOptions } from "./panelTarget.ts";

/** Enough to see a panel while its seam is dragged: the step that promises so little is the last, and leaves far less (see the test). */
const SEEN = { ...FLATTEN_TOLERANCE, energy: 1e-2, gap: 1e-5 };
/** Enough to read from where a fade reaches. */
const ROUGH = { ...FLATTEN_TOLERANCE, energy: 1e-3, gap: 1e-5 };

/**
 * All panels of a layout, flattened together.
 * @units flat in mm, compensated, warp along x, outer face up
 * @throws PlanError cloth-constants, compensation-range, strip-outline, strip-ends, strip-axis, panel-fold, flatten-start, cancelled
 */
export function flattenPanels(
  layout: StripLayout,
  options: FlattenOptions,
  context: StationContext,
): StationResult<FlatPanel[]> {
  const { panels, converged, gap } = flattenStrips({
    layout,
    options,
    others: [],
    start: new Map(),
    tolerance: FLATTEN_TOLERANCE,
    context,
  });
  const findings = listPanelFindings(panels);
  if (!converged) {
    findings.unshift({
      code: "flatten-unfinished",
      level: "caution",
      station: "panels",
      where: panels.map((p) => p.id),
      value: 1000 * gap,
      limit: 1000 * FLATTEN_TOLERANCE.gap,
      text: `the flattening stopped before it settled; the sides of seams are equal to ${(1000 * gap).toFixed(4)} mm, the stress figures are those of the panels as they are`,
      remedy: "look for needle triangles and very curved strips; more seams make the strips flatter",
      basis: "own argument",
    });
  }
  const checks = checkFlatPanels(panels, layout);
  const fade = checkBeyondFade(panels, buildStiffness(options.fabric));
  return {
    output: panels,
    findings: [...listBrokenChecks(checks, panels), ...findings, ...fade.findings],
    checks: [...checks, ...fade.checks],
  };
}

/**
 * Flattens again the panels that `others` does not hold; seams shared with those keep the length they are cut to.
 * For a dragged seam: its two panels anew, the rest as it was. The energy is that of these panels alone, so a last flattenPanels is due.
 * `start`: by strip, its vertices laid flat without a fold; strips it lacks are unfolded. @shape 2*n
 * @throws PlanError as flattenPanels
 */
export function reflattenPanels(
  layout: StripLayout,
  options: FlattenOptions,
  others: readonly FlatPanel[],
  start: ReadonlyMap<string, Float64Array<ArrayBuffer>>,
): FlatPanel[] {
  return flattenStrips({ layout, options, others, start, tolerance: SEEN, context: {} }).panels;
}

interface FlattenWork {
  layout: StripLayout;
  options: FlattenOptions;
  others: readonly FlatPanel[];
  start: ReadonlyMap<string, Float64Array<ArrayBuffer>>;
  tolerance: FlattenTolerance;
  context: StationContext;
}

function flattenStrips(work: FlattenWork): { panels: FlatPanel[]; converged: boolean; gap: number } {
  const { layout, options, others, start, tolerance, context } = work;
  const stiffness = buildStiffness(options.fabric);
  const drafts = listDrafts(layout, options, stiffness, new Set(others.map((p) => p.id)));
  if (drafts.length === 0) return { panels: [], converged: true, gap: 0 };
  const problem = buildFlattenProblem(layout, drafts, others, stiffness);
  let x = new Float64Array(2 * problem.nV);
  for (const d of drafts)
    x.set(buildFlattenStart(d.strip, d.target.turn, d.target.elastic, start.get(d.strip.id)), 2 * d.first);
  let result = { x, converged: true, gap: 0 };
  // Where a fade reaches is read from flat cloth, so that is made first, its decompensated sides at their length already.
  const rounds = drafts.some((d) => d.target.decompensated.length > 0) ? 2 : 1;
  for (let round = 0; round < rounds; round++) {
    for (const d of drafts) {
      const own = x.subarray(2 * d.first, 2 * d.first + 2 * d.strip.surfaceVertex.length);
      const target = round === rounds - 1 ? d.target : { ...d.target, decompensated: [] };
      const field = buildTargetField(d.strip, target, own);
      const area = measureAreas({ xyz: d.strip.erected, tri: d.strip.tri });
      // Two layers carry the intended force at half the strain, and are twice as stiff.
      const laps = lapOf(d, layout, options);
      problem.target.set(
        field.strain.map((e, i) => e / (1 + laps[Math.floor(i / 3)])),
        3 * d.firstTriangle,
      );
      problem.weight.set(
        field.share.map((w, t) => w * area[t] * (1 + laps[t])),
        d.firstTriangle,
      );
    }
    const last = round === rounds - 1;
    result = solveFlatten(problem, x, last ? tolerance : ROUGH, (step) => {
      if (context.cancelled?.())
        throw new PlanError("cancelled", "stopped on request while the panels were flattened", "panels");
      const share = (round + step / (step + 6)) / rounds;
      context.onProgress?.(share, `flattening ${drafts.length} panels, step ${step}`);
    });
    x = result.x;
  }
  return {
    panels: drafts.map((d) => buildFlatPanel(d, result.x, stiffness, options.fabric.id)),
    converged: result.converged,
    gap: result.gap,
  };
}

/** Share of each triangle under a second layer of cloth, none where the job counts one. @shape nT */
function lapOf({ strip }: PanelDraft, layout: StripLayout, { lap }: FlattenOptions): Float64Array<ArrayBuffer> {
  const surface = { xyz: strip.erected, tri: strip.tri };
  return measureLapShares(surface, lap ? listLapLines(layout, strip.id, strip.sides, lap) : []);
}

/** The panel record of a draft: cut cloth in mm, its lowest point on both axes at 0. */
function buildFlatPanel(
  draft: PanelDraft,
  x: Float64Array<ArrayBuffer>,
  stiffness: ClothStiffness,
  fabric: string,
): FlatPanel {
  const { strip, target } = draft;
  const n = strip.surfaceVertex.length;
  const flat = new Float64Array(2 * n);
  for (let c = 0; c < 2; c++) {
    const scale = 1000 / (1 + (c === 0 ? target.permanent.warp : target.permanent.weft));
    let low = Number.POSITIVE_INFINITY;
    for (let v = 0; v < n; v++) low = Math.min(low, scale * x[2 * (draft.first + v) + c]);
    for (let v = 0; v < n; v++) flat[2 * v + c] = scale * x[2 * (draft.first + v) + c] - low;
  }
  const { erected, tri } = strip;
  const stress = measurePanelStress(
    {
      erected,
      flat,
      tri,
      permanent: target.permanent,
      target: target.stress,
      run: buildRunDirections(strip),
      turn: target.turn,
    },
    stiffness,
  );
  const panel: FlatPanel = {
    id: strip.id,
    fabric,
    batch: target.batch,
    surfaceVertex: strip.surfaceVertex,
    erected,
    flat,
    tri,
    axis: { from: strip.from, to: strip.to, turn: target.turn },
    sides: strip.sides.map((s) => ({
      ...s,
      lengthErected: measureRun(erected, 3, s.vertices),
      lengthFlat: measureRun(flat, 2, s.vertices),
    })),
    target: target.stress,
    compensation: target.compensation,
    permanent: target.permanent,
    decompensated: target.decompensated,
    stress,
  };
  if (!flat.every(Number.isFinite)) {
    throw new PlanError("flatten-start", `panel ${strip.id} came out with points that are no numbers`, strip.id);
  }
  return panel;
}

/** Length of a polyline through points of 2 or 3 coordinates. */
function measureRun(x: Float64Array<ArrayBuffer>, size: number, path: number[]): number {
  let sum = 0;
  for (let i = 1; i < path.length; i++) {
    let d2 = 0;
    for (let k = 0; k < size; k++) d2 += (x[size * path[i] + k] - x[size * path[i - 1] + k]) ** 2;
    sum += Math.sqrt(d2);
  }
  return sum;
}
