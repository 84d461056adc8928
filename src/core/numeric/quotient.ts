// The quotient graph of a minimum degree elimination: variables still to be eliminated, elements that stand for eliminated
// ones, their lists in one store. What to eliminate and how degrees follow stands in order.ts.
// Source: P. Amestoy, T. Davis, I. Duff, SIAM J. Matrix Anal. Appl. 17(4), 1996, section 3.
import type { NodeGraph } from "./graph.ts";

/** Working state of the elimination. Nodes turn from variable to element when eliminated. */
export interface Quotient {
  n: number;
  /** Lists of all nodes: variable = its elements, then its variables; element = its variables. */
  list: Int32Array<ArrayBuffer>;
  free: number;
  from: Int32Array<ArrayBuffer>;
  length: Int32Array<ArrayBuffer>;
  /** Elements at the head of a variable's list. */
  elements: Int32Array<ArrayBuffer>;
  /** Unknowns in a variable; 0 for elements, merged and postponed nodes; negative while in the pivot's list. */
  weight: Int32Array<ArrayBuffer>;
  /** Approximate external degree of a variable, weight of the list of an element. */
  degree: Int32Array<ArrayBuffer>;
  /** Stamp of an element, 0 when absorbed. */
  stamp: Int32Array<ArrayBuffer>;
  /** Variables by degree, doubly linked; `before` also chains the buckets of equal hash. */
  head: Int32Array<ArrayBuffer>;
  after: Int32Array<ArrayBuffer>;
  before: Int32Array<ArrayBuffer>;
  /** Nodes merged into a node, as chains. */
  chainNext: Int32Array<ArrayBuffer>;
  chainEnd: Int32Array<ArrayBuffer>;
}

/** Every node a variable, its neighbours its list. */
export function openQuotient({ nNodes: n, nearStart, near, memberStart }: NodeGraph): Quotient {
  const size = near.length + (near.length >> 2) + 2 * n + 16;
  const list = new Int32Array(size);
  list.set(near);
  const weight = new Int32Array(n);
  const length = new Int32Array(n);
  const degree = new Int32Array(n);
  const chainEnd = new Int32Array(n);
  let total = 0;
  for (let v = 0; v < n; v++) {
    weight[v] = memberStart[v + 1] - memberStart[v];
    total += weight[v];
    length[v] = nearStart[v + 1] - nearStart[v];
    chainEnd[v] = v;
  }
  for (let v = 0; v < n; v++) for (let p = nearStart[v]; p < nearStart[v + 1]; p++) degree[v] += weight[near[p]];
  return {
    n,
    list,
    free: near.length,
    from: nearStart.slice(0, n),
    length,
    elements: new Int32Array(n),
    weight,
    degree,
    stamp: new Int32Array(n).fill(1),
    head: new Int32Array(total + 1).fill(-1),
    after: new Int32Array(n).fill(-1),
    before: new Int32Array(n).fill(-1),
    chainNext: new Int32Array(n).fill(-1),
    chainEnd,
  };
}

/** Enters a variable in the list of its degree. */
export function enlist({ head, after, before, degree }: Quotient, v: number): void {
  const first = head[degree[v]];
  after[v] = first;
  before[v] = -1;
  if (first !== -1) before[first] = v;
  head[degree[v]] = v;
}

/** Takes a variable out of the list of its degree. */
export function delist({ head, after, before, degree }: Quotient, v: number): void {
  if (after[v] !== -1) before[after[v]] = before[v];
  if (before[v] !== -1) after[before[v]] = after[v];
  else head[degree[v]] = after[v];
}

/** Moves all living lists to the front of the store. */
export function packLists(q: Quotient): void {
  const { n, list, from, length, weight, stamp, elements } = q;
  // the first entry of a list is kept in `from` while its place holds the owner's name
  for (let v = 0; v < n; v++) {
    const living = length[v] > 0 && (weight[v] !== 0 || (elements[v] < 0 && stamp[v] !== 0));
    if (!living) {
      length[v] = 0;
      continue;
    }
    const p = from[v];
    from[v] = list[p];
    list[p] = -1 - v;
  }
  let to = 0;
  for (let p = 0; p < q.free; ) {
    const owner = -1 - list[p++];
    if (owner < 0) continue;
    list[to] = from[owner];
    from[owner] = to++;
    for (let k = 1; k < length[owner]; k++) list[to++] = list[p++];
  }
  q.free = to;
}

/** Eliminates v together with another node: the one it cannot be told from, or the pivot. */
export function mergeInto(q: Quotient, v: number, into: number): void {
  q.weight[v] = 0;
  q.length[v] = 0;
  q.elements[v] = 0;
  q.chainNext[q.chainEnd[into]] = v;
  q.chainEnd[into] = q.chainEnd[v];
}
