// What small changes do to an equilibrium, to first order, from its tangent: slack lengths turned, supports moved, cloth cut
// otherwise. Source: K dx = −∂f/∂p dp; own derivation.
import { type NumericFactor, solveInPlace } from "../numeric/factor.ts";
import { measureForces, measureLink } from "./elements.ts";
import { assembleTangentInPlace, type EquilibriumSolver, factorShifted } from "./equilibrium.ts";
import type { Structure } from "./structure.ts";

/** What slack lengths turned do, for each metre ADDED (an adjuster opened). */
export interface Response {
  /** Forces of links, row-major, columns: links turned. @units kN/m */
  forces: Float64Array<ArrayBuffer>;
  /** Moves of nodes, three rows each, columns: links turned. @units m/m */
  moves: Float64Array<ArrayBuffer>;
}

/**
 * Response of link forces and node places to unit changes of slack lengths at an equilibrium. Leaves the solver with the factor
 * of this state.
 * @shape rows: read.links and read.nodes, columns: links of `turned`; out row-major
 */
export function measureResponse(
  solver: EquilibriumSolver,
  x: Float64Array<ArrayBuffer>,
  L0: Float64Array<ArrayBuffer>,
  turned: readonly number[],
  read: { links: readonly number[]; nodes: readonly number[] },
): Response {
  const { structure: s, unknown, n } = solver;
  assembleTangentInPlace(solver, x, L0);
  factorShifted(solver, 0);
  const right = new Float64Array(n * turned.length);
  const directs = turned.map((k, column) => {
    const { stiffness, length, u } = measureLink(s, x, L0, k);
    const direct = stiffness > 0 ? (-s.EA[k] * length) / (L0[k] * L0[k]) : 0;
    for (let i = 0; i < 3; i++) {
      const a = unknown[3 * s.link[2 * k] + i];
      const b = unknown[3 * s.link[2 * k + 1] + i];
      // f_a = −N u, f_b = +N u; right side = −∂f/∂L0
      if (a >= 0) right[column * n + a] += direct * u[i];
      if (b >= 0) right[column * n + b] -= direct * u[i];
    }
    return direct;
  });
  solveInPlace(solver.factor as NumericFactor, right, turned.length);
  const at = (column: number, node: number, i: number) => {
    const c = unknown[3 * node + i];
    return c < 0 ? 0 : right[column * n + c];
  };
  const forces = new Float64Array(read.links.length * turned.length);
  read.links.forEach((k, r) => {
    const { stiffness, u } = measureLink(s, x, L0, k);
    turned.forEach((t, c) => {
      let stretch = 0;
      for (let i = 0; i < 3; i++) stretch += u[i] * (at(c, s.link[2 * k + 1], i) - at(c, s.link[2 * k], i));
      forces[r * turned.length + c] = stiffness * stretch + (k === t ? directs[c] : 0);
    });
  });
  const moves = new Float64Array(3 * read.nodes.length * turned.length);
  read.nodes.forEach((node, r) => {
    for (let i = 0; i < 3; i++)
      for (let c = 0; c < turned.length; c++) moves[(3 * r + i) * turned.length + c] = at(c, node, i);
  });
  return { forces, moves };
}

/**
 * Change of link forces for unit changes of slack lengths at an equilibrium: the influence matrix.
 * @shape rows: links of `read`, columns: links of `turned`; out row-major
 * @units kN/m, per metre of slack length ADDED
 */
export function measureInfluence(
  solver: EquilibriumSolver,
  x: Float64Array<ArrayBuffer>,
  L0: Float64Array<ArrayBuffer>,
  turned: readonly number[],
  read: readonly number[],
): Float64Array<ArrayBuffer> {
  return measureResponse(solver, x, L0, turned, { links: read, nodes: [] }).forces;
}

/** A structure a little otherwise than it stands: other slack lengths, moved supports (in x) or another cloth. */
export interface Otherwise {
  structure: Structure;
  x: Float64Array<ArrayBuffer>;
  L0: Float64Array<ArrayBuffer>;
}

/**
 * Forces of links after a small change, to first order: the free nodes follow the tangent of the state as it stands.
 * @shape change: supports moved stand in its x; out: force change of each link of `read`, kN, for the change as it is
 */
export function measureChange(
  solver: EquilibriumSolver,
  x: Float64Array<ArrayBuffer>,
  L0: Float64Array<ArrayBuffer>,
  change: Otherwise,
  read: readonly number[],
): number[] {
  const { structure: s, unknown, n } = solver;
  const before = measureForces(s, x, L0).force;
  const after = measureForces(change.structure, change.x, change.L0).force;
  const move = new Float64Array(n);
  for (let c = 0; c < before.length; c++) if (unknown[c] >= 0) move[unknown[c]] = before[c] - after[c];
  solveInPlace(solver.factor as NumericFactor, move);
  const y = change.x.slice();
  for (let c = 0; c < y.length; c++) if (unknown[c] >= 0) y[c] += move[unknown[c]];
  return read.map((k) => measureLink(change.structure, y, change.L0, k).force - measureLink(s, x, L0, k).force);
}
