// Energy, forces and tangent of the elements of a structure. Constant-strain triangles, total Lagrangian (Green strain),
// two-node links of stiffness EA and slack length L0 with N = EA·(L − L0)/L0. Cables carry no compression, cloth neither
// (tensionField.ts). Formulas: Zienkiewicz & Taylor, The Finite Element Method, vol. 2, total Lagrangian form (from memory).
import type { Structure } from "./structure.ts";
import { relaxStress } from "./tensionField.ts";

/** Axial state of one link. */
export interface LinkState {
  /** kN, tension positive */
  force: number;
  /** m */
  length: number;
  /** dN/dL, kN/m; 0 where slack */
  stiffness: number;
  /** Unit vector from its first node to its second. */
  u: [number, number, number];
}

/** State of link k at positions x with slack lengths L0 (m). */
export function measureLink(s: Structure, x: Float64Array, L0: Float64Array, k: number): LinkState {
  const a = 3 * s.link[2 * k];
  const b = 3 * s.link[2 * k + 1];
  const dx = x[b] - x[a];
  const dy = x[b + 1] - x[a + 1];
  const dz = x[b + 2] - x[a + 2];
  const length = Math.sqrt(dx * dx + dy * dy + dz * dz);
  const force = (s.EA[k] * (length - L0[k])) / L0[k];
  const slack = force <= 0 && !s.strut[k];
  return {
    force: slack ? 0 : force,
    length,
    stiffness: slack ? 0 : s.EA[k] / L0[k],
    u: [dx / length, dy / length, dz / length],
  };
}

/** Room for one triangle's numbers, owned by the caller. */
export interface TriangleRoom {
  /** Deformation gradient, columns warp and weft: (x1, y1, z1, x2, y2, z2). */
  F: Float64Array;
  strain: Float64Array;
  stress: Float64Array;
  tangent: Float64Array;
}

/** Makes the room that measureTriangle fills. */
export function buildTriangleRoom(): TriangleRoom {
  return {
    F: new Float64Array(6),
    strain: new Float64Array(3),
    stress: new Float64Array(3),
    tangent: new Float64Array(6),
  };
}

/** Fills the room with strain, relaxed stress (kN/m) and tangent of triangle t; returns 0 taut, 1 wrinkled, 2 slack. */
export function measureTriangle(s: Structure, x: Float64Array, t: number, room: TriangleRoom): 0 | 1 | 2 {
  const { F, strain } = room;
  F.fill(0);
  for (let a = 0; a < 3; a++) {
    const v = 3 * s.tri[3 * t + a];
    const gw = s.shape[6 * t + 2 * a];
    const gf = s.shape[6 * t + 2 * a + 1];
    for (let i = 0; i < 3; i++) {
      F[i] += x[v + i] * gw;
      F[3 + i] += x[v + i] * gf;
    }
  }
  strain[0] = (F[0] * F[0] + F[1] * F[1] + F[2] * F[2] - 1) / 2;
  strain[1] = (F[3] * F[3] + F[4] * F[4] + F[5] * F[5] - 1) / 2;
  strain[2] = F[0] * F[3] + F[1] * F[4] + F[2] * F[5];
  return relaxStress(s.laws[s.law[t]], strain, room.stress, room.tangent);
}

/** Strain energy of everything less the work of the loads, kJ (kN·m). */
export function measureEnergy(s: Structure, x: Float64Array, L0: Float64Array): number {
  const room = buildTriangleRoom();
  let sum = 0;
  for (let t = 0; t < s.area.length; t++) {
    measureTriangle(s, x, t, room);
    const d = s.laws[s.law[t]];
    const [p, q, r] = room.stress;
    const det = d.ww * d.ff - d.wf * d.wf;
    sum += (s.area[t] * ((d.ff * p * p - 2 * d.wf * p * q + d.ww * q * q) / det + (r * r) / d.g)) / 2;
  }
  for (let k = 0; k < s.EA.length; k++) {
    const { force, length } = measureLink(s, x, L0, k);
    sum += (force * (length - L0[k])) / 2;
  }
  for (let c = 0; c < x.length; c++) sum -= s.load[c] * x[c];
  return sum;
}

/** Internal less outer force at every node, kN. @shape 3*nN; scale: largest single element force or load */
export function measureForces(
  s: Structure,
  x: Float64Array,
  L0: Float64Array,
): { force: Float64Array<ArrayBuffer>; scale: number } {
  const force = s.load.map((q) => -q);
  const room = buildTriangleRoom();
  let scale = force.reduce((most, q) => Math.max(most, Math.abs(q)), 0);
  for (let t = 0; t < s.area.length; t++) {
    measureTriangle(s, x, t, room);
    const { F, stress } = room;
    for (let a = 0; a < 3; a++) {
      const gw = s.shape[6 * t + 2 * a] * s.area[t];
      const gf = s.shape[6 * t + 2 * a + 1] * s.area[t];
      const w = stress[0] * gw + stress[2] * gf;
      const f = stress[2] * gw + stress[1] * gf;
      const v = 3 * s.tri[3 * t + a];
      for (let i = 0; i < 3; i++) {
        const q = F[i] * w + F[3 + i] * f;
        force[v + i] += q;
        if (Math.abs(q) > scale) scale = Math.abs(q);
      }
    }
  }
  for (let k = 0; k < s.EA.length; k++) {
    const { force: n, u } = measureLink(s, x, L0, k);
    const a = 3 * s.link[2 * k];
    const b = 3 * s.link[2 * k + 1];
    for (let i = 0; i < 3; i++) {
      force[a + i] -= n * u[i];
      force[b + i] += n * u[i];
    }
    if (Math.abs(n) > scale) scale = Math.abs(n);
  }
  return { force, scale };
}

/** Packed lower triangle (i ≥ j at i(i+1)/2 + j) of triangle t's 9 × 9 tangent, node by node x, y, z. @units kN/m */
export function fillTriangleTangent(s: Structure, t: number, room: TriangleRoom, out: Float64Array): void {
  const { F, stress, tangent: C } = room;
  const area = s.area[t];
  const B = new Float64Array(27);
  const CB = new Float64Array(27);
  for (let a = 0; a < 3; a++) {
    const gw = s.shape[6 * t + 2 * a];
    const gf = s.shape[6 * t + 2 * a + 1];
    for (let i = 0; i < 3; i++) {
      const c = 3 * a + i;
      B[c] = F[i] * gw;
      B[9 + c] = F[3 + i] * gf;
      B[18 + c] = F[i] * gf + F[3 + i] * gw;
    }
  }
  for (let c = 0; c < 9; c++) {
    CB[c] = C[0] * B[c] + C[1] * B[9 + c] + C[3] * B[18 + c];
    CB[9 + c] = C[1] * B[c] + C[2] * B[9 + c] + C[4] * B[18 + c];
    CB[18 + c] = C[3] * B[c] + C[4] * B[9 + c] + C[5] * B[18 + c];
  }
  for (let i = 0, at = 0; i < 9; i++) {
    const ga = 6 * t + 2 * Math.floor(i / 3);
    for (let j = 0; j <= i; j++, at++) {
      let k = B[i] * CB[j] + B[9 + i] * CB[9 + j] + B[18 + i] * CB[18 + j];
      if (i % 3 === j % 3) {
        const gb = 6 * t + 2 * Math.floor(j / 3);
        const [aw, af, bw, bf] = [s.shape[ga], s.shape[ga + 1], s.shape[gb], s.shape[gb + 1]];
        k += aw * (stress[0] * bw + stress[2] * bf) + af * (stress[2] * bw + stress[1] * bf);
      }
      out[at] = area * k;
    }
  }
}

/** Packed lower triangle of link k's 6 × 6 tangent. @units kN/m */
export function fillLinkTangent(state: LinkState, out: Float64Array): void {
  const { u, force, length, stiffness } = state;
  const n = force / length;
  for (let i = 0, at = 0; i < 6; i++) {
    for (let j = 0; j <= i; j++, at++) {
      const [p, q] = [i % 3, j % 3];
      const k = (stiffness - n) * u[p] * u[q] + (p === q ? n : 0);
      out[at] = i < 3 === j < 3 ? k : -k;
    }
  }
}
