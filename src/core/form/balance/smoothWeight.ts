// A smooth weight over the cloth that vanishes at everything held and along every edge and cable: the shape of an evenly pushed
// membrane over the mesh as a graph. Weighs residuals; measures nothing.
import { analyseSymmetric, factorSymmetric, solveInPlace } from "../../numeric/factor.ts";
import { addElementInPlace, buildPattern } from "../../numeric/pattern.ts";
import type { Surface } from "../../surface/surface.ts";

/** Packed lower triangle of a triangle's graph Laplacian: half of each side, which two triangles share. */
const ELEMENT = Float64Array.of(1, -0.5, 1, -0.5, -0.5, 1);

/**
 * The weight, greatest 1; all 0 where no vertex is free.
 * @shape out: 1 where it vanishes, nV -> nV
 * @source own: Poisson's equation on the mesh graph
 */
export function buildSmoothWeight(surface: Surface, out: Uint8Array<ArrayBuffer>): Float64Array<ArrayBuffer> {
  const { tri } = surface;
  const weight = new Float64Array(out.length);
  const number = new Int32Array(out.length).fill(-1);
  let n = 0;
  for (const v of tri) if (!out[v] && number[v] < 0) number[v] = n++;
  if (n === 0) return weight;
  const start = Uint32Array.from({ length: tri.length / 3 + 1 }, (_, t) => 3 * t);
  const where = buildPattern(
    n,
    start,
    Int32Array.from(tri, (v) => number[v]),
  );
  const values = new Float64Array(where.pattern.rowIndex.length);
  for (let t = 0; t < tri.length / 3; t++) addElementInPlace(values, where, t, ELEMENT);
  const push = new Float64Array(n).fill(1);
  solveInPlace(factorSymmetric(analyseSymmetric(where.pattern), values), push);
  let greatest = 0;
  for (const w of push) greatest = Math.max(greatest, w);
  for (let v = 0; v < weight.length; v++) if (number[v] >= 0) weight[v] = push[number[v]] / greatest;
  return weight;
}
