// Order of elimination.
import type { SymmetricPattern } from "./pattern.ts";

/**
 * Reverse Cuthill–McKee order: order[k] is the unknown eliminated k-th.
 * @source A. George, J. W. Liu, Computer Solution of Large Sparse Positive Definite Systems, 1981, chapter 4
 */
export function orderUnknowns(pattern: SymmetricPattern): Int32Array<ArrayBuffer> {
  const { n, colStart, rowIndex } = pattern;
  const start = new Int32Array(n + 1);
  for (let j = 0; j < n; j++)
    for (let p = colStart[j] + 1; p < colStart[j + 1]; p++) {
      start[j + 1]++;
      start[rowIndex[p] + 1]++;
    }
  for (let j = 0; j < n; j++) start[j + 1] += start[j];
  const near = new Int32Array(start[n]);
  const fill = start.slice(0, n);
  for (let j = 0; j < n; j++)
    for (let p = colStart[j] + 1; p < colStart[j + 1]; p++) {
      const i = rowIndex[p];
      near[fill[j]++] = i;
      near[fill[i]++] = j;
    }
  const degree = (v: number) => start[v + 1] - start[v];
  const byDegree = Int32Array.from({ length: n }, (_, i) => i).sort((a, b) => degree(a) - degree(b) || a - b);
  const order = new Int32Array(n);
  const seen = new Uint8Array(n);
  let end = 0;
  for (const root of byDegree) {
    if (seen[root]) continue;
    seen[root] = 1;
    order[end++] = root;
    for (let k = end - 1; k < end; k++) {
      const from = end;
      for (let p = start[order[k]]; p < start[order[k] + 1]; p++)
        if (!seen[near[p]]) {
          seen[near[p]] = 1;
          order[end++] = near[p];
        }
      order.subarray(from, end).sort((a, b) => degree(a) - degree(b) || a - b);
    }
  }
  return order.reverse();
}
