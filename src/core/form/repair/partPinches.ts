// Vertices at which two fans of triangles touch in nothing but that point: each further fan gets a vertex of its own.
import { nextHalfedge, previousHalfedge } from "../../surface/adjacency.ts";
import { bucketByVertex, findMates } from "./bucketByVertex.ts";

/** Triangles with the new vertices, and the vertex each new one is a copy of (new ones follow the old in number). */
export interface PartedPinches {
  tri: Uint32Array<ArrayBuffer>;
  copyOf: number[];
}

/** Fans at one vertex: half-edges leaving it, grouped by shared sides. */
function groupFans(tri: Uint32Array<ArrayBuffer>, leaving: Uint32Array<ArrayBuffer>): number[][] {
  const open = new Set<number>(leaving);
  const fans: number[][] = [];
  const ends = (h: number) => [tri[nextHalfedge(h)], tri[previousHalfedge(h)]];
  for (const first of leaving) {
    if (!open.delete(first)) continue;
    const fan = [first];
    const sides = new Set(ends(first));
    for (let grown = true; grown; ) {
      grown = false;
      for (const h of open) {
        const [a, b] = ends(h);
        if (!sides.has(a) && !sides.has(b)) continue;
        sides.add(a).add(b);
        open.delete(h);
        fan.push(h);
        grown = true;
      }
    }
    fans.push(fan);
  }
  return fans;
}

/** Number of half-edges leaving the start of h that are reached by turning about it. */
function countFan(mate: Int32Array<ArrayBuffer>, h: number): number {
  let n = 1;
  for (let g = mate[previousHalfedge(h)]; g >= 0; g = mate[previousHalfedge(g)]) {
    if (g === h) return n;
    n++;
  }
  for (let g = mate[h]; g >= 0; g = mate[nextHalfedge(g)]) n++;
  return n;
}

/** Parts every pinch of a consistently wound surface whose sides have at most two triangles. */
export function partPinches(given: Uint32Array<ArrayBuffer>, nV: number): PartedPinches {
  const { start, item } = bucketByVertex(given, nV);
  const mate = findMates(given, nV);
  const tri = given.slice();
  const copyOf: number[] = [];
  for (let v = 0; v < nV; v++) {
    if (start[v + 1] - start[v] < 2 || countFan(mate, item[start[v]]) === start[v + 1] - start[v]) continue;
    const fans = groupFans(given, item.subarray(start[v], start[v + 1]));
    for (const fan of fans.slice(1)) {
      for (const h of fan) tri[h] = nV + copyOf.length;
      copyOf.push(v);
    }
  }
  return { tri, copyOf };
}
