// The stress a flat panel takes when it is pulled onto the form, as figures a panel card can print.
// Judges no limits: that is checkFlatPanels.ts. Definitions: facts.md "Strain and stress".
import type { StressFigures } from "../../records/flatPanel.ts";
import {
  buildErectedMetric,
  type ClothStiffness,
  measureLeastPrincipal,
  measureTriangleStrain,
} from "../../structure/cloth.ts";

/** What the figures are worked out from. @shape erected 3*n (m), flat 2*n (mm, as cut), tri 3*nT, run 3*nT (unit or zero) */
export interface PatternedPanel {
  erected: Float64Array<ArrayBuffer>;
  flat: Float64Array<ArrayBuffer>;
  tri: Uint32Array<ArrayBuffer>;
  permanent: { warp: number; weft: number };
  target: { warp: number; weft: number };
  /** Direction of the strip's run on the form at each triangle (buildRunDirections). */
  run: Float64Array<ArrayBuffer>;
  /** Angle of the run from the warp in the flat, degrees. */
  turn: number;
}

/** Stress as patterned of one panel. */
export interface PanelStress {
  warp: StressFigures;
  weft: StressFigures;
  /** Share of the erected area whose least principal stress is at or below 0. */
  compressedShare: number;
  /** Root mean square (by erected area) of the angle on the form between warp and intended warp, degrees. */
  warpDeviation: number;
}

/** Flat points of the relaxed cloth: millimetres to metres, the permanent strain put back. @shape 2*n */
export function buildRelaxedFlat(
  flat: Float64Array<ArrayBuffer>,
  permanent: { warp: number; weft: number },
): Float64Array<ArrayBuffer> {
  return flat.map((v, i) => (v / 1000) * (1 + (i % 2 === 0 ? permanent.warp : permanent.weft)));
}

/**
 * Stress of each triangle as patterned: warp, weft, shear.
 * @shape 3*nT @units kN/m
 */
export function measurePatternedStress(
  panel: Pick<PatternedPanel, "erected" | "flat" | "tri" | "permanent">,
  d: ClothStiffness,
): Float64Array<ArrayBuffer> {
  const { tri } = panel;
  const metric = buildErectedMetric(panel.erected, tri);
  const xy = buildRelaxedFlat(panel.flat, panel.permanent);
  const e = new Float64Array(7);
  const out = new Float64Array(tri.length);
  for (let t = 0; 3 * t < tri.length; t++) {
    measureTriangleStrain(metric, xy, tri, t, e);
    out[3 * t] = d.ww * e[0] + d.wf * e[1];
    out[3 * t + 1] = d.wf * e[0] + d.ff * e[1];
    out[3 * t + 2] = d.g * e[2];
  }
  return out;
}

/**
 * Least, mean and greatest stress, rms error against the target, compressed share and warp deviation of a panel.
 * The warp deviation is the root mean square over the erected area of the angle, on the form, between the line the warp takes
 * (F·e_x) and the direction of the strip's run turned by the panel's own turn; triangles without a run direction are left out.
 * @source facts.md "Strain and stress", weighted by erected area; warp deviation: own definition
 */
export function measurePanelStress(panel: PatternedPanel, d: ClothStiffness): PanelStress {
  const { tri, erected } = panel;
  const s = measurePatternedStress(panel, d);
  const xy = buildRelaxedFlat(panel.flat, panel.permanent);
  let total = 0;
  let compressed = 0;
  let turned = 0;
  let judged = 0;
  const ways = [panel.target.warp, panel.target.weft].map((target) => ({
    target,
    min: Number.POSITIVE_INFINITY,
    max: Number.NEGATIVE_INFINITY,
    sum: 0,
    error: 0,
  }));
  const frame: WarpFrame = { area: 0, warp: [0, 0, 0], side: [0, 0, 0] };
  for (let t = 0; t < s.length; t += 3) {
    fillWarpFrame(erected, xy, tri, t, frame);
    const { area } = frame;
    total += area;
    for (let k = 0; k < 2; k++) {
      const way = ways[k];
      const v = s[t + k];
      way.min = Math.min(way.min, v);
      way.max = Math.max(way.max, v);
      way.sum += area * v;
      way.error += area * (v - way.target) ** 2;
    }
    if (measureLeastPrincipal(s[t], s[t + 1], s[t + 2]) <= 0) compressed += area;
    const rx = panel.run[t];
    const ry = panel.run[t + 1];
    const rz = panel.run[t + 2];
    if (area === 0 || (rx === 0 && ry === 0 && rz === 0)) continue;
    const { warp: w, side: v } = frame;
    const along = rx * w[0] + ry * w[1] + rz * w[2];
    const across = rx * v[0] + ry * v[1] + rz * v[2];
    const off = ((Math.atan2(across, along) * 180) / Math.PI - panel.turn + 540) % 360;
    judged += area;
    turned += area * (off - 180) ** 2;
  }
  const [warp, weft] = ways.map((way) => ({
    min: way.min,
    mean: way.sum / total,
    max: way.max,
    rmsError: Math.sqrt(way.error / total),
  }));
  return {
    warp,
    weft,
    compressedShare: compressed / total,
    warpDeviation: judged > 0 ? Math.sqrt(turned / judged) : 0,
  };
}

/** A triangle's erected area, the unit direction of its warp line F·e_x, and the unit vector square to it. */
interface WarpFrame {
  area: number;
  warp: [number, number, number];
  side: [number, number, number];
}

/** The warp frame of a triangle (t counts corners) goes to `frame`. */
function fillWarpFrame(
  x: Float64Array<ArrayBuffer>,
  xy: Float64Array<ArrayBuffer>,
  tri: Uint32Array<ArrayBuffer>,
  t: number,
  frame: WarpFrame,
): void {
  const a = tri[t];
  const b = tri[t + 1];
  const c = tri[t + 2];
  const uy = xy[2 * b + 1] - xy[2 * a + 1];
  const vy = xy[2 * c + 1] - xy[2 * a + 1];
  const px = x[3 * b] - x[3 * a];
  const py = x[3 * b + 1] - x[3 * a + 1];
  const pz = x[3 * b + 2] - x[3 * a + 2];
  const qx = x[3 * c] - x[3 * a];
  const qy = x[3 * c + 1] - x[3 * a + 1];
  const qz = x[3 * c + 2] - x[3 * a + 2];
  const nx = py * qz - pz * qy;
  const ny = pz * qx - px * qz;
  const nz = px * qy - py * qx;
  const double = Math.sqrt(nx ** 2 + ny ** 2 + nz ** 2);
  // First column of F = [p q]·X⁻¹ but for the positive factor 1/det.
  const wx = px * vy - qx * uy;
  const wy = py * vy - qy * uy;
  const wz = pz * vy - qz * uy;
  const length = Math.sqrt(wx ** 2 + wy ** 2 + wz ** 2);
  const { warp, side } = frame;
  warp[0] = wx / length;
  warp[1] = wy / length;
  warp[2] = wz / length;
  side[0] = (ny / double) * warp[2] - (nz / double) * warp[1];
  side[1] = (nz / double) * warp[0] - (nx / double) * warp[2];
  side[2] = (nx / double) * warp[1] - (ny / double) * warp[0];
  frame.area = double / 2;
}
