// Weight of cloth and cables on the nodes, where the job asks for it. Fittings, masts and adjusters are left out.
import type { RigInput } from "../rigInput.ts";

/** m/s2, standard gravity (ISO 80000-3) */
const gravity = 9.80665;

/** What carries weight: cloth by flat area (m2), cables by slack length (m). */
export interface Weighed {
  tri: ArrayLike<number>;
  area: ArrayLike<number>;
  cables: readonly { edge: string | null; nodes: readonly number[]; firstLink: number }[];
  L0: ArrayLike<number>;
}

/** Loads, kN, z down; null where the job does not ask for them. @shape 3*nN */
export function weighStructure(input: RigInput, nN: number, parts: Weighed): Float64Array<ArrayBuffer> | null {
  if (!input.rig.selfWeight) return null;
  const load = new Float64Array(3 * nN);
  const put = (node: number, kg: number) => {
    load[3 * node + 2] -= (kg * gravity) / 1000;
  };
  for (let t = 0; t < parts.area.length; t++)
    for (let k = 0; k < 3; k++) put(parts.tri[3 * t + k], (input.fabric.mass * parts.area[t]) / 3);
  for (const c of parts.cables) {
    const mass = c.edge === null ? 0 : (input.cables[c.edge]?.type.mass ?? 0);
    for (let i = 0; i + 1 < c.nodes.length; i++)
      for (const v of [c.nodes[i], c.nodes[i + 1]]) put(v, (mass * parts.L0[c.firstLink + i]) / 2);
  }
  return load;
}
