// How much of a residual the rounding of the mesh file's coordinates can explain. A bound, not an estimate.

import type { FormEdge } from "../../records/foundForm.ts";
import type { MeshSource } from "../../records/job.ts";
import { nextHalfedge, previousHalfedge } from "../../surface/adjacency.ts";
import { measureVectorAreas } from "../../surface/measures.ts";
import type { Surface } from "../../surface/surface.ts";
import { convertToMetres } from "../repair/meshSize.ts";
import { isCable } from "./cablePull.ts";

/** Most decimals that are looked for; a file with more is taken as exact. */
const DECIMALS = 5;

/**
 * Share of the bounds' root mean square that rounding leaves at most. Along a cable of even links the change is
 * T/L·(d1 - 2·d0 + d2) in two directions, standard deviation √2·√6/√12 = 1 step·T/L against the bound 2·√3: 0.29. In plain
 * cloth 0.11 was measured.
 */
const TYPICAL = 0.35;

/**
 * Whether rounding alone can leave these residuals: none above its bound, and all together no larger than chance makes them.
 * @shape size, bound nV
 */
export function isExplainedByRounding(size: Float64Array<ArrayBuffer>, bound: Float64Array<ArrayBuffer>): boolean {
  let residual = 0;
  let reach = 0;
  for (let v = 0; v < size.length; v++) {
    if (size[v] > bound[v]) return false;
    residual += size[v] ** 2;
    if (size[v] > 0) reach += bound[v] ** 2;
  }
  return residual <= TYPICAL ** 2 * reach;
}

/**
 * Step of the file's coordinates in its own unit: the coarsest power of ten of which all are multiples, 0 where there is none.
 */
export function findStep(xyz: ArrayLike<number>): number {
  let decimals = 0;
  for (let i = 0; i < xyz.length; i++)
    for (; ; decimals++) {
      const scaled = xyz[i] * 10 ** decimals;
      if (Math.abs(scaled - Math.round(scaled)) <= 1e-9 * Math.max(1, Math.abs(scaled))) break;
      if (decimals === DECIMALS) return 0;
    }
  return 10 ** -decimals;
}

/** The step of the file's coordinates in metres. */
export function findStepMetres(source: MeshSource): number {
  return convertToMetres({ ...source, up: "z", xyz: Float64Array.of(findStep(source.xyz), 0, 0) })[0];
}

/**
 * Greatest change of the force at each vertex when every coordinate moves by up to half a step.
 * A link's direction turns by up to √3·step/L; a triangle's force s/2·(n × e) changes by up to s/2·√3·step·(1 + |e|/h).
 * @shape nV @units step m, stress kN/m -> kN
 * @source own
 */
export function measureRoundingReach(
  surface: Surface,
  edges: readonly FormEdge[],
  stress: number,
  step: number,
): Float64Array<ArrayBuffer> {
  const { xyz: x, tri } = surface;
  const out = new Float64Array(x.length / 3);
  const gap = (a: number, b: number) =>
    Math.sqrt((x[3 * a] - x[3 * b]) ** 2 + (x[3 * a + 1] - x[3 * b + 1]) ** 2 + (x[3 * a + 2] - x[3 * b + 2]) ** 2);
  const shift = Math.sqrt(3) * step;
  const areas = measureVectorAreas(surface);
  for (let h = 0; h < tri.length; h++) {
    const t = 3 * Math.floor(h / 3);
    const side = gap(tri[h], tri[nextHalfedge(h)]);
    const height = Math.sqrt(areas[t] ** 2 + areas[t + 1] ** 2 + areas[t + 2] ** 2) / side;
    out[tri[previousHalfedge(h)]] += (stress / 2) * shift * (1 + side / height);
  }
  for (const edge of edges) {
    if (!isCable(edge) || edge.force === null) continue;
    for (let i = 1; i < edge.vertices.length; i++) {
      const [a, b] = [edge.vertices[i - 1], edge.vertices[i]];
      const turn = (edge.force * shift) / gap(a, b);
      out[a] += turn;
      out[b] += turn;
    }
  }
  return out;
}
