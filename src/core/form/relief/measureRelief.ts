// How curved and how steep the form is: Gaussian curvature, which says how narrow strips must be, and slope, by which water
// runs off. No design for rain or snow: that is the engineer's.
// Source: angle defect and its sum over the surface, Gauss-Bonnet; strip width, check-values.md 4.2.
import type { Check, Finding } from "../../problem.ts";
import type { FormEdge, FormRelief } from "../../records/foundForm.ts";
import { type Adjacency, buildAdjacency, nextHalfedge, previousHalfedge } from "../../surface/adjacency.ts";
import { measureVectorAreas } from "../../surface/measures.ts";
import type { Surface } from "../../surface/surface.ts";
import { buildFormFinding, describePlace } from "../formFinding.ts";

/** Slope below which cloth counts as flat, rad: 2 degrees. Common practice. */
const FLAT = (2 * Math.PI) / 180;

/** Flat share of the area above which a caution is given. A saddle is flat round its middle, and drains. Common practice. */
const MUCH = 0.05;

/** Depth of a pit over the mean side below which it is rounding. */
const DEPTH = 0.005;

/** Angles of the triangles' corners. @shape 3*nT @units rad */
function measureAngles({ xyz: x, tri }: Surface): Float64Array<ArrayBuffer> {
  const out = new Float64Array(tri.length);
  for (let h = 0; h < tri.length; h++) {
    const v = 3 * tri[h];
    const b = 3 * tri[nextHalfedge(h)];
    const c = 3 * tri[previousHalfedge(h)];
    const px = x[b] - x[v];
    const py = x[b + 1] - x[v + 1];
    const pz = x[b + 2] - x[v + 2];
    const qx = x[c] - x[v];
    const qy = x[c + 1] - x[v + 1];
    const qz = x[c + 2] - x[v + 2];
    const n = (py * qz - pz * qy) ** 2 + (pz * qx - px * qz) ** 2 + (px * qy - py * qx) ** 2;
    out[h] = Math.atan2(Math.sqrt(n), px * qx + py * qy + pz * qz);
  }
  return out;
}

/**
 * Gaussian curvature of each triangle: every corner's angle defect, 2π less the angles round it,
 * is dealt out to its triangles by their angles there. So it is the same on every regular pattern of diagonals; dealt out by
 * area it is a third off where they alternate. A corner that is not inside deals out nothing.
 * @shape inside nV, 1 = not on the rim -> nT @units 1/m²
 * @source angle defect: Gauss-Bonnet; the dealing out is own
 */
export function measureCurvatures(
  surface: Surface,
  inside: Uint8Array<ArrayBuffer>,
  areas: Float64Array<ArrayBuffer>,
): Float64Array<ArrayBuffer> {
  const { tri } = surface;
  const angle = measureAngles(surface);
  const round = new Float64Array(inside.length);
  for (let h = 0; h < tri.length; h++) round[tri[h]] += angle[h];
  const out = new Float64Array(areas.length);
  for (let h = 0; h < tri.length; h++) {
    const t = Math.floor(h / 3);
    const v = tri[h];
    if (inside[v]) out[t] += ((2 * Math.PI - round[v]) * angle[h]) / round[v] / areas[t];
  }
  return out;
}

/** Vertices that are neither on the rim nor on a cable or a fixed point: where cloth alone is curved. */
function findPlain(
  adjacency: Adjacency,
  edges: readonly FormEdge[],
  fixed: Uint8Array<ArrayBuffer>,
  tri: Uint32Array<ArrayBuffer>,
): Uint8Array<ArrayBuffer> {
  const plain = fixed.map((held) => 1 - held);
  for (const e of edges) for (const v of e.vertices) plain[v] = 0;
  adjacency.twin.forEach((t, h) => {
    if (t < 0) plain[tri[h]] = plain[tri[nextHalfedge(h)]] = 0;
  });
  return plain;
}

/** Curvature at plain vertices, the mean over the triangles round each; NaN elsewhere. @shape nV @units 1/m² */
function meanCurvatures(
  surface: Surface,
  { fan, fanStart, nV }: Adjacency,
  plain: Uint8Array<ArrayBuffer>,
  areas: Float64Array<ArrayBuffer>,
): Float64Array<ArrayBuffer> {
  const { tri } = surface;
  const curvature = measureCurvatures(surface, plain, areas);
  return Float64Array.from({ length: nV }, (_, v) => {
    if (!plain[v]) return Number.NaN;
    let sum = 0;
    let area = 0;
    for (let i = fanStart[v]; i < fanStart[v + 1]; i++) {
      const t = Math.floor(fan[i] / 3);
      if (!plain[tri[3 * t]] || !plain[tri[3 * t + 1]] || !plain[tri[3 * t + 2]]) continue;
      sum += curvature[t] * areas[t];
      area += areas[t];
    }
    // no triangle round it lies clear of rim and cables
    return area === 0 ? Number.NaN : sum / area;
  });
}

/** Areas of triangles by their vector areas. @shape vector 3*nT, twice the area -> nT */
function sizesOf(vector: Float64Array): Float64Array<ArrayBuffer> {
  return Float64Array.from({ length: vector.length / 3 }, (_, t) => {
    const [x, y, z] = vector.subarray(3 * t, 3 * t + 3);
    return Math.sqrt(x * x + y * y + z * z) / 2;
  });
}

/**
 * Gaussian curvature of the form where cloth alone is curved: neither on the rim nor on a cable or a fixed point.
 * @shape fixed nV, 1 = held -> nV, NaN where there is none @units 1/m², negative is a saddle
 */
export function measureCurvature(
  surface: Surface,
  edges: readonly FormEdge[],
  fixed: Uint8Array<ArrayBuffer>,
): Float64Array<ArrayBuffer> {
  const adjacency = buildAdjacency(surface);
  const plain = findPlain(adjacency, edges, fixed, surface.tri);
  return meanCurvatures(surface, adjacency, plain, sizesOf(measureVectorAreas(surface)));
}

/** Least and greatest of the curvatures. */
function findCurvature(curvature: Float64Array): FormRelief["curvature"] {
  let found: FormRelief["curvature"] = null;
  curvature.forEach((k, v) => {
    if (Number.isNaN(k)) return;
    found ??= { least: k, leastAt: v, greatest: k, greatestAt: v };
    if (k < found.least) Object.assign(found, { least: k, leastAt: v });
    if (k > found.greatest) Object.assign(found, { greatest: k, greatestAt: v });
  });
  return found;
}

/** Plain vertices lower than all around them. */
function findPits(surface: Surface, adjacency: Adjacency, plain: Uint8Array<ArrayBuffer>): number[] {
  const { xyz: x, tri } = surface;
  const { fan, fanStart } = adjacency;
  return Array.from(plain.keys()).filter((v) => {
    if (!plain[v]) return false;
    let depth = Infinity;
    let side = 0;
    for (let i = fanStart[v]; i < fanStart[v + 1]; i++) {
      const w = tri[nextHalfedge(fan[i])];
      depth = Math.min(depth, x[3 * w + 2] - x[3 * v + 2]);
      side += Math.sqrt([0, 1, 2].reduce((s, k) => s + (x[3 * w + k] - x[3 * v + k]) ** 2, 0));
    }
    return depth > (DEPTH * side) / (fanStart[v + 1] - fanStart[v]);
  });
}

function describeAngle(a: number): string {
  return `${((180 * a) / Math.PI).toFixed(1)}°`;
}

/**
 * Curvature, slope and what they mean for strips and water.
 * @units 1/m², rad, m
 * @shape toSource nV
 */
export function measureRelief(
  surface: Surface,
  edges: readonly FormEdge[],
  fixed: Uint8Array<ArrayBuffer>,
  toSource: ArrayLike<number>,
): { relief: FormRelief; findings: Finding[]; checks: Check[] } {
  const { xyz, tri } = surface;
  const adjacency = buildAdjacency(surface);
  const vector = measureVectorAreas(surface);
  const areas = sizesOf(vector);
  let flattest = Infinity;
  let flattestAt = -1;
  let flat = 0;
  let all = 0;
  for (let t = 0; t < areas.length; t++) {
    const plan = Math.sqrt(vector[3 * t] ** 2 + vector[3 * t + 1] ** 2);
    const slope = Math.atan2(plan, Math.abs(vector[3 * t + 2]));
    all += areas[t];
    if (slope < FLAT) flat += areas[t];
    if (slope >= flattest) continue;
    flattest = slope;
    flattestAt = tri[3 * t];
  }
  const plain = findPlain(adjacency, edges, fixed, tri);
  const flatShare = flat / all;
  const pits = findPits(surface, adjacency, plain);
  const relief: FormRelief = {
    curvature: findCurvature(meanCurvatures(surface, adjacency, plain, areas)),
    flattest,
    flattestAt,
    flatShare,
    pits: pits.length,
  };
  const check: Check = {
    station: "form",
    text: `share of the cloth that slopes less than ${describeAngle(FLAT)}`,
    value: flatShare,
    limit: MUCH,
    holds: flatShare <= MUCH,
  };
  const findings: Finding[] = [];
  const place = (v: number) => `vertex ${toSource[v]} at ${describePlace(xyz, v)}`;
  if (!check.holds)
    findings.push(
      buildFormFinding("caution", {
        code: "form-flat",
        where: `vertex ${toSource[flattestAt]}`,
        value: flatShare,
        limit: MUCH,
        text: `${(100 * flatShare).toFixed(0)} % of the cloth slopes less than ${describeAngle(FLAT)}, flattest ${describeAngle(flattest)} at ${place(flattestAt)}: water and snow may stay there and pond`,
        remedy: "give the form more height, and let the engineer check ponding",
        basis: "common practice",
      }),
    );
  if (pits.length > 0)
    findings.push(
      buildFormFinding("caution", {
        code: "form-pit",
        where: pits.slice(0, 5).map((v) => `vertex ${toSource[v]}`),
        value: pits.length,
        limit: 0,
        text: `${pits.length === 1 ? "1 place is" : `${pits.length} places are`} lower than the cloth all round, first ${place(pits[0])}: water cannot run off`,
        remedy: "raise the form there, drain it, or settle it: cloth in balance has no pits",
      }),
    );
  return { relief, findings, checks: [check] };
}
