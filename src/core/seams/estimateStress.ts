// How far off the stress of a flat strip will be, before anything is flattened: from the curvature of its region, its width and
// length. An estimate for comparing layouts; the flattening measures. Source: own. A long strip of width w on curvature K has warp
// strains K y²/2 about their mean (check-values 4.2), rms |K| w²/(12 √5); at its free ends they fade by shear lag, as cos(2πy/w) does.
import { measureAreas } from "../surface/measures.ts";
import { measureCornerAngle, type Region } from "./region.ts";

/** Root mean square of the Gauss curvature of a region, 1/m2: angle defects over areas, each vertex taken with its neighbours. */
export function measureCurvature(region: Region): number {
  const { surface, adjacency } = region;
  const { nV, fan, fanStart } = adjacency;
  const areas = measureAreas(surface);
  const inner = new Uint8Array(nV).fill(1);
  for (const outline of region.outlines) for (const v of outline.vertices) inner[v] = 0;
  const defect = new Float64Array(nV);
  const area = new Float64Array(nV);
  for (let v = 0; v < nV; v++) {
    if (!inner[v] || fanStart[v] === fanStart[v + 1]) continue;
    defect[v] = 2 * Math.PI - measureCornerAngle(surface, adjacency, v);
    for (let i = fanStart[v]; i < fanStart[v + 1]; i++) area[v] += areas[Math.floor(fan[i] / 3)] / 3;
  }
  let sum = 0;
  let total = 0;
  for (let v = 0; v < nV; v++) {
    if (!inner[v] || area[v] === 0) continue;
    let d = defect[v];
    let a = area[v];
    for (let i = fanStart[v]; i < fanStart[v + 1]; i++) {
      const h = fan[i];
      const w = surface.tri[h % 3 === 2 ? h - 2 : h + 1];
      d += defect[w];
      a += area[w];
    }
    sum += area[v] * (d / a) ** 2;
    total += area[v];
  }
  return total > 0 ? Math.sqrt(sum / total) : 0;
}

/** Cloth and target of the estimate, kN/m. */
export interface StressTarget {
  Ew: number;
  G: number;
  warp: number;
}

/** Estimated rms error of the warp stress of a strip, as a share of its target. */
export function estimateStressError(
  curvature: number,
  size: { width: number; length: number },
  cloth: StressTarget,
): number {
  const { width, length } = size;
  if (!(width > 0) || !(length > 0)) return 0;
  // rms of (y² − mean)/2 over a width w is w²/(12 √5)
  const strain = (curvature * width * width) / (12 * Math.sqrt(5));
  const a = ((Math.PI * length) / width) * Math.sqrt(cloth.G / cloth.Ew);
  const lag = Math.tanh(a) / a;
  const kept = Math.sqrt(Math.max(0, 1 - 2 * lag + (lag + 1 / Math.cosh(a) ** 2) / 2));
  return (cloth.Ew * strain * kept) / Math.max(cloth.warp, 1e-9);
}
