// The state of the roof that fits the crew's readings best: how far each adjuster is from its planned length. Every reading weighs
// by its error; lengths are believed to lie near the plan, so that what readings do not tell stays as planned.
// Source: maximum of the posterior by Gauss–Newton, own; modes a roof hung from corners does not show in forces are told by places.
import { Matrix, solve } from "ml-matrix";
import { measureLink } from "../../structure/elements.ts";
import type { EquilibriumSolver } from "../../structure/equilibrium.ts";
import { measureInfluence, measureResponse } from "../../structure/influence.ts";
import type { Rig } from "../build/buildRig.ts";
import { findTautest } from "../stages/readState.ts";
import { type RigState, turnTo } from "../stages/solveLengths.ts";
import type { SortedReadings } from "./sortReadings.ts";

/** How well things are known: one standard deviation. */
export interface ReadingTrust {
  /** Share of a force reading. */
  force: number;
  /** Surveyed place, m. */
  place: number;
  /** Adjuster's length against the plan, m. */
  length: number;
}

/**
 * Survey to 3 mm each way, adjusters within a centimetre (common practice). A bound of ±a is a standard deviation of a/√3
 * (JCGM 100:2008, 4.3.7, rectangular distribution; from memory).
 */
export const trustDefaults = { place: 0.003 / Math.sqrt(3), length: 0.01 };

/** What is known of the lengths before a set of readings: where each adjuster is believed to be, and how firmly. */
export interface LengthBelief {
  /** Length over the plan, m. */
  off: number[];
  /** Inverse of the covariance, 1/m2. @shape n × n */
  H: Matrix;
}

/** A fitted state. */
export interface ReadingFit {
  state: RigState;
  /** Length over the plan of each adjuster, m, and its standard deviation. */
  off: number[];
  sure: number[];
  /** Inverse of the covariance of the lengths, with all readings, 1/m2. @shape n × n */
  H: Matrix;
  /** Standard deviation of each adjuster's force as fitted, kN. */
  sureForce: number[];
  /** How far the lengths lie from what was believed before, squared deviations summed; about n where all is as believed. */
  strain: number;
  /** Misfit of each reading over its own deviation: forces, then corners (the longest way). */
  misfit: { row: number; id: string; times: number }[];
}

/** Smallest force whose share counts as error, of the greatest reading: a gauge has a smallest mark. */
const leastShare = 0.02;

interface System {
  H: Matrix;
  g: number[];
  cost: number;
}

/** What the plan alone says of the lengths. */
export function believePlan(rig: Rig, trust: ReadingTrust): LengthBelief {
  const n = rig.adjusters.length;
  return { off: new Array(n).fill(0), H: Matrix.eye(n).mul(1 / trust.length ** 2) };
}

/** What a fit says of the lengths after turns that were told, m added; each is set to `turnError`, m. */
export function believeTurned(
  fit: Pick<ReadingFit, "off" | "H">,
  turns: readonly number[],
  turnError: number,
): LengthBelief {
  const n = fit.off.length;
  const spread = solve(fit.H, Matrix.eye(n)).add(Matrix.eye(n).mul(turnError ** 2));
  return { off: fit.off.map((q, i) => q + turns[i]), H: solve(spread, Matrix.eye(n)) };
}

/**
 * Fits lengths to readings, from the planned state.
 * @shape planned: the state the readings are held against; out: one number an adjuster
 */
export function fitReadings(
  rig: Rig,
  solver: EquilibriumSolver,
  planned: RigState,
  readings: SortedReadings,
  trust: ReadingTrust,
  belief: LengthBelief = believePlan(rig, trust),
): ReadingFit {
  const n = rig.adjusters.length;
  const links = rig.adjusters.map((a) => a.link);
  const home = links.map((k) => planned.L0[k]);
  const most = Math.max(...readings.forces.map((f) => f.kN), 0);
  const deviation = (kN: number) => Math.max(trust.force * Math.max(kN, leastShare * most), 1e-3);
  const measure = (state: RigState) => {
    const rows = readings.forces.map((f) => {
      const link = findTautest(rig, state, f.member);
      const { force } = measureLink(rig.structure, state.x, state.L0, link);
      return { link, miss: (force - f.kN) / deviation(f.kN), by: deviation(f.kN) };
    });
    const places = readings.corners.map((c) => [0, 1, 2].map((k) => (state.x[3 * c.node + k] - c.at[k]) / trust.place));
    const off = links.map((k, i) => state.L0[k] - home[i]);
    const sum = (values: number[]) => values.reduce((s, q) => s + q * q, 0);
    const from = off.map((q, i) => q - belief.off[i]);
    const pull = belief.H.mmul(Matrix.columnVector(from)).to1DArray();
    const strain = pull.reduce((s, q, i) => s + q * from[i], 0);
    const cost = sum(rows.map((r) => r.miss)) + sum(places.flat()) + strain;
    return { rows, places, off, pull, strain, cost };
  };
  const assemble = (state: RigState, at: ReturnType<typeof measure>): System => {
    const nodes = readings.corners.map((c) => c.node);
    const r = measureResponse(solver, state.x, state.L0, links, { links: at.rows.map((q) => q.link), nodes });
    const H = belief.H.clone();
    const g = at.pull.slice();
    const add = (row: (j: number) => number, miss: number) => {
      for (let i = 0; i < n; i++) {
        g[i] += row(i) * miss;
        for (let j = 0; j < n; j++) H.set(i, j, H.get(i, j) + row(i) * row(j));
      }
    };
    at.rows.forEach((q, m) => {
      add((j) => r.forces[m * n + j] / q.by, q.miss);
    });
    at.places.flat().forEach((miss, m) => {
      add((j) => r.moves[m * n + j] / trust.place, miss);
    });
    return { H, g, cost: at.cost };
  };
  let state = planned;
  let at = measure(state);
  let system = assemble(state, at);
  for (let round = 0; round < 20; round++) {
    const step = solve(system.H, Matrix.columnVector(system.g.map((q) => -q))).to1DArray();
    const longest = Math.max(...step.map(Math.abs));
    if (longest < 2e-5) break;
    let share = Math.min(1, 0.006 / longest);
    let taken = false;
    for (let halving = 0; halving < 5 && !taken; halving++, share /= 2) {
      const lengths = links.map((k, i) => state.L0[k] + share * step[i]);
      const next = turnTo(rig, solver, state, lengths);
      const there = measure(next);
      if (!next.equilibrium.converged || there.cost > at.cost) continue;
      const gain = at.cost - there.cost;
      state = next;
      at = there;
      taken = gain > 1e-4 * (1 + at.cost);
      system = assemble(state, at);
      break;
    }
    if (!taken) break;
  }
  const spread = solve(system.H, Matrix.eye(n));
  const own = measureInfluence(solver, state.x, state.L0, links, links);
  const J = Matrix.from1DArray(n, n, own);
  const forceSpread = J.mmul(spread).mmul(J.transpose());
  const roots = (m: Matrix) => at.off.map((_, i) => Math.sqrt(Math.max(m.get(i, i), 0)));
  return {
    state,
    off: at.off,
    sure: roots(spread),
    H: system.H,
    sureForce: roots(forceSpread),
    strain: at.strain,
    misfit: [
      ...at.rows.map((q, m) => ({
        row: readings.forces[m].row,
        id: readings.forces[m].member.id,
        times: Math.abs(q.miss),
      })),
      ...at.places.map((p, m) => ({
        row: readings.corners[m].row,
        id: readings.corners[m].id,
        times: Math.sqrt(p[0] ** 2 + p[1] ** 2 + p[2] ** 2),
      })),
    ],
  };
}
