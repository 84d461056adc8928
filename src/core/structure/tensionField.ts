// Stress of cloth that carries no compression: the strain energy is relaxed by the wrinkling that costs it least.
// For a Green strain E the relaxed energy is min over positive semidefinite P of W(E + P), W(E) = ½ Eᵀ D E: P = 0 where the
// cloth is taut, P = β n nᵀ where it wrinkles across n, P = −E where it is slack. Says nothing of the wrinkles' number or height.
// Source: the minimum statement is that of tension-field theory (Pipkin, IMA J. Appl. Math. 36, 1986, from memory); the
// closed tangent is own work, from the stationarity of ½(E + βe)ᵀD(E + βe) in β and the wrinkle's angle.
import type { ClothStiffness } from "./cloth.ts";

/** 0 taut, 1 wrinkled in one direction, 2 slack. */
export type ClothState = 0 | 1 | 2;

/**
 * Relaxed second Piola–Kirchhoff stress and its tangent.
 * @shape strain (E_ww, E_ff, 2E_wf); stress 3 out; tangent 6 out: (11, 12, 22, 13, 23, 33)
 * @units strain dimensionless, stress and tangent kN/m
 */
export function relaxStress(
  d: ClothStiffness,
  strain: ArrayLike<number>,
  stress: Float64Array,
  tangent: Float64Array,
): ClothState {
  const [a, b, c] = [strain[0], strain[1], strain[2]];
  const s1 = d.ww * a + d.wf * b;
  const s2 = d.wf * a + d.ff * b;
  const s3 = d.g * c;
  if (s1 + s2 > 0 && s1 * s2 >= s3 * s3) {
    stress[0] = s1;
    stress[1] = s2;
    stress[2] = s3;
    fillTangent(tangent, d.ww, d.wf, d.ff, 0, 0, d.g);
    return 0;
  }
  if (a <= 0 && b <= 0 && 4 * a * b >= c * c) {
    stress.fill(0, 0, 3);
    fillTangent(tangent, 0, 0, 0, 0, 0, 0);
    return 2;
  }
  const angle = findWrinkle(d, s1, s2, s3);
  const n1 = Math.cos(angle);
  const n2 = Math.sin(angle);
  const e = [n1 * n1, n2 * n2, 2 * n1 * n2];
  const f = [-e[2], e[2], 2 * (n1 * n1 - n2 * n2)];
  const de = [d.ww * e[0] + d.wf * e[1], d.wf * e[0] + d.ff * e[1], d.g * e[2]];
  const df = [d.ww * f[0] + d.wf * f[1], d.wf * f[0] + d.ff * f[1], d.g * f[2]];
  const ede = e[0] * de[0] + e[1] * de[1] + e[2] * de[2];
  const beta = Math.max(-(e[0] * s1 + e[1] * s2 + e[2] * s3) / ede, 1e-300);
  stress[0] = s1 + beta * de[0];
  stress[1] = s2 + beta * de[1];
  stress[2] = s3 + beta * de[2];
  // H = [[eDe, eDf], [eDf, fDf + e''·S/β]], e''·S = twice the stress along the wrinkle
  const edf = e[0] * df[0] + e[1] * df[1] + e[2] * df[2];
  const along = Math.max(stress[0] + stress[1], 0);
  const h22 = f[0] * df[0] + f[1] * df[1] + f[2] * df[2] + (2 * along) / beta;
  const det = ede * h22 - edf * edf;
  const [i11, i12, i22] = [h22 / det, -edf / det, ede / det];
  const less = (p: number, q: number) =>
    i11 * de[p] * de[q] + i12 * (de[p] * df[q] + df[p] * de[q]) + i22 * df[p] * df[q];
  fillTangent(
    tangent,
    d.ww - less(0, 0),
    d.wf - less(0, 1),
    d.ff - less(1, 1),
    -less(0, 2),
    -less(1, 2),
    d.g - less(2, 2),
  );
  return 1;
}

function fillTangent(
  out: Float64Array,
  k11: number,
  k12: number,
  k22: number,
  k13: number,
  k23: number,
  k33: number,
): void {
  out[0] = k11;
  out[1] = k12;
  out[2] = k22;
  out[3] = k13;
  out[4] = k23;
  out[5] = k33;
}

const SCAN = 24;

/** Angle of the wrinkle's normal n from the warp that relaxes most energy: the greatest (e·S)²/(eᵀDe) with e·S < 0. */
function findWrinkle(d: ClothStiffness, s1: number, s2: number, s3: number): number {
  // slope of the relaxed energy over the angle, in sign: e'·(S + β D e)
  const slope = (angle: number): { gain: number; slope: number } => {
    const n1 = Math.cos(angle);
    const n2 = Math.sin(angle);
    const e2 = 2 * n1 * n2;
    const cos2 = n1 * n1 - n2 * n2;
    const p = n1 * n1 * s1 + n2 * n2 * s2 + e2 * s3;
    const d1 = d.ww * n1 * n1 + d.wf * n2 * n2;
    const d2 = d.wf * n1 * n1 + d.ff * n2 * n2;
    const d3 = d.g * e2;
    const q = n1 * n1 * d1 + n2 * n2 * d2 + e2 * d3;
    const beta = -p / q;
    return {
      gain: p < 0 ? (p * p) / q : -1,
      slope: -e2 * (s1 + beta * d1) + e2 * (s2 + beta * d2) + 2 * cos2 * (s3 + beta * d3),
    };
  };
  let best = 0;
  let most = -1;
  for (let k = 0; k < SCAN; k++) {
    const { gain } = slope((Math.PI * k) / SCAN);
    if (gain > most) {
      most = gain;
      best = k;
    }
  }
  let low = (Math.PI * (best - 1)) / SCAN;
  let high = (Math.PI * (best + 1)) / SCAN;
  for (let i = 0; i < 50; i++) {
    const middle = (low + high) / 2;
    if (slope(middle).slope > 0) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
}
