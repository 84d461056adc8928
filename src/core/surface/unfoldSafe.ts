// The way out where a strip is too curved to be laid flat gently: an embedding in a convex outline, which never folds, then
// relaxed towards the strip's own lengths with an energy that grows without bound before a triangle turns over.
// Source: W. T. Tutte, How to draw a graph, Proc. London Math. Soc. 13, 1963; symmetric Dirichlet energy with eigenvalues after
// B. Smith, F. de Goes & T. Kim, Analytic eigensystems for isotropic distortion energies, ACM Trans. Graph. 38(1), 2019.
import { analyseSymmetric, factorSymmetric, refactorInPlace, solveInPlace } from "../numeric/factor.ts";
import { addElementInPlace, buildPattern, type ElementPattern } from "../numeric/pattern.ts";
import type { Adjacency } from "./adjacency.ts";
import { measureArea, measureDistance, vertexAt } from "./measures.ts";
import type { Surface } from "./surface.ts";
import type { Unfolding } from "./unfolding.ts";

/** Newton steps at most, the relative fall of energy that ends them, and the energy for each area that counts as none. */
const MOST_STEPS = 100;
const LEAST_FALL = 1e-2;
const NO_ENERGY = 1e-14;

/**
 * Embedding with the outline on an ellipse of the strip's area and, about, its slenderness; every inner vertex is the mean of its
 * neighbours. No triangle is turned over.
 * @shape 2*nV @units m
 */
export function embedConvex(
  surface: Surface,
  adjacency: Adjacency,
  outline: readonly number[],
): Float64Array<ArrayBuffer> {
  const { nV, nT } = adjacency;
  const { tri } = surface;
  const along: number[] = [0];
  for (let i = 0; i < outline.length; i++)
    along.push(
      along[i] + measureDistance(vertexAt(surface, outline[i]), vertexAt(surface, outline[(i + 1) % outline.length])),
    );
  const around = along[outline.length];
  const area = measureArea(surface);
  // An ellipse of half axes p ≥ q has the area πpq and about the perimeter 4p where slender; a circle where it cannot be.
  const p = Math.max(around / 4.2, Math.sqrt(area / Math.PI));
  const q = Math.max(area / (Math.PI * p), p / 20);
  const xy = new Float64Array(2 * nV);
  const unknown = new Int32Array(nV).fill(0);
  outline.forEach((v, i) => {
    unknown[v] = -1;
    const turn = (2 * Math.PI * along[i]) / around;
    xy[2 * v] = p * Math.cos(turn);
    xy[2 * v + 1] = q * Math.sin(turn);
  });
  let n = 0;
  for (let v = 0; v < nV; v++) if (unknown[v] === 0) unknown[v] = n++;
  if (n === 0) return xy;
  const where = buildPattern(
    n,
    Uint32Array.from({ length: nT + 1 }, (_, t) => 3 * t),
    Int32Array.from(tri, (v) => unknown[v]),
  );
  const values = new Float64Array(where.pattern.rowIndex.length);
  const entry = Float64Array.of(2, -1, 2, -1, -1, 2);
  const side = new Float64Array(2 * n);
  for (let t = 0; t < nT; t++) {
    addElementInPlace(values, where, t, entry);
    for (let k = 0; k < 9; k++) {
      const i = unknown[tri[3 * t + Math.floor(k / 3)]];
      const w = tri[3 * t + (k % 3)];
      if (i < 0 || unknown[w] >= 0) continue;
      side[i] += xy[2 * w];
      side[n + i] += xy[2 * w + 1];
    }
  }
  solveInPlace(factorSymmetric(analyseSymmetric(where.pattern), values), side, 2);
  for (let v = 0; v < nV; v++) {
    if (unknown[v] < 0) continue;
    xy[2 * v] = side[unknown[v]];
    xy[2 * v + 1] = side[n + unknown[v]];
  }
  return xy;
}

/** Map from a triangle's own shape to the flat: columns over the shape's inverse sides. Written to F as [xx, yx, xy, yy]. */
function mapTriangle(tri: Uint32Array, unfolding: Unfolding, xy: Float64Array, t: number, F: Float64Array): void {
  const h = 3 * t;
  const [a, b, c] = [2 * tri[h], 2 * tri[h + 1], 2 * tri[h + 2]];
  const l = unfolding.length[h];
  const px = unfolding.apexX[h];
  const py = unfolding.apexY[h];
  for (let k = 0; k < 2; k++) {
    const u = (xy[b + k] - xy[a + k]) / l;
    F[k] = u;
    F[2 + k] = (xy[c + k] - xy[a + k] - px * u) / py;
  }
}

/** Symmetric Dirichlet energy ∑ A (|F|² + |F⁻¹|² - 4), none without strain, infinite where a triangle is turned over. */
function measureEnergy(tri: Uint32Array, unfolding: Unfolding, xy: Float64Array): number {
  const F = new Float64Array(4);
  let sum = 0;
  for (let t = 0; 3 * t < tri.length; t++) {
    mapTriangle(tri, unfolding, xy, t, F);
    const det = F[0] * F[3] - F[2] * F[1];
    if (!(det > 0)) return Number.POSITIVE_INFINITY;
    const square = F[0] * F[0] + F[1] * F[1] + F[2] * F[2] + F[3] * F[3];
    sum += ((unfolding.length[3 * t] * unfolding.apexY[3 * t]) / 2) * (square + square / (det * det) - 4);
  }
  return sum;
}

/**
 * Gradient and positive definite Hessian of one triangle's energy in its six coordinates.
 * @shape gradient 6, hessian 21 (packed lower triangle)
 */
function differentiate(
  F: Float64Array,
  l: number,
  px: number,
  py: number,
  out: { gradient: Float64Array; hessian: Float64Array },
): void {
  // Singular value decomposition of a 2 × 2 matrix with positive determinant, by its rotation-like and reflection-like parts.
  const e = (F[0] + F[3]) / 2;
  const f = (F[0] - F[3]) / 2;
  const g = (F[1] + F[2]) / 2;
  const h = (F[1] - F[2]) / 2;
  const q = Math.sqrt(e * e + h * h);
  const r = Math.sqrt(f * f + g * g);
  const s1 = q + r;
  const s2 = Math.max(q - r, 1e-12 * q);
  const sum = Math.atan2(h, e);
  const difference = Math.atan2(g, f);
  const beta = (sum + difference) / 2;
  const alpha = (difference - sum) / 2;
  const cu = Math.cos(beta);
  const su = Math.sin(beta);
  const cv = Math.cos(alpha);
  const sv = Math.sin(alpha);
  // U = [cu -su; su cu], V = [cv -sv; sv cv]; modes U · M · Vᵀ as [xx, yx, xy, yy].
  const mode = (m00: number, m01: number, m10: number, m11: number): number[] => {
    const a00 = cu * m00 - su * m10;
    const a01 = cu * m01 - su * m11;
    const a10 = su * m00 + cu * m10;
    const a11 = su * m01 + cu * m11;
    return [a00 * cv - a01 * sv, a10 * cv - a11 * sv, a00 * sv + a01 * cv, a10 * sv + a11 * cv];
  };
  const root = Math.SQRT1_2;
  const product = s1 * s1 * s1 * s2 * s2 * s2;
  const modes = [mode(1, 0, 0, 0), mode(0, 0, 0, 1), mode(0, -root, root, 0), mode(0, root, root, 0)];
  const value = [
    2 + 6 / s1 ** 4,
    2 + 6 / s2 ** 4,
    Math.max(0, 2 - (2 * (s1 * s1 - s1 * s2 + s2 * s2)) / product),
    2 + (2 * (s1 * s1 + s1 * s2 + s2 * s2)) / product,
  ];
  const slope1 = 2 * s1 - 2 / (s1 * s1 * s1);
  const slope2 = 2 * s2 - 2 / (s2 * s2 * s2);
  const area = (l * py) / 2;
  // F = [b - a, c - a] · D⁻¹: the derivative of a mode by corner a, b, c in x and y.
  const rows = modes.map((m) => {
    const bx = m[0] / l - (m[2] * px) / (l * py);
    const by = m[1] / l - (m[3] * px) / (l * py);
    const cx = m[2] / py;
    const cy = m[3] / py;
    return [-bx - cx, -by - cy, bx, by, cx, cy];
  });
  for (let i = 0, at = 0; i < 6; i++) {
    out.gradient[i] = area * (slope1 * rows[0][i] + slope2 * rows[1][i]);
    for (let j = 0; j <= i; j++, at++) {
      let s = 0;
      for (let k = 0; k < 4; k++) s += value[k] * rows[k][i] * rows[k][j];
      out.hessian[at] = area * s;
    }
  }
}

/** Largest step along d at which no triangle's area has fallen to zero. */
function findLargestStep(tri: Uint32Array, xy: Float64Array, d: Float64Array): number {
  let step = Number.POSITIVE_INFINITY;
  for (let t = 0; t < tri.length; t += 3) {
    const [a, b, c] = [2 * tri[t], 2 * tri[t + 1], 2 * tri[t + 2]];
    const ux = xy[b] - xy[a];
    const uy = xy[b + 1] - xy[a + 1];
    const wx = xy[c] - xy[a];
    const wy = xy[c + 1] - xy[a + 1];
    const dux = d[b] - d[a];
    const duy = d[b + 1] - d[a + 1];
    const dwx = d[c] - d[a];
    const dwy = d[c + 1] - d[a + 1];
    const A = dux * dwy - duy * dwx;
    const B = ux * dwy - uy * dwx + dux * wy - duy * wx;
    const C = ux * wy - uy * wx;
    // Least positive root of A s² + B s + C with C > 0.
    const disc = B * B - 4 * A * C;
    if (disc < 0) continue;
    const z = -(B + Math.sign(B || 1) * Math.sqrt(disc)) / 2;
    for (const root of [z / A, C / z]) if (root > 0) step = Math.min(step, root);
  }
  return step;
}

function buildBarrierPattern(
  tri: Uint32Array,
  n: number,
  held: ReadonlySet<number>,
): { where: ElementPattern; dof: Int32Array } {
  const dof = new Int32Array(2 * n);
  let count = 0;
  for (let i = 0; i < 2 * n; i++) dof[i] = held.has(i) ? -1 : count++;
  const nT = tri.length / 3;
  const elementDof = new Int32Array(6 * nT);
  for (let h = 0; h < tri.length; h++) {
    elementDof[2 * h] = dof[2 * tri[h]];
    elementDof[2 * h + 1] = dof[2 * tri[h] + 1];
  }
  return {
    where: buildPattern(
      count,
      Uint32Array.from({ length: nT + 1 }, (_, t) => 6 * t),
      elementDof,
    ),
    dof,
  };
}

/**
 * Newton descent of the symmetric Dirichlet energy from a layout without folds; stays without folds.
 * @shape start 2*n -> 2*n
 */
export function relaxWithBarrier(
  tri: Uint32Array,
  unfolding: Unfolding,
  start: Float64Array<ArrayBuffer>,
): Float64Array<ArrayBuffer> {
  const n = start.length / 2;
  let xy = start.slice();
  // Held: one corner of the first triangle, and the next one across its side, so that nothing moves as a whole.
  const [a, b] = [2 * tri[0], 2 * tri[1]];
  const flat = Math.abs(xy[b] - xy[a]) > Math.abs(xy[b + 1] - xy[a + 1]);
  const { where, dof } = buildBarrierPattern(tri, n, new Set([a, a + 1, flat ? b + 1 : b]));
  const symbolic = analyseSymmetric(where.pattern);
  const { colStart } = where.pattern;
  const values = new Float64Array(where.pattern.rowIndex.length);
  const side = new Float64Array(where.pattern.n);
  const move = new Float64Array(2 * n);
  const F = new Float64Array(4);
  const part = { gradient: new Float64Array(6), hessian: new Float64Array(21) };
  let factor: ReturnType<typeof factorSymmetric> | null = null;
  let energy = measureEnergy(tri, unfolding, xy);
  let none = 0;
  for (let h = 0; h < tri.length; h += 3) none += NO_ENERGY * unfolding.length[h] * unfolding.apexY[h];
  for (let round = 0; round < MOST_STEPS; round++) {
    values.fill(0);
    side.fill(0);
    for (let t = 0; 3 * t < tri.length; t++) {
      const h = 3 * t;
      mapTriangle(tri, unfolding, xy, t, F);
      differentiate(F, unfolding.length[h], unfolding.apexX[h], unfolding.apexY[h], part);
      addElementInPlace(values, where, t, part.hessian);
      for (let k = 0; k < 6; k++) {
        const i = dof[2 * tri[h + (k >> 1)] + (k & 1)];
        if (i >= 0) side[i] -= part.gradient[k];
      }
    }
    for (let i = 0; i < where.pattern.n; i++) values[colStart[i]] *= 1 + 1e-10;
    const gradient = side.slice();
    if (factor) refactorInPlace(factor, values);
    else factor = factorSymmetric(symbolic, values);
    solveInPlace(factor, side);
    let slope = 0;
    for (let i = 0; i < side.length; i++) slope -= gradient[i] * side[i];
    for (let i = 0; i < 2 * n; i++) move[i] = dof[i] < 0 ? 0 : side[dof[i]];
    let step = Math.min(1, 0.9 * findLargestStep(tri, xy, move));
    let next = xy;
    let after = energy;
    for (let half = 0; half < 40; half++, step /= 2) {
      next = xy.map((x, i) => x + step * move[i]);
      after = measureEnergy(tri, unfolding, next);
      if (after <= energy + 1e-4 * step * slope) break;
    }
    if (!(after < energy)) break;
    const fall = energy - after;
    xy = next;
    energy = after;
    if (fall < LEAST_FALL * energy || energy < none) break;
  }
  return xy;
}
