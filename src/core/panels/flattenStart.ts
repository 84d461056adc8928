// First flat points of a strip, every triangle upright: its outline on a bulged trapezium, the inside at weighted means, its ears
// folded out. Far from flat cloth, but the flattening can start from it whatever the curvature; flattenSolve.ts does the rest.
import { analyseSymmetric, factorSymmetric, solveInPlace } from "../numeric/factor.ts";
import { addElementInPlace, buildPattern } from "../numeric/pattern.ts";
import { PlanError } from "../problem.ts";
import { buildAdjacency, nextHalfedge, previousHalfedge } from "../surface/adjacency.ts";
import { measureArea } from "../surface/measures.ts";
import type { LocalStrip } from "./localStrip.ts";

/** Bulge of the outline's four runs against their chord, as a share of the strip's width: convex, yet near the strip. */
const BULGE = 0.02;

/**
 * Flat points of the relaxed cloth to start the flattening from: axis at `turn` degrees from x, sizes divided by 1 + elastic strain.
 * @shape 2*n @units m
 * @throws PlanError strip-axis: the two ends have one mean point
 */
export function buildFlattenStart(
  strip: LocalStrip,
  turn: number,
  elastic: { warp: number; weft: number },
): Float64Array<ArrayBuffer> {
  const xy = buildEmbedding(strip);
  const a = meanOf(xy, strip.from);
  const b = meanOf(xy, strip.to);
  const length = Math.sqrt((b[0] - a[0]) ** 2 + (b[1] - a[1]) ** 2);
  let reach = 0;
  for (let i = 0; i < xy.length; i++) reach = Math.max(reach, Math.abs(xy[i] - a[i % 2]));
  if (!(length > 1e-9 * reach)) {
    throw new PlanError(
      "strip-axis",
      `the two ends of strip ${strip.id} have one mean point (${length} m apart): it has no axis to lay along the warp; give it other ends`,
      strip.id,
    );
  }
  const c = (b[0] - a[0]) / length;
  const s = (b[1] - a[1]) / length;
  const cosTurn = Math.cos((turn * Math.PI) / 180);
  const sinTurn = Math.sin((turn * Math.PI) / 180);
  const out = new Float64Array(xy.length);
  for (let i = 0; i < xy.length; i += 2) {
    const along = c * (xy[i] - a[0]) + s * (xy[i + 1] - a[1]);
    const across = c * (xy[i + 1] - a[1]) - s * (xy[i] - a[0]);
    out[i] = (cosTurn * along - sinTurn * across) / (1 + elastic.warp);
    out[i + 1] = (sinTurn * along + cosTurn * across) / (1 + elastic.weft);
  }
  return out;
}

function meanOf(xy: Float64Array<ArrayBuffer>, group: number[]): [number, number] {
  let x = 0;
  let y = 0;
  for (const v of group) {
    x += xy[2 * v] / group.length;
    y += xy[2 * v + 1] / group.length;
  }
  return [x, y];
}

/**
 * An embedding in the plane with every triangle counter-clockwise (it may overlap itself where ears meet).
 * @shape 2*n @source W. T. Tutte, How to draw a graph, 1963: inner vertices at weighted means, outline convex
 */
export function buildEmbedding(strip: LocalStrip): Float64Array<ArrayBuffer> {
  const { erected: x, tri } = strip;
  const n = x.length / 3;
  const outline = findOutline(strip);
  const { ears, cut } = peelEars(strip, new Set(outline.corner.map((i) => outline.ring[i])));
  const out = new Float64Array(2 * n);
  const rim = placeOutline(strip, outline, cut, out);
  const dof: number[] = [];
  const ends: number[] = [];
  const start = [0];
  for (let h = 0; h < tri.length; h++) {
    if (ears[Math.floor(h / 3)] >= 0) continue;
    const [a, b] = [tri[h], tri[nextHalfedge(h)]];
    ends.push(a, b);
    dof.push(rim[a] ? -1 : a, rim[b] ? -1 : b);
    start.push(dof.length);
  }
  const where = buildPattern(n, Uint32Array.from(start), Int32Array.from(dof));
  const values = new Float64Array(where.pattern.rowIndex.length);
  const rhs = new Float64Array(2 * n);
  const entry = new Float64Array(3);
  for (let e = 0; 2 * e < ends.length; e++) {
    const [a, b] = [ends[2 * e], ends[2 * e + 1]];
    const w = 1 / measureSide(x, a, b);
    entry[0] = w;
    entry[1] = -w;
    entry[2] = w;
    addElementInPlace(values, where, e, entry);
    for (let c = 0; c < 2; c++) {
      if (rim[a] && !rim[b]) rhs[c * n + b] += w * out[2 * a + c];
      if (rim[b] && !rim[a]) rhs[c * n + a] += w * out[2 * b + c];
    }
  }
  for (let v = 0; v < n; v++) {
    if (!rim[v] && values[where.pattern.colStart[v]] > 0) continue;
    values[where.pattern.colStart[v]] = 1;
    rhs[v] = out[2 * v];
    rhs[n + v] = out[2 * v + 1];
  }
  solveInPlace(factorSymmetric(analyseSymmetric(where.pattern), values), rhs, 2);
  for (let v = 0; v < n; v++) {
    out[2 * v] = rhs[v];
    out[2 * v + 1] = rhs[n + v];
  }
  foldOutEars(strip, ears, out);
  return out;
}

/**
 * Ears, triangles that hang on one side only, taken off again and again: on a convex outline they would be slivers, but at its corners.
 * ears: for each triangle the order in which it was taken off, else -1. cut: 1 for vertices that went with them.
 */
function peelEars(
  strip: LocalStrip,
  corners: ReadonlySet<number>,
): { ears: Int32Array<ArrayBuffer>; cut: Uint8Array<ArrayBuffer> } {
  const { erected, tri } = strip;
  const { twin, nT } = buildAdjacency({ xyz: erected, tri });
  const ears = new Int32Array(nT).fill(-1);
  const cut = new Uint8Array(erected.length / 3);
  const hangsOn = (t: number) =>
    [3 * t, 3 * t + 1, 3 * t + 2].filter((h) => twin[h] >= 0 && ears[Math.floor(twin[h] / 3)] < 0);
  let left = nT;
  const queue = Array.from({ length: nT }, (_, t) => t);
  for (let i = 0; i < queue.length && left > 1; i++) {
    const t = queue[i];
    const sides = hangsOn(t);
    if (ears[t] >= 0 || sides.length !== 1 || corners.has(tri[previousHalfedge(sides[0])])) continue;
    ears[t] = nT - left;
    left--;
    cut[tri[previousHalfedge(sides[0])]] = 1;
    queue.push(Math.floor(twin[sides[0]] / 3));
  }
  return { ears, cut };
}

/** Lays the ears out again, last taken first, each with its true height over the side it hangs on. */
function foldOutEars(strip: LocalStrip, ears: Int32Array<ArrayBuffer>, out: Float64Array<ArrayBuffer>): void {
  const { erected: x, tri } = strip;
  const { twin } = buildAdjacency({ xyz: x, tri });
  const order = [...ears.keys()].filter((t) => ears[t] >= 0).sort((a, b) => ears[b] - ears[a]);
  for (const t of order) {
    const h = [3 * t, 3 * t + 1, 3 * t + 2].find((k) => {
      const o = twin[k] < 0 ? -1 : Math.floor(twin[k] / 3);
      return o >= 0 && (ears[o] < 0 || ears[o] > ears[t]);
    });
    if (h === undefined) continue;
    const [a, b, c] = [tri[h], tri[nextHalfedge(h)], tri[previousHalfedge(h)]];
    const length = measureSide(x, a, b);
    let along = 0;
    for (let k = 0; k < 3; k++) along += ((x[3 * b + k] - x[3 * a + k]) * (x[3 * c + k] - x[3 * a + k])) / length;
    const height = Math.sqrt(Math.max(measureSide(x, a, c) ** 2 - along * along, 0));
    const [dx, dy] = [out[2 * b] - out[2 * a], out[2 * b + 1] - out[2 * a + 1]];
    const flat = Math.sqrt(dx * dx + dy * dy);
    const share = along / length;
    out[2 * c] = out[2 * a] + share * dx - (height * dy) / flat;
    out[2 * c + 1] = out[2 * a + 1] + share * dy + (height * dx) / flat;
  }
}

/**
 * The outline, begun at its first corner, and where its four runs begin in it: end `from`, the run to `to`, end `to`, the run back.
 * A pointed end is a run of no length.
 */
interface Outline {
  ring: number[];
  corner: number[];
}

function findOutline(strip: LocalStrip): Outline {
  const around = strip.sides.flatMap((s) => s.vertices.slice(0, -1));
  const size = around.length;
  const [from, to] = [new Set(strip.from), new Set(strip.to)];
  let first = 0;
  while (!(from.has(around[first]) && !from.has(around[(first + size - 1) % size]))) first++;
  const ring = around.map((_, i) => around[(first + i) % size]);
  let i = 0;
  while (i + 1 < size && from.has(ring[i + 1])) i++;
  const corner = [0, i];
  while (i + 1 < size && !to.has(ring[i])) i++;
  corner.push(i);
  while (i + 1 < size && to.has(ring[i + 1])) i++;
  corner.push(i);
  return { ring, corner };
}

/** Puts the outline, without the vertices in `cut`, on a trapezium with bulged sides; returns 1 for each vertex placed. */
function placeOutline(
  strip: LocalStrip,
  outline: Outline,
  cut: Uint8Array<ArrayBuffer>,
  out: Float64Array<ArrayBuffer>,
): Uint8Array<ArrayBuffer> {
  const { erected: x, tri } = strip;
  const { ring, corner } = outline;
  const placed = new Uint8Array(cut.length);
  const runs = corner.map((first, q) => {
    const last = q < 3 ? corner[q + 1] : ring.length;
    const path = Array.from({ length: last - first + 1 }, (_, i) => ring[(first + i) % ring.length]);
    const kept = path.filter((v) => !cut[v]);
    const along = [0];
    for (let i = 1; i < kept.length; i++) along.push(along[i - 1] + measureSide(x, kept[i - 1], kept[i]));
    return { kept, along, total: along[along.length - 1] };
  });
  const length = (runs[1].total + runs[3].total) / 2;
  const width = measureArea({ xyz: x, tri }) / length;
  const belly = Math.max(BULGE * width, width / 2 - (runs[0].total + runs[2].total) / 4);
  const bulge = [BULGE * runs[0].total, belly, BULGE * runs[2].total, belly];
  const [y0, y1] = [runs[0].total / 2, runs[2].total / 2];
  const trapezium = [
    [0, y0],
    [0, -y0],
    [length, -y1],
    [length, y1],
    [0, y0],
  ];
  runs.forEach(({ kept, along, total }, q) => {
    const [a, b] = [trapezium[q], trapezium[q + 1]];
    const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
    const chord = Math.sqrt(dx * dx + dy * dy);
    for (let i = 0; i + 1 < kept.length; i++) {
      const s = along[i] / total;
      const off = (4 * s * (1 - s) * bulge[q]) / chord;
      out[2 * kept[i]] = a[0] + s * dx + off * dy;
      out[2 * kept[i] + 1] = a[1] + s * dy - off * dx;
      placed[kept[i]] = 1;
    }
  });
  return placed;
}

function measureSide(x: Float64Array<ArrayBuffer>, a: number, b: number): number {
  return Math.sqrt(
    (x[3 * b] - x[3 * a]) ** 2 + (x[3 * b + 1] - x[3 * a + 1]) ** 2 + (x[3 * b + 2] - x[3 * a + 2]) ** 2,
  );
}
