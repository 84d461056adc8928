// The problem of the flattening in plain arrays: all panels' triangles, the ties of their seams, the conditions on their axes.
// Energy and derivatives stand in flattenSystem.ts, the iteration in flattenSolve.ts.
import { PlanError } from "../../problem.ts";
import type { FlatPanel } from "../../records/flatPanel.ts";
import type { StripLayout } from "../../records/stripLayout.ts";
import { buildErectedMetric, type ClothStiffness } from "../../structure/cloth.ts";
import { buildHeldOutline, type HeldOutline, measureAlong } from "./heldOutline.ts";
import { buildLocalStrip, type LocalStrip } from "./localStrip.ts";
import { buildPanelTarget, type FlattenOptions, type PanelTarget } from "./panelTarget.ts";

/** A strip on its way to a panel; first and firstTriangle: where it begins among all. */
export interface PanelDraft {
  strip: LocalStrip;
  target: PanelTarget;
  first: number;
  firstTriangle: number;
}

/** A linear condition on the flat points: the sum of value[i]·X[dof[i]] is nought. */
export interface AxisCondition {
  /** Ascending, each once. */
  dof: number[];
  value: number[];
}

/**
 * What is minimised over the flat points X of the relaxed cloth: Σ ½ weight·(E − E0)ᵀD(E − E0), with the ties and axes as conditions.
 * @shape tri, metric and target 3*nT; weight nT; shrink 2*nV; tie 4*nTies; tieLength nTies; pin one vertex a panel
 * @units m, kN/m
 */
export interface FlattenProblem {
  nV: number;
  tri: Uint32Array<ArrayBuffer>;
  /** Squared lengths and dot product of the erected sides (buildErectedMetric). */
  metric: Float64Array<ArrayBuffer>;
  /** Erected area, less within the fade of a decompensated side, m2. */
  weight: Float64Array<ArrayBuffer>;
  stiffness: ClothStiffness;
  /** Intended strain E0 of each triangle: E_ww, E_ff, 2E_wf. */
  target: Float64Array<ArrayBuffer>;
  /** 1/(1 + permanent) of each coordinate: cut cloth = shrink·X. */
  shrink: Float64Array<ArrayBuffer>;
  /** Vertices a, b and c, d of two pieces that are cut equally long; c = d = -1 where the piece is cut to tieLength. */
  tie: Int32Array<ArrayBuffer>;
  tieLength: Float64Array<ArrayBuffer>;
  axes: AxisCondition[];
  pin: number[];
}

/** An axis condition: the mean points of two groups of vertices lie on a line square to (nx, ny). */
export function buildAxisCondition(from: number[], to: number[], nx: number, ny: number): AxisCondition {
  const sum = new Map<number, number>();
  const add = (group: number[], sign: number) => {
    for (const v of group) {
      if (nx !== 0) sum.set(2 * v, (sum.get(2 * v) ?? 0) + (sign * nx) / group.length);
      if (ny !== 0) sum.set(2 * v + 1, (sum.get(2 * v + 1) ?? 0) + (sign * ny) / group.length);
    }
  };
  add(to, 1);
  add(from, -1);
  const dof = [...sum.keys()].sort((a, b) => a - b);
  return { dof, value: dof.map((i) => sum.get(i) ?? 0) };
}

/** The strips that are to be flattened, with their targets, in the layout's order; strips in `held` are passed over. */
export function listDrafts(
  layout: StripLayout,
  options: FlattenOptions,
  stiffness: ClothStiffness,
  held: ReadonlySet<string>,
): PanelDraft[] {
  const drafts: PanelDraft[] = [];
  let first = 0;
  let firstTriangle = 0;
  for (const s of layout.strips) {
    if (held.has(s.id)) continue;
    const strip = buildLocalStrip(layout, s);
    drafts.push({ strip, target: buildPanelTarget(strip, stiffness, options), first, firstTriangle });
    first += strip.surfaceVertex.length;
    firstTriangle += strip.tri.length / 3;
  }
  return drafts;
}

/**
 * The problem of these strips together; target and weight are left empty. Seams with panels in `others` keep those panels' lengths;
 * pieces of decompensated sides are cut as long as they are erected.
 * @throws PlanError seam-sides: a seam runs through a vertex that one of its strips does not have
 */
export function buildFlattenProblem(
  layout: StripLayout,
  drafts: readonly PanelDraft[],
  others: readonly FlatPanel[],
  stiffness: ClothStiffness,
): FlattenProblem {
  const last = drafts[drafts.length - 1];
  const nV = last.first + last.strip.surfaceVertex.length;
  const nT = last.firstTriangle + last.strip.tri.length / 3;
  const ties = listTies(layout, drafts, others);
  const problem: FlattenProblem = {
    nV,
    tri: new Uint32Array(3 * nT),
    metric: new Float64Array(3 * nT),
    weight: new Float64Array(nT),
    stiffness,
    target: new Float64Array(3 * nT),
    shrink: new Float64Array(2 * nV),
    tie: Int32Array.from(ties.flatMap((t) => t.ends)),
    tieLength: Float64Array.from(ties.map((t) => t.length)),
    axes: [],
    pin: drafts.map((d) => d.first),
  };
  for (const { strip, target, first, firstTriangle } of drafts) {
    problem.tri.set(
      strip.tri.map((v) => v + first),
      3 * firstTriangle,
    );
    problem.metric.set(buildErectedMetric(strip.erected, strip.tri), 3 * firstTriangle);
    const shrink = [1 / (1 + target.permanent.warp), 1 / (1 + target.permanent.weft)];
    for (let i = 0; i < 2 * strip.surfaceVertex.length; i++) problem.shrink[2 * first + i] = shrink[i % 2];
    // The axis lies at the turn in the cut cloth.
    const angle = (target.turn * Math.PI) / 180;
    const move = (v: number) => v + first;
    const nx = target.turn === 0 ? 0 : -Math.sin(angle) * shrink[0];
    problem.axes.push(buildAxisCondition(strip.from.map(move), strip.to.map(move), nx, Math.cos(angle) * shrink[1]));
  }
  return problem;
}

interface Tie {
  ends: [number, number, number, number];
  length: number;
}

function listTies(layout: StripLayout, drafts: readonly PanelDraft[], others: readonly FlatPanel[]): Tie[] {
  const index = (vertices: Uint32Array<ArrayBuffer>, first: number) =>
    new Map([...vertices].map((v, i) => [v, first + i]));
  const free = new Map(drafts.map((d) => [d.strip.id, index(d.strip.surfaceVertex, d.first)]));
  const held = new Map(others.map((p) => [p.id, p]));
  const outlines = new Map<FlatPanel, HeldOutline>();
  const outlineOf = (panel: FlatPanel): HeldOutline => {
    const outline = outlines.get(panel) ?? buildHeldOutline(panel);
    outlines.set(panel, outline);
    return outline;
  };
  const out: Tie[] = [];
  for (const seam of layout.seams) {
    const [a, b] = seam.strips.map((id) => free.get(id));
    const cut = held.get(a === undefined ? seam.strips[0] : seam.strips[1]);
    const own = a ?? b;
    if (own === undefined) continue;
    const at = (map: Map<number, number>, w: number): number => map.get(w) ?? refuseSeam(seam.id, w);
    const pieces = seam.vertices.slice(1).map((v, k): [number, number] => [seam.vertices[k], v]);
    if (a !== undefined && b !== undefined)
      for (const [u, v] of pieces) out.push({ ends: [at(a, u), at(a, v), at(b, u), at(b, v)], length: 0 });
    else if (cut !== undefined) {
      const length = measureAlong(outlineOf(cut), layout.surface, seam.vertices);
      pieces.forEach(([u, v], k) => {
        out.push({ ends: [at(own, u), at(own, v), -1, -1], length: length[k] });
      });
    }
  }
  for (const { strip, target, first } of drafts)
    for (const { side } of target.decompensated) out.push(...listErectedTies(strip, side, first));
  return out;
}

/** Ties that cut every piece of a side as long as it is erected. */
function listErectedTies(strip: LocalStrip, side: number, first: number): Tie[] {
  const { erected: x } = strip;
  const path = strip.sides[side].vertices;
  return path.slice(1).map((b, k) => {
    const a = path[k];
    const d = [0, 1, 2].map((c) => x[3 * b + c] - x[3 * a + c]);
    return { ends: [first + a, first + b, -1, -1], length: Math.sqrt(d[0] ** 2 + d[1] ** 2 + d[2] ** 2) };
  });
}

function refuseSeam(seam: string, vertex: number): never {
  throw new PlanError(
    "seam-sides",
    `seam ${seam} runs through vertex ${vertex}, which is not in both of its strips; lay the seams again`,
    seam,
    { vertex },
  );
}
