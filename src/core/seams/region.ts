// The regions of a form: its pieces between inner cables, each as a surface of its own with labelled outlines.
// A cable that ends inside the cloth divides nothing and is handed back by name; one that only slits a ring opens it.
import { PlanError } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import { type Adjacency, buildAdjacency, nextHalfedge } from "../surface/adjacency.ts";
import { createGeodesicSolver, type GeodesicSolver } from "../surface/geodesic.ts";
import { measureAreas, measureDistance, vertexAt } from "../surface/measures.ts";
import { type CutEdge, extractPiece, partSurface } from "../surface/pieces.ts";
import type { Surface, Vec3 } from "../surface/surface.ts";

/** A closed outline of a region; the region lies to its left seen on the outer face. */
export interface Outline {
  /** Region vertices, first not repeated. */
  vertices: number[];
  /** Form edge (index) of the segment from vertex i to the next. */
  edge: Int32Array<ArrayBuffer>;
  /** Arc length at vertex i; the last entry is the whole length. @shape n+1 */
  arc: Float64Array<ArrayBuffer>;
  /** Positions in `vertices` where the outline turns (interior angle below CORNER_ANGLE), in order. */
  turns: number[];
  /** Positions where it turns or the edge changes, in order. */
  corners: number[];
}

/** A piece of the form between inner cables. */
export interface Region {
  id: string;
  surface: Surface;
  adjacency: Adjacency;
  solver: GeodesicSolver;
  /** Form vertex of each region vertex. */
  formVertex: Uint32Array<ArrayBuffer>;
  /** Form triangles it is made of. */
  triangles: number[];
  /** Longest first. */
  outlines: Outline[];
}

/** Interior angle below which an outline counts as turning where two edges meet, and within one edge, rad. own: 150° keeps a scalloped edge with a mid anchor in one piece; 120° within an edge passes a ring of 7 links. */
const CORNER_ANGLE = (150 / 180) * Math.PI;
const TURN_WITHIN_EDGE = (120 / 180) * Math.PI;

/** Key of a directed form segment. */
export function segmentKey(a: number, b: number, nV: number): number {
  return a * nV + b;
}

/**
 * Form edge (index) of every boundary and cable segment, by undirected key (smaller vertex first).
 * @throws PlanError seam-cable-path: an inner cable leaves the sides of the mesh
 */
function labelSegments(form: FoundForm, adjacency: Adjacency): Map<number, number> {
  const nV = adjacency.nV;
  const tri = form.surface.tri;
  const sides = new Set<number>();
  for (let h = 0; h < tri.length; h++) {
    const a = tri[h];
    const b = tri[nextHalfedge(h)];
    sides.add(segmentKey(Math.min(a, b), Math.max(a, b), nV));
  }
  const labels = new Map<number, number>();
  form.edges.forEach((edge, e) => {
    for (let i = 1; i < edge.vertices.length; i++) {
      const a = edge.vertices[i - 1];
      const b = edge.vertices[i];
      const key = segmentKey(Math.min(a, b), Math.max(a, b), nV);
      if (!sides.has(key))
        throw new PlanError(
          "seam-cable-path",
          `edge ${edge.id} leaves the mesh between vertices ${a} and ${b}: no triangle has that side; name its vertices one by one along the mesh`,
          edge.id,
          { a, b },
        );
      if (!labels.has(key)) labels.set(key, e);
    }
  });
  return labels;
}

/** Half-edges on inner cables and the labels of all segments, cables that end inside the cloth pruned; and those cables' names. */
function markDividers(form: FoundForm, adjacency: Adjacency) {
  const labels = labelSegments(form, adjacency);
  const { tri } = form.surface;
  const { twin, nV } = adjacency;
  const divider = new Uint8Array(tri.length);
  const degree = new Int32Array(nV);
  for (let h = 0; h < tri.length; h++) {
    const a = tri[h];
    const b = tri[nextHalfedge(h)];
    if (twin[h] < 0) {
      degree[a] += 2;
      degree[b] += 2;
    } else if (labels.has(segmentKey(Math.min(a, b), Math.max(a, b), nV))) {
      divider[h] = 1;
      if (h < twin[h]) {
        degree[a]++;
        degree[b]++;
      }
    }
  }
  const pruned = new Set<string>();
  const queue: number[] = [];
  for (let v = 0; v < nV; v++) if (degree[v] === 1) queue.push(v);
  for (let v = queue.pop(); v !== undefined; v = queue.pop()) {
    for (let i = adjacency.fanStart[v]; i < adjacency.fanStart[v + 1] && degree[v] === 1; i++) {
      const h = adjacency.fan[i];
      if (!divider[h]) continue;
      const w = tri[nextHalfedge(h)];
      divider[h] = divider[twin[h]] = 0;
      degree[v]--;
      degree[w]--;
      const key = segmentKey(Math.min(v, w), Math.max(v, w), nV);
      const label = labels.get(key);
      if (label !== undefined) pruned.add(form.edges[label].id);
      labels.delete(key);
      if (degree[w] === 1) queue.push(w);
    }
  }
  return { divider, labels, pruned: [...pruned] };
}

/** Mesh edges of the inner cables that divide the form. */
function listDividers(form: FoundForm, divider: Uint8Array): CutEdge[] {
  const { tri } = form.surface;
  const out: CutEdge[] = [];
  for (let h = 0; h < tri.length; h++)
    if (divider[h] && tri[h] < tri[nextHalfedge(h)]) out.push([tri[h], tri[nextHalfedge(h)]]);
  return out;
}

/**
 * Regions of a form in reading order, vertices doubled along the cables that divide; and the cables that do not.
 * @throws PlanError seam-cable-path, seam-open-boundary, seam-closed-surface
 */
export function buildRegions(
  form: FoundForm,
  adjacency: Adjacency,
): { regions: Region[]; labels: Map<number, number>; pruned: string[] } {
  const { divider, labels, pruned } = markDividers(form, adjacency);
  const cuts = listDividers(form, divider);
  const piece = partSurface(form.surface, cuts, adjacency);
  const members: number[][] = [];
  piece.forEach((p, t) => {
    members[p] ??= [];
    members[p].push(t);
  });
  const regions = members.map((triangles): Region => {
    const mesh = extractPiece(form.surface, triangles, cuts, adjacency);
    const surface: Surface = { xyz: mesh.xyz, tri: mesh.tri };
    const own = buildAdjacency(surface);
    const region: Region = {
      id: "",
      surface,
      adjacency: own,
      solver: createGeodesicSolver(surface, own),
      formVertex: mesh.surfaceVertex,
      triangles,
      outlines: [],
    };
    region.outlines = mesh.outline.map((loop) => buildOutline(region, loop, labels, adjacency.nV));
    if (region.outlines.length === 0)
      throw new PlanError(
        "seam-closed-surface",
        "a piece of the form has no boundary: strips need an edge to start on; leave an opening or name a cable on it",
        "form",
      );
    region.outlines.sort((a, b) => b.arc[b.vertices.length] - a.arc[a.vertices.length]);
    return region;
  });
  sortRegions(form, regions);
  return { regions, labels, pruned };
}

/** Mean place of a region by area. */
function measureMiddle(region: Region): Vec3 {
  const areas = measureAreas(region.surface);
  const sum: Vec3 = [0, 0, 0];
  let total = 0;
  areas.forEach((area, t) => {
    total += area;
    for (let k = 0; k < 3; k++)
      for (let c = 0; c < 3; c++) sum[c] += (area * region.surface.xyz[3 * region.surface.tri[3 * t + k] + c]) / 3;
  });
  return [sum[0] / total, sum[1] / total, sum[2] / total];
}

/**
 * Puts regions in reading order and names them: round the ring, counter-clockwise from the first anchor, where a form has a
 * ring and three regions or more; else along the longer side of the roof.
 */
function sortRegions(form: FoundForm, regions: Region[]) {
  const middle = new Map(regions.map((r) => [r, measureMiddle(r)]));
  const at = (r: Region) => middle.get(r) ?? [0, 0, 0];
  const low = [Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY];
  const high = [Number.NEGATIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (let i = 0; i < form.surface.xyz.length; i++) {
    if (i % 3 === 2) continue;
    low[i % 3] = Math.min(low[i % 3], form.surface.xyz[i]);
    high[i % 3] = Math.max(high[i % 3], form.surface.xyz[i]);
  }
  const size = Math.max(high[0] - low[0], high[1] - low[1]);
  const first = high[0] - low[0] >= (high[1] - low[1]) * (1 - 1e-6) ? 0 : 1;
  let key = (r: Region): number[] => [at(r)[first], at(r)[1 - first], at(r)[2]];
  if (form.loops.length > 1 && regions.length > 2) {
    const ring = form.loops[1];
    const centre = [0, 0];
    for (const v of ring) for (let c = 0; c < 2; c++) centre[c] += form.surface.xyz[3 * v + c] / ring.length;
    const angle = (x: number, y: number) => Math.atan2(y - centre[1], x - centre[0]);
    const anchor = form.anchors[0]?.vertex;
    const zero =
      anchor === undefined ? -Math.PI : angle(form.surface.xyz[3 * anchor], form.surface.xyz[3 * anchor + 1]);
    key = (r) => {
      const [x, y] = at(r);
      const turn = (angle(x, y) - zero + 4 * Math.PI + 1e-6) % (2 * Math.PI);
      return [turn * size, Math.hypot(x - centre[0], y - centre[1])];
    };
  }
  const keys = new Map(regions.map((r) => [r, key(r)]));
  regions.sort((a, b) => {
    const p = keys.get(a) ?? [];
    const q = keys.get(b) ?? [];
    return p.map((x, k) => x - q[k]).find((d) => Math.abs(d) > 1e-6 * size) ?? 0;
  });
  regions.forEach((r, i) => {
    r.id = `region ${i + 1}`;
  });
}

/** Interior angle of the surface at a boundary vertex, rad: the angles of its triangles there. */
export function measureCornerAngle(surface: Surface, adjacency: Adjacency, v: number): number {
  let sum = 0;
  for (let i = adjacency.fanStart[v]; i < adjacency.fanStart[v + 1]; i++) {
    const h = adjacency.fan[i];
    const p = vertexAt(surface, v);
    const q = vertexAt(surface, surface.tri[nextHalfedge(h)]);
    const r = vertexAt(surface, surface.tri[nextHalfedge(nextHalfedge(h))]);
    const a = measureDistance(p, q);
    const b = measureDistance(p, r);
    const c = measureDistance(q, r);
    sum += Math.acos(Math.min(1, Math.max(-1, (a * a + b * b - c * c) / (2 * a * b))));
  }
  return sum;
}

function buildOutline(region: Region, loop: number[], labels: Map<number, number>, nV: number): Outline {
  const { surface, adjacency, formVertex } = region;
  const n = loop.length;
  const edge = new Int32Array(n);
  const arc = new Float64Array(n + 1);
  for (let i = 0; i < n; i++) {
    const a = formVertex[loop[i]];
    const b = formVertex[loop[(i + 1) % n]];
    edge[i] = labels.get(segmentKey(Math.min(a, b), Math.max(a, b), nV)) ?? -1;
    if (edge[i] < 0)
      throw new PlanError(
        "seam-open-boundary",
        `the boundary between vertices ${a} and ${b} belongs to no edge of the form; run the form station first`,
        `vertex ${a}`,
        { a, b },
      );
    arc[i + 1] = arc[i] + measureDistance(vertexAt(surface, loop[i]), vertexAt(surface, loop[(i + 1) % n]));
  }
  const turns: number[] = [];
  const corners: number[] = [];
  for (let i = 0; i < n; i++) {
    const changes = edge[i] !== edge[(i + n - 1) % n];
    const turn = measureCornerAngle(surface, adjacency, loop[i]) < (changes ? CORNER_ANGLE : TURN_WITHIN_EDGE);
    if (turn) turns.push(i);
    if (turn || changes) corners.push(i);
  }
  return { vertices: loop, edge, arc, turns, corners };
}
