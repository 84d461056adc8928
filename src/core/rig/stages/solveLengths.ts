// Adjuster lengths that give stated forces on the full structure. A roof hung from its corners has hardly more than one tension
// mode: forces set what they determine, the other modes are held at a reference geometry (Tikhonov).
// Source: influence matrix as in Kwan & Pellegrino 1993 (from memory), repeated Gauss–Newton with a regularising term; own.
import { Matrix, SingularValueDecomposition } from "ml-matrix";
import type { Check } from "../../problem.ts";
import { type EquilibriumSolver, type EquilibriumState, solveEquilibrium } from "../../structure/equilibrium.ts";
import { measureInfluence } from "../../structure/influence.ts";
import type { Rig } from "../build/buildRig.ts";
import { type Places, readAdjusters } from "./readState.ts";

/** A state of the rig: positions, slack lengths of all links, and how far the solve came. */
export interface RigState extends Places {
  equilibrium: EquilibriumState;
}

export interface LengthOptions {
  /** Greatest allowed |force − target| over the target. */
  tolerance: number;
  /** Longest change of an adjuster in one round, m. */
  stride: number;
  rounds: number;
  cancelled?: () => boolean;
}

/** Defaults of solveLengths: a tenth of the 0.5 % that the schedule promises before rounding. */
export const lengthDefaults: LengthOptions = { tolerance: 5e-4, stride: 0.015, rounds: 60 };

/** Rounds without getting nearer before the stride is cut. */
const idleRounds = 6;

/** Stride below which a solve that no longer comes nearer is given up, m. */
const shortest = 1e-4;

/** How sharply a state is solved: out-of-balance over the largest force. Readings are kept to 1e-3 of a force at best. */
export const restLimit = { onTheWay: 1e-6, finished: 1e-9 };

/** What a state's solve is given beside where it starts. */
export interface StateOptions {
  /** The finished state, which all figures hang on. */
  sharp?: boolean;
  cancelled?: (() => boolean) | undefined;
}

/** A state from slack lengths, starting near another one. */
export function solveState(rig: Rig, solver: EquilibriumSolver, near: Places, options: StateOptions = {}): RigState {
  const least = rig.adjusters.length === 0 ? 0 : Math.min(...rig.adjusters.map((a) => a.target));
  const { cancelled } = options;
  const equilibrium = solveEquilibrium(solver, near.x, near.L0, {
    tolerance: options.sharp ? restLimit.finished : restLimit.onTheWay,
    floor: Number.isFinite(least) ? 1e-9 * least : 0,
    ...(cancelled ? { cancelled } : {}),
  });
  return { x: equilibrium.x, L0: near.L0, equilibrium };
}

/** The state with the adjusters at other slack lengths, m. */
export function turnTo(
  rig: Rig,
  solver: EquilibriumSolver,
  state: Places,
  lengths: readonly number[],
  options: StateOptions = {},
): RigState {
  const L0 = state.L0.slice();
  rig.adjusters.forEach((a, i) => {
    L0[a.link] = lengths[i];
  });
  return solveState(rig, solver, { x: state.x, L0 }, options);
}

/** Influence of adjusters on each other, kN per m of length ADDED. @shape n × n */
export function measureAdjusterInfluence(rig: Rig, solver: EquilibriumSolver, state: RigState): Matrix {
  const links = rig.adjusters.map((a) => a.link);
  return Matrix.from1DArray(links.length, links.length, measureInfluence(solver, state.x, state.L0, links, links));
}

/**
 * State in which every adjuster carries its wanted force within the tolerance, as near as may be to the reference lengths.
 * @shape wanted, reference: one for each adjuster, kN and m
 * @units off: greatest |force − wanted| / target reached
 */
export function solveLengths(
  rig: Rig,
  solver: EquilibriumSolver,
  start: RigState,
  wanted: number[],
  reference: number[],
  given: Partial<LengthOptions> = {},
): RigState & { off: number } {
  const options = { ...lengthDefaults, ...given };
  const n = rig.adjusters.length;
  const links = rig.adjusters.map((a) => a.link);
  const targets = rig.adjusters.map((a) => a.target);
  let state = start;
  let softness = 0.05;
  let { stride } = options;
  let longest = stride;
  let idle = 0;
  let best: RigState | null = null;
  let least = Infinity;
  for (let round = 0; round < options.rounds; round++) {
    const forces = readAdjusters(rig, state);
    const miss = forces.map((f, i) => (wanted[i] - f) / targets[i]);
    const off = Math.max(...miss.map(Math.abs));
    const better = off < least && state.equilibrium.converged;
    if (better) {
      least = off;
      best = state;
    }
    if (off < options.tolerance) break;
    idle = better ? 0 : idle + 1;
    if (best && idle >= idleRounds) {
      // first order reaches too far (cloth or links going slack on the way): back to the best and on with half the stride
      state = best;
      stride = Math.min(stride, longest) / 2;
      if (stride < shortest) break;
    }
    const J = measureAdjusterInfluence(rig, solver, state);
    for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) J.set(i, j, J.get(i, j) / targets[i]);
    const svd = new SingularValueDecomposition(J, { autoTranspose: true });
    const strongest = svd.diagonal[0];
    if (!(strongest > 0)) {
      // everything slack: take in a little everywhere
      state = turnTo(
        rig,
        solver,
        state,
        links.map((k) => state.L0[k] - options.stride / 3),
        options,
      );
      continue;
    }
    const mu = softness * strongest;
    const home = links.map((k, i) => reference[i] - state.L0[k]);
    // (JᵀJ + μ²) d = Jᵀ miss + μ² home
    const left = J.transpose().mmul(J);
    for (let i = 0; i < n; i++) left.set(i, i, left.get(i, i) + mu * mu);
    const right = J.transpose().mmul(Matrix.columnVector(miss));
    for (let i = 0; i < n; i++) right.set(i, 0, right.get(i, 0) + mu * mu * home[i]);
    const d = new SingularValueDecomposition(left, { autoTranspose: true }).solve(right).to1DArray();
    longest = Math.max(...d.map(Math.abs));
    const share = longest > stride ? stride / longest : 1;
    longest *= share;
    state = turnTo(
      rig,
      solver,
      state,
      links.map((k, i) => state.L0[k] + share * d[i]),
      options,
    );
    if (longest < 2e-4 || round % 4 === 3) softness /= 4;
  }
  return { ...(best ?? state), off: least };
}

/** The check that forces hold before rounding. */
export function checkLengths(name: string, off: number): Check {
  return {
    station: "rig",
    text: `stage ${name}: forces before moves are rounded, off by at most`,
    value: off,
    limit: 0.005,
    holds: off <= 0.005,
  };
}

/**
 * Singular values of the adjusters' influence on each other, greatest first: how strongly each tension mode shows in forces.
 * @shape influence: rows of the adjusters first, n columns, kN per m @units kN/mm
 */
export function measureModes(rig: Rig, influence: ArrayLike<number>): number[] {
  const n = rig.adjusters.length;
  const J = new Matrix(n, n);
  for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) J.set(i, j, influence[i * n + j] / 1000);
  return new SingularValueDecomposition(J, { autoTranspose: true }).diagonal;
}

/** Tension modes that forces determine: singular values above 5 % of the greatest. */
export function countModes(singular: readonly number[]): number {
  return singular.filter((s) => s > 0.05 * singular[0]).length;
}
