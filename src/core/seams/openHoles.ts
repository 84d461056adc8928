// Opens a region of several rings: seams from the rim to the first ring, from ring to ring and on to the rim again make two
// pieces of it that strips can be laid on. The seams become inner edges of a working copy of the form. Source: own.
import { PlanError } from "../problem.ts";
import type { FormEdge, FoundForm } from "../records/foundForm.ts";
import type { Adjacency } from "../surface/adjacency.ts";
import { cutSurface } from "../surface/cut.ts";
import { vertexAt } from "../surface/measures.ts";
import type { SurfacePoint } from "../surface/surface.ts";
import { type Outline, type Region, segmentKey } from "./region.ts";
import { traceSeam } from "./seamLine.ts";

/** Mark of an opening seam among the edges of the working copy; no edge of a mesh is named so. */
const OPENING = "opening seam ";

/** True for an edge that stands for an opening seam. */
export function isOpening(edge: FormEdge): boolean {
  return edge.loop === -1 && edge.forceFrom === "none" && edge.id.startsWith(OPENING);
}

function centreOf(region: Region, outline: Outline): [number, number] {
  let x = 0;
  let y = 0;
  for (const v of outline.vertices) {
    const p = vertexAt(region.surface, v);
    x += p[0] / outline.vertices.length;
    y += p[1] / outline.vertices.length;
  }
  return [x, y];
}

interface Ring {
  outline: Outline;
  centre: [number, number];
  /** Greatest distance of its vertices from the centre. */
  radius: number;
}

function measureRing(region: Region, outline: Outline): Ring {
  const centre = centreOf(region, outline);
  let radius = 0;
  for (const v of outline.vertices) {
    const p = vertexAt(region.surface, v);
    radius = Math.max(radius, Math.hypot(p[0] - centre[0], p[1] - centre[1]));
  }
  return { outline, centre, radius };
}

/** Rings in rows along a way, each row in its order: a ring belongs to a row whose last ring its line along the way meets. */
function groupRows(rings: readonly Ring[], way: readonly [number, number]): Ring[][] {
  const across = (r: Ring) => r.centre[1] * way[0] - r.centre[0] * way[1];
  const along = (r: Ring) => r.centre[0] * way[0] + r.centre[1] * way[1];
  const rows: Ring[][] = [];
  for (const ring of [...rings].sort((a, b) => across(a) - across(b))) {
    const row = rows[rows.length - 1];
    const last = row?.[row.length - 1];
    if (last && across(ring) - across(last) <= ring.radius + last.radius) row.push(ring);
    else rows.push([ring]);
  }
  return rows.map((row) => row.sort((a, b) => along(a) - along(b)));
}

/** Way along which the rings stand in the fewest rows; among equals the one nearest to x. */
function findWay(rings: readonly Ring[]): [number, number] {
  const ways: [number, number][] = [];
  for (let i = 0; i < rings.length; i++)
    for (let j = i + 1; j < rings.length; j++) {
      const d = [rings[j].centre[0] - rings[i].centre[0], rings[j].centre[1] - rings[i].centre[1]];
      const size = Math.hypot(d[0], d[1]);
      const turn = Math.abs(d[0]) > 1e-6 * size ? Math.sign(d[0]) : Math.sign(d[1]);
      if (size > 0) ways.push([(turn * d[0]) / size, (turn * d[1]) / size]);
    }
  const cost = (way: [number, number]) => groupRows(rings, way).length - (0.5 * Math.round(20 * way[0])) / 20;
  return ways.reduce((best, way) => (cost(way) < cost(best) - 1e-9 ? way : best), ways[0] ?? [1, 0]);
}

/** The outline's vertex that `score` rates highest. */
function pickVertex(region: Region, outline: Outline, score: (x: number, y: number) => number): number {
  let best = outline.vertices[0];
  let top = Number.NEGATIVE_INFINITY;
  for (const v of outline.vertices) {
    const p = vertexAt(region.surface, v);
    const s = score(p[0], p[1]);
    if (s > top + 1e-9) {
      top = s;
      best = v;
    }
  }
  return best;
}

function refuseHoles(region: Region): never {
  throw new PlanError(
    "seam-holes",
    `${region.id} has ${region.outlines.length} boundary loops and no straight seam joins them without touching a third; name cables between the rings that divide it, or give the seams one by one ("pairs") so that every panel has one outline`,
    region.id,
    { loops: region.outlines.length },
  );
}

/** Opening seams of a region, as places of the form: one string of seams for every row of rings. */
function traceOpenings(region: Region): SurfacePoint[][] {
  const [rim, ...inner] = region.outlines;
  const rings = inner.map((outline) => measureRing(region, outline));
  const way = findWay(rings);
  const along = (x: number, y: number) => x * way[0] + y * way[1];
  const outward = (from: number, sign: number) => {
    const p = vertexAt(region.surface, from);
    return pickVertex(region, rim, (x, y) => {
      const size = Math.hypot(x - p[0], y - p[1]);
      return size > 0 ? (sign * along(x - p[0], y - p[1])) / size : -2;
    });
  };
  const legs: [number, number][] = [];
  for (const row of groupRows(rings, way)) {
    const stops = row.map((ring) => ({
      enter: pickVertex(region, ring.outline, (x, y) => -along(x, y)),
      leave: pickVertex(region, ring.outline, along),
    }));
    legs.push([outward(stops[0].enter, -1), stops[0].enter]);
    for (let i = 1; i < stops.length; i++) legs.push([stops[i - 1].leave, stops[i].enter]);
    legs.push([stops[stops.length - 1].leave, outward(stops[stops.length - 1].leave, 1)]);
  }
  return legs.map(([from, to]) => {
    const line = traceSeam(region, { a: from, b: from, t: 0 }, { a: to, b: to, t: 0 });
    if (!line.clear) refuseHoles(region);
    return line.points.map((p) => ({ a: region.formVertex[p.a], b: region.formVertex[p.b], t: p.t }));
  });
}

/**
 * A working copy of the form in which every region of three outlines or more is opened; null where there is none.
 * First vertices stay the form's own.
 * @throws PlanError seam-holes
 */
export function openHoles(form: FoundForm, adjacency: Adjacency, regions: readonly Region[]): FoundForm | null {
  const paths = regions.filter((region) => region.outlines.length > 2).flatMap(traceOpenings);
  if (paths.length === 0) return null;
  const cut = cutSurface(form.surface, paths, { adjacency, snap: 0.004 });
  const nV = adjacency.nV;
  const inserted = new Map<number, { t: number; v: number }[]>();
  cut.vertexPlace.forEach((p, i) => {
    const key = segmentKey(p.a, p.b, nV);
    const list = inserted.get(key) ?? [];
    list.push({ t: p.t, v: nV + i });
    inserted.set(key, list);
  });
  const refine = (vertices: readonly number[]) =>
    vertices.flatMap((v, i) => {
      if (i === 0) return [v];
      const u = vertices[i - 1];
      const list = [...(inserted.get(segmentKey(Math.min(u, v), Math.max(u, v), nV)) ?? [])];
      list.sort((a, b) => (u < v ? a.t - b.t : b.t - a.t));
      return [...list.map((s) => s.v), v];
    });
  const edges = form.edges.map((edge) => ({ ...edge, vertices: refine(edge.vertices) }));
  cut.pathVertices.forEach((vertices, i) => {
    edges.push({
      id: `${OPENING}${i + 1}`,
      kind: "ridge",
      vertices,
      loop: -1,
      force: null,
      forceFrom: "none",
      reaction: null,
    });
  });
  return { ...form, surface: cut.surface, edges };
}
