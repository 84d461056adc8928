// Warp and weft stress that balance a given form best, together with the cables whose forces are not known. Residuals normal to
// the cloth weighed with smooth fields that vanish at edges, and the weighted residuals along the cables; never node by node.
import { solveNonNegative } from "../../numeric/leastSquares.ts";
import type { Finding } from "../../problem.ts";
import type { FormEdge } from "../../records/foundForm.ts";
import { measureVertexNormals } from "../../surface/measures.ts";
import type { Surface } from "../../surface/surface.ts";
import { buildFormFinding } from "../formFinding.ts";
import { buildSystem, findOpen, LOOSE, measureSpread, type Stations } from "./cableForces.ts";
import { measureMembraneForces, type StressField } from "./membraneForces.ts";
import { buildSmoothWeight } from "./smoothWeight.ts";

/** Share of the weighted force of the cloth below which a residual says nothing of the stress: the form is level. */
const LEVEL = 1e-5;

/** Stress found, and the standard spread of each. @units kN/m */
export interface ClothStress {
  warp: number;
  weft: number;
  spread: { warp: number; weft: number };
}

interface StressSystem {
  /** Cables that are solved for, by edge. */
  cables: number[];
  /** One row a weighted residual, one column a cable. */
  pull: Float64Array<ArrayBuffer>[];
  /** Weighted residual of warp and of weft stress of 1 kN/m, row by row. */
  warp: Float64Array<ArrayBuffer>;
  weft: Float64Array<ArrayBuffer>;
  /** What cables of known force leave, row by row. @units kN */
  right: Float64Array<ArrayBuffer>;
  known: boolean;
  /** Weighted force of cloth under 1 kN/m, to measure rows by. */
  size: number;
}

/** Fields over the cloth: the smooth weight times polynomials of the second degree in plan. @shape nV each */
function buildFields(surface: Surface, weight: Float64Array<ArrayBuffer>): Float64Array<ArrayBuffer>[] {
  const { xyz } = surface;
  const mean = [0, 0];
  const nV = weight.length;
  for (let v = 0; v < nV; v++) for (let k = 0; k < 2; k++) mean[k] += xyz[3 * v + k] / nV;
  let reach = 0;
  for (let v = 0; v < nV; v++) for (let k = 0; k < 2; k++) reach = Math.max(reach, Math.abs(xyz[3 * v + k] - mean[k]));
  const terms: ((x: number, y: number) => number)[] = [
    () => 1,
    (x) => x,
    (_, y) => y,
    (x) => x * x,
    (x, y) => x * y,
    (_, y) => y * y,
  ];
  return terms.map((term) =>
    weight.map((w, v) => w * term((xyz[3 * v] - mean[0]) / reach, (xyz[3 * v + 1] - mean[1]) / reach)),
  );
}

function buildStressSystem(
  surface: Surface,
  edges: readonly FormEdge[],
  stations: Stations,
  fixed: Uint8Array<ArrayBuffer>,
  direction: StressField["direction"],
): StressSystem {
  const force = {
    warp: measureMembraneForces(surface, { warp: 1, weft: 0, direction }).force,
    weft: measureMembraneForces(surface, { warp: 0, weft: 1, direction }).force,
  };
  const asked = edges.map((_, e) => e).filter((e) => stations[e] !== null && edges[e].force === null);
  const known = new Float64Array(surface.xyz.length);
  edges.forEach((edge, e) => {
    for (const { vertex, pull } of stations[e] ?? [])
      for (let k = 0; k < 3; k++) known[3 * vertex + k] += (edge.force ?? 0) * pull[k];
  });
  const along = buildSystem(stations, asked, known, fixed);
  const open = findOpen(along.rows, asked.length);
  const columns = asked.map((_, j) => j).filter((j) => !open.includes(j));
  const leave = (f: Float64Array<ArrayBuffer>) => buildSystem(stations, [], f, fixed).right.map((x) => -x);

  const out = fixed.slice();
  for (const edge of edges) for (const v of edge.vertices) out[v] = 1;
  const weight = buildSmoothWeight(surface, out);
  const normal = measureVertexNormals(surface);
  const fields = buildFields(surface, weight);
  const across = (f: Float64Array<ArrayBuffer>) =>
    fields.map((field) => {
      let sum = 0;
      for (let v = 0; v < field.length; v++)
        for (let k = 0; k < 3; k++) sum += field[v] * normal[3 * v + k] * f[3 * v + k];
      return sum;
    });
  const { size } = measureMembraneForces(surface, { warp: 1, weft: 1, direction: null });
  return {
    cables: columns.map((j) => asked[j]),
    pull: [
      ...along.rows.map((r) => Float64Array.from(columns, (j) => r[j])),
      ...fields.map(() => new Float64Array(columns.length)),
    ],
    warp: Float64Array.from([...leave(force.warp), ...across(force.warp)]),
    weft: Float64Array.from([...leave(force.weft), ...across(force.weft)]),
    right: Float64Array.from([...along.right, ...fields.map(() => 0)]),
    known: edges.some((e, i) => stations[i] !== null && (e.force ?? 0) > 0),
    size: size.reduce((sum, s, v) => sum + s * weight[v], 0),
  };
}

/** Least squares over cables and stress; null where the form does not say. */
function solveStress(system: StressSystem, mean: number, even: boolean): ClothStress | null {
  const { pull, warp, weft, right, known, size } = system;
  // both stresses, their half difference at the job's mean, or one stress both ways
  const sum = warp.map((w, i) => w + weft[i]);
  const apart = warp.map((w, i) => w - weft[i]);
  if (even && !known) return null;
  const stress = even ? [sum] : known ? [warp, weft] : [apart];
  const b = known ? right : right.map((r, i) => r - mean * sum[i]);
  const length = (c: Float64Array<ArrayBuffer>) => Math.sqrt(c.reduce((s, x) => s + x * x, 0));
  if (stress.some((c) => length(c) < LEVEL * size)) return null;
  const n = system.cables.length;
  const rows = pull.map((r, i) => Float64Array.from([...r, ...stress.map((c) => c[i])]));
  if (rows.length <= n + stress.length) return null;
  const { x, residual, undetermined } = solveNonNegative(rows, b, known ? {} : { free: [n] });
  if (undetermined.some((j) => j >= n)) return null;
  const pulled = Array.from({ length: n + stress.length }, (_, j) => j).filter((j) => j >= n || x[j] > 0);
  const width = measureSpread(rows, pulled, residual).slice(pulled.length - stress.length);
  if (even) return { warp: x[n], weft: x[n], spread: { warp: width[0], weft: width[0] } };
  if (known) return { warp: x[n], weft: x[n + 1], spread: { warp: width[0], weft: width[1] } };
  return { warp: mean + x[n], weft: mean - x[n], spread: { warp: width[0], weft: width[0] } };
}

/**
 * The stress of best balance with its findings; null: the form does not say it, the job's stands.
 * Where no cable's force is known only the ratio can be found: the job's mean is kept.
 * @units job kN/m; direction null: one stress both ways
 * @source weighted residuals (Galerkin); non-negative least squares: Lawson, Hanson 1974, chapter 23
 */
export function balanceStress(
  { surface, edges, fixed }: { surface: Surface; edges: readonly FormEdge[]; fixed: Uint8Array<ArrayBuffer> },
  stations: Stations,
  job: StressField,
): { stress: ClothStress | null; findings: Finding[] } {
  const system = buildStressSystem(surface, edges, stations, fixed, job.direction);
  const found = solveStress(system, (job.warp + job.weft) / 2, job.direction === null);
  if (found === null || !(found.warp > 0 && found.weft > 0)) {
    const why =
      found !== null
        ? `best balance leaves it without tension in ${found.warp > 0 ? "weft" : "warp"}`
        : job.direction === null && !system.known
          ? "no cable's force is known, and without a warp direction there is no ratio to be found"
          : "it is level, or held so closely that no residual tells";
    return {
      stress: null,
      findings: [
        buildFormFinding("caution", {
          code: "cloth-stress-open",
          where: "prestress",

          text: `the form does not say the stress of its cloth: ${why}; ${job.warp} and ${job.weft} kN/m of the job are taken`,
          remedy:
            "give the force of at least one cable (edges.NAME.force) and the warp direction, or prestress as the form was found with",
        }),
      ],
    };
  }
  const say = (way: "warp" | "weft") => `${way} ${found[way].toFixed(3)} ± ${found.spread[way].toFixed(3)} kN/m`;
  const ways = (["warp", "weft"] as const).filter((way) => found.spread[way] > LOOSE * found[way]);
  const findings = [
    buildFormFinding("note", {
      code: "cloth-stress-balance",
      where: "prestress",
      value: found.warp / found.weft,
      text: `stress of the cloth from best balance: ${say("warp")}, ${say("weft")}${system.known ? "" : `; no cable's force is known, so the form says the ratio alone: the job's mean, ${(job.warp + job.weft) / 2} kN/m, is kept`}`,
      remedy: system.known
        ? "leave out prestress.from where the intended stress is known"
        : "give the force of one cable (edges.NAME.force) and the mean is found too",
    }),
  ];
  if (ways.length > 0)
    findings.push(
      buildFormFinding("caution", {
        code: "cloth-stress-loose",
        where: "prestress",
        value: ways.length,
        text: `the form says the stress of its cloth only within more than ${100 * LOOSE} %: ${ways.map(say).join(", ")}`,
        remedy: "give prestress in the job without prestress.from, or bring the form into balance first",
      }),
    );
  return { stress: found, findings };
}
