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

/**
 * Squared lengths and dot product of the erected sides p1 = x1 − x0, p2 = x2 − x0: p1·p1, p1·p2, p2·p2 for each triangle.
 * @shape xyz 3*nV, tri 3*nT -> 3*nT @units m2
 */
export function buildErectedMetric(
  xyz: Float64Array<ArrayBuffer>,
  tri: Uint32Array<ArrayBuffer>,
): Float64Array<ArrayBuffer> {
  const out = new Float64Array(tri.length);
  for (let t = 0; t < tri.length; t += 3) {
    const a = 3 * tri[t];
    const b = 3 * tri[t + 1];
    const c = 3 * tri[t + 2];
    for (let k = 0; k < 3; k++) {
      const p = xyz[b + k] - xyz[a + k];
      const q = xyz[c + k] - xyz[a + k];
      out[t] += p * p;
      out[t + 1] += p * q;
      out[t + 2] += q * q;
    }
  }
  return out;
}

/**
 * Green strain of flat triangle t pulled onto the form, F = x·X⁻¹, E = ½(FᵀF − I), with what its derivatives need:
 * out = E_ww, E_ff, 2E_wf, the flat triangle's doubled signed area, then C = FᵀF as C_ww, C_ff, C_wf.
 * @shape metric 3*nT (buildErectedMetric), xy 2*nV flat points of the relaxed cloth, tri 3*nT, out at least 7
 * @units xy in metres, warp along x
 * @source facts.md "Strain and stress"
 */
export function measureTriangleStrain(
  metric: Float64Array<ArrayBuffer>,
  xy: Float64Array<ArrayBuffer>,
  tri: Uint32Array<ArrayBuffer>,
  t: number,
  out: Float64Array<ArrayBuffer>,
): Float64Array<ArrayBuffer> {
  const a = 2 * tri[3 * t];
  const b = 2 * tri[3 * t + 1];
  const c = 2 * tri[3 * t + 2];
  const ux = xy[b] - xy[a];
  const uy = xy[b + 1] - xy[a + 1];
  const vx = xy[c] - xy[a];
  const vy = xy[c + 1] - xy[a + 1];
  const det = ux * vy - uy * vx;
  const m11 = metric[3 * t];
  const m12 = metric[3 * t + 1];
  const m22 = metric[3 * t + 2];
  const d2 = det * det;
  const ww = (m11 * vy * vy - 2 * m12 * vy * uy + m22 * uy * uy) / d2;
  const ff = (m11 * vx * vx - 2 * m12 * vx * ux + m22 * ux * ux) / d2;
  const wf = (-m11 * vx * vy + m12 * (ux * vy + uy * vx) - m22 * ux * uy) / d2;
  out[0] = (ww - 1) / 2;
  out[1] = (ff - 1) / 2;
  out[2] = wf;
  out[3] = det;
  out[4] = ww;
  out[5] = ff;
  out[6] = wf;
  return out;
}

/** Least principal stress of a plane state, kN/m: at or below 0 the cloth would be compressed. */
export function measureLeastPrincipal(warp: number, weft: number, shear: number): number {
  const half = (warp - weft) / 2;
  return (warp + weft) / 2 - Math.sqrt(half * half + shear * shear);
}
