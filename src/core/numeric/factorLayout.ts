// Where the parts of a supernodal factor lie in its one store: panels, trailing triangles, matrix entries.
// Layout of a panel: panel.ts. Source: own; stacks after J. W. Liu, SIAM Review 34, 1992.
import { countBlocks } from "./panel.ts";
import type { SymmetricPattern } from "./pattern.ts";
import type { Supernodes } from "./supernodes.ts";

/**
 * Places of the trailing triangles: only the ancestors of the supernode at work are open, so those of one parity of depth come
 * and go as on a stack.
 */
export function placeTrails({ nS, parent, rowStart }: Supernodes, panelEntries: number) {
  const trail = new Int32Array(nS).fill(-1);
  const parity = new Uint8Array(nS);
  for (let s = nS - 1; s >= 0; s--) parity[s] = parent[s] < 0 ? 0 : 1 - parity[parent[s]];
  const size = (s: number) => ((rowStart[s + 1] - rowStart[s]) * (rowStart[s + 1] - rowStart[s] + 1)) / 2;
  const top = [0, 0];
  const most = [0, 0];
  for (let s = 0; s < nS; s++) {
    const q = parent[s];
    if (q >= 0 && trail[q] < 0) {
      const side = parity[q];
      trail[q] = top[side];
      top[side] += size(q);
      most[side] = Math.max(most[side], top[side]);
    }
    if (trail[s] >= 0) top[parity[s]] = trail[s];
  }
  for (let s = 0; s < nS; s++) if (trail[s] >= 0) trail[s] += panelEntries + (parity[s] === 0 ? 0 : most[0]);
  return { trail, storeEntries: panelEntries + most[0] + most[1] };
}

/** For every row of a supernode its place among the columns and rows of the parent. */
export function relateRows({ nS, first, parent, rowStart, row }: Supernodes): Int32Array<ArrayBuffer> {
  const rel = new Int32Array(row.length);
  for (let s = 0; s < nS; s++) {
    const q = parent[s];
    if (q < 0) continue;
    const w = first[q + 1] - first[q];
    let at = rowStart[q];
    for (let p = rowStart[s]; p < rowStart[s + 1]; p++) {
      if (row[p] < first[q + 1]) {
        rel[p] = row[p] - first[q];
        continue;
      }
      while (row[at] < row[p]) at++;
      rel[p] = w + at - rowStart[q];
    }
  }
  return rel;
}

/** Place in the store of every entry of the pattern. */
export function placeEntries(
  { n, colStart, rowIndex }: SymmetricPattern,
  { nS, first, rowStart, row }: Supernodes,
  position: Int32Array<ArrayBuffer>,
  panel: Int32Array<ArrayBuffer>,
): Int32Array<ArrayBuffer> {
  const superOf = new Int32Array(n);
  for (let s = 0; s < nS; s++) superOf.fill(s, first[s], first[s + 1]);
  const into = new Int32Array(colStart[n]);
  for (let j = 0; j < n; j++)
    for (let p = colStart[j]; p < colStart[j + 1]; p++) {
      const a = position[j];
      const b = position[rowIndex[p]];
      const column = Math.min(a, b);
      const at = Math.max(a, b);
      const s = superOf[column];
      const w = first[s + 1] - first[s];
      let i = at - first[s];
      let base = panel[s];
      if (i >= w) {
        base += 3 * w * countBlocks(w);
        let low = rowStart[s];
        let high = rowStart[s + 1] - 1;
        while (low < high) {
          const middle = (low + high) >> 1;
          if (row[middle] < at) low = middle + 1;
          else high = middle;
        }
        i = low - rowStart[s];
      }
      into[p] = base + 3 * (((i / 3) | 0) * w + column - first[s]) + (i % 3);
    }
  return into;
}
