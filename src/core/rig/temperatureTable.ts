// Forces of the finished rig when everything is warmer or colder than the reference: anchors stay where they are.
import type { FactsTensioning } from "../records/rig.ts";
import type { EquilibriumSolver } from "../structure/equilibrium.ts";
import type { Rig } from "./buildRig.ts";
import { readForces } from "./readState.ts";
import { type RigState, solveState } from "./solveLengths.ts";

/** Steps of the table from the reference temperature, K. */
export const temperatureSteps = [-20, -10, 0, 10, 20];

/** Expansion of adjusters and masts, carbon steel, 1/K (EN 1993-1-11:2006 3.3, from memory). */
export const steelExpansion = 12e-6;

/**
 * Table of forces by temperature, cables and cloth alike.
 * @shape alpha: 1/K of every cable in the order of rig.cables; cloth 1/K
 * @source free strain α·ΔT on slack lengths and flat shapes; own
 */
export function buildTemperatureTable(
  rig: Rig,
  solver: EquilibriumSolver,
  finished: RigState,
  alpha: { cables: number[]; cloth: number },
  reference: number,
): FactsTensioning["temperatureTable"] {
  return temperatureSteps.map((step) => {
    if (step === 0) return { temperature: reference, forces: readForces(rig, finished) };
    const L0 = finished.L0.slice();
    for (const a of rig.adjusters) L0[a.link] *= 1 + steelExpansion * step;
    for (const s of rig.struts) L0[s.link] *= 1 + steelExpansion * step;
    rig.cables.forEach((c, k) => {
      for (let i = 0; i + 1 < c.nodes.length; i++) L0[c.firstLink + i] *= 1 + alpha.cables[k] * step;
    });
    const grown = 1 + alpha.cloth * step;
    const structure = {
      ...rig.structure,
      shape: rig.structure.shape.map((g) => g / grown),
      area: rig.structure.area.map((a) => a * grown * grown),
    };
    const warm = { ...rig, structure };
    return {
      temperature: reference + step,
      forces: readForces(warm, solveState(warm, { ...solver, structure }, { x: finished.x, L0 })),
    };
  });
}
