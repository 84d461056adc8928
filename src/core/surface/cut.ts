// Cuts paths into a surface: every place of a path becomes a vertex, every piece of it an edge, and all triangles keep their area and
// orientation. Tracing the paths stands in geodesic.ts, parting the cut surface in pieces.ts.
import { PlanError } from "../problem.ts";
import { type Adjacency, buildAdjacency } from "./adjacency.ts";
import { findCommonTriangle, preparePath } from "./cutPath.ts";
import { crossChords, meetChords, partTriangle, type TriangleRim } from "./cutTriangle.ts";
import { pointAt, vertexAt } from "./measures.ts";
import { findPathCrossing } from "./pathCrossing.ts";
import type { Surface, SurfacePoint, Vec3 } from "./surface.ts";
import { findHalfedge } from "./surfacePoint.ts";

/** Places on one edge closer than this share are one vertex. */
const SAME_SHARE = 1e-6;

/** How a surface is cut. */
export interface CutOptions {
  /** A crossing within this share of an edge's end is moved to the vertex there, 0…0.4; 0.01 unless said. */
  snap?: number;
  /** … and no further than this, m; any way unless said. */
  reach?: number;
  /** Adjacency of the surface, where the caller has it. */
  adjacency?: Adjacency;
}

/** A surface with paths cut in. */
export interface CutSurface {
  /** First vertices as before, then the inserted ones in the order in which the paths meet them. */
  surface: Surface;
  /** Of the cut surface. */
  adjacency: Adjacency;
  /** Vertices of the cut surface along each path; each two in a row are joined by an edge. */
  pathVertices: number[][];
  /** Triangle of the surface before for each new triangle. */
  parent: Uint32Array<ArrayBuffer>;
  /** Place on the surface before of each inserted vertex, in order. */
  vertexPlace: SurfacePoint[];
}

/** A path's way through one triangle. */
interface Chord {
  from: number;
  to: number;
  path: number;
}

/** Inserted vertices edge by edge. */
interface EdgeSplits {
  nV: number;
  places: SurfacePoint[];
  /** By a·nV + b, a < b: share from a and vertex, sorted by share. */
  byEdge: Map<number, { t: number; vertex: number }[]>;
}

function insertPlace(splits: EdgeSplits, p: SurfacePoint): number {
  if (p.a === p.b) return p.a;
  const key = p.a * splits.nV + p.b;
  let list = splits.byEdge.get(key);
  if (!list) {
    list = [];
    splits.byEdge.set(key, list);
  }
  const near = list.find((s) => Math.abs(s.t - p.t) <= SAME_SHARE);
  if (near) return near.vertex;
  const vertex = splits.nV + splits.places.length;
  splits.places.push(p);
  list.push({ t: p.t, vertex });
  list.sort((u, w) => u.t - w.t);
  return vertex;
}

/** Inserted vertices between a and b in that order, with their share from a. */
function listSplits(splits: EdgeSplits, a: number, b: number): { t: number; vertex: number }[] {
  const list = splits.byEdge.get(Math.min(a, b) * splits.nV + Math.max(a, b));
  if (!list) return [];
  return a < b ? list : list.map((s) => ({ t: 1 - s.t, vertex: s.vertex })).reverse();
}

/** Vertices of a path, with those that other paths inserted where it runs along an edge. */
function fillPath(splits: EdgeSplits, points: readonly SurfacePoint[], along: readonly boolean[]): number[] {
  const at = (p: SurfacePoint) => insertPlace(splits, p);
  const out = [at(points[0])];
  for (let i = 1; i < points.length; i++) {
    const p = points[i - 1];
    const q = points[i];
    if (along[i]) {
      const [a, b] = [...new Set([p.a, p.b, q.a, q.b])];
      const share = (r: SurfacePoint) => (r.a === r.b ? (r.a === a ? 0 : 1) : r.a === a ? r.t : 1 - r.t);
      const from = share(p);
      const to = share(q);
      const between = listSplits(splits, a, b).filter((s) => (s.t - from) * (s.t - to) < 0);
      if (from > to) between.reverse();
      for (const s of between) if (s.vertex !== out[out.length - 1]) out.push(s.vertex);
    }
    const v = at(q);
    if (v !== out[out.length - 1]) out.push(v);
  }
  return out;
}

function buildRim(surface: Surface, splits: EdgeSplits, t: number): TriangleRim {
  const rim: TriangleRim = { vertex: [], x: [], y: [], sides: [] };
  const corner = [0, 1, 2].map((k) => vertexAt(surface, surface.tri[3 * t + k]));
  const minus = (p: Vec3, q: Vec3): Vec3 => [p[0] - q[0], p[1] - q[1], p[2] - q[2]];
  const dot = (p: Vec3, q: Vec3) => p[0] * q[0] + p[1] * q[1] + p[2] * q[2];
  const u = minus(corner[1], corner[0]);
  const w = minus(corner[2], corner[0]);
  const l = Math.sqrt(dot(u, u));
  const wx = dot(u, w) / l;
  const x = [0, l, wx];
  const y = [0, 0, Math.sqrt(Math.max(0, dot(w, w) - wx * wx))];
  for (let k = 0; k < 3; k++) {
    const n = (k + 1) % 3;
    const a = surface.tri[3 * t + k];
    const b = surface.tri[3 * t + n];
    rim.vertex.push(a);
    rim.x.push(x[k]);
    rim.y.push(y[k]);
    rim.sides.push((1 << k) | (1 << ((k + 2) % 3)));
    for (const s of listSplits(splits, a, b)) {
      rim.vertex.push(s.vertex);
      rim.x.push(x[k] + s.t * (x[n] - x[k]));
      rim.y.push(y[k] + s.t * (y[n] - y[k]));
      rim.sides.push(1 << k);
    }
  }
  return rim;
}

/** Triangles with an inserted vertex on a side. @shape nT */
function markSplit(surface: Surface, adjacency: Adjacency, splits: EdgeSplits): Uint8Array<ArrayBuffer> {
  const touched = new Uint8Array(adjacency.nT);
  for (const key of splits.byEdge.keys()) {
    const h = findHalfedge(surface, adjacency, Math.floor(key / splits.nV), key % splits.nV);
    touched[Math.floor(h / 3)] = 1;
    if (adjacency.twin[h] >= 0) touched[Math.floor(adjacency.twin[h] / 3)] = 1;
  }
  return touched;
}

function refuseCrossing(first: number, second: number, at: Vec3): never {
  const place = at.map((c) => c.toFixed(3)).join(", ");
  const who = first === second ? `path ${first + 1} crosses itself` : `paths ${first + 1} and ${second + 1} cross`;
  throw new PlanError(
    "seam-crossing",
    `${who} at (${place}) m: move an end of one of them so that they keep to their sides, or let one end on the other`,
    first === second ? `path ${first + 1}` : [`path ${first + 1}`, `path ${second + 1}`],
    { first, second, x: at[0], y: at[1], z: at[2] },
  );
}

/** Children of one triangle, in vertices. @throws PlanError seam-crossing */
function cutOneTriangle(rim: TriangleRim, chords: readonly Chord[], xyz: Float64Array<ArrayBuffer>): number[] {
  const ranks = chords.map((c): [number, number] => [rim.vertex.indexOf(c.from), rim.vertex.indexOf(c.to)]);
  for (let i = 0; i < ranks.length; i++)
    for (let j = 0; j < i; j++) {
      if (!crossChords(ranks[i], ranks[j])) continue;
      const s = meetChords(rim, ranks[i], ranks[j]);
      const at = [0, 1, 2].map((k) => (1 - s) * xyz[3 * chords[i].from + k] + s * xyz[3 * chords[i].to + k]);
      refuseCrossing(chords[j].path, chords[i].path, [at[0], at[1], at[2]]);
    }
  return partTriangle(rim, ranks).flatMap((t) => t.map((r) => rim.vertex[r]));
}

/**
 * The surface with the paths as edges. Paths may share ends, touch at vertices, run together and along mesh edges.
 * @throws PlanError seam-crossing: two paths cross, or one crosses itself; cut-path: places in a row without a common triangle;
 *   surface-point: a place not on the mesh; seam-point: nothing left of a path after snapping; surface-edge from the adjacency
 * @source own
 */
export function cutSurface(
  surface: Surface,
  paths: readonly (readonly SurfacePoint[])[],
  options: CutOptions = {},
): CutSurface {
  const adjacency = options.adjacency ?? buildAdjacency(surface);
  const share = Math.min(0.4, Math.max(0, options.snap ?? 0.01));
  const snap = { share, reach: options.reach ?? Number.POSITIVE_INFINITY };
  const { nV, nT, twin } = adjacency;
  const { tri } = surface;
  const onBoundary = new Uint8Array(nV);
  for (let h = 0; h < 3 * nT; h++) if (twin[h] < 0) onBoundary[tri[h]] = 1;
  const splits: EdgeSplits = { nV, places: [], byEdge: new Map() };
  const chords = new Map<number, Chord[]>();
  const prepared = paths.map((path) => preparePath(surface, adjacency, onBoundary, path, snap));
  const along = prepared.map((points, path) =>
    points.map((p, i) => {
      const to = insertPlace(splits, p);
      if (i === 0) return false;
      const t = findCommonTriangle(surface, adjacency, points[i - 1], p);
      if (t < 0) return true;
      const list = chords.get(t) ?? [];
      list.push({ from: insertPlace(splits, points[i - 1]), to, path });
      chords.set(t, list);
      return false;
    }),
  );
  const pathVertices = prepared.map((points, p) => fillPath(splits, points, along[p]));
  const xyz = new Float64Array(3 * (nV + splits.places.length));
  xyz.set(surface.xyz);
  splits.places.forEach((p, i) => {
    xyz.set(pointAt(surface, p), 3 * (nV + i));
  });
  const touched = markSplit(surface, adjacency, splits);
  const out: number[] = [];
  const parent: number[] = [];
  for (let t = 0; t < nT; t++) {
    const start = out.length;
    if (!touched[t]) out.push(tri[3 * t], tri[3 * t + 1], tri[3 * t + 2]);
    else out.push(...cutOneTriangle(buildRim(surface, splits, t), chords.get(t) ?? [], xyz));
    for (let i = start; i < out.length; i += 3) parent.push(t);
  }
  const cut: Surface = { xyz, tri: new Uint32Array(out) };
  const after = buildAdjacency(cut);
  const crossing = findPathCrossing(cut, after, pathVertices);
  if (crossing) refuseCrossing(crossing.first, crossing.second, vertexAt(cut, crossing.vertex));
  return { surface: cut, adjacency: after, pathVertices, parent: new Uint32Array(parent), vertexPlace: splits.places };
}
