// Dense kernels on the panels of a supernodal factor. A panel keeps the w columns of a supernode as blocks of three rows,
// column by column: entry (row 3·B + lane, column k) at panel + 3·(B·w + k) + lane. The w rows of the triangle come first,
// padded to whole blocks, then the rows below it, padded likewise; padding is zero. Diagonals hold their reciprocals.
// All products are 3 × 3 blocks of dots with nine running sums: what fits the registers of a scalar engine. Places in the inner
// loops are written (p + 1) | 0: told that they wrap, the engine leaves out a check for overflow (a twentieth of the time).
// Source: left-looking blocked Cholesky, G. H. Golub, C. F. Van Loan, Matrix Computations, section 4.2; block size by measurement.

type Store = Float64Array<ArrayBuffer>;

/** Entries of a panel with w columns and r rows below the triangle. */
export function measurePanel(w: number, r: number): number {
  return 3 * w * (countBlocks(w) + countBlocks(r));
}

/** Blocks of three that hold this many rows. */
export function countBlocks(rows: number): number {
  return ((rows + 2) / 3) | 0;
}

/**
 * Cholesky factor of the triangle of a panel in place.
 * @shape floor: pivots of column k must exceed floor[floorStart + k]
 * @returns the column whose pivot fails, with the pivot left in place of its diagonal; -1 if none does
 */
export function factorTriangleInPlace(x: Store, panel: number, w: number, floor: Store, floorStart: number): number {
  for (let i0 = 0; i0 < w; i0 += 3) {
    const pi = panel + i0 * w;
    solveBlockRowInPlace(x, panel, w, pi, i0);
    let d00 = x[pi + 3 * i0];
    let d10 = x[pi + 3 * i0 + 1];
    let d20 = x[pi + 3 * i0 + 2];
    const two = i0 + 1 < w;
    const three = i0 + 2 < w;
    let d11 = two ? x[pi + 3 * i0 + 4] : 0;
    let d21 = two ? x[pi + 3 * i0 + 5] : 0;
    let d22 = three ? x[pi + 3 * i0 + 8] : 0;
    for (let p = pi, end = pi + 3 * i0; p < end; p = (p + 3) | 0) {
      const a = x[p];
      const b = x[(p + 1) | 0];
      const c = x[(p + 2) | 0];
      d00 -= a * a;
      d10 -= b * a;
      d20 -= c * a;
      d11 -= b * b;
      d21 -= c * b;
      d22 -= c * c;
    }
    const at = pi + 3 * i0;
    if (!(d00 > floor[floorStart + i0])) {
      x[at] = d00;
      return i0;
    }
    const r0 = 1 / Math.sqrt(d00);
    x[at] = r0;
    d10 *= r0;
    d20 *= r0;
    if (!two) break;
    x[at + 1] = d10;
    d11 -= d10 * d10;
    if (!(d11 > floor[floorStart + i0 + 1])) {
      x[at + 4] = d11;
      return i0 + 1;
    }
    const r1 = 1 / Math.sqrt(d11);
    x[at + 4] = r1;
    if (!three) break;
    x[at + 2] = d20;
    d21 = (d21 - d20 * d10) * r1;
    x[at + 5] = d21;
    d22 -= d20 * d20 + d21 * d21;
    if (!(d22 > floor[floorStart + i0 + 2])) {
      x[at + 8] = d22;
      return i0 + 2;
    }
    x[at + 8] = 1 / Math.sqrt(d22);
  }
  return -1;
}

/** Solves the rows below the triangle against it, in place. */
export function solveRowsInPlace(x: Store, panel: number, w: number, r: number): void {
  const below = panel + 3 * w * countBlocks(w);
  const end = below + 3 * w * countBlocks(r);
  for (let pi = below; pi < end; pi += 3 * w) solveBlockRowInPlace(x, panel, w, pi, w);
}

/** Columns 0 … columns-1 of three rows at pi, solved against the triangle. */
function solveBlockRowInPlace(x: Store, panel: number, w: number, pi: number, columns: number): void {
  for (let j0 = 0; j0 < columns; j0 += 3) {
    const pj = panel + j0 * w;
    const at = pi + 3 * j0;
    const two = j0 + 1 < columns;
    const three = j0 + 2 < columns;
    let s00 = x[at];
    let s10 = x[at + 1];
    let s20 = x[at + 2];
    let s01 = 0;
    let s11 = 0;
    let s21 = 0;
    let s02 = 0;
    let s12 = 0;
    let s22 = 0;
    if (two) {
      s01 = x[at + 3];
      s11 = x[at + 4];
      s21 = x[at + 5];
    }
    if (three) {
      s02 = x[at + 6];
      s12 = x[at + 7];
      s22 = x[at + 8];
    }
    let q = pj;
    for (let p = pi; p < at; p = (p + 3) | 0) {
      const a0 = x[p];
      const a1 = x[(p + 1) | 0];
      const a2 = x[(p + 2) | 0];
      const b0 = x[q];
      s00 -= a0 * b0;
      s10 -= a1 * b0;
      s20 -= a2 * b0;
      const b1 = x[(q + 1) | 0];
      s01 -= a0 * b1;
      s11 -= a1 * b1;
      s21 -= a2 * b1;
      const b2 = x[(q + 2) | 0];
      s02 -= a0 * b2;
      s12 -= a1 * b2;
      s22 -= a2 * b2;
      q = (q + 3) | 0;
    }
    const r0 = x[q];
    s00 *= r0;
    s10 *= r0;
    s20 *= r0;
    x[at] = s00;
    x[at + 1] = s10;
    x[at + 2] = s20;
    if (!two) return;
    const l10 = x[(q + 1) | 0];
    const r1 = x[(q + 4) | 0];
    s01 = (s01 - s00 * l10) * r1;
    s11 = (s11 - s10 * l10) * r1;
    s21 = (s21 - s20 * l10) * r1;
    x[at + 3] = s01;
    x[at + 4] = s11;
    x[at + 5] = s21;
    if (!three) return;
    const l20 = x[(q + 2) | 0];
    const l21 = x[(q + 5) | 0];
    const r2 = x[(q + 8) | 0];
    x[at + 6] = (s02 - s00 * l20 - s01 * l21) * r2;
    x[at + 7] = (s12 - s10 * l20 - s11 * l21) * r2;
    x[at + 8] = (s22 - s20 * l20 - s21 * l21) * r2;
  }
}

/** Place of column 0 of a row of a panel. */
export function findRow(panel: number, below: number, width: number, row: number): number {
  if (row < width) {
    const block = (row / 3) | 0;
    return panel + 3 * block * width + row - 3 * block;
  }
  const block = ((row - width) / 3) | 0;
  return below + 3 * block * width + (row - width) - 3 * block;
}
