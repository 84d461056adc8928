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
  const { tri, shape } = s;
  const p = 3 * tri[3 * t];
  const q = 3 * tri[3 * t + 1];
  const r = 3 * tri[3 * t + 2];
  // the three gradients add to nothing: sides from the first corner suffice
  const [qw, qf, rw, rf] = [shape[6 * t + 2], shape[6 * t + 3], shape[6 * t + 4], shape[6 * t + 5]];
  const ux = x[q] - x[p];
  const uy = x[q + 1] - x[p + 1];
  const uz = x[q + 2] - x[p + 2];
  const vx = x[r] - x[p];
  const vy = x[r + 1] - x[p + 1];
  const vz = x[r + 2] - x[p + 2];
  const w1 = ux * qw + vx * rw;
  const w2 = uy * qw + vy * rw;
  const w3 = uz * qw + vz * rw;
  const f1 = ux * qf + vx * rf;
  const f2 = uy * qf + vy * rf;
  const f3 = uz * qf + vz * rf;
  F[0] = w1;
  F[1] = w2;
  F[2] = w3;
  F[3] = f1;
  F[4] = f2;
  F[5] = f3;
  strain[0] = (w1 * w1 + w2 * w2 + w3 * w3 - 1) / 2;
  strain[1] = (f1 * f1 + f2 * f2 + f3 * f3 - 1) / 2;
  strain[2] = w1 * f1 + w2 * f2 + w3 * f3;
  return relaxStress(s.laws[s.law[t]], strain, room.stress, room.tangent);
}

/** Forces of a state. */
export interface ForceState {
  /** Internal less outer force at every node, kN. @shape 3*nN */
  force: Float64Array<ArrayBuffer>;
  /** Largest single element force or load, kN. */
  scale: number;
  /** Strain energy of everything less the work of the loads, kJ (kN·m). */
  energy: number;
}

/** Internal less outer force at every node, the largest element force, and the energy whose gradient the forces are. */
export function measureForces(s: Structure, x: Float64Array, L0: Float64Array): ForceState {
  const { tri, shape, area, layers, load } = s;
  const force = new Float64Array(x.length);
  const room = buildTriangleRoom();
  const { F, stress } = room;
  let scale = 0;
  let energy = 0;
  for (let c = 0; c < x.length; c++) {
    force[c] = -load[c];
    energy -= load[c] * x[c];
    if (Math.abs(load[c]) > scale) scale = Math.abs(load[c]);
  }
  for (let t = 0; t < area.length; t++) {
    if (measureTriangle(s, x, t, room) === 2) continue;
    const d = s.laws[s.law[t]];
    const a = area[t] * layers[t];
    const s1 = stress[0];
    const s2 = stress[1];
    const s3 = stress[2];
    energy +=
      (a * ((d.ff * s1 * s1 - 2 * d.wf * s1 * s2 + d.ww * s2 * s2) / (d.ww * d.ff - d.wf * d.wf) + (s3 * s3) / d.g)) /
      2;
    for (let k = 0; k < 3; k++) {
      const gw = shape[6 * t + 2 * k] * a;
      const gf = shape[6 * t + 2 * k + 1] * a;
      const w = s1 * gw + s3 * gf;
      const f = s3 * gw + s2 * gf;
      const v = 3 * tri[3 * t + k];
      for (let i = 0; i < 3; i++) {
        const q = F[i] * w + F[3 + i] * f;
        force[v + i] += q;
        if (Math.abs(q) > scale) scale = Math.abs(q);
      }
    }
  }
  for (let k = 0; k < s.EA.length; k++) {
    const a = 3 * s.link[2 * k];
    const b = 3 * s.link[2 * k + 1];
    const dx = x[b] - x[a];
    const dy = x[b + 1] - x[a + 1];
    const dz = x[b + 2] - x[a + 2];
    const length = Math.sqrt(dx * dx + dy * dy + dz * dz);
    const n = (s.EA[k] * (length - L0[k])) / L0[k];
    if (n <= 0 && !s.strut[k]) continue;
    energy += (n * (length - L0[k])) / 2;
    const q = n / length;
    force[a] -= q * dx;
    force[a + 1] -= q * dy;
    force[a + 2] -= q * dz;
    force[b] += q * dx;
    force[b + 1] += q * dy;
    force[b + 2] += q * dz;
    if (Math.abs(n) > scale) scale = Math.abs(n);
  }
  return { force, scale, energy };
}

/**
 * Packed lower triangle (i ≥ j at i(i+1)/2 + j) of triangle t's 9 × 9 tangent, node by node x, y, z.
 * The strain's derivative at corner a is α_a F_warp + β_a F_weft with α = (gw, 0, gf), β = (0, gf, gw), so a pair of corners
 * needs four numbers and the outer products of F's columns. @units kN/m
 */
export function fillTriangleTangent(s: Structure, t: number, room: TriangleRoom, out: Float64Array): void {
  const { F, stress, tangent: C } = room;
  const { shape } = s;
  const area = s.area[t] * s.layers[t];
  for (let a = 0; a < 3; a++) {
    const aw = area * shape[6 * t + 2 * a];
    const af = area * shape[6 * t + 2 * a + 1];
    // rows α_a·C and β_a·C
    const p1 = aw * C[0] + af * C[3];
    const p2 = aw * C[1] + af * C[4];
    const p3 = aw * C[3] + af * C[5];
    const q1 = af * C[1] + aw * C[3];
    const q2 = af * C[2] + aw * C[4];
    const q3 = af * C[4] + aw * C[5];
    for (let b = 0; b <= a; b++) {
      const bw = shape[6 * t + 2 * b];
      const bf = shape[6 * t + 2 * b + 1];
      const ww = p1 * bw + p3 * bf;
      const wf = p2 * bf + p3 * bw;
      const fw = q1 * bw + q3 * bf;
      const ff = q2 * bf + q3 * bw;
      const h = aw * (stress[0] * bw + stress[2] * bf) + af * (stress[2] * bw + stress[1] * bf);
      for (let i = 0; i < 3; i++) {
        const row = 3 * a + i;
        const last = a === b ? i : 2;
        const left = F[i] * ww + F[3 + i] * fw;
        const right = F[i] * wf + F[3 + i] * ff;
        let at = (row * (row + 1)) / 2 + 3 * b;
        for (let j = 0; j <= last; j++, at++) out[at] = left * F[j] + right * F[3 + j] + (i === j ? h : 0);
      }
    }
  }
}

/** Packed lower triangle of link k's 6 × 6 tangent. @units kN/m */
export function fillLinkTangent(state: LinkState, out: Float64Array): void {
  const { u, force, length, stiffness } = state;
  const n = force / length;
  for (let i = 0, at = 0; i < 6; i++) {
    const p = i < 3 ? i : i - 3;
    for (let j = 0; j <= i; j++, at++) {
      const q = j < 3 ? j : j - 3;
      const k = (stiffness - n) * u[p] * u[q] + (p === q ? n : 0);
      out[at] = i < 3 === j < 3 ? k : -k;
    }
  }
}
