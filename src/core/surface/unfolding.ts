// Shape of every triangle seen from each of its sides: what is needed to lay the next triangle down in the plane.
import { nextHalfedge, previousHalfedge } from "./adjacency.ts";
import type { Surface } from "./surface.ts";

/**
 * For half-edge h from a to b with the third corner c: length |ab|, and c in the frame with a at 0 and b on the x axis.
 * @shape length, apexX, apexY 3*nT @units m
 */
export interface Unfolding {
  length: Float64Array<ArrayBuffer>;
  apexX: Float64Array<ArrayBuffer>;
  apexY: Float64Array<ArrayBuffer>;
}

/** Unfolding data of all half-edges, from the positions (no angle, no difference of squares). */
export function buildUnfolding(surface: Surface): Unfolding {
  const { xyz: x, tri } = surface;
  const n = tri.length;
  const length = new Float64Array(n);
  const apexX = new Float64Array(n);
  const apexY = new Float64Array(n);
  for (let h = 0; h < n; h++) {
    const a = 3 * tri[h];
    const b = 3 * tri[nextHalfedge(h)];
    const c = 3 * tri[previousHalfedge(h)];
    const ux = x[b] - x[a];
    const uy = x[b + 1] - x[a + 1];
    const uz = x[b + 2] - x[a + 2];
    const wx = x[c] - x[a];
    const wy = x[c + 1] - x[a + 1];
    const wz = x[c + 2] - x[a + 2];
    const l = Math.sqrt(ux * ux + uy * uy + uz * uz);
    const nx = uy * wz - uz * wy;
    const ny = uz * wx - ux * wz;
    const nz = ux * wy - uy * wx;
    length[h] = l;
    apexX[h] = (ux * wx + uy * wy + uz * wz) / l;
    apexY[h] = Math.sqrt(nx * nx + ny * ny + nz * nz) / l;
  }
  return { length, apexX, apexY };
}

/** Corner angle at the start of half-edge h, rad. */
export function measureCornerAngle(unfolding: Unfolding, h: number): number {
  return Math.atan2(unfolding.apexY[h], unfolding.apexX[h]);
}
