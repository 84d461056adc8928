// Cholesky factor of a sparse symmetric positive definite matrix: analyse once, factor for every set of values, solve.
import { PlanError } from "../problem.ts";
import { orderUnknowns } from "./order.ts";
import type { SymmetricPattern } from "./pattern.ts";

/** What depends on the pattern alone. */
export interface SymbolicFactor {
  pattern: SymmetricPattern;
  order: Int32Array<ArrayBuffer>;
  rank: Int32Array<ArrayBuffer>;
  parent: Int32Array<ArrayBuffer>;
  start: Int32Array<ArrayBuffer>;
  upStart: Int32Array<ArrayBuffer>;
  upRow: Int32Array<ArrayBuffer>;
  upFrom: Int32Array<ArrayBuffer>;
  /** Entries of the factor, diagonal included. */
  factorEntries: number;
}

/** A factored matrix. Owns its storage; refactorInPlace overwrites it. */
export interface NumericFactor {
  symbolic: SymbolicFactor;
  row: Int32Array<ArrayBuffer>;
  value: Float64Array<ArrayBuffer>;
  /** False after a failed factorisation: solving is then refused. */
  ready: boolean;
}

/** Order and symbolic factor of a pattern. */
export function analyseSymmetric(pattern: SymmetricPattern): SymbolicFactor {
  const { n, colStart, rowIndex } = pattern;
  const order = orderUnknowns(pattern);
  const rank = new Int32Array(n);
  for (let k = 0; k < n; k++) rank[order[k]] = k;
  const upStart = new Int32Array(n + 1);
  const up = (p: number, j: number) => Math.max(rank[rowIndex[p]], rank[j]);
  for (let j = 0; j < n; j++) for (let p = colStart[j]; p < colStart[j + 1]; p++) upStart[up(p, j) + 1]++;
  for (let k = 0; k < n; k++) upStart[k + 1] += upStart[k];
  const fill = upStart.slice(0, n);
  const upRow = new Int32Array(upStart[n]);
  const upFrom = new Int32Array(upStart[n]);
  for (let j = 0; j < n; j++)
    for (let p = colStart[j]; p < colStart[j + 1]; p++) {
      const k = up(p, j);
      upRow[fill[k]] = Math.min(rank[rowIndex[p]], rank[j]);
      upFrom[fill[k]++] = p;
    }
  const parent = new Int32Array(n).fill(-1);
  const ancestor = new Int32Array(n).fill(-1);
  for (let k = 0; k < n; k++)
    for (let p = upStart[k]; p < upStart[k + 1]; p++)
      for (let i = upRow[p]; i !== -1 && i < k; ) {
        const next = ancestor[i];
        ancestor[i] = k;
        if (next === -1) parent[i] = k;
        i = next;
      }
  const count = new Int32Array(n + 1);
  const mark = new Int32Array(n).fill(-1);
  for (let k = 0; k < n; k++) {
    mark[k] = k;
    count[k + 1]++;
    for (let p = upStart[k]; p < upStart[k + 1]; p++)
      for (let i = upRow[p]; mark[i] !== k; i = parent[i]) {
        mark[i] = k;
        count[i + 1]++;
      }
  }
  for (let k = 0; k < n; k++) count[k + 1] += count[k];
  return { pattern, order, rank, parent, start: count, upStart, upRow, upFrom, factorEntries: count[n] };
}

/**
 * Factors the matrix with these values.
 * @throws PlanError not-positive-definite: facts row (caller's numbering) and pivot
 */
export function factorSymmetric(symbolic: SymbolicFactor, values: Float64Array<ArrayBuffer>): NumericFactor {
  const factor: NumericFactor = {
    symbolic,
    row: new Int32Array(symbolic.factorEntries),
    value: new Float64Array(symbolic.factorEntries),
    ready: false,
  };
  refactorInPlace(factor, values);
  return factor;
}

/**
 * Factors again with other values of the same pattern, in the storage of the factor.
 * @throws PlanError not-positive-definite: facts row (caller's numbering) and pivot
 */
export function refactorInPlace(factor: NumericFactor, values: Float64Array<ArrayBuffer>): void {
  const { row, value, symbolic } = factor;
  const { start, parent, upStart, upRow, upFrom, order } = symbolic;
  const n = order.length;
  factor.ready = false;
  const next = start.slice(0, n);
  const x = new Float64Array(n);
  const mark = new Int32Array(n).fill(-1);
  const stack = new Int32Array(n);
  const path = new Int32Array(n);
  for (let k = 0; k < n; k++) {
    let top = n;
    mark[k] = k;
    for (let p = upStart[k]; p < upStart[k + 1]; p++) {
      x[upRow[p]] += values[upFrom[p]];
      let depth = 0;
      for (let i = upRow[p]; mark[i] !== k; i = parent[i]) {
        mark[i] = k;
        path[depth++] = i;
      }
      while (depth > 0) stack[--top] = path[--depth];
    }
    let d = x[k];
    const own = d;
    x[k] = 0;
    for (; top < n; top++) {
      const i = stack[top];
      const l = x[i] / value[start[i]];
      x[i] = 0;
      for (let p = start[i] + 1; p < next[i]; p++) x[row[p]] -= value[p] * l;
      d -= l * l;
      row[next[i]] = k;
      value[next[i]++] = l;
    }
    if (!(d > 1e-14 * own))
      throw new PlanError(
        "not-positive-definite",
        `the matrix is not positive definite: pivot ${d} in row ${order[k]} (must be above 0)`,
        `row ${order[k]}`,
        { row: order[k], pivot: d },
      );
    row[next[k]] = k;
    value[next[k]++] = Math.sqrt(d);
  }
  factor.ready = true;
}

/**
 * Solves A x = b in place.
 * @shape b n × nRhs by columns: unknown i of right-hand side r at r*n + i
 */
export function solveInPlace(factor: NumericFactor, b: Float64Array<ArrayBuffer>, nRhs = 1): void {
  const { row, value } = factor;
  const { start, order } = factor.symbolic;
  const n = order.length;
  const x = new Float64Array(n);
  for (let r = 0; r < nRhs; r++) {
    for (let k = 0; k < n; k++) x[k] = b[r * n + order[k]];
    for (let k = 0; k < n; k++) {
      x[k] /= value[start[k]];
      for (let p = start[k] + 1; p < start[k + 1]; p++) x[row[p]] -= value[p] * x[k];
    }
    for (let k = n - 1; k >= 0; k--) {
      for (let p = start[k] + 1; p < start[k + 1]; p++) x[k] -= value[p] * x[row[p]];
      x[k] /= value[start[k]];
    }
    for (let k = 0; k < n; k++) b[r * n + order[k]] = x[k];
  }
}
