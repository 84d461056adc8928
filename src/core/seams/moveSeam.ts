// Seams that can be moved one at a time, and the layout with one of them between two other places: for a seam end that is dragged.
// Traces one geodesic over the cloth on both sides and parts it there (partHeld.ts); lays nothing out, checks nothing (the plan does,
// when the seam is let go).
import { PlanError } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { EdgePlace, Job } from "../records/job.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import { measureDistance, pointAt, vertexAt } from "../surface/measures.ts";
import type { SurfacePoint } from "../surface/surface.ts";
import { isSamePoint } from "../surface/surfacePoint.ts";
import { AT_VERTEX } from "./chain.ts";
import { cutStrips } from "./cutStrips.ts";
import { findOnRim, type HeldSeam, holdSeam } from "./holdSeam.ts";
import { nameStrips } from "./nameStrips.ts";
import { findEdge, placeOnEdge } from "./pairs.ts";
import { joinParts, type MovedSeam, nameHalves, partHeld } from "./partHeld.ts";
import { type LaidSeams, laySeams, type SeamOptions } from "./runSeams.ts";
import { traceSeam } from "./seamLine.ts";

/** A layout whose seams can be moved one at a time. */
export interface SeamWork {
  job: Job;
  laid: LaidSeams;
  /** The layout as laid. */
  whole: StripLayout;
  /** By id of its weld: the paths (indices) that make it. */
  pathsOf: ReadonlyMap<string, number[]>;
  /** By id of its weld: places of its two ends; only of welds of one path whose ends lie on edges, which are those that can be moved. */
  ends: ReadonlyMap<string, [EdgePlace, EdgePlace]>;
  /** The seam in hand, and which of its two strips lies to the left of its way. */
  held: { weld: string; seam: HeldSeam; halves: [string, string] } | null;
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
  const cut = cutStrips(laid.form, laid.adjacency, laid.labels, laid.plans, laid.paths);
  const named = nameStrips(laid.form, job, laid.plans, cut);
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
  const whole = { surface: cut.surface, seams: named.seams, strips: named.strips, choices: [] };
  return { job, laid, whole, pathsOf, ends, held: null };
}

/** The held seam parted between two places. @throws PlanError seam-move */
function partBetween(work: SeamWork, seam: HeldSeam, weld: string, to: readonly [EdgePlace, EdgePlace]) {
  const { form } = work.laid;
  const [from, finish] = to.map((place) => {
    const edge = findEdge(form, place.edge, weld);
    const at = pointAt(form.surface, placeOnEdge(form, edge, place.at));
    return findOnRim(seam, form.edges.indexOf(edge), at, AT_VERTEX);
  });
  if (!from || !finish)
    throw new PlanError(
      "seam-move",
      `${weld} cannot end there: it would cross another seam, or its two panels do not border that edge`,
      weld,
    );
  const line = traceSeam(seam, from, finish);
  if (!line.clear)
    throw new PlanError(
      "seam-move",
      `${weld} would run along an edge or another seam, or touch it, between these places`,
      weld,
    );
  return partHeld(seam, line.points, weld);
}

/** Takes a seam in hand. @throws PlanError seam-move: it cannot be moved by itself; those of cutting */
function takeInHand(work: SeamWork, weld: string): NonNullable<SeamWork["held"]> {
  const ends = work.ends.get(weld);
  const path = work.pathsOf.get(weld)?.[0];
  if (ends === undefined || path === undefined)
    throw new PlanError(
      "seam-move",
      `${weld} cannot be moved by itself: it has several legs, ends inside the cloth, or carries the end of another seam; give the seams one by one (pairs)`,
      weld,
    );
  const own = new Set(work.whole.seams.filter((s) => s.weld === weld).flatMap((s) => s.strips));
  const strips = work.whole.strips.filter((s) => own.has(s.id));
  const seam = holdSeam(work.laid, work.whole, path, strips);
  return { weld, seam, halves: nameHalves(partBetween(work, seam, weld, ends), work.whole, strips) };
}

/**
 * The two strips of a weld between two other places, and its seams. The first move of a weld takes longer: its cloth is taken in hand.
 * Vertices of the base keep their numbers from one move of it to the next.
 * @throws PlanError seam-move: this weld cannot be moved, or not there; those of cutting
 */
export function moveSeamInPlace(work: SeamWork, weld: string, to: readonly [EdgePlace, EdgePlace]): MovedSeam {
  if (work.held?.weld !== weld) work.held = takeInHand(work, weld);
  const { seam, halves } = work.held;
  return joinParts(seam, partBetween(work, seam, weld, to), halves, work.laid.form, weld);
}
