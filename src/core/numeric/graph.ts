// The graph of a symmetric pattern with unknowns that have the same neighbours joined into one node (the two or three
// unknowns of a vertex, the members of a clique), so that ordering and analysis run on fewer nodes.
import type { SymmetricPattern } from "./pattern.ts";

/**
 * Graph of joined unknowns.
 * @shape memberStart nNodes+1, member n: unknowns of a node ascending; near: neighbours of node v, without v, at
 *   nearStart[v] … nearStart[v+1]
 */
export interface NodeGraph {
  nNodes: number;
  memberStart: Int32Array<ArrayBuffer>;
  member: Int32Array<ArrayBuffer>;
  nearStart: Int32Array<ArrayBuffer>;
  near: Int32Array<ArrayBuffer>;
}

/** Neighbours of every unknown, both triangles, without the unknown itself. */
function listNeighbours({ n, colStart, rowIndex }: SymmetricPattern) {
  const start = new Int32Array(n + 1);
  for (let j = 0; j < n; j++) {
    start[j + 1] += colStart[j + 1] - colStart[j] - 1;
    for (let p = colStart[j] + 1; p < colStart[j + 1]; p++) start[rowIndex[p] + 1]++;
  }
  for (let j = 0; j < n; j++) start[j + 1] += start[j];
  const fill = start.slice(0, n);
  const near = new Int32Array(start[n]);
  for (let j = 0; j < n; j++)
    for (let p = colStart[j] + 1; p < colStart[j + 1]; p++) {
      const i = rowIndex[p];
      near[fill[j]++] = i;
      near[fill[i]++] = j;
    }
  return { start, near };
}

/** For every unknown the smallest one with the same closed neighbourhood. */
function findTwins(n: number, start: Int32Array<ArrayBuffer>, near: Int32Array<ArrayBuffer>): Int32Array<ArrayBuffer> {
  const first = new Int32Array(n);
  const hash = new Int32Array(n);
  for (let v = 0; v < n; v++) {
    first[v] = v;
    let h = Math.imul(v + 1, 0x9e3779b1);
    h ^= h >>> 15;
    for (let p = start[v]; p < start[v + 1]; p++) {
      let g = Math.imul(near[p] + 1, 0x9e3779b1);
      g ^= g >>> 15;
      h = (h + g) | 0;
    }
    hash[v] = h;
  }
  const mark = new Int32Array(n).fill(-1);
  for (let v = 0; v < n; v++) {
    if (first[v] !== v) continue;
    // twins are neighbours of each other, so only neighbours need be looked at
    let marked = false;
    for (let p = start[v]; p < start[v + 1]; p++) {
      const u = near[p];
      if (u < v || hash[u] !== hash[v] || first[u] !== u || start[u + 1] - start[u] !== start[v + 1] - start[v])
        continue;
      if (!marked) {
        marked = true;
        mark[v] = v;
        for (let q = start[v]; q < start[v + 1]; q++) mark[near[q]] = v;
      }
      let same = true;
      for (let q = start[u]; q < start[u + 1] && same; q++) same = mark[near[q]] === v;
      if (same) first[u] = v;
    }
  }
  return first;
}

/** Graph of a pattern, unknowns with the same closed neighbourhood joined; nodes in order of their first unknown. */
export function buildNodeGraph(pattern: SymmetricPattern): NodeGraph {
  const { n } = pattern;
  const { start, near } = listNeighbours(pattern);
  const first = findTwins(n, start, near);
  const node = new Int32Array(n);
  let nNodes = 0;
  for (let v = 0; v < n; v++) node[v] = first[v] === v ? nNodes++ : node[first[v]];
  const memberStart = new Int32Array(nNodes + 1);
  for (let v = 0; v < n; v++) memberStart[node[v] + 1]++;
  for (let k = 0; k < nNodes; k++) memberStart[k + 1] += memberStart[k];
  const member = new Int32Array(n);
  const fill = memberStart.slice(0, nNodes);
  for (let v = 0; v < n; v++) member[fill[node[v]]++] = v;
  if (nNodes === n) return { nNodes, memberStart, member, nearStart: start, near };
  const nearStart = new Int32Array(nNodes + 1);
  const joined = new Int32Array(near.length);
  let end = 0;
  for (let k = 0; k < nNodes; k++) {
    const v = member[memberStart[k]];
    for (let p = start[v]; p < start[v + 1]; p++) {
      const u = near[p];
      if (first[u] === u && node[u] !== k) joined[end++] = node[u];
    }
    nearStart[k + 1] = end;
  }
  return { nNodes, memberStart, member, nearStart, near: joined.slice(0, end) };
}
