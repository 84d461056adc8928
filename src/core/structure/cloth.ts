// The orthotropic law of coated cloth and the strain of a flat triangle pulled onto the form.
// Does not know wrinkling, creep or load history. Formulas: facts.md "Strain and stress"; law as in Beccarelli 2015, eqs 3.9-3.15.
import { PlanError } from "../problem.ts";

/** Plane-stress stiffness, kN/m: D = [[ww, wf, 0], [wf, ff, 0], [0, 0, g]]; first axis warp, engineering shear. */
export interface ClothStiffness {
  ww: number;
  wf: number;
  ff: number;
  g: number;
}

/** The four constants of a cloth; nuWf: weft strain caused by unit warp strain. */
export interface ClothConstants {
  /** kN/m */
  Ew: number;
  Ef: number;
  nuWf: number;
  G: number;
}

/**
 * Stiffness matrix from the four constants.
 * @units kN/m
 * @throws PlanError cloth-constants: a stiffness at or below 0, or nuWf·nuFw at or above 1
 * @source Beccarelli 2015, eqs 3.9-3.15; nuFw = nuWf·Ef/Ew
 */
export function buildStiffness(c: ClothConstants): ClothStiffness {
  const nuFw = (c.nuWf * c.Ef) / c.Ew;
  const d = 1 - c.nuWf * nuFw;
  if (!(c.Ew > 0 && c.Ef > 0 && c.G > 0 && d > 0)) {
    throw new PlanError(
      "cloth-constants",
      `the cloth's constants are not those of a real cloth: Ew ${c.Ew}, Ef ${c.Ef}, G ${c.G} kN/m must be above 0 and nuWf·nuFw = ${(1 - d).toFixed(3)} below 1; correct the fabric in the job`,
      "fabric",
      { Ew: c.Ew, Ef: c.Ef, G: c.G, nuWf: c.nuWf },
    );
  }
  return { ww: c.Ew / d, wf: (nuFw * c.Ew) / d, ff: c.Ef / d, g: c.G };
}

/**
 * Green strain that carries a given stress: E0 = D⁻¹ S0, no shear.
 * @units stress kN/m, strain dimensionless
 */
export function measureTargetStrain(
  d: ClothStiffness,
  stress: { warp: number; weft: number },
): { warp: number; weft: number } {
  const det = d.ww * d.ff - d.wf * d.wf;
  return {
    warp: (d.ff * stress.warp - d.wf * stress.weft) / det,
    weft: (d.ww * stress.weft - d.wf * stress.warp) / det,
  };
}

/** Engineering strain of a Green strain: √(1 + 2E) − 1. */
export function measureEngineeringStrain(green: number): number {
  return Math.sqrt(1 + 2 * green) - 1;
}
