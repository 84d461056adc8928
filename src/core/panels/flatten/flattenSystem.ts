// Energy, gradient and Gauss–Newton matrix of the flattening. Does not iterate: flattenSolve.ts does.
// Derivatives are exact: with G = δX·X⁻¹ the metric C = FᵀF changes by −(GᵀC + CG). Source: own, from facts.md "Strain and stress".
import { addElementInPlace, buildPattern, type ElementPattern } from "../../numeric/pattern.ts";
import { measureTriangleStrain } from "../../structure/cloth.ts";
import type { FlattenProblem } from "./flattenProblem.ts";

/** A problem with its matrix pattern and scratch. Multipliers belong to the conditions: ties first, then axes. */
export interface FlattenSystem {
  problem: FlattenProblem;
  where: ElementPattern;
  /** 1 where a coordinate is held. @shape 2*nV */
  held: Uint8Array<ArrayBuffer>;
  /** @shape one for each entry of the pattern */
  values: Float64Array<ArrayBuffer>;
  /** @shape 2*nV */
  gradient: Float64Array<ArrayBuffer>;
  /** Multiplier of each condition, kN. @shape nTies + nAxes */
  multiplier: Float64Array<ArrayBuffer>;
  /** Stiffness of the conditions, kN/m; set by who iterates. */
  stiff: number;
}

/** Energy of the cloth (kNm), energy with the conditions, greatest condition gap (m), and whether every flat triangle is upright. */
export interface FlattenState {
  energy: number;
  merit: number;
  gap: number;
  upright: boolean;
}

/** A system ready to be assembled, its conditions not yet stiff. */
export function buildFlattenSystem(problem: FlattenProblem): FlattenSystem {
  const { tri, tie, axes, nV, pin } = problem;
  const nT = tri.length / 3;
  const nTies = tie.length / 4;
  const start = new Uint32Array(nT + nTies + axes.length + 1);
  const held = new Uint8Array(2 * nV);
  for (const v of pin) held.fill(1, 2 * v, 2 * v + 2);
  const dof = new Int32Array(6 * nT + 8 * nTies + axes.reduce((sum, axis) => sum + axis.dof.length, 0));
  let n = 0;
  const add = (i: number) => {
    dof[n++] = held[i] === 1 ? -1 : i;
  };
  for (let t = 0; t < nT; t++) {
    for (let k = 0; k < 3; k++) for (let c = 0; c < 2; c++) add(2 * tri[3 * t + k] + c);
    start[t + 1] = n;
  }
  for (let s = 0; s < nTies; s++) {
    for (let k = 0; k < 4; k++) if (tie[4 * s + k] >= 0) for (let c = 0; c < 2; c++) add(2 * tie[4 * s + k] + c);
    start[nT + s + 1] = n;
  }
  axes.forEach((axis, i) => {
    for (const d of axis.dof) add(d);
    start[nT + nTies + i + 1] = n;
  });
  const where = buildPattern(2 * nV, start, dof.subarray(0, n));
  return {
    problem,
    where,
    held,
    values: new Float64Array(where.pattern.rowIndex.length),
    gradient: new Float64Array(2 * nV),
    multiplier: new Float64Array(nTies + axes.length),
    stiff: 0,
  };
}

/** Energy and merit at the flat points x. */
export function measureFlattenState(system: FlattenSystem, x: Float64Array<ArrayBuffer>): FlattenState {
  const { problem, stiff, multiplier } = system;
  const { tri, metric, target, weight } = problem;
  const { ww, wf, ff, g } = problem.stiffness;
  const e = new Float64Array(7);
  let energy = 0;
  let upright = true;
  for (let t = 0; 3 * t < tri.length; t++) {
    measureTriangleStrain(metric, x, tri, t, e);
    if (!(e[3] > 0)) upright = false;
    const a = e[0] - target[3 * t];
    const b = e[1] - target[3 * t + 1];
    const c = e[2] - target[3 * t + 2];
    energy += 0.5 * weight[t] * (ww * a * a + 2 * wf * a * b + ff * b * b + g * c * c);
  }
  let merit = energy;
  let gap = 0;
  const gaps = measureGaps(problem, x);
  for (let i = 0; i < gaps.length; i++) {
    merit += gaps[i] * (multiplier[i] + 0.5 * stiff * gaps[i]);
    gap = Math.max(gap, Math.abs(gaps[i]));
  }
  return { energy, merit, gap, upright };
}

/**
 * Gaps of the conditions: difference of the two cut lengths of each tie, then the lean of each axis.
 * @shape nTies + nAxes @units m
 */
export function measureGaps(problem: FlattenProblem, x: Float64Array<ArrayBuffer>): Float64Array<ArrayBuffer> {
  const { tie, axes } = problem;
  const nTies = tie.length / 4;
  const out = new Float64Array(nTies + axes.length);
  const run = new Float64Array(2);
  for (let s = 0; s < nTies; s++) {
    const first = measurePiece(problem, x, tie[4 * s], tie[4 * s + 1], run);
    out[s] =
      first -
      (tie[4 * s + 2] < 0 ? problem.tieLength[s] : measurePiece(problem, x, tie[4 * s + 2], tie[4 * s + 3], run));
  }
  axes.forEach((axis, i) => {
    let sum = 0;
    for (let k = 0; k < axis.dof.length; k++) sum += axis.value[k] * x[axis.dof[k]];
    out[nTies + i] = sum;
  });
  return out;
}

/** Fills gradient and values of the merit at x, with `damping` added to every diagonal of an unknown. */
export function assembleFlattenInPlace(system: FlattenSystem, x: Float64Array<ArrayBuffer>): void {
  const { values, gradient, where, held } = system;
  values.fill(0);
  gradient.fill(0);
  addCloth(system, x);
  addConditions(system, x);
  const { colStart } = where.pattern;
  for (let i = 0; i < held.length; i++)
    if (held[i] === 1) {
      values[colStart[i]] = 1;
      gradient[i] = 0;
    }
}

function addCloth(system: FlattenSystem, x: Float64Array<ArrayBuffer>): void {
  const { problem, values, gradient, where } = system;
  const { tri, metric, target, weight } = problem;
  const { ww, wf, ff, g } = problem.stiffness;
  const e = new Float64Array(7);
  const b = new Float64Array(18);
  const d = new Float64Array(18);
  const h = new Float64Array(21);
  for (let t = 0; 3 * t < tri.length; t++) {
    measureTriangleStrain(metric, x, tri, t, e);
    fillStrainDerivative(x, tri, t, e, b);
    const ew = e[0] - target[3 * t];
    const ef = e[1] - target[3 * t + 1];
    const es = e[2] - target[3 * t + 2];
    const sw = weight[t] * (ww * ew + wf * ef);
    const sf = weight[t] * (wf * ew + ff * ef);
    const ss = weight[t] * g * es;
    let n = 0;
    for (let i = 0; i < 6; i++) {
      const b0 = b[i];
      const b1 = b[6 + i];
      const b2 = b[12 + i];
      d[i] = weight[t] * (ww * b0 + wf * b1);
      d[6 + i] = weight[t] * (wf * b0 + ff * b1);
      d[12 + i] = weight[t] * g * b2;
      gradient[2 * tri[3 * t + (i >> 1)] + (i & 1)] += sw * b0 + sf * b1 + ss * b2;
      for (let j = 0; j <= i; j++) h[n++] = b0 * d[j] + b1 * d[6 + j] + b2 * d[12 + j];
    }
    addElementInPlace(values, where, t, h);
  }
}

/** Rows E_ww, E_ff, 2E_wf by columns x0, y0, x1, y1, x2, y2 of one triangle. @shape b 18, by rows */
function fillStrainDerivative(
  x: Float64Array<ArrayBuffer>,
  tri: Uint32Array<ArrayBuffer>,
  t: number,
  e: Float64Array<ArrayBuffer>,
  b: Float64Array<ArrayBuffer>,
): void {
  const det = e[3];
  const cww = e[4];
  const cff = e[5];
  const cwf = e[6];
  for (let k = 0; k < 3; k++) {
    const p = 2 * tri[3 * t + ((k + 1) % 3)];
    const q = 2 * tri[3 * t + ((k + 2) % 3)];
    // Gradient of the corner's own linear function.
    const nx = (x[p + 1] - x[q + 1]) / det;
    const ny = (x[q] - x[p]) / det;
    b[2 * k] = -cww * nx;
    b[2 * k + 1] = -cwf * nx;
    b[6 + 2 * k] = -cwf * ny;
    b[6 + 2 * k + 1] = -cff * ny;
    b[12 + 2 * k] = -(cww * ny + cwf * nx);
    b[12 + 2 * k + 1] = -(cwf * ny + cff * nx);
  }
}

function addConditions(system: FlattenSystem, x: Float64Array<ArrayBuffer>): void {
  const { problem } = system;
  const { tri, tie, axes } = problem;
  const nT = tri.length / 3;
  const nTies = tie.length / 4;
  const gaps = measureGaps(problem, x);
  const run = new Float64Array(2);
  const dof = new Int32Array(8);
  const value = new Float64Array(8);
  const room = Math.max(8, ...axes.map((axis) => axis.dof.length));
  const h = new Float64Array((room * (room + 1)) / 2);
  for (let s = 0; s < nTies; s++) {
    let n = 0;
    for (let side = 0; side < 2; side++) {
      const a = tie[4 * s + 2 * side];
      const b = tie[4 * s + 2 * side + 1];
      if (a < 0) continue;
      measurePiece(problem, x, a, b, run);
      for (let end = 0; end < 2; end++) {
        const v = end === 0 ? a : b;
        const sign = (side === 0) === (end === 0) ? -1 : 1;
        for (let c = 0; c < 2; c++) {
          dof[n] = 2 * v + c;
          value[n++] = sign * run[c] * problem.shrink[2 * v + c];
        }
      }
    }
    addCondition(system, nT + s, { dof, value, n, force: system.multiplier[s] + system.stiff * gaps[s] }, h);
  }
  axes.forEach(({ dof, value }, i) => {
    const k = nTies + i;
    const force = system.multiplier[k] + system.stiff * gaps[k];
    addCondition(system, nT + k, { dof, value, n: dof.length, force }, h);
  });
}

/** Adds a condition on the first n unknowns of a list; h: room for their packed lower triangle. */
function addCondition(
  system: FlattenSystem,
  element: number,
  on: { dof: ArrayLike<number>; value: ArrayLike<number>; n: number; force: number },
  h: Float64Array<ArrayBuffer>,
): void {
  const { gradient, values, where, stiff } = system;
  const { dof, value, n, force } = on;
  let at = 0;
  for (let i = 0; i < n; i++) {
    gradient[dof[i]] += value[i] * force;
    for (let j = 0; j <= i; j++) h[at++] = stiff * value[i] * value[j];
  }
  addElementInPlace(values, where, element, h);
}

/** Cut length of the piece from a to b; its unit direction in the cut cloth goes to run. */
function measurePiece(
  problem: FlattenProblem,
  x: Float64Array<ArrayBuffer>,
  a: number,
  b: number,
  run: Float64Array<ArrayBuffer>,
): number {
  const { shrink } = problem;
  const dx = x[2 * b] * shrink[2 * b] - x[2 * a] * shrink[2 * a];
  const dy = x[2 * b + 1] * shrink[2 * b + 1] - x[2 * a + 1] * shrink[2 * a + 1];
  const length = Math.sqrt(dx * dx + dy * dy);
  run[0] = dx / length;
  run[1] = dy / length;
  return length;
}
