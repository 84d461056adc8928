// The pattern of a sparse symmetric matrix put together from elements, and where every element entry goes in its values.
// Does not hold values and does not order unknowns: factor.ts does. Source: own; rows come out ascending because
// unknowns are walked in ascending order, as in a transposition by counting.
import { PlanError } from "../problem.ts";

/**
 * Lower triangle of a symmetric n × n matrix by column: diagonal first, rows ascending, every diagonal present.
 * @shape colStart n+1, rowIndex colStart[n]; values belong to the caller, one for every rowIndex
 */
export interface SymmetricPattern {
  n: number;
  colStart: Int32Array<ArrayBuffer>;
  rowIndex: Int32Array<ArrayBuffer>;
}

/**
 * A pattern together with the places of the element entries.
 * @shape slot: the packed lower triangles of all elements one after another, entry (i ≥ j, element's own order) of
 *   element e at slotStart[e] + i(i+1)/2 + j; slotStart nElements+1.
 *   ≥ 0: add to values[slot]; -1: one of the two unknowns is held, add nothing;
 *   ≤ -2: i ≠ j name the same unknown, so (i,j) and (j,i) both fall on its diagonal: add twice to values[-2 - slot].
 */
export interface ElementPattern {
  pattern: SymmetricPattern;
  slot: Int32Array<ArrayBuffer>;
  slotStart: Uint32Array<ArrayBuffer>;
}

/**
 * Pattern of the sum of elements, each a clique of unknowns, in time linear in their pairs.
 * @shape elementStart nElements+1; elementDof: the unknowns of element e at elementStart[e] … elementStart[e+1], -1 for a
 *   held one. An unknown named twice in an element is allowed (see ElementPattern.slot; only such elements have slots ≤ -2).
 * @throws PlanError matrix-unknown: an unknown outside -1 … n-1
 */
export function buildPattern(
  n: number,
  elementStart: Uint32Array<ArrayBuffer>,
  elementDof: Int32Array<ArrayBuffer>,
): ElementPattern {
  const nE = elementStart.length - 1;
  const slotStart = new Uint32Array(nE + 1);
  for (let e = 0; e < nE; e++) {
    const k = elementStart[e + 1] - elementStart[e];
    slotStart[e + 1] = slotStart[e] + (k * (k + 1)) / 2;
  }
  const users = listUsers(n, elementStart, elementDof);
  const colStart = new Int32Array(n + 1);
  const mark = new Int32Array(n).fill(-1);
  for (let i = 0; i < n; i++) {
    mark[i] = i;
    colStart[i + 1]++;
    for (let u = users.start[i]; u < users.start[i + 1]; u++) {
      const e = users.element[u];
      for (let q = elementStart[e]; q < elementStart[e + 1]; q++) {
        const j = elementDof[q];
        if (j < 0 || j >= i || mark[j] === i) continue;
        mark[j] = i;
        colStart[j + 1]++;
      }
    }
  }
  for (let j = 0; j < n; j++) colStart[j + 1] += colStart[j];

  const rowIndex = new Int32Array(colStart[n]);
  const slot = new Int32Array(slotStart[nE]).fill(-1);
  const fill = colStart.slice(0, n);
  const place = new Int32Array(n);
  mark.fill(-1);
  for (let i = 0; i < n; i++) {
    mark[i] = i;
    place[i] = fill[i]++;
    rowIndex[place[i]] = i;
    for (let u = users.start[i]; u < users.start[i + 1]; u++) {
      const e = users.element[u];
      const first = elementStart[e];
      const p = users.position[u] - first;
      for (let q = elementStart[e]; q < elementStart[e + 1]; q++) {
        const j = elementDof[q];
        if (j < 0 || j > i) continue;
        if (mark[j] !== i) {
          mark[j] = i;
          place[j] = fill[j]++;
          rowIndex[place[j]] = i;
        }
        const k = q - first;
        if (j === i && k > p) continue;
        const pair = p > k ? (p * (p + 1)) / 2 + k : (k * (k + 1)) / 2 + p;
        slot[slotStart[e] + pair] = j === i && k !== p ? -2 - place[j] : place[j];
      }
    }
  }
  return { pattern: { n, colStart, rowIndex }, slot, slotStart };
}

/**
 * Adds the packed lower triangle of one element to the values of the matrix, slots of every kind heeded.
 * @shape entries: packed lower triangle, read from `from`; values: one for every rowIndex of the pattern
 */
export function addElementInPlace(
  values: Float64Array<ArrayBuffer>,
  where: ElementPattern,
  element: number,
  entries: Float64Array<ArrayBuffer>,
  from = 0,
): void {
  const { slot, slotStart } = where;
  const first = slotStart[element];
  const last = slotStart[element + 1];
  for (let s = first; s < last; s++) {
    const to = slot[s];
    if (to >= 0) values[to] += entries[from + s - first];
    else if (to < -1) values[-2 - to] += 2 * entries[from + s - first];
  }
}

/**
 * Product of the matrix with a vector, the upper triangle taken from the lower.
 * @shape values colStart[n], x n -> n
 */
export function multiplySymmetric(
  pattern: SymmetricPattern,
  values: Float64Array<ArrayBuffer>,
  x: Float64Array<ArrayBuffer>,
): Float64Array<ArrayBuffer> {
  const { n, colStart, rowIndex } = pattern;
  const y = new Float64Array(n);
  for (let j = 0; j < n; j++) {
    const xj = x[j];
    let sum = values[colStart[j]] * xj;
    for (let p = colStart[j] + 1; p < colStart[j + 1]; p++) {
      const i = rowIndex[p];
      sum += values[p] * x[i];
      y[i] += values[p] * xj;
    }
    y[j] += sum;
  }
  return y;
}

/** For every unknown, the elements that name it and where: the transposed element list. */
function listUsers(n: number, elementStart: Uint32Array<ArrayBuffer>, elementDof: Int32Array<ArrayBuffer>) {
  const nE = elementStart.length - 1;
  const start = new Uint32Array(n + 1);
  for (let e = 0; e < nE; e++) {
    for (let p = elementStart[e]; p < elementStart[e + 1]; p++) {
      const d = elementDof[p];
      if (d < 0) {
        if (d === -1) continue;
      } else if (d < n) {
        start[d + 1]++;
        continue;
      }
      throw new PlanError(
        "matrix-unknown",
        `element ${e} names unknown ${d}; there are ${n}: give 0 … ${n - 1}, or -1 for a held one`,
        `element ${e}`,
        { element: e, unknown: d, unknowns: n },
      );
    }
  }
  for (let d = 0; d < n; d++) start[d + 1] += start[d];
  const fill = start.slice(0, n);
  const element = new Uint32Array(start[n]);
  const position = new Uint32Array(start[n]);
  for (let e = 0; e < nE; e++) {
    for (let p = elementStart[e]; p < elementStart[e + 1]; p++) {
      const d = elementDof[p];
      if (d < 0) continue;
      element[fill[d]] = e;
      position[fill[d]++] = p;
    }
  }
  return { start, element, position };
}
