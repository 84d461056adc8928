// Vertices at which two fans of triangles touch in nothing but that point: each further fan gets a vertex of its own.
import { bucketByVertex } from "./bucketByVertex.ts";

/** Triangles with the new vertices, and the vertex each new one is a copy of (new ones follow the old in number). */
export interface PartedPinches {
  tri: Uint32Array<ArrayBuffer>;
  copyOf: number[];
}

/** Fans at one vertex: half-edges leaving it, grouped by shared sides. */
function groupFans(tri: Uint32Array<ArrayBuffer>, leaving: Uint32Array<ArrayBuffer>): number[][] {
  const open = new Set<number>(leaving);
  const fans: number[][] = [];
  const ends = (h: number) => [tri[h % 3 === 2 ? h - 2 : h + 1], tri[h % 3 === 0 ? h + 2 : h - 1]];
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

/** Parts every pinch of a consistently wound surface whose sides have at most two triangles. */
export function partPinches(given: Uint32Array<ArrayBuffer>, nV: number): PartedPinches {
  const { start, item } = bucketByVertex(given, nV);
  const tri = given.slice();
  const copyOf: number[] = [];
  for (let v = 0; v < nV; v++) {
    if (start[v + 1] - start[v] < 2) continue;
    const fans = groupFans(given, item.subarray(start[v], start[v + 1]));
    for (const fan of fans.slice(1)) {
      for (const h of fan) tri[h] = nV + copyOf.length;
      copyOf.push(v);
    }
  }
  return { tri, copyOf };
}
