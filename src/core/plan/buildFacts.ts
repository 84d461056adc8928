// From the stations' records to the facts record: the one place where typed arrays become lists.
import type { Facts, FactsForm, FactsPanel, FactsPiece, FactsRelief, FactsSeam, Vec2 } from "../records/facts.ts";
import type { CutPanel, CutPiece, Ring } from "../records/flatPanel.ts";
import type { FormRelief, FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import { measurePathLength, vertexAt } from "../surface/measures.ts";
import type { Surface, Vec3 } from "../surface/surface.ts";

function listTriples(values: ArrayLike<number>): Vec3[] {
  return Array.from({ length: values.length / 3 }, (_, i) => [values[3 * i], values[3 * i + 1], values[3 * i + 2]]);
}

function listPairs(values: Ring): Vec2[] {
  return Array.from({ length: values.length / 2 }, (_, i) => [values[2 * i], values[2 * i + 1]]);
}

function listPath(surface: Surface, vertices: readonly number[]): Vec3[] {
  return vertices.map((v) => vertexAt(surface, v));
}

/** Head of the file: what stands in every title block. */
export function buildHead(job: Job, revision: string): Facts {
  const { site, ...papers } = job.papers;
  return {
    format: "seamstay-facts",
    version: 1,
    job: { title: job.title, issue: job.issue, revision, ...papers, mesh: job.meshName, ...(site ? { site } : {}) },
    fabrics: { [job.fabric.id]: job.fabric },
    checks: [],
    findings: [],
  };
}

/** The form's part. */
export function buildFormFacts(form: FoundForm): FactsForm {
  return {
    vertices: listTriples(form.surface.xyz),
    triangles: listTriples(form.surface.tri),
    stress: form.stress,
    ...(form.stressSpread ? { stressSpread: form.stressSpread } : {}),
    edges: form.edges.map((e) => ({
      id: e.id,
      kind: e.kind,
      vertices: e.vertices,
      force: e.force,
      reaction: e.reaction,
      forceFrom: e.forceFrom,
      length: measurePathLength(listPath(form.surface, e.vertices)),
      ...(e.spread === undefined ? {} : { spread: e.spread }),
    })),
    anchors: form.anchors,
    residual: form.residual,
    area: form.area,
    reactions: form.reactions,
    ...(form.relief ? { relief: buildReliefFacts(form.relief) } : {}),
  };
}

/** Difference in length between a strip's edges and its middle that the strip width is told for. Common practice. */
const EDGE_SHARE = 0.005;

/** Curvature and slope. @source strip width w = √(8e/|K|): check-values.md 4.2 */
function buildReliefFacts({ curvature, flattest, flattestAt, flatShare, pits }: FormRelief): FactsRelief {
  const most = curvature ? Math.max(Math.abs(curvature.least), Math.abs(curvature.greatest)) : 0;
  const width = Math.sqrt((8 * EDGE_SHARE) / most);
  return {
    curvature,
    // beyond a kilometre it is rounding that curves
    stripWidth: width < 1000 ? width : null,
    slope: { least: (180 * flattest) / Math.PI, leastAt: flattestAt },
    flatShare,
    pits,
  };
}

/** The seams' part; sides in the panels' own vertex numbers, both in the seam's order (empty while there are no panels). */
export function buildSeamFacts(layout: StripLayout, panels: readonly CutPanel[]): FactsSeam[] {
  const local = new Map(panels.map((p) => [p.id, new Map(Array.from(p.surfaceVertex, (v, i) => [v, i]))]));
  return layout.seams.map((s) => ({
    id: s.id,
    path: listPath(layout.surface, s.vertices),
    length: s.length,
    weld: s.weld,
    cable: s.cable,
    upper: s.upper,
    sides: s.strips.map((panel) => {
      const own = local.get(panel);
      return { panel, vertices: own ? s.vertices.map((v) => own.get(v) ?? -1) : [] };
    }),
  }));
}

/** One panel's part. */
export function buildPanelFacts(p: CutPanel): FactsPanel {
  return {
    id: p.id,
    fabric: p.fabric,
    batch: p.batch,
    erected: listTriples(p.erected),
    flat: listPairs(p.flat),
    triangles: listTriples(p.tri),
    axis: p.axis,
    target: p.target,
    compensation: p.compensation,
    permanent: p.permanent,
    decompensated: p.decompensated,
    stress: p.stress,
    net: listPairs(p.net),
    cut: listPairs(p.cut),
    sides: p.sides.map((s, k) => ({ ...s, ...p.outlines[k] })),
    marks: p.marks,
    area: p.area,
    size: p.size,
    control: p.control,
  };
}

/** The part of a piece that is no panel. */
export function buildPieceFacts(p: CutPiece): FactsPiece {
  return { ...p, cut: listPairs(p.cut) };
}
