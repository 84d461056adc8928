// A hanging cable as a chain of links between two level supports, for published and closed-form cases.
import {
  createEquilibriumSolver,
  type EquilibriumState,
  solveEquilibrium,
} from "../../src/core/structure/equilibrium.ts";
import { buildStructure, type ClothElements, type Structure } from "../../src/core/structure/structure.ts";

export const noCloth: ClothElements = {
  tri: new Uint32Array(0),
  flat: new Float64Array(0),
  law: new Uint16Array(0),
  laws: [],
};

/** A cable of given unstrained link lengths between two level supports, self-weight lumped, with a point load at one node. m, kN */
export function hangChain(
  lengths: number[],
  span: number,
  weight: number,
  EA: number,
  load = { at: 0, kN: 0 },
): EquilibriumState & { structure: Structure } {
  const n = lengths.length;
  const whole = lengths.reduce((sum, l) => sum + l, 0);
  const xyz = new Float64Array(3 * (n + 1));
  const forces = new Float64Array(xyz.length);
  const link = new Uint32Array(2 * n);
  let at = 0;
  for (let i = 0; i <= n; i++) {
    xyz.set([span * at, 0, -0.4 * span * at * (1 - at)], 3 * i);
    if (i === n) break;
    at += lengths[i] / whole;
    forces[3 * i + 2] -= (weight * lengths[i]) / 2;
    forces[3 * i + 5] -= (weight * lengths[i]) / 2;
    link.set([i, i + 1], 2 * i);
  }
  forces[3 * load.at + 2] -= load.kN;
  const held = new Uint8Array(xyz.length).map((_, c) => (c < 3 || c >= 3 * n || c % 3 === 1 ? 1 : 0));
  // a loose chain is followed from a soft cable to the real one, so that no link goes slack on the way
  let x = xyz;
  let found: (EquilibriumState & { structure: Structure }) | null = null;
  const soft = Math.min(20 * (weight * whole + load.kN), 0.1 * EA);
  const steps = Math.ceil(Math.log(EA / soft) / Math.log(3));
  for (let s = 0; s <= steps; s++) {
    const links = { link, EA: new Float64Array(n).fill(soft * (EA / soft) ** (s / steps)), strut: new Uint8Array(n) };
    const structure = buildStructure({ xyz, held, load: forces }, noCloth, links);
    found = { ...solveEquilibrium(createEquilibriumSolver(structure), x, new Float64Array(lengths)), structure };
    x = found.x;
  }
  if (!found) throw new Error("nothing solved");
  return found;
}
