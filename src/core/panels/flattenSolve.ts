// Gauss–Newton with exact conditions for the flattening of panels, all together. Knows no panels, no records: only the problem's arrays.
// Source: Levenberg–Marquardt and augmented Lagrangian, Nocedal and Wright, Numerical Optimization, 2006, sections 10.3 and 17.3.

import {
  analyseSymmetric,
  factorSymmetric,
  type NumericFactor,
  type SymbolicFactor,
  solveInPlace,
  tryRefactorInPlace,
} from "../numeric/factor.ts";
import { PlanError } from "../problem.ts";
import { measureTriangleStrain } from "../structure/cloth.ts";
import type { FlattenProblem } from "./flattenProblem.ts";
import {
  assembleFlattenInPlace,
  buildFlattenSystem,
  type FlattenState,
  type FlattenSystem,
  measureFlattenState,
  measureGaps,
} from "./flattenSystem.ts";

/** When to stop. */
export interface FlattenTolerance {
  /** Stop when a step promises less than this share of the energy. */
  energy: number;
  /** … or less than the energy of this strain everywhere. */
  strain: number;
  /** And no condition is off by more than this, m. */
  gap: number;
  steps: number;
}

/** Far below what a table cuts and a patterner reads. */
export const FLATTEN_TOLERANCE: FlattenTolerance = { energy: 1e-10, strain: 1e-11, gap: 1e-9, steps: 40 };

/** A step that promises less than this share of the energy is no caution when the steps run out (strips that want to buckle creep on). */
const SETTLED = 1e-6;

/** Stiffness of the conditions against the cloth's warp stiffness; multipliers take what it leaves. */
const STIFF = 1e5;

/** Where the iteration ended. */
export interface FlattenResult {
  /** Flat points of the relaxed cloth, m. @shape 2*nV */
  x: Float64Array<ArrayBuffer>;
  energy: number;
  /** Greatest gap of a condition, m. */
  gap: number;
  steps: number;
  converged: boolean;
}

/**
 * Flat points of least strain energy that meet the ties and axes, from a start whose triangles are all upright.
 * @throws PlanError flatten-start: a flat triangle of the start is turned over or has no area
 */
export function solveFlatten(
  problem: FlattenProblem,
  start: Float64Array<ArrayBuffer>,
  tolerance: FlattenTolerance,
  onStep: (step: number) => void,
): FlattenResult {
  const system = buildFlattenSystem(problem, STIFF * problem.stiffness.ww);
  const symbolic = analyseSymmetric(system.where.pattern);
  let factor: NumericFactor | null = null;
  let x = start.slice();
  let state = measureFlattenState(system, x);
  if (!state.upright) refuseStart(problem, x);
  let total = 0;
  for (const a of problem.area) total += a;
  const floor = 0.5 * problem.stiffness.ww * total * tolerance.strain ** 2;
  let damping = 0;
  let settled = false;
  for (let step = 1; step <= tolerance.steps; step++) {
    onStep(step);
    assembleFlattenInPlace(system, x);
    addDamping(system, damping * problem.stiffness.ww);
    factor = factorAgain(symbolic, factor, system.values);
    if (factor === null || !factor.ready) {
      damping = damping === 0 ? FIRST_DAMPING : 100 * damping;
      if (damping > LAST_DAMPING) break;
      continue;
    }
    const move = system.gradient.map((g) => -g);
    solveInPlace(factor, move);
    let promise = 0;
    for (let i = 0; i < move.length; i++) promise -= 0.5 * move[i] * system.gradient[i];
    settled = promise <= SETTLED * state.energy + floor && state.gap <= tolerance.gap;
    const small = promise <= tolerance.energy * state.energy + floor;
    const next = small ? tryStep(system, x, move, 1) : searchLine(system, x, move, state.merit - 2e-4 * promise);
    if (next === null) {
      damping = damping === 0 ? FIRST_DAMPING : 100 * damping;
      settled = false;
      if (damping > LAST_DAMPING) break;
      continue;
    }
    ({ x, state } = next);
    const free = damping === 0;
    damping = damping <= FIRST_DAMPING ? 0 : damping / 100;
    if (!small || !free) continue;
    if (state.gap <= tolerance.gap) return { x, energy: state.energy, gap: state.gap, steps: step, converged: true };
    const gaps = measureGaps(problem, x);
    for (let i = 0; i < gaps.length; i++) system.multiplier[i] += system.stiff * gaps[i];
    state = measureFlattenState(system, x);
  }
  return { x, energy: state.energy, gap: state.gap, steps: tolerance.steps, converged: settled };
}

/** The factor of these values; null, or not ready, where they are too badly conditioned: more damping is due. */
function factorAgain(
  symbolic: SymbolicFactor,
  factor: NumericFactor | null,
  values: Float64Array<ArrayBuffer>,
): NumericFactor | null {
  if (factor !== null) {
    tryRefactorInPlace(factor, values);
    return factor;
  }
  try {
    return factorSymmetric(symbolic, values);
  } catch (error) {
    if (error instanceof PlanError && error.code === "not-positive-definite") return null;
    throw error;
  }
}

/** Levenberg damping against the cloth's warp stiffness: the first tried, and where it is given up. */
const FIRST_DAMPING = 1e-4;
const LAST_DAMPING = 1e6;

interface Trial {
  x: Float64Array<ArrayBuffer>;
  state: FlattenState;
}

function tryStep(
  system: FlattenSystem,
  x: Float64Array<ArrayBuffer>,
  move: Float64Array<ArrayBuffer>,
  share: number,
): Trial | null {
  const next = x.slice();
  for (let i = 0; i < next.length; i++) next[i] += share * move[i];
  const state = measureFlattenState(system, next);
  return state.upright ? { x: next, state } : null;
}

/** The first of 1, ½, ¼ … of the step that keeps every triangle upright and brings the merit down; null where none does. */
function searchLine(
  system: FlattenSystem,
  x: Float64Array<ArrayBuffer>,
  move: Float64Array<ArrayBuffer>,
  limit: number,
): Trial | null {
  for (let share = 1; share > 0.01; share /= 2) {
    const trial = tryStep(system, x, move, share);
    if (trial !== null && trial.state.merit <= limit) return trial;
  }
  return null;
}

function addDamping(system: FlattenSystem, damping: number): void {
  const { colStart, n } = system.where.pattern;
  for (let i = 0; i < n; i++) system.values[colStart[i]] += damping;
}

function refuseStart(problem: FlattenProblem, x: Float64Array<ArrayBuffer>): never {
  const e = new Float64Array(7);
  let t = 0;
  while (measureTriangleStrain(problem.metric, x, problem.tri, t, e)[3] > 0) t++;
  throw new PlanError(
    "flatten-start",
    `flat triangle ${t} of the first unfolding is turned over (doubled area ${e[3]} m2, must be above 0): the strip is too curved for one panel; lay the seams closer`,
    `triangle ${t}`,
    { triangle: t, area: e[3] },
  );
}
