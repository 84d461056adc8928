// The update of a supernode, added straight to its parent: products of the rows below the triangle, less what children left.
// Layout of a panel: panel.ts.
import { countBlocks, findRow } from "./panel.ts";

type Store = Float64Array<ArrayBuffer>;

/** Where the update of a supernode goes. */
export interface UpdateTarget {
  /** Own rows below the triangle: first block, columns, rows. */
  below: number;
  w: number;
  r: number;
  /** Own trailing triangle received from children, packed by rows; -1 if there were none. */
  own: number;
  /** Place of own row k among the rows of the parent: rel[relStart + k], ascending. */
  rel: Int32Array<ArrayBuffer>;
  relStart: number;
  /** Panel, width and trailing triangle of the parent. */
  panel: number;
  width: number;
  trail: number;
}

/** Adds (received triangle - B·Bᵀ) of a supernode to the panel and the trailing triangle of its parent. */
// biome-ignore lint/complexity/noExcessiveLinesPerFunction: the running sums go straight to the parent; parted in two it takes a tenth longer
export function updateParentInPlace(x: Store, target: UpdateTarget): void {
  const { below, w, r, own, rel, relStart, panel, width, trail } = target;
  const belowParent = panel + 3 * width * countBlocks(width);
  const stride = 3 * w;
  let split = 0;
  while (split < r && rel[relStart + split] < width) split++;
  for (let i0 = 0, pi = below; i0 < r; i0 += 3, pi += stride) {
    const rows = Math.min(3, r - i0);
    // base of parent row a: panel entries at base + 3·column, trailing entries at base + column
    const g0 = rel[relStart + i0];
    const g1 = rel[relStart + (rows > 1 ? i0 + 1 : i0)];
    const g2 = rel[relStart + (rows > 2 ? i0 + 2 : i0)];
    const p0 = findRow(panel, belowParent, width, g0);
    const p1 = findRow(panel, belowParent, width, g1);
    const p2 = findRow(panel, belowParent, width, g2);
    const t0 = trail + (((g0 - width) * (g0 - width + 1)) >> 1) - width;
    const t1 = trail + (((g1 - width) * (g1 - width + 1)) >> 1) - width;
    const t2 = trail + (((g2 - width) * (g2 - width + 1)) >> 1) - width;
    const o0 = own + ((i0 * (i0 + 1)) >> 1);
    const o1 = o0 + i0 + 1;
    const o2 = o1 + i0 + 2;
    for (let j0 = 0, pj = below; j0 <= i0; j0 += 3, pj += stride) {
      let s00 = 0;
      let s10 = 0;
      let s20 = 0;
      let s01 = 0;
      let s11 = 0;
      let s21 = 0;
      let s02 = 0;
      let s12 = 0;
      let s22 = 0;
      let q = pj;
      for (let p = pi, end = pi + stride; p < end; p = (p + 3) | 0) {
        const a0 = x[p];
        const a1 = x[(p + 1) | 0];
        const a2 = x[(p + 2) | 0];
        const b0 = x[q];
        s00 += a0 * b0;
        s10 += a1 * b0;
        s20 += a2 * b0;
        const b1 = x[(q + 1) | 0];
        s01 += a0 * b1;
        s11 += a1 * b1;
        s21 += a2 * b1;
        const b2 = x[(q + 2) | 0];
        s02 += a0 * b2;
        s12 += a1 * b2;
        s22 += a2 * b2;
        q = (q + 3) | 0;
      }
      const whole = j0 < i0;
      const inPanel = j0 + 3 <= split;
      if (rows === 3 && whole && (inPanel || j0 >= split)) {
        if (own >= 0) {
          s00 -= x[o0 + j0];
          s01 -= x[o0 + j0 + 1];
          s02 -= x[o0 + j0 + 2];
          s10 -= x[o1 + j0];
          s11 -= x[o1 + j0 + 1];
          s12 -= x[o1 + j0 + 2];
          s20 -= x[o2 + j0];
          s21 -= x[o2 + j0 + 1];
          s22 -= x[o2 + j0 + 2];
        }
        let c0 = rel[relStart + j0];
        let c1 = rel[relStart + j0 + 1];
        let c2 = rel[relStart + j0 + 2];
        let b0 = t0;
        let b1 = t1;
        let b2 = t2;
        if (inPanel) {
          c0 *= 3;
          c1 *= 3;
          c2 *= 3;
          b0 = p0;
          b1 = p1;
          b2 = p2;
        }
        x[b0 + c0] -= s00;
        x[b0 + c1] -= s01;
        x[b0 + c2] -= s02;
        x[b1 + c0] -= s10;
        x[b1 + c1] -= s11;
        x[b1 + c2] -= s12;
        x[b2 + c0] -= s20;
        x[b2 + c1] -= s21;
        x[b2 + c2] -= s22;
        continue;
      }
      // edges: fewer than three rows, the diagonal block, columns on both sides of the parent's triangle
      for (let b = 0; b < 3 && j0 + b < r; b++) {
        const c = rel[relStart + j0 + b];
        const left = j0 + b < split;
        const col = left ? 3 * c : c;
        const m0 = b === 0 ? s00 : b === 1 ? s01 : s02;
        const m1 = b === 0 ? s10 : b === 1 ? s11 : s12;
        const m2 = b === 0 ? s20 : b === 1 ? s21 : s22;
        if (whole || b === 0) x[(left ? p0 : t0) + col] -= own >= 0 ? m0 - x[o0 + j0 + b] : m0;
        if (rows > 1 && (whole || b <= 1)) x[(left ? p1 : t1) + col] -= own >= 0 ? m1 - x[o1 + j0 + b] : m1;
        if (rows > 2) x[(left ? p2 : t2) + col] -= own >= 0 ? m2 - x[o2 + j0 + b] : m2;
      }
    }
  }
}
