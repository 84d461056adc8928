// Forces of the finished rig when everything is warmer or colder than the reference: anchors stay, or move with their frame.
import type { FactsTensioning } from "../../records/rig.ts";
import type { EquilibriumSolver } from "../../structure/equilibrium.ts";
import type { Rig } from "../build/buildRig.ts";
import { readForces } from "../stages/readState.ts";
import { type RigState, solveState } from "../stages/solveLengths.ts";
import { type Expansion, growCloth, warmAnchors, warmLengths } from "./warmRig.ts";

/** Steps of the table from the reference temperature, K. */
export const temperatureSteps = [-20, -10, 0, 10, 20];

/**
 * Table of forces by temperature, cables and cloth alike.
 * @source free strain α·ΔT on slack lengths and flat shapes; own
 */
export function buildTemperatureTable(
  rig: Rig,
  solver: EquilibriumSolver,
  finished: RigState,
  expansion: Expansion,
  reference: number,
): FactsTensioning["temperatureTable"] {
  return temperatureSteps.map((step) => {
    if (step === 0) return { temperature: reference, forces: readForces(rig, finished) };
    const L0 = warmLengths(rig, finished.L0, expansion, step);
    const structure = growCloth(rig.structure, { warp: expansion.cloth * step, weft: expansion.cloth * step });
    const warm = { ...rig, structure };
    return {
      temperature: reference + step,
      forces: readForces(
        warm,
        solveState(warm, { ...solver, structure }, { x: warmAnchors(rig, finished.x, expansion, step), L0 }),
      ),
    };
  });
}
