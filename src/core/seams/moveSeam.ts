// Moves one seam of a layout and cuts again, all others where they were: for a seam end that is dragged. Traces one geodesic and
// cuts; lays nothing out, checks nothing (the plan does, when the seam is let go).
import { PlanError } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { EdgePlace, Job } from "../records/job.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import { measureDistance, pointAt, vertexAt } from "../surface/measures.ts";
import type { SurfacePoint } from "../surface/surface.ts";
import { isSamePoint } from "../surface/surfacePoint.ts";
import { cutStrips } from "./cutStrips.ts";
import { nameStrips } from "./nameStrips.ts";
import { findEdge, findInRegion, placeOnEdge } from "./pairs.ts";
import { type LaidSeams, laySeams, type SeamOptions } from "./runSeams.ts";
import { traceSeam } from "./seamLine.ts";
import type { SeamPath } from "./seamPath.ts";

/** A layout whose seams can be moved one at a time. */
export interface SeamWork {
  job: Job;
  laid: LaidSeams;
  /** By id of its weld: the paths (indices) that make it. */
  pathsOf: ReadonlyMap<string, number[]>;
  /** By id of its weld: places of its two ends; only of welds of one path whose ends lie on edges, which are those that can be moved. */
  ends: ReadonlyMap<string, [EdgePlace, EdgePlace]>;
}

/** A place of the form as a share of an edge; null inside the cloth. */
function nameEdgePlace(form: FoundForm, p: SurfacePoint): EdgePlace | null {
  for (const { id, vertices } of form.edges) {
    const arc = [0];
    for (let i = 1; i < vertices.length; i++)
      arc.push(
        arc[i - 1] + measureDistance(vertexAt(form.surface, vertices[i - 1]), vertexAt(form.surface, vertices[i])),
      );
    const total = arc[arc.length - 1];
    for (let i = 0; i < vertices.length; i++) {
      if (p.a === p.b && vertices[i] === p.a) return { edge: id, at: arc[i] / total };
      if (i === 0 || p.a === p.b) continue;
      const step = (arc[i] - arc[i - 1]) / total;
      if (vertices[i - 1] === p.a && vertices[i] === p.b) return { edge: id, at: arc[i - 1] / total + p.t * step };
      if (vertices[i - 1] === p.b && vertices[i] === p.a) return { edge: id, at: arc[i] / total - p.t * step };
    }
  }
  return null;
}

function cutAndName(job: Job, laid: LaidSeams, paths: SeamPath[]) {
  const cut = cutStrips(laid.form, laid.adjacency, laid.labels, laid.plans, paths);
  return { cut, named: nameStrips(laid.form, job, laid.plans, cut) };
}

/** True where another seam of the layout ends on this path between its ends. */
function carriesEnd(laid: LaidSeams, path: number): boolean {
  const own = laid.paths[path];
  return laid.paths.some(
    (other, i) =>
      i !== path &&
      other.region === own.region &&
      [other.line.points[0], other.line.points[other.line.points.length - 1]].some((p) =>
        own.line.points.slice(1, -1).some((q) => isSamePoint(p, q)),
      ),
  );
}

/**
 * The layout that runSeams makes with these options, ready for moving seams.
 * @throws PlanError as runSeams
 */
export function openSeams(found: FoundForm, job: Job, options: SeamOptions): SeamWork {
  const laid = laySeams(found, job, options, {});
  const { named } = cutAndName(job, laid, laid.paths);
  const pathsOf = new Map<string, number[]>();
  laid.paths.forEach(({ weld }, i) => {
    const id = named.weldOf.get(weld);
    if (id !== undefined) pathsOf.set(id, [...(pathsOf.get(id) ?? []), i]);
  });
  const ends = new Map<string, [EdgePlace, EdgePlace]>();
  for (const [id, [path, ...more]] of pathsOf) {
    if (more.length > 0 || carriesEnd(laid, path)) continue;
    const { line, region } = laid.paths[path];
    const of = laid.regions[region].formVertex;
    const both = [line.points[0], line.points[line.points.length - 1]].map((p) =>
      nameEdgePlace(laid.form, { a: of[p.a], b: of[p.b], t: p.t }),
    );
    if (both[0] && both[1]) ends.set(id, [both[0], both[1]]);
  }
  return { job, laid, pathsOf, ends };
}

/**
 * The layout with one weld between two other places. Its path is cut last, so that all vertices of the others keep their numbers
 * from one move of it to the next.
 * @throws PlanError seam-move: this weld cannot be moved, or not there; those of cutting
 */
export function moveSeam(work: SeamWork, weld: string, to: readonly [EdgePlace, EdgePlace]): StripLayout {
  const { laid, job } = work;
  const path = work.ends.has(weld) ? work.pathsOf.get(weld)?.[0] : undefined;
  if (path === undefined)
    throw new PlanError(
      "seam-move",
      `${weld} cannot be moved by itself: it has several legs, ends inside the cloth, or carries the end of another seam; give the seams one by one (pairs)`,
      weld,
    );
  const old = laid.paths[path];
  const region = laid.regions[old.region];
  const [from, finish] = to.map((place) => {
    const at = placeOnEdge(laid.form, findEdge(laid.form, place.edge, weld), place.at);
    return findInRegion(laid.form, region, at)[0];
  });
  if (!from || !finish)
    throw new PlanError("seam-move", `${weld} cannot end there: ${region.id} does not border both edges`, weld);
  const line = traceSeam(region, from, finish);
  if (!line.clear)
    throw new PlanError("seam-move", `${weld} would run along an edge or leave the cloth between these places`, weld);
  const paths = [...laid.paths.filter((_, i) => i !== path), { ...old, line }];
  const { cut, named } = cutAndName(job, laid, paths);
  if (cut.paths.length < paths.length) throw new PlanError("seam-move", `${weld} would cross another seam`, weld);
  return { surface: cut.surface, seams: named.seams, strips: named.strips, choices: [] };
}

/** Vertex of one cut surface for each vertex of another, by place; -1 where it is not there. */
export function matchVertices(from: StripLayout, to: StripLayout): Int32Array {
  const key = (layout: StripLayout, v: number) => pointAt(layout.surface, { a: v, b: v, t: 0 }).join();
  const at = new Map<string, number>();
  for (let v = 0; v < to.surface.xyz.length / 3; v++) at.set(key(to, v), v);
  return Int32Array.from({ length: from.surface.xyz.length / 3 }, (_, v) => at.get(key(from, v)) ?? -1);
}
