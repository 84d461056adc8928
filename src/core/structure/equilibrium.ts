// Equilibrium of a structure by Newton's method on the strain energy, with a shift where the tangent is not positive definite
// and a back-tracking line search. The tangent is analysed once for a structure and refactored at every step.
// Where everything is slack there is no unique place: the shift then acts as a weak tie to where the nodes are.
import {
  analyseSymmetric,
  factorSymmetric,
  type NumericFactor,
  type SymbolicFactor,
  solveInPlace,
  tryRefactorInPlace,
} from "../numeric/factor.ts";
import { addElementInPlace, buildPattern, type ElementPattern } from "../numeric/pattern.ts";
import { PlanError } from "../problem.ts";
import {
  buildTriangleRoom,
  type ForceState,
  fillLinkTangent,
  fillTriangleTangent,
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
  /** The factor is unshifted and of a state near the last one, so that a step may be tried with it before a new one is made. */
  near: boolean;
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
  /** Tangents factored. */
  factors: number;
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
    near: false,
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

/**
 * Factors solver.values with a shift on the diagonal, raised until the matrix is positive definite; returns the shift.
 * @throws PlanError equilibrium-tangent: entries that are not numbers
 */
export function factorShifted(solver: EquilibriumSolver, first: number): number {
  const { pattern } = solver.elements;
  const diagonal = largestDiagonal(solver);
  let shift = first;
  for (let tries = 0; tries < 40; tries++) {
    const values = shift > 0 ? solver.values.slice() : solver.values;
    if (shift > 0) for (let i = 0; i < pattern.n; i++) values[pattern.colStart[i]] += shift;
    if (refactor(solver, values)) {
      solver.near = shift === 0;
      return shift;
    }
    shift = shift > 0 ? 10 * shift : 1e-9 * diagonal;
  }
  throw new PlanError(
    "equilibrium-tangent",
    "the tangent of the structure cannot be factored: a coordinate or length is not a number",
    [],
    { shift },
  );
}

/** False where the matrix is not positive definite. */
function refactor(solver: EquilibriumSolver, values: Float64Array<ArrayBuffer>): boolean {
  if (solver.factor) return tryRefactorInPlace(solver.factor, values) < 0;
  try {
    solver.factor = factorSymmetric(solver.symbolic, values);
    return true;
  } catch (error) {
    if (!(error instanceof PlanError) || error.code !== "not-positive-definite") throw error;
    return false;
  }
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

/** A step's direction, with what a line search asks of it. */
interface Direction {
  move: Float64Array<ArrayBuffer>;
  /** Change of the energy along it, kJ; below 0. */
  slope: number;
  /** Longest way of a coordinate, m. */
  longest: number;
}

function findDirection(solver: EquilibriumSolver, force: Float64Array): Direction {
  const { unknown, n, factor } = solver;
  const move = new Float64Array(n);
  for (let c = 0; c < force.length; c++) if (unknown[c] >= 0) move[unknown[c]] = -force[c];
  const down = move.slice();
  solveInPlace(factor as NumericFactor, move);
  let slope = 0;
  let longest = 0;
  for (let i = 0; i < n; i++) {
    slope -= move[i] * down[i];
    longest = Math.max(longest, Math.abs(move[i]));
  }
  return { move, slope, longest };
}

/** A state on the way: positions, forces, and the greatest out-of-balance force. */
interface Iterate extends ForceState {
  x: Float64Array<ArrayBuffer>;
  most: number;
}

function measureIterate(solver: EquilibriumSolver, x: Float64Array<ArrayBuffer>, L0: Float64Array): Iterate {
  const state = measureForces(solver.structure, x, L0);
  return { x, ...state, most: largestFree(state.force, solver.unknown) };
}

/** Back-tracking along a direction; null where no share of it lowers the energy. */
function search(
  solver: EquilibriumSolver,
  now: Iterate,
  L0: Float64Array,
  way: Direction,
  limits: { stride: number; halvings: number },
): { next: Iterate; halving: number; step: number } | null {
  const { stride, halvings } = limits;
  let step = way.longest > stride ? stride / way.longest : 1;
  for (let halving = 0; halving <= halvings; halving++, step /= 2) {
    const next = measureIterate(solver, moved(now.x, way.move, step, solver.unknown), L0);
    const gain = next.energy - now.energy;
    if (gain <= 1e-4 * step * way.slope) return { next, halving, step };
    // near the end the energy is flat to rounding but the forces still improve
    if (gain <= 1e-9 * Math.max(now.energy, now.scale * stride) && next.most < 0.9 * now.most)
      return { next, halving, step };
  }
  return null;
}

/**
 * Positions in equilibrium from a start, for given slack lengths. A factor at hand is used as long as every step with it leaves
 * less than a quarter of the force (chord steps); then the tangent is factored anew.
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
  const stride = options.stride || 0.05 * measureSize(start);
  let now = measureIterate(solver, start.slice(), L0);
  const floor = Math.max(measureRounding(solver.structure, start, L0), options.floor);
  let shift = 0;
  let factors = 0;
  for (let steps = 0; ; steps++) {
    const { x, scale } = now;
    const residual = scale > 0 ? now.most / scale : 0;
    const good = residual < options.tolerance || now.most < floor;
    const end = (converged: boolean) => ({ x, steps, factors, residual, scale, converged });
    if (good || steps === options.maxSteps || solver.n === 0) return end(good);
    if (options.cancelled?.()) throw new PlanError("cancelled", "stopped on request");
    if (solver.near) {
      const chord = search(solver, now, L0, findDirection(solver, now.force), { stride, halvings: 0 });
      solver.near = chord !== null && chord.step === 1 && chord.next.most < 0.25 * now.most;
      if (chord) {
        now = chord.next;
        continue;
      }
    }
    assembleTangentInPlace(solver, x, L0);
    shift = factorShifted(solver, shift);
    factors++;
    const found = search(solver, now, L0, findDirection(solver, now.force), { stride, halvings: 29 });
    if (!found) {
      // a kink of the tension-only law: try again with a stronger tie
      solver.near = false;
      if (shift > 1e3) return end(false);
      shift = Math.max(100 * shift, 1e-2);
      continue;
    }
    solver.near &&= found.step === 1 && found.next.most < 0.25 * now.most;
    // many halvings: the quadratic model reaches too far (links going slack), so tie harder; none: let go again
    if (found.halving > 2) shift = Math.max(10 * shift, 1e-6 * largestDiagonal(solver));
    else if (found.halving === 0) shift = shift < 1e-8 * largestDiagonal(solver) ? 0 : shift / 10;
    now = found.next;
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
