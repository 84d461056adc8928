// Forces of the prestressed cloth at its vertices, and its pull across a side. Stress is given, not iterated.
import { nextHalfedge, previousHalfedge } from "../../surface/adjacency.ts";
import { measureVectorAreas } from "../../surface/measures.ts";
import type { Surface, Vec3 } from "../../surface/surface.ts";

/** Prestress and the direction it is measured along; direction null: the mean both ways. */
export interface StressField {
  /** kN/m */
  warp: number;
  weft: number;
  direction: Vec3 | null;
}

/** Pull of the cloth at each vertex. @units kN */
export interface MembraneForces {
  /** Sum of the triangles' forces. @shape 3*nV */
  force: Float64Array<ArrayBuffer>;
  /** Sum of their magnitudes. @shape nV */
  size: Float64Array<ArrayBuffer>;
}

/** sigma·m for an in-plane vector m of a triangle with unit normal n; a direction square to the triangle means the mean. */
function applyStress(field: StressField, n: Vec3, m: Vec3): Vec3 {
  const mean = (field.warp + field.weft) / 2;
  const d = field.direction;
  if (d === null || field.warp === field.weft) return [mean * m[0], mean * m[1], mean * m[2]];
  const along = d[0] * n[0] + d[1] * n[1] + d[2] * n[2];
  const p: Vec3 = [d[0] - along * n[0], d[1] - along * n[1], d[2] - along * n[2]];
  const square = p[0] ** 2 + p[1] ** 2 + p[2] ** 2;
  if (square < 1e-12 * (d[0] ** 2 + d[1] ** 2 + d[2] ** 2)) return [mean * m[0], mean * m[1], mean * m[2]];
  const k = ((field.warp - field.weft) * (p[0] * m[0] + p[1] * m[1] + p[2] * m[2])) / square;
  return [field.weft * m[0] + k * p[0], field.weft * m[1] + k * p[1], field.weft * m[2] + k * p[2]];
}

/** sigma·(n × e) for the side from corner k to k+1 of triangle t: pull across that side towards the inside, times its length. */
function pullAcross(surface: Surface, areas: Float64Array<ArrayBuffer>, h: number, field: StressField): Vec3 {
  const { xyz: x, tri } = surface;
  const t = 3 * Math.floor(h / 3);
  const l = Math.sqrt(areas[t] ** 2 + areas[t + 1] ** 2 + areas[t + 2] ** 2);
  const n: Vec3 = [areas[t] / l, areas[t + 1] / l, areas[t + 2] / l];
  const a = 3 * tri[h];
  const b = 3 * tri[nextHalfedge(h)];
  const e: Vec3 = [x[b] - x[a], x[b + 1] - x[a + 1], x[b + 2] - x[a + 2]];
  return applyStress(field, n, [n[1] * e[2] - n[2] * e[1], n[2] * e[0] - n[0] * e[2], n[0] * e[1] - n[1] * e[0]]);
}

/**
 * Nodal forces of a given stress: f_i = -½ sigma·(n × e_i), e_i the side opposite to corner i. For equal stress s both ways
 * that is -s times the gradient of the area, the natural force densities s·cot/2 of the two sides at i.
 * @shape areas: doubled vector areas 3*nT (measureVectorAreas)
 * @source own: virtual work of a constant stress on a triangle whose displacement is linear
 */
export function measureMembraneForces(surface: Surface, field: StressField): MembraneForces {
  const { xyz, tri } = surface;
  const areas = measureVectorAreas(surface);
  const force = new Float64Array(xyz.length);
  const size = new Float64Array(xyz.length / 3);
  for (let h = 0; h < tri.length; h++) {
    const p = pullAcross(surface, areas, h, field);
    const v = tri[previousHalfedge(h)];
    for (let k = 0; k < 3; k++) force[3 * v + k] -= p[k] / 2;
    size[v] += Math.sqrt(p[0] ** 2 + p[1] ** 2 + p[2] ** 2) / 2;
  }
  return { force, size };
}

/**
 * Pull of the cloth across a side per metre, kN/m.
 * @shape h: half-edge 3*t + k
 */
export function measureLinePull(
  surface: Surface,
  areas: Float64Array<ArrayBuffer>,
  h: number,
  field: StressField,
): number {
  const { xyz: x, tri } = surface;
  const p = pullAcross(surface, areas, h, field);
  const a = 3 * tri[h];
  const b = 3 * tri[nextHalfedge(h)];
  const l = (x[b] - x[a]) ** 2 + (x[b + 1] - x[a + 1]) ** 2 + (x[b + 2] - x[a + 2]) ** 2;
  return Math.sqrt((p[0] ** 2 + p[1] ** 2 + p[2] ** 2) / l);
}
