// Which columns of the factor are kept together, in what order they are eliminated, and the rows below each of them.
// Works on the joined nodes of graph.ts. Holds no values.
import type { NodeGraph } from "./graph.ts";

/**
 * Supernodes in the order of elimination (children before parents, their unknowns consecutive).
 * @shape order n: unknown at a position; first nS+1: first position of a supernode; parent nS, -1 at a root;
 *   rowStart nS+1, row: positions below the columns of supernode s, ascending, at rowStart[s] … rowStart[s+1]
 */
export interface Supernodes {
  nS: number;
  order: Int32Array<ArrayBuffer>;
  first: Int32Array<ArrayBuffer>;
  parent: Int32Array<ArrayBuffer>;
  rowStart: Int32Array<ArrayBuffer>;
  row: Int32Array<ArrayBuffer>;
}

/** Widths up to `width` may carry this share of zeros when a child is joined to its parent. */
const ZERO_SHARE: readonly { width: number; share: number }[] = [
  { width: 6, share: 0.6 },
  { width: 16, share: 0.3 },
  { width: 48, share: 0.1 },
  { width: Number.POSITIVE_INFINITY, share: 0.03 },
];

/**
 * Supernodes of the factor for an elimination order of the nodes.
 * @source elimination tree: J. W. Liu, The role of elimination trees in sparse factorization, SIAM J. Matrix Anal. Appl. 11,
 *   1990; joining of small supernodes: I. Duff, J. Reid, The multifrontal solution of indefinite sparse symmetric linear
 *   equations, ACM Trans. Math. Softw. 9, 1983. differs: shares of zeros found by measurement
 */
export function buildSupernodes(graph: NodeGraph, nodeOrder: Int32Array<ArrayBuffer>): Supernodes {
  const n = graph.nNodes;
  const rank = new Int32Array(n);
  for (let k = 0; k < n; k++) rank[nodeOrder[k]] = k;
  const { parent, front } = measureFronts(graph, nodeOrder, rank);
  const width = new Int32Array(n);
  for (let k = 0; k < n; k++) width[k] = weightOf(graph, nodeOrder[k]);
  const joined = joinNodes(parent, width, front);
  const heads = orderHeads(parent, joined);
  return layOut(graph, nodeOrder, rank, { parent, joined, width, front, heads });
}

function weightOf({ memberStart }: NodeGraph, v: number): number {
  return memberStart[v + 1] - memberStart[v];
}

/** Elimination tree over ranks, and the unknowns from each node down its column of the factor, itself included. */
function measureFronts(graph: NodeGraph, nodeOrder: Int32Array<ArrayBuffer>, rank: Int32Array<ArrayBuffer>) {
  const { nNodes: n, nearStart, near } = graph;
  const parent = new Int32Array(n).fill(-1);
  const ancestor = new Int32Array(n).fill(-1);
  for (let k = 0; k < n; k++) {
    const v = nodeOrder[k];
    for (let p = nearStart[v]; p < nearStart[v + 1]; p++)
      for (let i = rank[near[p]]; i < k && i !== -1; ) {
        const next = ancestor[i];
        ancestor[i] = k;
        if (next === -1) parent[i] = k;
        i = next;
      }
  }
  const front = new Int32Array(n);
  const mark = new Int32Array(n).fill(-1);
  for (let k = 0; k < n; k++) {
    const v = nodeOrder[k];
    const own = weightOf(graph, v);
    mark[k] = k;
    front[k] += own;
    for (let p = nearStart[v]; p < nearStart[v + 1]; p++)
      for (let i = rank[near[p]]; i < k && mark[i] !== k; i = parent[i]) {
        mark[i] = k;
        front[i] += own;
      }
  }
  return { parent, front };
}

/** Joins nodes to their parents where that costs few zeros; width and front of a head grow. 1 where joined to the parent. */
function joinNodes(
  parent: Int32Array<ArrayBuffer>,
  width: Int32Array<ArrayBuffer>,
  front: Int32Array<ArrayBuffer>,
): Uint8Array<ArrayBuffer> {
  const n = parent.length;
  const { childStart, child } = listChildren(parent);
  const joined = new Uint8Array(n);
  const zeros = new Float64Array(n);
  const size = (w: number, f: number) => w * f - (w * (w - 1)) / 2;
  for (let p = 0; p < n; p++)
    for (let exact = 1; exact >= 0; exact--)
      for (let q = childStart[p]; q < childStart[p + 1]; q++) {
        const c = child[q];
        if (joined[c]) continue;
        const w = width[c] + width[p];
        const f = width[c] + front[p];
        const filled = size(width[c], front[c]) - zeros[c] + size(width[p], front[p]) - zeros[p];
        const empty = size(w, f) - filled;
        let rule = 0;
        while (w > ZERO_SHARE[rule].width) rule++;
        if (exact ? front[c] !== f : empty > ZERO_SHARE[rule].share * size(w, f)) continue;
        joined[c] = 1;
        width[p] = w;
        front[p] = f;
        zeros[p] = empty;
      }
  return joined;
}

function listChildren(parent: Int32Array<ArrayBuffer>) {
  const n = parent.length;
  const childStart = new Int32Array(n + 1);
  for (let k = 0; k < n; k++) if (parent[k] >= 0) childStart[parent[k] + 1]++;
  for (let k = 0; k < n; k++) childStart[k + 1] += childStart[k];
  const fill = childStart.slice(0, n);
  const child = new Int32Array(childStart[n]);
  for (let k = 0; k < n; k++) if (parent[k] >= 0) child[fill[parent[k]]++] = k;
  return { childStart, child };
}

/** Heads of the supernodes in postorder, the child with the most descendants first so that few fronts stay open. */
function orderHeads(parent: Int32Array<ArrayBuffer>, joined: Uint8Array<ArrayBuffer>) {
  const n = parent.length;
  const headOf = new Int32Array(n);
  let nS = 0;
  for (let k = n - 1; k >= 0; k--) {
    headOf[k] = joined[k] ? headOf[parent[k]] : k;
    if (!joined[k]) nS++;
  }
  const up = new Int32Array(n).fill(-1);
  const size = new Int32Array(n);
  const heavy = new Int32Array(n).fill(-1);
  for (let k = 0; k < n; k++) {
    size[k]++;
    if (parent[k] < 0) continue;
    size[parent[k]] += size[k];
    if (!joined[k]) up[k] = headOf[parent[k]];
  }
  const { childStart, child } = listChildren(up);
  for (let k = 0; k < n; k++) if (up[k] >= 0 && (heavy[up[k]] < 0 || size[k] > size[heavy[up[k]]])) heavy[up[k]] = k;
  const heads = new Int32Array(nS);
  const stack = new Int32Array(nS);
  // reversed preorder with the heavy child visited last is a postorder with the heavy child first
  let at = nS;
  let top = 0;
  for (let k = 0; k < n; k++) if (!joined[k] && up[k] < 0) stack[top++] = k;
  while (top > 0) {
    const k = stack[--top];
    heads[--at] = k;
    if (heavy[k] >= 0) stack[top++] = heavy[k];
    for (let q = childStart[k]; q < childStart[k + 1]; q++) if (child[q] !== heavy[k]) stack[top++] = child[q];
  }
  return { heads, headOf, up };
}

interface Tree {
  parent: Int32Array<ArrayBuffer>;
  joined: Uint8Array<ArrayBuffer>;
  width: Int32Array<ArrayBuffer>;
  front: Int32Array<ArrayBuffer>;
  heads: ReturnType<typeof orderHeads>;
}

/** Final positions and the rows of every supernode. */
function layOut(
  graph: NodeGraph,
  nodeOrder: Int32Array<ArrayBuffer>,
  rank: Int32Array<ArrayBuffer>,
  { width, front, heads: { heads, headOf, up } }: Tree,
): Supernodes {
  const { nNodes: n, nearStart, near, memberStart, member } = graph;
  const nS = heads.length;
  const index = new Int32Array(n).fill(-1);
  const first = new Int32Array(nS + 1);
  const rowStart = new Int32Array(nS + 1);
  for (let s = 0; s < nS; s++) {
    index[heads[s]] = s;
    first[s + 1] = first[s] + width[heads[s]];
    rowStart[s + 1] = rowStart[s] + front[heads[s]] - width[heads[s]];
  }
  const parent = new Int32Array(nS);
  for (let s = 0; s < nS; s++) parent[s] = up[heads[s]] < 0 ? -1 : index[up[heads[s]]];

  // nodes by supernode, within it by rank; then unknowns
  const superOf = new Int32Array(n);
  const count = new Int32Array(nS + 1);
  for (let k = 0; k < n; k++) {
    superOf[k] = index[headOf[k]];
    count[superOf[k] + 1]++;
  }
  for (let s = 0; s < nS; s++) count[s + 1] += count[s];
  const sorted = new Int32Array(n);
  for (let k = 0; k < n; k++) sorted[count[superOf[k]]++] = k;
  const order = new Int32Array(first[nS]);
  const row = new Int32Array(rowStart[nS]);
  const fill = rowStart.slice(0, nS);
  const mark = new Int32Array(nS).fill(-1);
  let at = 0;
  for (let i = 0; i < n; i++) {
    const k = sorted[i];
    const v = nodeOrder[k];
    const own = superOf[k];
    const from = at;
    for (let p = memberStart[v]; p < memberStart[v + 1]; p++) order[at++] = member[p];
    mark[own] = i;
    for (let p = nearStart[v]; p < nearStart[v + 1]; p++) {
      // a neighbour eliminated earlier lies in this supernode or below it in the tree
      if (rank[near[p]] > k) continue;
      for (let s = superOf[rank[near[p]]]; mark[s] !== i; s = parent[s]) {
        mark[s] = i;
        for (let q = from; q < at; q++) row[fill[s]++] = q;
      }
    }
  }
  return { nS, order, first, parent, rowStart, row };
}
