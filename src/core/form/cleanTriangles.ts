// Triangles without area and triangles given twice, taken out without opening a crack. Moves no vertex.
import { bucketByVertex, findMates } from "./bucketByVertex.ts";

/** What is left, and a vertex of each triangle that was taken out or split anew. */
export interface CleanTriangles {
  tri: Uint32Array<ArrayBuffer>;
  flatAt: number[];
  doubledAt: number[];
}

/** Height over the longest side and the corner opposite to it; height 0 where two corners are one. */
function measureHeight(x: Float64Array<ArrayBuffer>, tri: Uint32Array<ArrayBuffer>, t: number): [number, number] {
  const p = [0, 1, 2].map((k) => 3 * tri[3 * t + k]);
  const side = (a: number, b: number) => [0, 1, 2].map((k) => x[p[b] + k] - x[p[a] + k]);
  const s = [side(1, 2), side(2, 0), side(0, 1)];
  const l = s.map((v) => v[0] ** 2 + v[1] ** 2 + v[2] ** 2);
  const k = l[0] >= l[1] && l[0] >= l[2] ? 0 : l[1] >= l[2] ? 1 : 2;
  const [a, b] = [s[k], s[(k + 1) % 3]];
  const n = [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
  return [l[k] > 0 ? Math.sqrt((n[0] ** 2 + n[1] ** 2 + n[2] ** 2) / l[k]) : 0, k];
}

/** Triangles that are no higher than the tolerance. */
function findFlat(x: Float64Array<ArrayBuffer>, tri: Uint32Array<ArrayBuffer>, tolerance: number): Map<number, number> {
  const out = new Map<number, number>();
  for (let t = 0; t < tri.length / 3; t++) {
    const a = tri[3 * t];
    const b = tri[3 * t + 1];
    const c = tri[3 * t + 2];
    if (a === b || b === c || c === a) {
      out.set(t, -1);
      continue;
    }
    const [height, corner] = measureHeight(x, tri, t);
    if (height <= tolerance) out.set(t, corner);
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
    const s = [tri[3 * t], tri[3 * t + 1], tri[3 * t + 2]].sort((a, b) => a - b);
    sorted.set(s, 3 * t);
    low[t] = s[0];
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
  const flatAt = [...findFlat(x, tri, tolerance).keys()].map((t) => tri[3 * t]);
  for (let left = findFlat(x, tri, tolerance), round = 0; left.size > 0; round++) {
    const dropped = round < 64 ? closeFlatInPlace(tri, nV, left) : new Set(left.keys());
    tri = keepInOrder(tri, dropped);
    left = findFlat(x, tri, tolerance);
  }
  return { tri, flatAt, doubledAt: doubled.map((t) => given[3 * t]) };
}
