// Triangles without area and triangles given twice, taken out without opening a crack. Moves no vertex.
import { bucketByVertex, findMates } from "./bucketByVertex.ts";

/** What is left, and a vertex of each triangle that was taken out or split anew. */
export interface CleanTriangles {
  tri: Uint32Array<ArrayBuffer>;
  flatAt: number[];
  doubledAt: number[];
}

/** Height over the longest side. */
function measureHeight(x: Float64Array<ArrayBuffer>, tri: Uint32Array<ArrayBuffer>, t: number): number {
  const a = 3 * tri[3 * t];
  const b = 3 * tri[3 * t + 1];
  const c = 3 * tri[3 * t + 2];
  const ux = x[b] - x[a];
  const uy = x[b + 1] - x[a + 1];
  const uz = x[b + 2] - x[a + 2];
  const vx = x[c] - x[a];
  const vy = x[c + 1] - x[a + 1];
  const vz = x[c + 2] - x[a + 2];
  const square = (uy * vz - uz * vy) ** 2 + (uz * vx - ux * vz) ** 2 + (ux * vy - uy * vx) ** 2;
  const opposite = (vx - ux) ** 2 + (vy - uy) ** 2 + (vz - uz) ** 2;
  const longest = Math.max(ux * ux + uy * uy + uz * uz, vx * vx + vy * vy + vz * vz, opposite);
  return longest > 0 ? Math.sqrt(square / longest) : 0;
}

/** Corner opposite to the longest side, 0…2. */
function findMiddleCorner(x: Float64Array<ArrayBuffer>, tri: Uint32Array<ArrayBuffer>, t: number): number {
  const p = [0, 1, 2].map((k) => 3 * tri[3 * t + k]);
  const l = [0, 1, 2].map((k) => {
    const [b, c] = [p[(k + 1) % 3], p[(k + 2) % 3]];
    return (x[b] - x[c]) ** 2 + (x[b + 1] - x[c + 1]) ** 2 + (x[b + 2] - x[c + 2]) ** 2;
  });
  return l[0] >= l[1] && l[0] >= l[2] ? 0 : l[1] >= l[2] ? 1 : 2;
}

/** Triangles that are no higher than the tolerance. */
function findFlat(x: Float64Array<ArrayBuffer>, tri: Uint32Array<ArrayBuffer>, tolerance: number): Map<number, number> {
  const out = new Map<number, number>();
  for (let t = 0; t < tri.length / 3; t++) {
    const a = tri[3 * t];
    const b = tri[3 * t + 1];
    const c = tri[3 * t + 2];
    if (a === b || b === c || c === a) out.set(t, -1);
    else if (measureHeight(x, tri, t) <= tolerance) out.set(t, findMiddleCorner(x, tri, t));
  }
  return out;
}

function keepInOrder(tri: Uint32Array<ArrayBuffer>, dropped: Set<number>): Uint32Array<ArrayBuffer> {
  if (dropped.size === 0) return tri;
  const out = new Uint32Array(tri.length - 3 * dropped.size);
  let n = 0;
  for (let t = 0; t < tri.length / 3; t++) {
    if (dropped.has(t)) continue;
    out.set(tri.subarray(3 * t, 3 * t + 3), n);
    n += 3;
  }
  return out;
}

/**
 * A flat triangle has its middle corner on its longest side: the neighbour across that side is split there, so that the
 * surface stays closed. Returns the triangles dropped in this round; the neighbour's two halves take both places.
 */
function closeFlatInPlace(tri: Uint32Array<ArrayBuffer>, nV: number, flat: Map<number, number>): Set<number> {
  const mate = findMates(tri, nV);
  const dropped = new Set<number>();
  const touched = new Set<number>();
  for (const [t, corner] of flat) {
    if (touched.has(t)) continue;
    const across = corner < 0 ? -1 : mate[3 * t + ((corner + 1) % 3)];
    const other = across < 0 ? -1 : Math.floor(across / 3);
    if (other < 0 || flat.has(other)) {
      dropped.add(t);
      touched.add(t);
      continue;
    }
    if (touched.has(other)) continue;
    const middle = tri[3 * t + corner];
    const [p, q, r] = [0, 1, 2].map((k) => tri[3 * other + ((across + k) % 3)]);
    tri.set([p, middle, r], 3 * other);
    tri.set([middle, q, r], 3 * t);
    touched.add(t).add(other);
  }
  return dropped;
}

function findDoubled(tri: Uint32Array<ArrayBuffer>, nV: number): number[] {
  const nT = tri.length / 3;
  const sorted = new Uint32Array(tri.length);
  const low = new Uint32Array(nT);
  for (let t = 0; t < nT; t++) {
    const [a, b, c] = [tri[3 * t], tri[3 * t + 1], tri[3 * t + 2]];
    low[t] = Math.min(a, b, c);
    sorted[3 * t] = low[t];
    sorted[3 * t + 2] = Math.max(a, b, c);
    sorted[3 * t + 1] = a + b + c - sorted[3 * t] - sorted[3 * t + 2];
  }
  const { start, item } = bucketByVertex(low, nV);
  const out: number[] = [];
  for (let v = 0; v < nV; v++)
    for (let j = start[v] + 1; j < start[v + 1]; j++) {
      const t = item[j];
      for (let i = start[v]; i < j; i++) {
        const o = item[i];
        if (sorted[3 * o + 1] !== sorted[3 * t + 1] || sorted[3 * o + 2] !== sorted[3 * t + 2]) continue;
        out.push(t);
        break;
      }
    }
  return out.sort((a, b) => a - b);
}

/**
 * Triangles with area, each once.
 * @units tolerance: least height of a triangle that counts, as x
 */
export function cleanTriangles(
  x: Float64Array<ArrayBuffer>,
  given: Uint32Array<ArrayBuffer>,
  tolerance: number,
): CleanTriangles {
  const nV = x.length / 3;
  const doubled = findDoubled(given, nV);
  let tri = keepInOrder(given, new Set(doubled)).slice();
  let left = findFlat(x, tri, tolerance);
  const flatAt = [...left.keys()].map((t) => tri[3 * t]);
  for (let round = 0; left.size > 0; round++) {
    const dropped = round < 64 ? closeFlatInPlace(tri, nV, left) : new Set(left.keys());
    tri = keepInOrder(tri, dropped);
    left = findFlat(x, tri, tolerance);
  }
  return { tri, flatAt, doubledAt: doubled.map((t) => given[3 * t]) };
}
