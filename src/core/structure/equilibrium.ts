// Equilibrium of a structure by Newton's method on the strain energy, with a shift where the tangent is not positive definite
// and a back-tracking line search. The tangent is analysed once for a structure and refactored at every step.
// Where everything is slack there is no unique place: the shift then acts as a weak tie to where the nodes are.
import {
  analyseSymmetric,
  factorSymmetric,
  type NumericFactor,
  refactorInPlace,
  type SymbolicFactor,
  solveInPlace,
} from "../numeric/factor.ts";
import { addElementInPlace, buildPattern, type ElementPattern } from "../numeric/pattern.ts";
import { PlanError } from "../problem.ts";
import {
  buildTriangleRoom,
  fillLinkTangent,
  fillTriangleTangent,
  measureEnergy,
  measureForces,
  measureLink,
  measureTriangle,
} from "./elements.ts";
import type { Structure } from "./structure.ts";

/** A structure with its analysed tangent; owns the factor's storage. */
export interface EquilibriumSolver {
  structure: Structure;
  /** Unknown of each coordinate, -1 where held. @shape 3*nN */
  unknown: Int32Array<ArrayBuffer>;
  n: number;
  elements: ElementPattern;
  symbolic: SymbolicFactor;
  factor: NumericFactor | null;
  /** Matrix values of the last assembly. */
  values: Float64Array<ArrayBuffer>;
}

export interface EquilibriumOptions {
  /** Largest out-of-balance force component over the largest element force. */
  tolerance: number;
  maxSteps: number;
  /** Longest way a node may go in one step, m; keeps slack steps in the neighbourhood. */
  stride: number;
  /** Out-of-balance force that is good enough however small the element forces are, kN. */
  floor: number;
  cancelled?: () => boolean;
}

/** Defaults of solveEquilibrium; stride is set from the structure's size where 0. */
export const equilibriumDefaults: EquilibriumOptions = { tolerance: 1e-10, maxSteps: 80, stride: 0, floor: 0 };

export interface EquilibriumState {
  x: Float64Array<ArrayBuffer>;
  steps: number;
  /** As EquilibriumOptions.tolerance counts it. */
  residual: number;
  /** Largest element force, kN. */
  scale: number;
  converged: boolean;
}

/** Numbers the unknowns and analyses the tangent of a structure. */
export function createEquilibriumSolver(structure: Structure): EquilibriumSolver {
  const { held, tri, link } = structure;
  const unknown = new Int32Array(held.length);
  let n = 0;
  for (let c = 0; c < unknown.length; c++) unknown[c] = held[c] ? -1 : n++;
  const m = structure.area.length;
  const k = structure.EA.length;
  const start = new Uint32Array(m + k + 1);
  const dof = new Int32Array(9 * m + 6 * k);
  let at = 0;
  const push = (node: number) => {
    for (let i = 0; i < 3; i++) dof[at++] = unknown[3 * node + i];
  };
  for (let t = 0; t < m; t++) {
    for (let a = 0; a < 3; a++) push(tri[3 * t + a]);
    start[t + 1] = at;
  }
  for (let l = 0; l < k; l++) {
    push(link[2 * l]);
    push(link[2 * l + 1]);
    start[m + l + 1] = at;
  }
  const elements = buildPattern(n, start, dof);
  return {
    structure,
    unknown,
    n,
    elements,
    symbolic: analyseSymmetric(elements.pattern),
    factor: null,
    values: new Float64Array(elements.pattern.rowIndex.length),
  };
}

/** Puts the tangent at x together in solver.values. */
export function assembleTangentInPlace(solver: EquilibriumSolver, x: Float64Array, L0: Float64Array): void {
  const { structure: s, elements, values } = solver;
  values.fill(0);
  const room = buildTriangleRoom();
  const packed = new Float64Array(45);
  const m = s.area.length;
  for (let t = 0; t < m; t++) {
    if (measureTriangle(s, x, t, room) === 2) continue;
    fillTriangleTangent(s, t, room, packed);
    addElementInPlace(values, elements, t, packed);
  }
  for (let k = 0; k < s.EA.length; k++) {
    const state = measureLink(s, x, L0, k);
    if (state.force === 0 && state.stiffness === 0) continue;
    fillLinkTangent(state, packed);
    addElementInPlace(values, elements, m + k, packed);
  }
}

function largestDiagonal(solver: EquilibriumSolver): number {
  const { pattern } = solver.elements;
  let most = 0;
  for (let i = 0; i < pattern.n; i++) most = Math.max(most, solver.values[pattern.colStart[i]]);
  return most > 0 ? most : 1;
}

/** Factors solver.values, shifted where need be; returns the shift. first: shift to begin with. */
function factorShifted(solver: EquilibriumSolver, first: number): number {
  const { pattern } = solver.elements;
  const diagonal = largestDiagonal(solver);
  let shift = first;
  for (let tries = 0; tries < 40; tries++) {
    const values = shift > 0 ? solver.values.slice() : solver.values;
    if (shift > 0) for (let i = 0; i < pattern.n; i++) values[pattern.colStart[i]] += shift;
    try {
      if (solver.factor) refactorInPlace(solver.factor, values);
      else solver.factor = factorSymmetric(solver.symbolic, values);
      return shift;
    } catch (error) {
      if (!(error instanceof PlanError) || error.code !== "not-positive-definite") throw error;
      shift = shift > 0 ? 10 * shift : 1e-9 * diagonal;
    }
  }
  throw new PlanError(
    "equilibrium-tangent",
    "the tangent of the structure cannot be factored: a coordinate or length is not a number",
    [],
    { shift },
  );
}

function largestFree(force: Float64Array, unknown: Int32Array): number {
  let most = 0;
  for (let c = 0; c < force.length; c++) if (unknown[c] >= 0) most = Math.max(most, Math.abs(force[c]));
  return most;
}

/** Moves the free coordinates by step × move; returns new positions. */
function moved(
  x: Float64Array<ArrayBuffer>,
  move: Float64Array,
  step: number,
  unknown: Int32Array,
): Float64Array<ArrayBuffer> {
  const y = x.slice();
  for (let c = 0; c < y.length; c++) if (unknown[c] >= 0) y[c] += step * move[unknown[c]];
  return y;
}

/**
 * Positions in equilibrium from a start, for given slack lengths.
 * @shape x 3*nN, L0 one for each link (m)
 * @throws PlanError equilibrium-tangent, cancelled; a solve that does not get there is returned with converged false
 */
export function solveEquilibrium(
  solver: EquilibriumSolver,
  start: Float64Array<ArrayBuffer>,
  L0: Float64Array<ArrayBuffer>,
  given: Partial<EquilibriumOptions> = {},
): EquilibriumState {
  const options = { ...equilibriumDefaults, ...given };
  const { structure: s, unknown } = solver;
  let x = start.slice();
  const stride = options.stride || 0.05 * measureSize(start);
  let { force, scale } = measureForces(s, x, L0);
  let energy = measureEnergy(s, x, L0);
  const floor = Math.max(measureRounding(s, start, L0), options.floor);
  let shift = 0;
  for (let steps = 0; ; steps++) {
    const residual = scale > 0 ? largestFree(force, unknown) / scale : 0;
    const good = residual < options.tolerance || residual * scale < floor;
    if (good || steps === options.maxSteps || solver.n === 0) return { x, steps, residual, scale, converged: good };
    if (options.cancelled?.()) throw new PlanError("cancelled", "stopped on request");
    assembleTangentInPlace(solver, x, L0);
    shift = factorShifted(solver, shift);
    const move = new Float64Array(solver.n);
    for (let c = 0; c < force.length; c++) if (unknown[c] >= 0) move[unknown[c]] = -force[c];
    const down = move.slice();
    solveInPlace(solver.factor as NumericFactor, move);
    let slope = 0;
    let longest = 0;
    for (let i = 0; i < move.length; i++) {
      slope -= move[i] * down[i];
      longest = Math.max(longest, Math.abs(move[i]));
    }
    let step = longest > stride ? stride / longest : 1;
    const was = largestFree(force, unknown);
    let taken: Float64Array<ArrayBuffer> | null = null;
    let halving = 0;
    for (; halving < 30; halving++, step /= 2) {
      const y = moved(x, move, step, unknown);
      const e = measureEnergy(s, y, L0);
      if (e <= energy + 1e-4 * step * slope) {
        taken = y;
        break;
      }
      // near the end the energy is flat to rounding but the forces still improve
      if (
        e - energy <= 1e-9 * Math.max(energy, scale * stride) &&
        largestFree(measureForces(s, y, L0).force, unknown) < 0.9 * was
      ) {
        taken = y;
        break;
      }
    }
    if (!taken) {
      // a kink of the tension-only law: try again with a stronger tie
      if (shift > 1e3) return { x, steps, residual, scale, converged: false };
      shift = Math.max(100 * shift, 1e-2);
      continue;
    }
    // many halvings: the quadratic model reaches too far (links going slack), so tie harder; none: let go again
    if (halving > 2) shift = Math.max(10 * shift, 1e-6 * largestDiagonal(solver));
    else if (halving === 0) shift = shift < 1e-8 * largestDiagonal(solver) ? 0 : shift / 10;
    x = taken;
    energy = measureEnergy(s, x, L0);
    ({ force, scale } = measureForces(s, x, L0));
  }
}

/** Force that the last digit of a coordinate makes in the stiffest link, kN: no residual can be asked below it. */
function measureRounding(s: Structure, x: Float64Array, L0: Float64Array): number {
  let stiffest = 0;
  for (let k = 0; k < s.EA.length; k++) stiffest = Math.max(stiffest, s.EA[k] / L0[k]);
  const far = x.reduce((most, q) => Math.max(most, Math.abs(q)), 0);
  return 4 * Number.EPSILON * far * stiffest;
}

/** Longest side of the box round the nodes, m. */
function measureSize(x: Float64Array): number {
  const low = [Infinity, Infinity, Infinity];
  const high = [-Infinity, -Infinity, -Infinity];
  for (let c = 0; c < x.length; c++) {
    low[c % 3] = Math.min(low[c % 3], x[c]);
    high[c % 3] = Math.max(high[c % 3], x[c]);
  }
  return Math.max(high[0] - low[0], high[1] - low[1], high[2] - low[2], 1e-9);
}

/**
 * Change of link forces for unit changes of slack lengths at an equilibrium: the influence matrix from the tangent.
 * @shape rows: links of `read`, columns: links of `turned`; out row-major
 * @units kN/m, per metre of slack length ADDED (an adjuster opened)
 * @source tangent of the equilibrium: K dx = −∂f/∂L0 dL0; own derivation
 */
export function measureInfluence(
  solver: EquilibriumSolver,
  x: Float64Array<ArrayBuffer>,
  L0: Float64Array<ArrayBuffer>,
  turned: number[],
  read: number[],
): Float64Array<ArrayBuffer> {
  const { structure: s, unknown, n } = solver;
  assembleTangentInPlace(solver, x, L0);
  factorShifted(solver, 0);
  const right = new Float64Array(n * turned.length);
  const states = new Map<number, ReturnType<typeof measureLink>>();
  for (const k of new Set([...turned, ...read])) states.set(k, measureLink(s, x, L0, k));
  const direct = (k: number) => {
    const state = states.get(k);
    return state && state.stiffness > 0 ? (-s.EA[k] * state.length) / (L0[k] * L0[k]) : 0;
  };
  const addTo = (k: number, column: number, value: number) => {
    const u = states.get(k)?.u ?? [0, 0, 0];
    for (let i = 0; i < 3; i++) {
      const a = unknown[3 * s.link[2 * k] + i];
      const b = unknown[3 * s.link[2 * k + 1] + i];
      // f_a = −N u, f_b = +N u; right side = −∂f/∂L0
      if (a >= 0) right[column * n + a] += value * u[i];
      if (b >= 0) right[column * n + b] -= value * u[i];
    }
  };
  turned.forEach((k, c) => {
    addTo(k, c, direct(k));
  });
  solveInPlace(solver.factor as NumericFactor, right, turned.length);
  const out = new Float64Array(read.length * turned.length);
  read.forEach((k, r) => {
    const state = states.get(k);
    if (!state) return;
    turned.forEach((t, c) => {
      let stretch = 0;
      for (let i = 0; i < 3; i++) {
        const a = unknown[3 * s.link[2 * k] + i];
        const b = unknown[3 * s.link[2 * k + 1] + i];
        stretch += state.u[i] * ((b >= 0 ? right[c * n + b] : 0) - (a >= 0 ? right[c * n + a] : 0));
      }
      out[r * turned.length + c] = state.stiffness * stretch + (k === t ? direct(k) : 0);
    });
  });
  return out;
}
