// One pass of natural force densities: every triangle under membrane stress acts like three links along its sides, every cable
// like one link; the free vertices are where those links balance. The iteration to a form and its checks stand elsewhere.
// Source: natural force density method, Comput. Methods Appl. Mech. Eng. 197 (2008); force density method, ibid. 3 (1974).
import {
  analyseSymmetric,
  factorSymmetric,
  type NumericFactor,
  refactorInPlace,
  solveInPlace,
} from "../../numeric/factor.ts";
import { buildPattern } from "../../numeric/pattern.ts";
import { PlanError } from "../../problem.ts";
import type { Surface } from "../../surface/surface.ts";

/**
 * The linear system of the free vertices of one surface; its factor is kept and refilled pass by pass.
 * @shape unknown nV: number of a free vertex, -1 for a held one; vertex nFree; lines 2*nL; slots: six a triangle, then three
 *   a line (packed lower triangles, see numeric/pattern.ts)
 */
export interface ForceDensitySystem {
  unknown: Int32Array<ArrayBuffer>;
  vertex: Uint32Array<ArrayBuffer>;
  lines: Uint32Array<ArrayBuffer>;
  slot: Int32Array<ArrayBuffer>;
  values: Float64Array<ArrayBuffer>;
  sides: Float64Array<ArrayBuffer>;
  symbolic: ReturnType<typeof analyseSymmetric>;
  factor: NumericFactor | undefined;
}

/**
 * Force densities, tension positive.
 * @shape side 3*nT: side k lies opposite corner k of its triangle; line nL: force over length
 * @units kN/m
 */
export interface ForceDensities {
  side: Float64Array<ArrayBuffer>;
  line: Float64Array<ArrayBuffer>;
}

/**
 * System of a surface for held vertices and cable lines; analysed once, good for every position and force.
 * @shape fixed nV, 1 = held; lines 2*nL vertex pairs
 */
export function buildForceDensitySystem(
  surface: Surface,
  fixed: Uint8Array<ArrayBuffer>,
  lines: Uint32Array<ArrayBuffer>,
): ForceDensitySystem {
  const { tri } = surface;
  const nV = surface.xyz.length / 3;
  const nT = tri.length / 3;
  const nL = lines.length / 2;
  const unknown = new Int32Array(nV).fill(-1);
  let nFree = 0;
  for (let v = 0; v < nV; v++) if (!fixed[v]) unknown[v] = nFree++;
  const vertex = new Uint32Array(nFree);
  for (let v = 0; v < nV; v++) if (unknown[v] >= 0) vertex[unknown[v]] = v;
  const start = new Uint32Array(nT + nL + 1);
  for (let e = 0; e < nT + nL; e++) start[e + 1] = start[e] + (e < nT ? 3 : 2);
  const dof = new Int32Array(tri.length + lines.length);
  for (let p = 0; p < tri.length; p++) dof[p] = unknown[tri[p]];
  for (let p = 0; p < lines.length; p++) dof[tri.length + p] = unknown[lines[p]];
  const { pattern, slot } = buildPattern(nFree, start, dof);
  return {
    unknown,
    vertex,
    lines,
    slot,
    values: new Float64Array(pattern.rowIndex.length),
    sides: new Float64Array(3 * nFree),
    symbolic: analyseSymmetric(pattern),
    factor: undefined,
  };
}

/**
 * Force densities of the sides for the same stress in every direction: stress·cot(opposite angle)/2, negative where that
 * angle is obtuse.
 * @units stress kN/m
 * @throws PlanError triangle-flat: a triangle without area
 * @source CMAME 197 (2008), isotropic case
 */
export function measureIsotropicDensities(
  surface: Surface,
  stress: number,
  out = new Float64Array(surface.tri.length),
): Float64Array<ArrayBuffer> {
  const { xyz: x, tri } = surface;
  for (let t = 0; t < tri.length; t += 3) {
    const a = 3 * tri[t];
    const b = 3 * tri[t + 1];
    const c = 3 * tri[t + 2];
    const ux = x[c] - x[b];
    const uy = x[c + 1] - x[b + 1];
    const uz = x[c + 2] - x[b + 2];
    const vx = x[a] - x[c];
    const vy = x[a + 1] - x[c + 1];
    const vz = x[a + 2] - x[c + 2];
    const wx = x[b] - x[a];
    const wy = x[b + 1] - x[a + 1];
    const wz = x[b + 2] - x[a + 2];
    const nx = uy * vz - uz * vy;
    const ny = uz * vx - ux * vz;
    const nz = ux * vy - uy * vx;
    const twice = Math.sqrt(nx * nx + ny * ny + nz * nz);
    if (!(twice > 0)) throw flatTriangle(t / 3);
    const f = (-0.5 * stress) / twice;
    out[t] = f * (vx * wx + vy * wy + vz * wz);
    out[t + 1] = f * (wx * ux + wy * uy + wz * uz);
    out[t + 2] = f * (ux * vx + uy * vy + uz * vz);
  }
  return out;
}

/**
 * Force densities of the sides for a stress given in the cloth's own directions.
 * @shape stress 3*nT: warp, weft, shear; warp 3*nT: warp direction of each triangle, of any length, laid into its plane
 * @units stress kN/m
 * @throws PlanError triangle-flat; warp-direction: the direction stands square on its triangle
 * @source CMAME 197 (2008), q = A t T^-T S / l²; differs: the same three numbers in closed form, q of side ij =
 *   -A·grad(i)·S·grad(j) with the gradients of the corner functions, which needs no inverse
 */
export function measureDensities(
  surface: Surface,
  stress: Float64Array<ArrayBuffer>,
  warp: Float64Array<ArrayBuffer>,
  out = new Float64Array(surface.tri.length),
): Float64Array<ArrayBuffer> {
  const { xyz, tri } = surface;
  const e = new Float64Array(6);
  for (let t = 0; t < tri.length; t += 3) {
    const area = layInCloth(xyz, tri, warp, t, e);
    const [sw, sf, shear] = [stress[t], stress[t + 1], stress[t + 2]];
    for (let k = 0; k < 3; k++) {
      const i = 2 * ((k + 1) % 3);
      const j = 2 * ((k + 2) % 3);
      const product = e[i] * (sf * e[j] - shear * e[j + 1]) + e[i + 1] * (sw * e[j + 1] - shear * e[j]);
      out[t + k] = -product / (4 * area);
    }
  }
  return out;
}

/** Sides of triangle t/3 in its cloth directions, side k opposite corner k at 2k; returns the area. */
function layInCloth(
  x: Float64Array<ArrayBuffer>,
  tri: Uint32Array<ArrayBuffer>,
  warp: Float64Array<ArrayBuffer>,
  t: number,
  e: Float64Array<ArrayBuffer>,
): number {
  const [a, b, c] = [3 * tri[t], 3 * tri[t + 1], 3 * tri[t + 2]];
  const u = [x[c] - x[b], x[c + 1] - x[b + 1], x[c + 2] - x[b + 2]];
  const v = [x[a] - x[c], x[a + 1] - x[c + 1], x[a + 2] - x[c + 2]];
  const n = cross(u, v);
  const twice = Math.sqrt(dot(n, n));
  if (!(twice > 0)) throw flatTriangle(t / 3);
  for (let k = 0; k < 3; k++) n[k] /= twice;
  const given = [warp[t], warp[t + 1], warp[t + 2]];
  const off = dot(given, n);
  const w = given.map((value, k) => value - off * n[k]);
  const length = Math.sqrt(dot(w, w));
  if (!(length > 1e-9 * Math.sqrt(dot(given, given))))
    throw new PlanError(
      "warp-direction",
      `the warp direction of triangle ${t / 3} stands square on it or is zero: give one that runs along the surface`,
      `triangle ${t / 3}`,
      { triangle: t / 3 },
    );
  const f = cross(n, w);
  e[0] = dot(u, w) / length;
  e[1] = dot(u, f) / length;
  e[2] = dot(v, w) / length;
  e[3] = dot(v, f) / length;
  e[4] = -e[0] - e[2];
  e[5] = -e[1] - e[3];
  return twice / 2;
}

/**
 * New places of all vertices: the free ones where the given force densities balance (and carry the load), the held ones as
 * they are. Refills the factor of the system.
 * @shape load 3*nV, force on each vertex, kN
 * @throws PlanError form-unstable: facts vertex and pivot; the force densities do not hold that vertex
 */
export function stepForceDensity(
  system: ForceDensitySystem,
  surface: Surface,
  densities: ForceDensities,
  load?: Float64Array<ArrayBuffer>,
): Float64Array<ArrayBuffer> {
  const { vertex, sides, values } = system;
  const n = vertex.length;
  values.fill(0);
  for (let i = 0; i < n; i++)
    for (let r = 0; r < 3; r++) sides[r * n + i] = load === undefined ? 0 : load[3 * vertex[i] + r];
  addTriangles(system, surface, densities.side);
  addLines(system, surface, densities.line);
  refill(system);
  if (system.factor !== undefined) solveInPlace(system.factor, sides, 3);
  const xyz = surface.xyz.slice();
  for (let i = 0; i < n; i++) for (let r = 0; r < 3; r++) xyz[3 * vertex[i] + r] = sides[r * n + i];
  return xyz;
}

function refill(system: ForceDensitySystem): void {
  try {
    if (system.factor === undefined) system.factor = factorSymmetric(system.symbolic, system.values);
    else refactorInPlace(system.factor, system.values);
  } catch (error) {
    if (!(error instanceof PlanError) || error.code !== "not-positive-definite") throw error;
    const v = system.vertex[Number(error.facts.row)];
    throw new PlanError(
      "form-unstable",
      `the membrane stress and cable forces do not hold vertex ${v} in place (pivot ${error.facts.pivot} kN/m, must be above 0): hold more vertices, give the cables more force, or mend triangles with very obtuse angles there`,
      `vertex ${v}`,
      { vertex: v, pivot: error.facts.pivot },
    );
  }
}

function addTriangles(system: ForceDensitySystem, { xyz: x, tri }: Surface, side: Float64Array<ArrayBuffer>): void {
  const { unknown, slot, values } = system;
  for (let t = 0, s = 0; t < tri.length; t += 3, s += 6) {
    const q0 = side[t];
    const q1 = side[t + 1];
    const q2 = side[t + 2];
    const a = slot[s];
    const b = slot[s + 2];
    const c = slot[s + 5];
    if (a >= 0) values[a] += q1 + q2;
    if (b >= 0) values[b] += q2 + q0;
    if (c >= 0) values[c] += q0 + q1;
    if (a >= 0 && b >= 0 && c >= 0) {
      values[slot[s + 4]] -= q0;
      values[slot[s + 3]] -= q1;
      values[slot[s + 1]] -= q2;
      continue;
    }
    for (let k = 0; k < 3; k++) {
      const v = tri[t + ((k + 1) % 3)];
      const w = tri[t + ((k + 2) % 3)];
      const place = slot[s + (k === 0 ? 4 : k === 1 ? 3 : 1)];
      if (place >= 0) values[place] -= side[t + k];
      else if (unknown[v] >= 0) pullToHeld(system, x, unknown[v], w, side[t + k]);
      else if (unknown[w] >= 0) pullToHeld(system, x, unknown[w], v, side[t + k]);
    }
  }
}

function addLines(system: ForceDensitySystem, { xyz: x, tri }: Surface, line: Float64Array<ArrayBuffer>): void {
  const { unknown, slot, values, lines } = system;
  for (let l = 0, s = 2 * tri.length; 2 * l < lines.length; l++, s += 3) {
    const q = line[l];
    const v = lines[2 * l];
    const w = lines[2 * l + 1];
    if (slot[s] >= 0) values[slot[s]] += q;
    if (slot[s + 2] >= 0) values[slot[s + 2]] += q;
    if (slot[s + 1] >= 0) values[slot[s + 1]] -= q;
    else if (unknown[v] >= 0) pullToHeld(system, x, unknown[v], w, q);
    else if (unknown[w] >= 0) pullToHeld(system, x, unknown[w], v, q);
  }
}

/** Right-hand side of a link from unknown i to a held vertex. */
function pullToHeld(
  { sides, vertex }: ForceDensitySystem,
  x: Float64Array<ArrayBuffer>,
  i: number,
  held: number,
  q: number,
) {
  const n = vertex.length;
  sides[i] += q * x[3 * held];
  sides[n + i] += q * x[3 * held + 1];
  sides[2 * n + i] += q * x[3 * held + 2];
}

function flatTriangle(t: number): PlanError {
  return new PlanError(
    "triangle-flat",
    `triangle ${t} has no area, so its sides have no force density: merge its vertices or swap its longest side`,
    `triangle ${t}`,
    { triangle: t },
  );
}

function dot(a: readonly number[], b: readonly number[]): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

function cross(a: readonly number[], b: readonly number[]): number[] {
  return [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
}
