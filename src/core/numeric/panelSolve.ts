// Triangular solves with the panels of a supernodal factor (layout: panel.ts), for one or three right-hand sides at a time.
// y holds the right-hand sides by position, interleaved: side c of position i at 3·i + c, or at i for one side.
import { countBlocks } from "./panel.ts";

type Store = Float64Array<ArrayBuffer>;

/** The part of a factor that belongs to one supernode. */
export interface PanelPlace {
  panel: number;
  /** First position and number of its columns. */
  first: number;
  w: number;
  row: Int32Array<ArrayBuffer>;
  rowStart: number;
  rowEnd: number;
}

/** One step of L y = b: the columns of a panel are solved and taken off the rows below, one right-hand side. */
export function forwardOneInPlace(x: Store, place: PanelPlace, y: Store): void {
  const { panel, first, w, row, rowStart, rowEnd } = place;
  for (let i = 0; i < w; i++) {
    const block = (i / 3) | 0;
    let p = panel + 3 * block * w + i - 3 * block;
    let sum = y[first + i];
    for (let k = 0; k < i; k++, p += 3) sum -= x[p] * y[first + k];
    y[first + i] = sum * x[p];
  }
  let p = panel + 3 * w * countBlocks(w);
  for (let i = rowStart; i < rowEnd; i += 3) {
    let s0 = 0;
    let s1 = 0;
    let s2 = 0;
    for (let k = first; k < first + w; k++, p += 3) {
      const z = y[k];
      s0 += x[p] * z;
      s1 += x[p + 1] * z;
      s2 += x[p + 2] * z;
    }
    y[row[i]] -= s0;
    if (i + 1 < rowEnd) y[row[i + 1]] -= s1;
    if (i + 2 < rowEnd) y[row[i + 2]] -= s2;
  }
}

/** One step of Lᵀ y = b: the rows below are taken off the columns of a panel, which are then solved, one right-hand side. */
export function backwardOneInPlace(x: Store, place: PanelPlace, y: Store): void {
  const { panel, first, w, row, rowStart, rowEnd } = place;
  let p = panel + 3 * w * countBlocks(w);
  for (let i = rowStart; i < rowEnd; i += 3) {
    const z0 = y[row[i]];
    const z1 = i + 1 < rowEnd ? y[row[i + 1]] : 0;
    const z2 = i + 2 < rowEnd ? y[row[i + 2]] : 0;
    for (let k = first; k < first + w; k++, p += 3) y[k] -= x[p] * z0 + x[p + 1] * z1 + x[p + 2] * z2;
  }
  for (let i = w - 1; i >= 0; i--) {
    const block = (i / 3) | 0;
    let q = panel + 3 * block * w + i - 3 * block;
    const z = y[first + i] * x[q + 3 * i];
    y[first + i] = z;
    for (let k = first; k < first + i; k++, q += 3) y[k] -= x[q] * z;
  }
}

/** forwardOneInPlace for three right-hand sides. */
export function forwardThreeInPlace(x: Store, place: PanelPlace, y: Store): void {
  const { panel, first, w, row, rowStart, rowEnd } = place;
  const f = 3 * first;
  for (let i = 0; i < w; i++) {
    const block = (i / 3) | 0;
    let p = panel + 3 * block * w + i - 3 * block;
    let s0 = y[f + 3 * i];
    let s1 = y[f + 3 * i + 1];
    let s2 = y[f + 3 * i + 2];
    for (let k = f; k < f + 3 * i; k += 3, p += 3) {
      const l = x[p];
      s0 -= l * y[k];
      s1 -= l * y[k + 1];
      s2 -= l * y[k + 2];
    }
    const r = x[p];
    y[f + 3 * i] = s0 * r;
    y[f + 3 * i + 1] = s1 * r;
    y[f + 3 * i + 2] = s2 * r;
  }
  let p = panel + 3 * w * countBlocks(w);
  for (let i = rowStart; i < rowEnd; i += 3) {
    let s00 = 0;
    let s01 = 0;
    let s02 = 0;
    let s10 = 0;
    let s11 = 0;
    let s12 = 0;
    let s20 = 0;
    let s21 = 0;
    let s22 = 0;
    for (let k = f; k < f + 3 * w; k += 3, p += 3) {
      const l0 = x[p];
      const l1 = x[p + 1];
      const l2 = x[p + 2];
      const z0 = y[k];
      const z1 = y[k + 1];
      const z2 = y[k + 2];
      s00 += l0 * z0;
      s01 += l0 * z1;
      s02 += l0 * z2;
      s10 += l1 * z0;
      s11 += l1 * z1;
      s12 += l1 * z2;
      s20 += l2 * z0;
      s21 += l2 * z1;
      s22 += l2 * z2;
    }
    const r0 = 3 * row[i];
    y[r0] -= s00;
    y[r0 + 1] -= s01;
    y[r0 + 2] -= s02;
    if (i + 1 >= rowEnd) break;
    const r1 = 3 * row[i + 1];
    y[r1] -= s10;
    y[r1 + 1] -= s11;
    y[r1 + 2] -= s12;
    if (i + 2 >= rowEnd) break;
    const r2 = 3 * row[i + 2];
    y[r2] -= s20;
    y[r2 + 1] -= s21;
    y[r2 + 2] -= s22;
  }
}

/** backwardOneInPlace for three right-hand sides. */
export function backwardThreeInPlace(x: Store, place: PanelPlace, y: Store): void {
  const { panel, first, w, row, rowStart, rowEnd } = place;
  const f = 3 * first;
  let p = panel + 3 * w * countBlocks(w);
  for (let i = rowStart; i < rowEnd; i += 3) {
    // a missing row repeats the first one: its entries in the panel are zero
    const r0 = 3 * row[i];
    const r1 = i + 1 < rowEnd ? 3 * row[i + 1] : r0;
    const r2 = i + 2 < rowEnd ? 3 * row[i + 2] : r0;
    const z00 = y[r0];
    const z01 = y[r0 + 1];
    const z02 = y[r0 + 2];
    const z10 = y[r1];
    const z11 = y[r1 + 1];
    const z12 = y[r1 + 2];
    const z20 = y[r2];
    const z21 = y[r2 + 1];
    const z22 = y[r2 + 2];
    for (let k = f; k < f + 3 * w; k += 3, p += 3) {
      const l0 = x[p];
      const l1 = x[p + 1];
      const l2 = x[p + 2];
      y[k] -= l0 * z00 + l1 * z10 + l2 * z20;
      y[k + 1] -= l0 * z01 + l1 * z11 + l2 * z21;
      y[k + 2] -= l0 * z02 + l1 * z12 + l2 * z22;
    }
  }
  for (let i = w - 1; i >= 0; i--) {
    const block = (i / 3) | 0;
    let q = panel + 3 * block * w + i - 3 * block;
    const r = x[q + 3 * i];
    const z0 = y[f + 3 * i] * r;
    const z1 = y[f + 3 * i + 1] * r;
    const z2 = y[f + 3 * i + 2] * r;
    y[f + 3 * i] = z0;
    y[f + 3 * i + 1] = z1;
    y[f + 3 * i + 2] = z2;
    for (let k = f; k < f + 3 * i; k += 3, q += 3) {
      const l = x[q];
      y[k] -= l * z0;
      y[k + 1] -= l * z1;
      y[k + 2] -= l * z2;
    }
  }
}
