// A first flat layout of a strip, near its lengths on the form and without a triangle turned over: exact where the strip is developable.
// A start for flattening, not the answer: it knows no cloth and no stress.
// Source: hinge by hinge; then as-rigid-as-possible (Liu, Zhang, Xu, Gotsman & Gortler, Computer Graphics Forum 27(5), 2008);
// where that folds, an embedding in a convex outline, relaxed with a barrier (unfoldSafe.ts).
import { analyseSymmetric, factorSymmetric, solveInPlace } from "../numeric/factor.ts";
import { addElementInPlace, buildPattern } from "../numeric/pattern.ts";
import { PlanError } from "../problem.ts";
import { type Adjacency, buildAdjacency, findBoundaryLoops, nextHalfedge, previousHalfedge } from "./adjacency.ts";
import { buildUnfolding, type Unfolding } from "./unfolding.ts";
import { embedConvex, relaxWithBarrier } from "./unfoldSafe.ts";

/** Largest strain of a side below which a layout counts as exact. */
const EXACT_STRAIN = 1e-10;

/** As-rigid-as-possible rounds at most, and the change of energy (share) that ends them. */
const MOST_ROUNDS = 8;
const LEAST_CHANGE = 1e-3;

/** A triangle whose flat area is below this share of its area on the form counts as folded. */
const LEAST_AREA_SHARE = 0.05;

/** Height over longest side below which a triangle is taken as higher when weighing it. */
const LEAST_HEIGHT = 1e-3;

/** Largest relative change of a side's length in a flat layout. */
export function measureStrain(tri: Uint32Array, unfolding: Unfolding, xy: Float64Array): number {
  let worst = 0;
  for (let h = 0; h < tri.length; h++) {
    const a = 2 * tri[h];
    const b = 2 * tri[nextHalfedge(h)];
    const l = Math.sqrt((xy[b] - xy[a]) ** 2 + (xy[b + 1] - xy[a + 1]) ** 2);
    worst = Math.max(worst, Math.abs(l / unfolding.length[h] - 1));
  }
  return worst;
}

/** Least share of its area on the form that a triangle keeps in the flat; negative where one is turned over. */
export function measureLeastAreaShare(tri: Uint32Array, unfolding: Unfolding, xy: Float64Array): number {
  let least = Number.POSITIVE_INFINITY;
  for (let h = 0; h < tri.length; h += 3) {
    const [a, b, c] = [2 * tri[h], 2 * tri[h + 1], 2 * tri[h + 2]];
    const doubled = (xy[b] - xy[a]) * (xy[c + 1] - xy[a + 1]) - (xy[b + 1] - xy[a + 1]) * (xy[c] - xy[a]);
    least = Math.min(least, doubled / (unfolding.length[h] * unfolding.apexY[h]));
  }
  return least;
}

/** @throws PlanError panel-disc */
function checkDisc(adjacency: Adjacency, loops: number[][]): void {
  const { nV, nT, twin, fanStart } = adjacency;
  let nE = 0;
  for (let h = 0; h < 3 * nT; h++) if (twin[h] < h) nE++;
  const euler = nV - nE + nT;
  let lone = -1;
  for (let v = 0; v < nV; v++) if (fanStart[v] === fanStart[v + 1]) lone = v;
  if (lone < 0 && loops.length === 1 && euler === 1) return;
  throw new PlanError(
    "panel-disc",
    `a strip to be laid flat must be one piece with one outline and no hole; this one has ${loops.length} outlines, Euler number ${euler} (must be 1)${lone < 0 ? "" : ` and vertex ${lone} without triangle`}: add a seam that opens it`,
    [],
    { outlines: loops.length, euler },
  );
}

/** A layout hinge by hinge. @shape xy 2*nV; turn 2*nT: cosine and sine of each triangle's turn from its own shape (side 0→1 along +x) */
interface Hinged {
  xy: Float64Array<ArrayBuffer>;
  turn: Float64Array<ArrayBuffer>;
}

/**
 * Lays triangle after triangle in the plane, breadth first from the one amid the strip; every vertex keeps its first place. A
 * triangle's turn follows from its neighbour's and the hinge alone, never from places that curvature has shifted: on a short
 * side between two shifted places it would be any.
 */
function layHingeByHinge(tri: Uint32Array, adjacency: Adjacency, unfolding: Unfolding, first: number): Hinged {
  const { length, apexX, apexY } = unfolding;
  const xy = new Float64Array(2 * adjacency.nV);
  const turn = new Float64Array(2 * adjacency.nT);
  const placed = new Uint8Array(adjacency.nV);
  const seen = new Uint8Array(adjacency.nT);
  const place = (v: number, x: number, y: number) => {
    if (placed[v]) return;
    placed[v] = 1;
    xy[2 * v] = x;
    xy[2 * v + 1] = y;
  };
  // Unit direction of half-edge h of a triangle in its own shape.
  const direct = (h: number): [number, number] => {
    const h0 = h - (h % 3);
    const [l, px, py] = [length[h0], apexX[h0], apexY[h0]];
    if (h === h0) return [1, 0];
    return h === h0 + 1 ? [(px - l) / length[h], py / length[h]] : [-px / length[h], -py / length[h]];
  };
  const h0 = 3 * first;
  place(tri[h0], 0, 0);
  place(tri[h0 + 1], length[h0], 0);
  place(tri[h0 + 2], apexX[h0], apexY[h0]);
  turn[2 * first] = 1;
  seen[first] = 1;
  const queue = [first];
  for (let q = 0; q < queue.length; q++)
    for (let h = 3 * queue[q]; h < 3 * queue[q] + 3; h++) {
      const g = adjacency.twin[h];
      const t = Math.floor(g / 3);
      if (g < 0 || seen[t]) continue;
      seen[t] = 1;
      queue.push(t);
      const [c, s] = [turn[2 * queue[q]], turn[2 * queue[q] + 1]];
      const [dx, dy] = direct(h);
      // The hinge runs the other way in the neighbour.
      const ux = s * dy - c * dx;
      const uy = -s * dx - c * dy;
      const [ex, ey] = direct(g);
      turn[2 * t] = ux * ex + uy * ey;
      turn[2 * t + 1] = uy * ex - ux * ey;
      const a = 2 * tri[g];
      const px = apexX[g];
      const py = apexY[g];
      place(tri[previousHalfedge(g)], xy[a] + px * ux - py * uy, xy[a + 1] + px * uy + py * ux);
    }
  return { xy, turn };
}

/** A triangle amid the strip: the last one reached when peeling from the boundary inwards. */
function findMiddle(adjacency: Adjacency): number {
  const { nT, twin } = adjacency;
  const seen = new Uint8Array(nT);
  const queue: number[] = [];
  for (let h = 0; h < 3 * nT; h++) {
    const t = Math.floor(h / 3);
    if (twin[h] >= 0 || seen[t]) continue;
    seen[t] = 1;
    queue.push(t);
  }
  for (let q = 0; q < queue.length; q++)
    for (let h = 3 * queue[q]; h < 3 * queue[q] + 3; h++) {
      const o = twin[h] < 0 ? -1 : Math.floor(twin[h] / 3);
      if (o < 0 || seen[o]) continue;
      seen[o] = 1;
      queue.push(o);
    }
  return queue[queue.length - 1];
}

/**
 * Half cotangents of the corners opposite to the half-edges, those of a needle as if it were LEAST_HEIGHT of its longest side high
 * (all three of one triangle, so that the matrix stays positive definite).
 * @shape 3*nT
 */
function measureWeights(unfolding: Unfolding): Float64Array<ArrayBuffer> {
  const { length, apexX, apexY } = unfolding;
  const w = new Float64Array(length.length);
  for (let t = 0; t < w.length; t += 3) {
    let h = t;
    for (let k = t + 1; k < t + 3; k++) if (length[k] > length[h]) h = k;
    const l = length[h];
    const x = apexX[h];
    const y = Math.max(apexY[h], LEAST_HEIGHT * l);
    w[h] = (x * (x - l) + y * y) / (2 * l * y);
    w[nextHalfedge(h)] = x / (2 * y);
    w[previousHalfedge(h)] = (l - x) / (2 * y);
  }
  return w;
}

/**
 * As-rigid-as-possible relaxation: every triangle asks for its own shape turned to fit best, the sparse factor finds the layout
 * nearest to all of them; repeated. The first turns are those of the hinges. Vertex `held` stays.
 */
function relaxRigid(tri: Uint32Array, unfolding: Unfolding, start: Hinged, held: number): Float64Array<ArrayBuffer> {
  const n = start.xy.length / 2;
  const nT = tri.length / 3;
  const { length, apexX, apexY } = unfolding;
  const weight = measureWeights(unfolding);
  const dof = (v: number) => (v === held ? -1 : v > held ? v - 1 : v);
  const where = buildPattern(
    n - 1,
    Uint32Array.from({ length: nT + 1 }, (_, t) => 3 * t),
    Int32Array.from(tri, dof),
  );
  const values = new Float64Array(where.pattern.rowIndex.length);
  const entry = new Float64Array(6);
  for (let t = 0; t < nT; t++) {
    const [w0, w1, w2] = [weight[3 * t], weight[3 * t + 1], weight[3 * t + 2]];
    entry.set([w0 + w2, -w0, w0 + w1, -w2, -w1, w1 + w2]);
    addElementInPlace(values, where, t, entry);
  }
  const factor = factorSymmetric(analyseSymmetric(where.pattern), values);
  const xy = start.xy.slice();
  const side = new Float64Array(2 * (n - 1));
  let energy = Number.POSITIVE_INFINITY;
  for (let round = 0; round < MOST_ROUNDS; round++) {
    side.fill(0);
    let sum = 0;
    for (let t = 0; t < nT; t++) {
      const h0 = 3 * t;
      // Sides of the triangle's own shape: 0→1, 1→2, 2→0.
      const ex = [length[h0], apexX[h0] - length[h0], -apexX[h0]];
      const ey = [0, apexY[h0], -apexY[h0]];
      let re = 0;
      let im = 0;
      for (let k = 0; k < 3; k++) {
        const a = 2 * tri[h0 + k];
        const b = 2 * tri[h0 + ((k + 1) % 3)];
        const ux = xy[b] - xy[a];
        const uy = xy[b + 1] - xy[a + 1];
        re += weight[h0 + k] * (ex[k] * ux + ey[k] * uy);
        im += weight[h0 + k] * (ex[k] * uy - ey[k] * ux);
      }
      const r = Math.sqrt(re * re + im * im) || 1;
      const c = round === 0 ? start.turn[2 * t] : re / r;
      const s = round === 0 ? start.turn[2 * t + 1] : im / r;
      for (let k = 0; k < 3; k++) {
        const a = tri[h0 + k];
        const b = tri[h0 + ((k + 1) % 3)];
        const tx = c * ex[k] - s * ey[k];
        const ty = s * ex[k] + c * ey[k];
        sum += weight[h0 + k] * ((xy[2 * b] - xy[2 * a] - tx) ** 2 + (xy[2 * b + 1] - xy[2 * a + 1] - ty) ** 2);
        const i = dof(a);
        const j = dof(b);
        if (i >= 0) {
          side[i] -= weight[h0 + k] * tx;
          side[n - 1 + i] -= weight[h0 + k] * ty;
        }
        if (j >= 0) {
          side[j] += weight[h0 + k] * tx;
          side[n - 1 + j] += weight[h0 + k] * ty;
        }
      }
    }
    if (energy - sum <= LEAST_CHANGE * sum && round > 2) break;
    energy = sum;
    solveInPlace(factor, side, 2);
    // The held vertex stays at the origin of the solve.
    for (let v = 0; v < n; v++) {
      const i = dof(v);
      xy[2 * v] = i < 0 ? 0 : side[i];
      xy[2 * v + 1] = i < 0 ? 0 : side[n - 1 + i];
    }
  }
  return xy;
}

/**
 * A flat layout of a disc-shaped strip: near its lengths on the form, exact where it is developable, no triangle turned over,
 * counter-clockwise where the outer face is up.
 * @shape xyz 3*n, tri 3*nT (local) -> 2*n; vertex order kept
 * @units m; the place and turn in the plane mean nothing
 * @throws PlanError panel-disc: not one disc; panel-fold: no layout without folds was found
 */
export function unfoldSurface(
  xyz: Float64Array<ArrayBuffer>,
  tri: Uint32Array<ArrayBuffer>,
): Float64Array<ArrayBuffer> {
  const surface = { xyz, tri };
  const adjacency = buildAdjacency(surface);
  const loops = findBoundaryLoops(surface, adjacency);
  checkDisc(adjacency, loops);
  const unfolding = buildUnfolding(surface);
  const first = findMiddle(adjacency);
  const hinged = layHingeByHinge(tri, adjacency, unfolding, first);
  if (measureStrain(tri, unfolding, hinged.xy) <= EXACT_STRAIN) return hinged.xy;
  // The rounds are quick but slow to straighten a long strip; the barrier's Newton steps do that.
  let start = relaxRigid(tri, unfolding, hinged, tri[3 * first]);
  if (!(measureLeastAreaShare(tri, unfolding, start) > LEAST_AREA_SHARE))
    start = embedConvex(surface, adjacency, loops[0]);
  const xy = relaxWithBarrier(tri, unfolding, start);
  if (measureLeastAreaShare(tri, unfolding, xy) > 0) return xy;
  throw new PlanError(
    "panel-fold",
    "no flat layout of the strip without a triangle turned over was found: check it for needle triangles, or lay the seams closer",
    [],
    { triangles: tri.length / 3 },
  );
}
