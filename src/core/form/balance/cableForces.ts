// Cable forces that balance a given form best. The residual is linear in them; instead of its value at each vertex, which a
// millimetre of rounding spoils, its weighted sums along each cable are brought to zero (smooth test fields: Galerkin).
import { Matrix, SingularValueDecomposition } from "ml-matrix";
import { solveNonNegative } from "../../numeric/leastSquares.ts";
import type { Finding } from "../../problem.ts";
import type { FormEdge } from "../../records/foundForm.ts";
import type { Vec3 } from "../../surface/surface.ts";
import { buildFormFinding } from "../formFinding.ts";
import { type CableStation, collectAlong, removeAlong } from "./cablePull.ts";

/** Waves along a cable that weigh the residual. */
const FIELDS = 4;

/** Length of a cable's column (about its total turn, rad) outside the span of the others, below which it says nothing. */
const LEAST_TURN = 0.01;

/** Spread of a force over the force above which a caution is given. */
export const LOOSE = 0.05;

/** A force at or below this share of the greatest one is slack. */
const SLACK = 1e-6;

/** Stations of each edge, null where it is no cable. */
export type Stations = (CableStation[] | null)[];

/** Weights of the stations of one cable, one row a test field. */
function buildFields(stations: readonly CableStation[], free: (v: number) => boolean): Float64Array<ArrayBuffer>[] {
  const closed = stations.every((s) => s.along !== null);
  const loose = stations.filter((s) => free(s.vertex)).length;
  const rows: Float64Array<ArrayBuffer>[] = [];
  const add = (f: (s: number) => number) =>
    rows.push(Float64Array.from(stations, (s) => (free(s.vertex) ? f(s.share) : 0)));
  if (closed) add(() => 1);
  for (let k = 1; k <= FIELDS && rows.length < loose; k++) {
    if (!closed) add((s) => Math.sin(k * Math.PI * s));
    else if (k % 2 === 1) add((s) => Math.cos((k + 1) * Math.PI * s));
    else add((s) => Math.sin(k * Math.PI * s));
  }
  return rows;
}

interface System {
  /** Row after row, one column an unknown. */
  rows: Float64Array<ArrayBuffer>[];
  right: number[];
}

/** Weighted residuals: rows·T + (sum without unknowns) = 0. */
export function buildSystem(
  stations: Stations,
  unknown: readonly number[],
  known: Float64Array<ArrayBuffer>,
  fixed: Uint8Array<ArrayBuffer>,
): System {
  const along = collectAlong(stations.filter((s) => s !== null));
  const pulls = new Map<number, { column: number; pull: Vec3 }[]>();
  unknown.forEach((edge, column) => {
    for (const { vertex, pull } of stations[edge] ?? [])
      pulls.set(vertex, [...(pulls.get(vertex) ?? []), { column, pull }]);
  });
  const rows: Float64Array<ArrayBuffer>[] = [];
  const right: number[] = [];
  for (const cable of stations) {
    if (cable === null) continue;
    for (const weights of buildFields(cable, (v) => !fixed[v])) {
      const row = [0, 1, 2].map(() => new Float64Array(unknown.length));
      const sum = [0, 0, 0];
      cable.forEach(({ vertex: v }, i) => {
        if (weights[i] === 0) return;
        const out = along.get(v) ?? [];
        const r = removeAlong([known[3 * v], known[3 * v + 1], known[3 * v + 2]], out);
        for (let k = 0; k < 3; k++) sum[k] -= weights[i] * r[k];
        for (const { column, pull } of pulls.get(v) ?? []) {
          const p = removeAlong(pull, out);
          for (let k = 0; k < 3; k++) row[k][column] += weights[i] * p[k];
        }
      });
      rows.push(...row);
      right.push(...sum);
    }
  }
  return { rows, right };
}

/** Columns that turn too little to be found by balance, alone or beside the others. */
export function findOpen(rows: readonly Float64Array<ArrayBuffer>[], n: number): number[] {
  if (rows.length < n) return Array.from({ length: n }, (_, j) => j);
  const columns = Array.from({ length: n }, (_, j) => Float64Array.from(rows, (r) => r[j]));
  const dot = (a: Float64Array<ArrayBuffer>, b: Float64Array<ArrayBuffer>) => a.reduce((s, x, i) => s + x * b[i], 0);
  const short = columns.map((c, j) => (Math.sqrt(dot(c, c)) < LEAST_TURN ? j : -1)).filter((j) => j >= 0);
  const rest = columns.map((_, j) => j).filter((j) => !short.includes(j));
  if (rest.length === 0) return short;
  const svd = new SingularValueDecomposition(new Matrix(rows.map((r) => rest.map((j) => r[j]))));
  // distance of a column from the span of the others: 1 / sqrt of the diagonal of the inverse normal matrix
  const v = svd.rightSingularVectors;
  const open = rest.filter((_, i) => {
    const sum = svd.diagonal.reduce((s, d, k) => s + (v.get(i, k) / Math.max(d, 1e-300)) ** 2, 0);
    return 1 / Math.sqrt(sum) < LEAST_TURN;
  });
  return [...short, ...open].sort((a, b) => a - b);
}

/** Standard spread of each unknown from the misfit, kN. */
export function measureSpread(
  rows: readonly Float64Array<ArrayBuffer>[],
  columns: readonly number[],
  misfit: number,
): number[] {
  const over = rows.length - columns.length;
  if (columns.length === 0 || over <= 0) return columns.map(() => 0);
  const svd = new SingularValueDecomposition(new Matrix(rows.map((r) => columns.map((j) => r[j]))));
  const v = svd.rightSingularVectors;
  return columns.map((_, i) => {
    const sum = svd.diagonal.reduce((s, d, k) => s + (v.get(i, k) / d) ** 2, 0);
    return misfit * Math.sqrt(sum / over);
  });
}

function reportForces(
  edges: readonly FormEdge[],
  found: Map<number, number>,
  spread: Map<number, number>,
  open: number[],
): Finding[] {
  const findings: Finding[] = [];
  const solved = [...found.keys()];
  const greatest = solved.reduce((m, e) => Math.max(m, found.get(e) ?? 0), 0);
  const slack = solved.filter((e) => (found.get(e) ?? 0) <= SLACK * greatest);
  const loose = solved.filter((e) => !slack.includes(e) && (spread.get(e) ?? 0) > LOOSE * (found.get(e) ?? 0));
  const name = (e: number) => edges[e].id;
  const value = (e: number) => `${name(e)} ${(found.get(e) ?? 0).toFixed(2)} ± ${(spread.get(e) ?? 0).toFixed(2)} kN`;
  const add = (level: "caution" | "note", code: string, where: number[], text: string, remedy: string) => {
    if (where.length > 0)
      findings.push(buildFormFinding(level, { code, where: where.map(name), value: where.length, text, remedy }));
  };
  add(
    "note",
    "cable-force-balance",
    solved,
    `force of the cables from best balance with the prestress: ${solved.map(value).join(", ")}`,
    "give edges.NAME.force in the job where the intended force is known",
  );
  add(
    "caution",
    "cable-slack",
    slack,
    `best balance leaves cable ${slack.map(name).join(", ")} without tension: the form does not need it, or it bends the wrong way`,
    "check the form, give its force in the job, or take the line out of the mesh",
  );
  add(
    "caution",
    "cable-force-open",
    open,
    `the form does not say the force of cable ${open.map(name).join(", ")}: it runs straight, is held at every vertex, or shares its path with another (turn below ${LEAST_TURN} rad); taken as unknown, without force in the balance`,
    "give edges.NAME.force in the job",
  );
  add(
    "caution",
    "cable-force-loose",
    loose,
    `the form says the force of cable ${loose.map(value).join(", ")} only within more than ${100 * LOOSE} %`,
    "give edges.NAME.force in the job, or bring the form into balance first",
  );
  return findings;
}

/**
 * Fills in the force of every cable edge that has none: non-negative, best balance along the cables.
 * @shape membrane: pull of the cloth 3*nV, kN; stations: one for each edge
 * @source weighted residuals (Galerkin) with sine fields; non-negative least squares: Lawson, Hanson 1974, chapter 23
 */
export function balanceCablesInPlace(
  edges: readonly FormEdge[],
  stations: Stations,
  membrane: Float64Array<ArrayBuffer>,
  fixed: Uint8Array<ArrayBuffer>,
): Finding[] {
  const asked = edges.map((_, e) => e).filter((e) => stations[e] !== null && edges[e].force === null);
  if (asked.length === 0) return [];
  const known = membrane.slice();
  edges.forEach((edge, e) => {
    for (const { vertex, pull } of stations[e] ?? [])
      for (let k = 0; k < 3; k++) known[3 * vertex + k] += (edge.force ?? 0) * pull[k];
  });
  const { rows, right } = buildSystem(stations, asked, known, fixed);
  const open = findOpen(rows, asked.length);
  const columns = asked.map((_, j) => j).filter((j) => !open.includes(j));
  const found = new Map<number, number>();
  const spread = new Map<number, number>();
  if (columns.length > 0) {
    const solution = solveNonNegative(
      rows.map((r) => Float64Array.from(columns, (j) => r[j])),
      right,
    );
    const pulled = columns.filter((_, i) => solution.x[i] > 0);
    const width = measureSpread(rows, pulled, solution.residual);
    columns.forEach((j, i) => {
      const edge = edges[asked[j]];
      edge.force = solution.x[i];
      edge.forceFrom = "balance";
      found.set(asked[j], solution.x[i]);
      edge.spread = pulled.includes(j) ? width[pulled.indexOf(j)] : 0;
      spread.set(asked[j], edge.spread);
    });
  }
  return reportForces(
    edges,
    found,
    spread,
    open.map((j) => asked[j]),
  );
}
