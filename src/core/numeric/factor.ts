// Cholesky factor of a sparse symmetric positive definite matrix: analyse a pattern once, factor it for every set of values,
// solve for any number of right-hand sides. Supernodal and multifrontal: every supernode adds its update straight to the
// panel and the trailing triangle of its parent. Does not pivot and does not factor indefinite matrices: it names the row.
// Source: J. W. Liu, The multifrontal method for sparse matrix solution: theory and practice, SIAM Review 34, 1992;
// differs: update and assembly in one sweep, trailing triangles of even and odd depth on two stacks.
import { PlanError } from "../problem.ts";
import { placeEntries, placeTrails, relateRows } from "./factorLayout.ts";
import { buildNodeGraph } from "./graph.ts";
import { orderNodes } from "./order.ts";
import { countBlocks, factorTriangleInPlace, measurePanel, solveRowsInPlace } from "./panel.ts";
import {
  backwardOneInPlace,
  backwardThreeInPlace,
  forwardOneInPlace,
  forwardThreeInPlace,
  type PanelPlace,
} from "./panelSolve.ts";
import { updateParentInPlace } from "./panelUpdate.ts";
import type { SymmetricPattern } from "./pattern.ts";
import { buildSupernodes, type Supernodes } from "./supernodes.ts";

/** What an analysis is given beside the pattern. */
export interface AnalyseOptions {
  /** A pivot must exceed this share of its own diagonal entry; below it the matrix counts as singular. Default 1e-13. */
  pivotFloor?: number;
}

/**
 * All that depends on the pattern alone; may serve any number of factors.
 * @shape position n: elimination position of an unknown; panel nS: place of a panel in the store; trail nS: place of the
 *   trailing triangle, -1 if no child writes to it; rel: places of a supernode's rows among its parent's, as rowStart;
 *   into: place in the store of every entry of the pattern
 */
export interface SymbolicFactor {
  pattern: SymmetricPattern;
  pivotFloor: number;
  supernodes: Supernodes;
  position: Int32Array<ArrayBuffer>;
  panel: Int32Array<ArrayBuffer>;
  trail: Int32Array<ArrayBuffer>;
  rel: Int32Array<ArrayBuffer>;
  into: Int32Array<ArrayBuffer>;
  /** Entries of all panels, and of panels and stacks together. */
  panelEntries: number;
  storeEntries: number;
  /** Entries of the factor, zeros of joined supernodes included, padding not. */
  factorEntries: number;
  /** Multiply-add pairs of one factorisation, about. */
  work: number;
}

/** Places in the store are 32-bit numbers. */
const MOST_ENTRIES = 2 ** 31 - 1;

/** A factored matrix. Owns its storage; refactorInPlace overwrites it. */
export interface NumericFactor {
  symbolic: SymbolicFactor;
  store: Float64Array<ArrayBuffer>;
  /** Least pivot allowed, by position. */
  floor: Float64Array<ArrayBuffer>;
  /** Right-hand sides by position. */
  side: Float64Array<ArrayBuffer>;
  /** False after a failed factorisation: solving is then refused. */
  ready: boolean;
}

/**
 * Order of elimination and structure of the factor of a pattern.
 * @throws PlanError matrix-pattern: a column without its diagonal first or with rows not ascending; matrix-memory: more than
 *   2^31 - 1 entries
 */
export function analyseSymmetric(pattern: SymmetricPattern, options: AnalyseOptions = {}): SymbolicFactor {
  checkPattern(pattern);
  const graph = buildNodeGraph(pattern);
  const supernodes = buildSupernodes(graph, orderNodes(graph));
  const { nS, order, first, rowStart } = supernodes;
  const position = new Int32Array(pattern.n);
  for (let k = 0; k < pattern.n; k++) position[order[k]] = k;
  const panel = new Int32Array(nS);
  let panelEntries = 0;
  let factorEntries = 0;
  let work = 0;
  for (let s = 0; s < nS; s++) {
    const w = first[s + 1] - first[s];
    const r = rowStart[s + 1] - rowStart[s];
    panel[s] = panelEntries;
    panelEntries += measurePanel(w, r);
    factorEntries += (w * (w + 1)) / 2 + w * r;
    work += (w * w * w) / 6 + (w * w * r) / 2 + (w * r * (r + 1)) / 2;
  }
  const { trail, storeEntries } = placeTrails(supernodes, panelEntries);
  if (storeEntries > MOST_ENTRIES) throw tooLarge(pattern.n, storeEntries);
  const rel = relateRows(supernodes);
  const into = placeEntries(pattern, supernodes, position, panel);
  const pivotFloor = options.pivotFloor ?? 1e-13;
  return {
    ...{ pattern, pivotFloor, supernodes, position, panel, trail, rel, into },
    ...{ panelEntries, storeEntries, factorEntries, work },
  };
}

/**
 * Factors the matrix with these values.
 * @shape values: one for every rowIndex of the pattern
 * @throws PlanError not-positive-definite: facts row (caller's numbering), pivot; matrix-memory; matrix-values
 */
export function factorSymmetric(symbolic: SymbolicFactor, values: Float64Array<ArrayBuffer>): NumericFactor {
  const n = symbolic.pattern.n;
  let store: Float64Array<ArrayBuffer>;
  try {
    store = new Float64Array(symbolic.storeEntries);
  } catch {
    throw tooLarge(n, symbolic.storeEntries);
  }
  const factor: NumericFactor = {
    symbolic,
    store,
    floor: new Float64Array(n),
    side: new Float64Array(3 * n),
    ready: false,
  };
  refactorInPlace(factor, values);
  return factor;
}

/**
 * Factors again with other values of the same pattern, in the storage of the factor.
 * @throws PlanError not-positive-definite: facts row (caller's numbering) and pivot; the factor is then not usable until
 *   the next refactorInPlace that holds. matrix-values: values of another length than the pattern
 */
export function refactorInPlace(factor: NumericFactor, values: Float64Array<ArrayBuffer>): void {
  const failed = tryRefactorInPlace(factor, values);
  if (failed < 0) return;
  const { symbolic, store } = factor;
  const { supernodes, panel, position } = symbolic;
  const k = position[failed];
  let s = 0;
  while (supernodes.first[s + 1] <= k) s++;
  const w = supernodes.first[s + 1] - supernodes.first[s];
  const i = k - supernodes.first[s];
  const pivot = store[panel[s] + 3 * (((i / 3) | 0) * w + i) + (i % 3)];
  throw new PlanError(
    "not-positive-definite",
    `the matrix is not positive definite: the pivot of unknown ${failed} is ${pivot}, it must exceed ${factor.floor[k]}: the structure can move freely there or is unstable`,
    `unknown ${failed}`,
    { row: failed, pivot, floor: factor.floor[k] },
  );
}

/**
 * Like refactorInPlace, but hands back the unknown whose pivot fails instead of throwing, for methods that then shift.
 * @returns the failing unknown in the caller's numbering, -1 when the factor holds
 * @throws PlanError matrix-values: values of another length than the pattern
 */
export function tryRefactorInPlace(factor: NumericFactor, values: Float64Array<ArrayBuffer>): number {
  const { symbolic, store, floor } = factor;
  const { pattern, supernodes, into, panel, trail, rel, panelEntries, position, pivotFloor } = symbolic;
  const { nS, first, parent, rowStart, order } = supernodes;
  if (values.length !== into.length)
    throw new PlanError("matrix-values", `${values.length} values for a pattern of ${into.length} entries`, [], {
      values: values.length,
      entries: into.length,
    });
  factor.ready = false;
  store.fill(0, 0, panelEntries);
  for (let p = 0; p < values.length; p++) store[into[p]] = values[p];
  for (let j = 0; j < pattern.n; j++) floor[position[j]] = pivotFloor * values[pattern.colStart[j]];
  const open = new Uint8Array(nS);
  for (let s = 0; s < nS; s++) {
    const w = first[s + 1] - first[s];
    const r = rowStart[s + 1] - rowStart[s];
    const failed = factorTriangleInPlace(store, panel[s], w, floor, first[s]);
    if (failed >= 0) return order[first[s] + failed];
    if (r === 0) continue;
    solveRowsInPlace(store, panel[s], w, r);
    const q = parent[s];
    if (!open[q] && trail[q] >= 0) {
      const rq = rowStart[q + 1] - rowStart[q];
      store.fill(0, trail[q], trail[q] + (rq * (rq + 1)) / 2);
    }
    open[q] = 1;
    updateParentInPlace(store, {
      below: panel[s] + 3 * w * countBlocks(w),
      w,
      r,
      own: trail[s],
      rel,
      relStart: rowStart[s],
      panel: panel[q],
      width: first[q + 1] - first[q],
      trail: trail[q],
    });
  }
  factor.ready = true;
  return -1;
}

/**
 * Solves A x = b in place.
 * @shape b n × nRhs by columns: unknown i of right-hand side r at r*n + i
 * @throws PlanError factor-not-ready: the last factorisation failed; matrix-values: b is not n × nRhs long
 */
export function solveInPlace(factor: NumericFactor, b: Float64Array<ArrayBuffer>, nRhs = 1): void {
  const { order } = factor.symbolic.supernodes;
  const y = factor.side;
  const n = order.length;
  if (!factor.ready)
    throw new PlanError(
      "factor-not-ready",
      "the last factorisation failed: factor values that are positive definite first",
    );
  if (b.length !== n * nRhs)
    throw new PlanError("matrix-values", `right-hand sides of ${b.length} values for ${n} unknowns × ${nRhs}`, [], {
      values: b.length,
      unknowns: n,
      sides: nRhs,
    });
  let r = 0;
  for (; r + 3 <= nRhs; r += 3) {
    const [r0, r1, r2] = [r * n, (r + 1) * n, (r + 2) * n];
    for (let k = 0; k < n; k++) {
      y[3 * k] = b[r0 + order[k]];
      y[3 * k + 1] = b[r1 + order[k]];
      y[3 * k + 2] = b[r2 + order[k]];
    }
    sweep(factor, forwardThreeInPlace, backwardThreeInPlace);
    for (let k = 0; k < n; k++) {
      b[r0 + order[k]] = y[3 * k];
      b[r1 + order[k]] = y[3 * k + 1];
      b[r2 + order[k]] = y[3 * k + 2];
    }
  }
  for (; r < nRhs; r++) {
    for (let k = 0; k < n; k++) y[k] = b[r * n + order[k]];
    sweep(factor, forwardOneInPlace, backwardOneInPlace);
    for (let k = 0; k < n; k++) b[r * n + order[k]] = y[k];
  }
}

type Step = (x: Float64Array<ArrayBuffer>, place: PanelPlace, y: Float64Array<ArrayBuffer>) => void;

function sweep({ symbolic, store, side }: NumericFactor, forward: Step, backward: Step): void {
  const { panel, supernodes } = symbolic;
  const { nS, first, row, rowStart } = supernodes;
  const place: PanelPlace = { panel: 0, first: 0, w: 0, row, rowStart: 0, rowEnd: 0 };
  const go = (s: number) => {
    place.panel = panel[s];
    place.first = first[s];
    place.w = first[s + 1] - first[s];
    place.rowStart = rowStart[s];
    place.rowEnd = rowStart[s + 1];
  };
  for (let s = 0; s < nS; s++) {
    go(s);
    forward(store, place, side);
  }
  for (let s = nS - 1; s >= 0; s--) {
    go(s);
    backward(store, place, side);
  }
}

function tooLarge(unknowns: number, entries: number): PlanError {
  return new PlanError(
    "matrix-memory",
    `the factor of ${unknowns} unknowns needs ${Math.round(entries / 131072)} MB, more than this engine gives: use a coarser mesh`,
    [],
    { unknowns, entries },
  );
}

function checkPattern({ n, colStart, rowIndex }: SymmetricPattern): void {
  for (let j = 0; j < n; j++) {
    let good = colStart[j + 1] > colStart[j] && rowIndex[colStart[j]] === j;
    for (let p = colStart[j] + 1; good && p < colStart[j + 1]; p++) good = rowIndex[p] > rowIndex[p - 1];
    if (good && rowIndex[colStart[j + 1] - 1] < n) continue;
    throw new PlanError(
      "matrix-pattern",
      `column ${j} of the pattern must hold its diagonal first, then rows ascending below ${n}: use buildPattern`,
      `column ${j}`,
      { column: j, unknowns: n },
    );
  }
}
