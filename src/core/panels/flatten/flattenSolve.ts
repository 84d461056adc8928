// Gauss–Newton with exact conditions for the flattening of panels, all together. Knows no panels, no records: only the problem's arrays.
// Source: Levenberg–Marquardt and augmented Lagrangian, Nocedal and Wright, Numerical Optimization, 2006, sections 10.3 and 17.3.

import {
  analyseSymmetric,
  factorSymmetric,
  type NumericFactor,
  type SymbolicFactor,
  solveInPlace,
  tryRefactorInPlace,
} from "../../numeric/factor.ts";
import { PlanError } from "../../problem.ts";
import { measureTriangleStrain } from "../../structure/cloth.ts";
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
export const FLATTEN_TOLERANCE: FlattenTolerance = { energy: 1e-10, strain: 1e-11, gap: 1e-8, steps: 40 };

/** A step that promises less than this share of the energy is no caution when the steps run out (strips that want to buckle creep on). */
const SETTLED = 1e-6;

/** Stiffness of the conditions against the cloth's warp stiffness; multipliers take what it leaves. */
const STIFF = 1e5;
/** Soft conditions where stiff ones let a far start only move in part steps, until a step promises less than this share. */
const SOFT = 10;
const SOFT_ENERGY = 0.02;

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
  const system = buildFlattenSystem(problem);
  const walk: Walk = {
    system,
    symbolic: analyseSymmetric(system.where.pattern),
    factor: null,
    x: start.slice(),
    state: measureFlattenState(system, start),
    damping: 0,
    steps: 0,
  };
  if (!walk.state.upright) refuseStart(problem, start);
  let total = 0;
  for (const a of problem.weight) total += a;
  const floor = 0.5 * problem.stiffness.ww * total * tolerance.strain ** 2;
  const soft = { ...tolerance, energy: Math.max(SOFT_ENERGY, tolerance.energy), gap: Number.POSITIVE_INFINITY, floor };
  const stiff = { ...tolerance, floor };
  let end = walkInPlace(walk, STIFF, { ...stiff, partSteps: false }, onStep);
  if (end === "part step") {
    walkInPlace(walk, SOFT, { ...soft, partSteps: true }, onStep);
    end = walkInPlace(walk, STIFF, { ...stiff, partSteps: true }, onStep);
  }
  const converged = end === "settled";
  const { x, state, steps } = walk;
  return { x, energy: state.energy, gap: state.gap, steps, converged };
}

/** Where the iteration stands. */
interface Walk {
  system: FlattenSystem;
  symbolic: SymbolicFactor;
  factor: NumericFactor | null;
  x: Float64Array<ArrayBuffer>;
  state: FlattenState;
  damping: number;
  steps: number;
}

/**
 * Gauss–Newton steps with conditions of one stiffness until the tolerance is met ("settled") or steps or damping run out ("spent");
 * or until a whole step does not hold, where part steps are not allowed.
 */
function walkInPlace(
  walk: Walk,
  stiff: number,
  until: FlattenTolerance & { floor: number; partSteps: boolean },
  onStep: (step: number) => void,
): "settled" | "spent" | "part step" {
  const { system } = walk;
  const { ww } = system.problem.stiffness;
  system.stiff = stiff * ww;
  walk.state = measureFlattenState(system, walk.x);
  let settled = false;
  const brake = () => {
    settled = false;
    walk.damping = walk.damping === 0 ? FIRST_DAMPING : 100 * walk.damping;
    return walk.damping <= LAST_DAMPING;
  };
  while (walk.steps < until.steps) {
    onStep(++walk.steps);
    assembleFlattenInPlace(system, walk.x);
    addDamping(system, walk.damping * ww);
    walk.factor = factorAgain(walk.symbolic, walk.factor, system.values);
    if (walk.factor === null || !walk.factor.ready) {
      if (brake()) continue;
      break;
    }
    const move = system.gradient.map((g) => -g);
    solveInPlace(walk.factor, move);
    let promise = 0;
    for (let i = 0; i < move.length; i++) promise -= 0.5 * move[i] * system.gradient[i];
    const { merit, energy, gap } = walk.state;
    settled = promise <= SETTLED * energy + until.floor && gap <= until.gap;
    const small = promise <= until.energy * energy + until.floor;
    const next = small ? tryStep(system, walk.x, move, 1) : searchLine(system, walk.x, move, merit - 2e-4 * promise);
    if (!until.partSteps && (next === null || next.share < 1)) return "part step";
    if (next === null) {
      if (brake()) continue;
      break;
    }
    walk.x = next.x;
    walk.state = next.state;
    const free = walk.damping === 0;
    walk.damping = walk.damping <= FIRST_DAMPING ? 0 : walk.damping / 100;
    if (!small || !free) continue;
    if (walk.state.gap <= until.gap) return "settled";
    const gaps = measureGaps(system.problem, walk.x);
    for (let i = 0; i < gaps.length; i++) system.multiplier[i] += system.stiff * gaps[i];
    walk.state = measureFlattenState(system, walk.x);
  }
  return settled ? "settled" : "spent";
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
  share: number;
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
  return state.upright ? { share, x: next, state } : null;
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
