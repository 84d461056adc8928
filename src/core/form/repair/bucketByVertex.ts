// Things sorted by a vertex number, and the sides that triangles share whichever way they are wound.
import { nextHalfedge } from "../../surface/adjacency.ts";

/** Items with key v stand at item[start[v] … start[v+1]), in rising order. */
export interface Buckets {
  start: Uint32Array<ArrayBuffer>;
  item: Uint32Array<ArrayBuffer>;
}

/** Counting sort of 0 … keys.length-1 by key. */
export function bucketByVertex(keys: ArrayLike<number>, nV: number): Buckets {
  const start = new Uint32Array(nV + 1);
  for (let i = 0; i < keys.length; i++) start[keys[i] + 1]++;
  for (let v = 0; v < nV; v++) start[v + 1] += start[v];
  const fill = start.slice(0, nV);
  const item = new Uint32Array(keys.length);
  for (let i = 0; i < keys.length; i++) item[fill[keys[i]]++] = i;
  return { start, item };
}

/**
 * The side that each half-edge shares, in whatever direction: mate[h] is the other half-edge, -1 on the boundary,
 * -2 where three or more triangles meet. Half-edge 3*t + k runs from corner k to corner k+1 of triangle t.
 */
export function findMates(tri: Uint32Array<ArrayBuffer>, nV: number): Int32Array<ArrayBuffer> {
  const low = new Uint32Array(tri.length);
  const high = new Uint32Array(tri.length);
  for (let h = 0; h < tri.length; h++) {
    const a = tri[h];
    const b = tri[nextHalfedge(h)];
    low[h] = Math.min(a, b);
    high[h] = Math.max(a, b);
  }
  const { start, item } = bucketByVertex(low, nV);
  const mate = new Int32Array(tri.length).fill(-1);
  for (let v = 0; v < nV; v++)
    for (let i = start[v]; i < start[v + 1]; i++)
      for (let j = i + 1; j < start[v + 1]; j++) {
        const g = item[i];
        const h = item[j];
        if (high[g] !== high[h]) continue;
        if (mate[g] === -1 && mate[h] === -1) {
          mate[g] = h;
          mate[h] = g;
        } else {
          if (mate[g] >= 0) mate[mate[g]] = -2;
          if (mate[h] >= 0) mate[mate[h]] = -2;
          mate[g] = -2;
          mate[h] = -2;
        }
      }
  return mate;
}
