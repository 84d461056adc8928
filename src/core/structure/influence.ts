// What turning adjusters does to forces, to first order, from the tangent at an equilibrium.
import { type NumericFactor, solveInPlace } from "../numeric/factor.ts";
import { measureLink } from "./elements.ts";
import { assembleTangentInPlace, type EquilibriumSolver, factorShifted } from "./equilibrium.ts";

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
