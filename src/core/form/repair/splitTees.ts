// Vertices that lie on a rim side of another triangle instead of at its end (T-junctions): that triangle is split there, so
// that the sides fit. Only where a rim of the neighbour really runs along the side; moves no vertex.
import { nextHalfedge, previousHalfedge } from "../../surface/adjacency.ts";
import { findMates } from "./bucketByVertex.ts";

/** Share of a side within which a vertex lies on it. Half a millimetre of rounding on half a metre. */
const ON_SIDE = 1e-3;

/** The mended triangles, each vertex that was on a side, and the one furthest off it. */
export interface SplitTees {
  tri: Uint32Array<ArrayBuffer>;
  at: number[];
  /** @units as x */
  farthest: { vertex: number; distance: number };
}

interface Rim {
  x: Float64Array<ArrayBuffer>;
  /** Half-edges without a neighbour. */
  sides: number[];
  /** Vertices of the rim by cell of a grid. */
  cells: Map<string, number[]>;
  cell: number;
}

function buildRim(x: Float64Array<ArrayBuffer>, tri: Uint32Array<ArrayBuffer>, mate: Int32Array<ArrayBuffer>): Rim {
  const sides: number[] = [];
  let sum = 0;
  for (let h = 0; h < mate.length; h++) {
    if (mate[h] !== -1) continue;
    sides.push(h);
    if (sides.length > HEAP) break;
    sum += measureGap(x, tri[h], tri[nextHalfedge(h)]);
  }
  const rim: Rim = { x, sides, cells: new Map(), cell: sum / Math.max(1, sides.length) };
  for (const v of new Set(sides.flatMap((h) => [tri[h], tri[nextHalfedge(h)]]))) {
    const key = nameCell(rim, [x[3 * v], x[3 * v + 1], x[3 * v + 2]]);
    rim.cells.set(key, [...(rim.cells.get(key) ?? []), v]);
  }
  return rim;
}

function measureGap(x: Float64Array<ArrayBuffer>, a: number, b: number): number {
  return Math.sqrt(
    (x[3 * a] - x[3 * b]) ** 2 + (x[3 * a + 1] - x[3 * b + 1]) ** 2 + (x[3 * a + 2] - x[3 * b + 2]) ** 2,
  );
}

function nameCell({ cell }: Rim, p: number[], shift = [0, 0, 0]): string {
  return p.map((c, k) => Math.floor(c / cell) + shift[k]).join(",");
}

const SHIFTS = [-1, 0, 1].flatMap((i) => [-1, 0, 1].flatMap((j) => [-1, 0, 1].map((k) => [i, j, k])));

/** Rim vertices in the cells that a side passes, each once, in rising order. */
function collectNear(rim: Rim, a: number, b: number): number[] {
  const { x, cells, cell } = rim;
  const steps = Math.ceil((2 * measureGap(x, a, b)) / cell);
  const keys = new Set<string>();
  for (let i = 0; i <= steps; i++) {
    const p = [0, 1, 2].map((k) => x[3 * a + k] + ((x[3 * b + k] - x[3 * a + k]) * i) / Math.max(1, steps));
    for (const shift of SHIFTS) keys.add(nameCell(rim, p, shift));
  }
  return [...keys].flatMap((key) => cells.get(key) ?? []).sort((p, q) => p - q);
}

/** Vertices on a side from its start to its end, with their distance from it. */
function findOnSide(
  rim: Rim,
  [a, b, apex]: [number, number, number],
  tolerance: number,
): { vertex: number; share: number; distance: number }[] {
  const { x } = rim;
  const length = measureGap(x, a, b);
  const reach = Math.max(tolerance, ON_SIDE * length);
  return collectNear(rim, a, b)
    .filter((v) => v !== a && v !== b && v !== apex)
    .map((v) => {
      let share = 0;
      for (let k = 0; k < 3; k++) share += (x[3 * v + k] - x[3 * a + k]) * (x[3 * b + k] - x[3 * a + k]);
      share /= length * length;
      let square = 0;
      for (let k = 0; k < 3; k++) square += (x[3 * v + k] - x[3 * a + k] - share * (x[3 * b + k] - x[3 * a + k])) ** 2;
      return { vertex: v, share, distance: Math.sqrt(square) };
    })
    .filter(({ share, distance }) => distance <= reach && share * length > reach && (1 - share) * length > reach)
    .sort((p, q) => p.share - q.share || p.vertex - q.vertex);
}

/** Rim sides beyond which no T-junction is looked for: the mesh is a heap of pieces. */
const HEAP = 200_000;

/** A triangle has at most three rim sides, and is split along one of them in a round. */
const ROUNDS = 3;

/**
 * Splits every triangle whose rim side a neighbour meets in more vertices than its ends.
 * @shape x 3*nV, tri 3*nT; no vertex is added @units tolerance as x
 */
export function splitTees(x: Float64Array<ArrayBuffer>, tri: Uint32Array<ArrayBuffer>, tolerance: number): SplitTees {
  const sum: SplitTees = { tri, at: [], farthest: { vertex: -1, distance: 0 } };
  for (let round = 0; round < ROUNDS; round++) {
    const { tri: next, at, farthest } = splitOnce(x, sum.tri, tolerance);
    if (at.length === 0) break;
    sum.tri = next;
    sum.at.push(...at);
    if (sum.farthest.vertex < 0 || farthest.distance > sum.farthest.distance) sum.farthest = farthest;
  }
  return sum;
}

/** One side of each triangle. */
function splitOnce(x: Float64Array<ArrayBuffer>, tri: Uint32Array<ArrayBuffer>, tolerance: number): SplitTees {
  const rim = buildRim(x, tri, findMates(tri, x.length / 3));
  if (rim.sides.length > HEAP) return { tri, at: [], farthest: { vertex: -1, distance: 0 } };
  const key = (p: number, q: number) => `${Math.min(p, q)}-${Math.max(p, q)}`;
  const sides = new Set(rim.sides.map((h) => key(tri[h], tri[nextHalfedge(h)])));
  const at: number[] = [];
  const farthest = { vertex: -1, distance: 0 };
  const out = tri.slice();
  const more: number[] = [];
  const touched = new Set<number>();
  for (const h of rim.sides) {
    const t = Math.floor(h / 3);
    if (touched.has(t)) continue;
    const [a, b, apex] = [tri[h], tri[nextHalfedge(h)], tri[previousHalfedge(h)]];
    const found = findOnSide(rim, [a, b, apex], tolerance);
    const chain = [a, ...found.map((f) => f.vertex), b];
    const fits = (i: number) => sides.has(key(chain[i], chain[i + 1]));
    // a vertex that only touches the side, without a rim along it, is another matter
    const kept = found.filter((_, i) => fits(i) || fits(i + 1));
    if (kept.length === 0) continue;
    touched.add(t);
    const ring = [a, ...kept.map((f) => f.vertex), b];
    for (let i = 0; i + 1 < ring.length; i++) {
      if (i === 0) out.set([ring[0], ring[1], apex], 3 * t);
      else more.push(ring[i], ring[i + 1], apex);
    }
    for (const { vertex, distance } of kept) {
      at.push(vertex);
      if (farthest.vertex >= 0 && distance <= farthest.distance) continue;
      farthest.vertex = vertex;
      farthest.distance = distance;
    }
  }
  if (at.length === 0) return { tri, at, farthest };
  const wide = new Uint32Array(out.length + more.length);
  wide.set(out);
  wide.set(more, out.length);
  return { tri: wide, at, farthest };
}
