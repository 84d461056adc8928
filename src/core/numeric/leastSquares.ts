// Least squares with signs: min |A x - b| with x ≥ 0, some unknowns free of sign; dense, up to some 100 unknowns.
// A is first reduced to a triangle by reflections, so thousands of rows cost one pass and the condition is not squared.
// Not for sparse systems.
import { Matrix, SingularValueDecomposition } from "ml-matrix";
import { PlanError } from "../problem.ts";

/** Rows of a dense matrix, or all its entries row after row. */
export type DenseRows = readonly ArrayLike<number>[] | Float64Array<ArrayBuffer>;

/** How the unknowns may move. */
export interface NonNegativeOptions {
  /** Unknowns that may take either sign; none by default. */
  free?: readonly number[];
  /** Columns whose part outside the span of the others is below this share of their length count as dependent. */
  dependent?: number;
}

/** What solveNonNegative found. */
export interface NonNegativeSolution {
  /** @shape nUnknowns, zero or above but for the free ones */
  x: Float64Array<ArrayBuffer>;
  /** Length of A x - b, in the unit of b. */
  residual: number;
  /** A x - b row by row. */
  misfit: Float64Array<ArrayBuffer>;
  /** Largest over smallest singular value that is not zero, columns scaled to length 1 (so units do not matter). */
  condition: number;
  /** Unknowns the equations alone do not determine, ascending; they keep the smallest set that serves, the rest 0. */
  undetermined: number[];
}

const DEPENDENT = 1e-11;

/**
 * The x that brings A x closest to b with no unknown below zero but the free ones.
 * @throws PlanError least-squares-shape: rows of unequal length, or b of another length than A;
 *   least-squares-finite: an entry that is not finite; least-squares-cycle: not settled after 30 changes an unknown
 * @source C. L. Lawson, R. J. Hanson, Solving Least Squares Problems, 1974, chapter 23, algorithm NNLS; differs: free unknowns
 *   start in the passive set and never leave it, passive sets are solved by reflections with column exchange
 */
export function solveNonNegative(
  rows: DenseRows,
  b: ArrayLike<number>,
  options: NonNegativeOptions = {},
): NonNegativeSolution {
  const dependent = options.dependent ?? DEPENDENT;
  const { a, m, n } = readRows(rows, b);
  const scale = new Float64Array(n);
  for (let i = 0; i < m; i++) for (let j = 0; j < n; j++) scale[j] = Math.max(scale[j], Math.abs(a[i * n + j]));
  const square = new Float64Array(n);
  for (let i = 0; i < m; i++) for (let j = 0; j < n; j++) if (scale[j] > 0) square[j] += (a[i * n + j] / scale[j]) ** 2;
  for (let j = 0; j < n; j++) scale[j] *= Math.sqrt(square[j]);
  const { r, c, k } = reduceToTriangle(a, b, scale, m, n);

  const isFree = new Uint8Array(n);
  for (const j of options.free ?? []) isFree[j] = 1;
  const y = findPassive({ r, c, k, n, isFree, dependent });
  const x = new Float64Array(n);
  for (let j = 0; j < n; j++) if (scale[j] > 0) x[j] = y[j] / scale[j];
  const misfit = new Float64Array(m);
  let sum = 0;
  for (let i = 0; i < m; i++) {
    let s = -b[i];
    for (let j = 0; j < n; j++) s += a[i * n + j] * x[j];
    misfit[i] = s;
    sum += s * s;
  }
  return { x, residual: Math.sqrt(sum), misfit, ...measureCondition(r, k, n, dependent) };
}

interface Triangle {
  /** @shape k × n by rows */
  r: Float64Array<ArrayBuffer>;
  c: Float64Array<ArrayBuffer>;
  k: number;
  n: number;
  isFree: Uint8Array<ArrayBuffer>;
  dependent: number;
}

/** Lawson and Hanson's loop on the reduced system. */
function findPassive(triangle: Triangle): Float64Array<ArrayBuffer> {
  const { c, k, n, isFree } = triangle;
  const passive = isFree.slice();
  const refused = new Uint8Array(n);
  let y = solvePassive(triangle, passive);
  let size = 0;
  for (let i = 0; i < k; i++) size += c[i] * c[i];
  const floor = 1e-13 * Math.sqrt(size);
  for (let change = 0; change < 30 * (n + 1); change++) {
    const enter = findEntering(triangle, y, passive, refused, floor);
    if (enter < 0) return y;
    passive[enter] = 1;
    let z = solvePassive(triangle, passive);
    if (!(z[enter] > 0)) {
      // roundoff made the gradient look inviting, or the column depends on the passive ones
      passive[enter] = 0;
      refused[enter] = 1;
      continue;
    }
    for (;;) {
      let alpha = 1;
      for (let j = 0; j < n; j++)
        if (passive[j] && !isFree[j] && z[j] <= 0) alpha = Math.min(alpha, y[j] / (y[j] - z[j] || 1));
      let left = false;
      for (let j = 0; j < n; j++) {
        if (!passive[j]) continue;
        const moved = y[j] + alpha * (z[j] - y[j]);
        if (!isFree[j] && z[j] <= 0 && moved <= 1e-15 * Math.abs(z[j] - y[j])) {
          passive[j] = 0;
          y[j] = 0;
          left = true;
        } else y[j] = moved;
      }
      if (!left) break;
      z = solvePassive(triangle, passive);
    }
    y = z;
    refused.fill(0);
  }
  throw new PlanError(
    "least-squares-cycle",
    `non-negative least squares did not settle in ${30 * (n + 1)} changes for ${n} unknowns: look for unknowns that do almost the same, and join them`,
    [],
    { unknowns: n, changes: 30 * (n + 1) },
  );
}

/** The unknown at zero along which the misfit falls fastest, -1 if none does. */
function findEntering(
  { r, c, k, n }: Triangle,
  y: Float64Array<ArrayBuffer>,
  passive: Uint8Array<ArrayBuffer>,
  refused: Uint8Array<ArrayBuffer>,
  floor: number,
): number {
  const slope = new Float64Array(n);
  for (let i = 0; i < k; i++) {
    let s = c[i];
    for (let j = 0; j < n; j++) s -= r[i * n + j] * y[j];
    for (let j = 0; j < n; j++) slope[j] += r[i * n + j] * s;
  }
  let best = -1;
  for (let j = 0; j < n; j++)
    if (!passive[j] && !refused[j] && slope[j] > floor && (best < 0 || slope[j] > slope[best])) best = j;
  return best;
}

/** Least squares on the passive columns; dependent ones stay 0. */
function solvePassive(
  { r, c, k, n, dependent }: Triangle,
  passive: Uint8Array<ArrayBuffer>,
): Float64Array<ArrayBuffer> {
  const column: number[] = [];
  for (let j = 0; j < n; j++) if (passive[j]) column.push(j);
  const p = column.length;
  const q = new Float64Array(k * (p + 1));
  for (let i = 0; i < k; i++) {
    for (let s = 0; s < p; s++) q[i * (p + 1) + s] = r[i * n + column[s]];
    q[i * (p + 1) + p] = c[i];
  }
  const rank = reflectColumns(q, k, p, 1, { column, dependent });
  const y = new Float64Array(n);
  for (let s = rank - 1; s >= 0; s--) {
    let sum = q[s * (p + 1) + p];
    for (let t = s + 1; t < rank; t++) sum -= q[s * (p + 1) + t] * y[column[t]];
    y[column[s]] = sum / q[s * (p + 1) + s];
  }
  return y;
}

/**
 * Householder reflections on q (m × (p + extra) by rows) until its first p columns are a triangle; with `exchange` the longest
 * remaining column comes first and the work stops at the rank.
 * @source G. H. Golub, C. F. Van Loan, Matrix Computations, sections 5.2 and 5.4
 */
function reflectColumns(
  q: Float64Array<ArrayBuffer>,
  m: number,
  p: number,
  extra: number,
  exchange?: { column: number[]; dependent: number },
): number {
  const w = p + extra;
  const dots = new Float64Array(w);
  let longest = 0;
  const steps = Math.min(m, p);
  for (let s = 0; s < steps; s++) {
    if (exchange) {
      const size = new Float64Array(p);
      for (let i = s; i < m; i++) for (let j = s; j < p; j++) size[j] += q[i * w + j] ** 2;
      let best = s;
      for (let j = s + 1; j < p; j++) if (size[j] > size[best]) best = j;
      const length = Math.sqrt(size[best]);
      longest = Math.max(longest, length);
      if (!(length > exchange.dependent * longest)) return s;
      if (best !== s) {
        const { column } = exchange;
        [column[s], column[best]] = [column[best], column[s]];
        for (let i = 0; i < m; i++) [q[i * w + s], q[i * w + best]] = [q[i * w + best], q[i * w + s]];
      }
    }
    let length = 0;
    for (let i = s; i < m; i++) length += q[i * w + s] ** 2;
    length = Math.sqrt(length);
    if (length === 0) continue;
    const head = q[s * w + s];
    const alpha = head > 0 ? -length : length;
    q[s * w + s] = head - alpha;
    const half = length * (length + Math.abs(head));
    dots.fill(0);
    for (let i = s; i < m; i++) {
      const v = q[i * w + s];
      if (v !== 0) for (let j = s + 1; j < w; j++) dots[j] += v * q[i * w + j];
    }
    for (let i = s; i < m; i++) {
      const v = q[i * w + s] / half;
      if (v !== 0) for (let j = s + 1; j < w; j++) q[i * w + j] -= v * dots[j];
    }
    q[s * w + s] = alpha;
    for (let i = s + 1; i < m; i++) q[i * w + s] = 0;
  }
  return steps;
}

function readRows(rows: DenseRows, b: ArrayLike<number>) {
  const m = b.length;
  const flat = rows instanceof Float64Array;
  const n = flat ? (m > 0 ? rows.length / m : 0) : rows.length > 0 ? rows[0].length : 0;
  const a = flat ? rows : new Float64Array(m * n);
  if (!Number.isInteger(n) || (!flat && rows.length !== m))
    throw new PlanError(
      "least-squares-shape",
      `${m} right-hand values do not fit a matrix of ${rows.length} ${flat ? "entries" : "rows"}`,
      [],
      { rows: rows.length, values: m },
    );
  if (!flat)
    for (let i = 0; i < m; i++) {
      if (rows[i].length !== n)
        throw new PlanError(
          "least-squares-shape",
          `row ${i} has ${rows[i].length} entries, row 0 has ${n}: all rows must be equally long`,
          `row ${i}`,
          { row: i, entries: rows[i].length, expected: n },
        );
      for (let j = 0; j < n; j++) a[i * n + j] = rows[i][j];
    }
  for (let i = 0; i < m; i++)
    for (let j = 0; j <= n; j++)
      if (!Number.isFinite(j < n ? a[i * n + j] : b[i]))
        throw new PlanError(
          "least-squares-finite",
          `row ${i} of the least squares holds a value that is not finite`,
          `row ${i}`,
          {
            row: i,
            column: j,
          },
        );
  return { a, m, n };
}

/** R and c of the column-scaled [A | b]. */
function reduceToTriangle(
  a: Float64Array<ArrayBuffer>,
  b: ArrayLike<number>,
  scale: Float64Array<ArrayBuffer>,
  m: number,
  n: number,
) {
  const w = n + 1;
  const q = new Float64Array(m * w);
  for (let i = 0; i < m; i++) {
    for (let j = 0; j < n; j++) if (scale[j] > 0) q[i * w + j] = a[i * n + j] / scale[j];
    q[i * w + n] = b[i];
  }
  reflectColumns(q, m, n, 1);
  const k = Math.min(m, n);
  const r = new Float64Array(k * n);
  const c = new Float64Array(k);
  for (let i = 0; i < k; i++) {
    for (let j = i; j < n; j++) r[i * n + j] = q[i * w + j];
    c[i] = q[i * w + n];
  }
  return { r, c, k };
}

/** Condition and the unknowns that take part in a combination the equations do not see. */
function measureCondition(r: Float64Array<ArrayBuffer>, k: number, n: number, dependent: number) {
  if (n === 0) return { condition: 1, undetermined: [] };
  const square = new Matrix(n, n);
  for (let i = 0; i < k; i++) for (let j = 0; j < n; j++) square.set(i, j, r[i * n + j]);
  const svd = new SingularValueDecomposition(square, {
    computeLeftSingularVectors: false,
    computeRightSingularVectors: true,
  });
  const largest = svd.diagonal[0];
  const v = svd.rightSingularVectors;
  let smallest = largest;
  const share = new Float64Array(n);
  for (let s = 0; s < n; s++) {
    if (svd.diagonal[s] > dependent * largest) smallest = Math.min(smallest, svd.diagonal[s]);
    else for (let j = 0; j < n; j++) share[j] += v.get(j, s) ** 2;
  }
  const undetermined: number[] = [];
  for (let j = 0; j < n; j++) if (share[j] > 1e-12) undetermined.push(j);
  return { condition: largest > 0 ? largest / smallest : 1, undetermined };
}
