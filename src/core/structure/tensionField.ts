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
  // e = n nᵀ as a strain, f its derivative by the angle; De and Df
  const [e1, e2, e3] = [n1 * n1, n2 * n2, 2 * n1 * n2];
  const f3 = 2 * (e1 - e2);
  const de1 = d.ww * e1 + d.wf * e2;
  const de2 = d.wf * e1 + d.ff * e2;
  const de3 = d.g * e3;
  const df1 = (d.wf - d.ww) * e3;
  const df2 = (d.ff - d.wf) * e3;
  const df3 = d.g * f3;
  const ede = e1 * de1 + e2 * de2 + e3 * de3;
  const beta = Math.max(-(e1 * s1 + e2 * s2 + e3 * s3) / ede, 1e-300);
  stress[0] = s1 + beta * de1;
  stress[1] = s2 + beta * de2;
  stress[2] = s3 + beta * de3;
  // H = [[eDe, eDf], [eDf, fDf + e''·S/β]], e''·S = twice the stress along the wrinkle
  const edf = e1 * df1 + e2 * df2 + e3 * df3;
  const along = Math.max(stress[0] + stress[1], 0);
  const h22 = e3 * (df2 - df1) + f3 * df3 + (2 * along) / beta;
  const det = ede * h22 - edf * edf;
  const i11 = h22 / det;
  const i12 = -edf / det;
  const i22 = ede / det;
  tangent[0] = d.ww - (i11 * de1 * de1 + 2 * i12 * de1 * df1 + i22 * df1 * df1);
  tangent[1] = d.wf - (i11 * de1 * de2 + i12 * (de1 * df2 + df1 * de2) + i22 * df1 * df2);
  tangent[2] = d.ff - (i11 * de2 * de2 + 2 * i12 * de2 * df2 + i22 * df2 * df2);
  tangent[3] = -(i11 * de1 * de3 + i12 * (de1 * df3 + df1 * de3) + i22 * df1 * df3);
  tangent[4] = -(i11 * de2 * de3 + i12 * (de2 * df3 + df2 * de3) + i22 * df2 * df3);
  tangent[5] = d.g - (i11 * de3 * de3 + 2 * i12 * de3 * df3 + i22 * df3 * df3);
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

/** Angles looked at first, and their normals. */
const SCAN = 24;
const scanned = Float64Array.from({ length: 2 * SCAN }, (_, i) => {
  const angle = (Math.PI * (i >> 1)) / SCAN;
  return i % 2 === 0 ? Math.cos(angle) : Math.sin(angle);
});

/** Slope of the relaxed energy over the wrinkle's angle, in sign: e'·(S + β D e). */
function measureSlope(d: ClothStiffness, s1: number, s2: number, s3: number, angle: number): number {
  const n1 = Math.cos(angle);
  const n2 = Math.sin(angle);
  const e1 = n1 * n1;
  const e2 = n2 * n2;
  const e3 = 2 * n1 * n2;
  const d1 = d.ww * e1 + d.wf * e2;
  const d2 = d.wf * e1 + d.ff * e2;
  const d3 = d.g * e3;
  const beta = -(e1 * s1 + e2 * s2 + e3 * s3) / (e1 * d1 + e2 * d2 + e3 * d3);
  return e3 * (s2 - s1 + beta * (d2 - d1)) + 2 * (e1 - e2) * (s3 + beta * d3);
}

/** Angle of the wrinkle's normal n from the warp that relaxes most energy: the greatest (e·S)²/(eᵀDe) with e·S < 0. */
function findWrinkle(d: ClothStiffness, s1: number, s2: number, s3: number): number {
  let best = 0;
  let most = -1;
  for (let k = 0; k < SCAN; k++) {
    const e1 = scanned[2 * k] * scanned[2 * k];
    const e2 = scanned[2 * k + 1] * scanned[2 * k + 1];
    const e3 = 2 * scanned[2 * k] * scanned[2 * k + 1];
    const p = e1 * s1 + e2 * s2 + e3 * s3;
    if (p >= 0) continue;
    const gain = (p * p) / (d.ww * e1 * e1 + 2 * d.wf * e1 * e2 + d.ff * e2 * e2 + d.g * e3 * e3);
    if (gain > most) {
      most = gain;
      best = k;
    }
  }
  // root of the slope between the neighbours: false position, the end that stays put halved (Illinois)
  let low = (Math.PI * (best - 1)) / SCAN;
  let high = (Math.PI * (best + 1)) / SCAN;
  let atLow = measureSlope(d, s1, s2, s3, low);
  let atHigh = measureSlope(d, s1, s2, s3, high);
  if (!(atLow < 0 && atHigh > 0)) return bisectWrinkle(d, [s1, s2, s3], low, high);
  let side = 0;
  for (let i = 0; i < 60 && high - low > 1e-14; i++) {
    const next = low + ((high - low) * atLow) / (atLow - atHigh);
    if (next <= low || next >= high) break;
    const at = measureSlope(d, s1, s2, s3, next);
    if (at === 0) return next;
    if (at < 0) {
      low = next;
      atLow = at;
      if (side === -1) atHigh /= 2;
      side = -1;
    } else {
      high = next;
      atHigh = at;
      if (side === 1) atLow /= 2;
      side = 1;
    }
  }
  return -atLow < atHigh ? low : high;
}

/** The same by halving, where the slope has no plain change of sign between the neighbours. */
function bisectWrinkle(d: ClothStiffness, [s1, s2, s3]: [number, number, number], from: number, to: number): number {
  let low = from;
  let high = to;
  for (let i = 0; i < 50; i++) {
    const middle = (low + high) / 2;
    if (measureSlope(d, s1, s2, s3, middle) > 0) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
}
