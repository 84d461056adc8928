// Geodesics: locally shortest paths over the triangles, straight on the unfolded surface. Start from a best-first sleeve,
// then funnel and flips (sleeve.ts); round holes the other way is tried as well. Where the surface between is domed more than one
// geodesic may join two places: there a bounded exact search (exactSearch.ts) looks for a shorter one.
import { PlanError } from "../problem.ts";
import type { Adjacency } from "./adjacency.ts";
import { findShorterSleeve } from "./exactSearch.ts";
import { createSleeveScratch } from "./funnel.ts";
import { buildHoleCuts, type HoleCuts } from "./holeCuts.ts";
import { measureDistance, pointAt, vertexAt } from "./measures.ts";
import { measureAngle, type SleeveField, shortenSleeve, touchesBoundary } from "./sleeve.ts";
import { createSearchScratch, findSleeve, type SearchField } from "./sleeveSearch.ts";
import type { Surface, SurfacePoint } from "./surface.ts";
import { checkPoint, findTrianglesAt, isSamePoint, namePoint } from "./surfacePoint.ts";
import { buildUnfolding } from "./unfolding.ts";

/**
 * The search for another way round a hole ends at this times the length in hand and so many mean sides more: its lengths go through
 * the middles of sides and may be too long by that.
 */
const DETOUR = 1.01;
const DETOUR_SIDES = 2;

/** Two ways are equally long within this share. */
const EQUAL_SHARE = 1e-9;

/**
 * Positive curvature (rad, summed over inner vertices near the path) below which one way round the holes holds one geodesic, or
 * two that differ by less than half its square in length.
 */
const LEAST_DOME = 1e-4;

/** A path over the surface. */
export interface SurfacePath {
  /** Places on mesh edges and vertices in order; first and last are the ends asked for, in normal form. */
  points: SurfacePoint[];
  /** m */
  length: number;
  /** It runs along the boundary, or passes or bends at a boundary vertex, other than at its ends. */
  touchesBoundary: boolean;
  /** False where another way round a hole is as long within 1e-9. */
  unique: boolean;
}

/** How a geodesic is chosen. */
export interface GeodesicOptions {
  /** "shortest" also tries the other side of every hole; "start" keeps the way of the first line found. */
  homotopy?: "shortest" | "start";
  /** Made once for many paths on one surface; must belong to the same surface. */
  solver?: GeodesicSolver;
}

/** Lengths, holes and scratch for many geodesics on one surface. */
export interface GeodesicSolver extends SleeveField, SearchField {
  cuts: HoleCuts;
  /** m */
  meanSide: number;
}

/**
 * What many geodesics on one surface share.
 * @throws PlanError surface-vertex: two boundary runs touch at a vertex
 */
export function createGeodesicSolver(surface: Surface, adjacency: Adjacency): GeodesicSolver {
  const { nV, nT, twin } = adjacency;
  const unfolding = buildUnfolding(surface);
  const cuts = buildHoleCuts(surface, adjacency, unfolding);
  const onBoundary = new Uint8Array(nV);
  for (let h = 0; h < 3 * nT; h++) {
    if (twin[h] >= 0) continue;
    onBoundary[surface.tri[h]] = 1;
    onBoundary[surface.tri[h % 3 === 2 ? h - 2 : h + 1]] = 1;
  }
  return {
    surface,
    adjacency,
    unfolding,
    cuts,
    meanSide: unfolding.length.reduce((sum, l) => sum + l, 0) / (3 * nT),
    crossing: cuts.crossing,
    scratch: createSearchScratch(nT),
    angle: new Float64Array(nV).fill(-1),
    onBoundary,
    sleeveScratch: createSleeveScratch(),
  };
}

/** Straight line inside one triangle, or null where no triangle holds both places. */
function findShortCut(solver: GeodesicSolver, p: SurfacePoint, q: SurfacePoint): SurfacePath | null {
  const { surface, adjacency } = solver;
  const there = findTrianglesAt(surface, adjacency, q).triangles;
  if (!findTrianglesAt(surface, adjacency, p).triangles.some((t) => there.includes(t))) return null;
  const points = [p, q];
  return {
    points,
    length: measureDistance(pointAt(surface, p), pointAt(surface, q)),
    touchesBoundary: touchesBoundary(solver, points),
    unique: true,
  };
}

/** Smaller vertex numbers first, so that both directions take the same start. */
function isInOrder(p: SurfacePoint, q: SurfacePoint): boolean {
  if (p.a !== q.a) return p.a < q.a;
  return p.b !== q.b ? p.b < q.b : p.t < q.t;
}

/** True where the vertices that a path of this length could pass hold positive curvature. */
function isDomed(solver: GeodesicSolver, from: SurfacePoint, to: SurfacePoint, length: number): boolean {
  const { surface, adjacency, onBoundary } = solver;
  const [p, q] = [pointAt(surface, from), pointAt(surface, to)];
  let sum = 0;
  for (let v = 0; v < adjacency.nV; v++) {
    if (onBoundary[v] || adjacency.fanStart[v] === adjacency.fanStart[v + 1]) continue;
    const excess = 2 * Math.PI - measureAngle(solver, v);
    if (excess <= 0) continue;
    const at = vertexAt(surface, v);
    if (measureDistance(p, at) + measureDistance(at, q) <= length) sum += excess;
    if (sum > LEAST_DOME) return true;
  }
  return false;
}

function traceOrdered(solver: GeodesicSolver, from: SurfacePoint, to: SurfacePoint, shortest: boolean): SurfacePath {
  const { cuts } = solver;
  const sleeve = findSleeve(solver, { from, to, hole: -1, parity: 0, limit: Number.POSITIVE_INFINITY });
  if (!sleeve)
    throw new PlanError(
      "surface-pieces",
      `${namePoint(from)} and ${namePoint(to)} lie on pieces of the membrane that hang together in no side: choose both ends on one piece`,
      [namePoint(from), namePoint(to)],
      { from: from.a, to: to.a },
    );
  let best = shortenSleeve(solver, from, to, sleeve);
  let unique = true;
  for (let hole = 0; shortest && hole < cuts.holePiece.length; hole++) {
    if (cuts.holePiece[hole] !== cuts.piece[from.a]) continue;
    const parity = 1 - ((sleeve.marks >> hole) & 1);
    const other = findSleeve(solver, {
      from,
      to,
      hole,
      parity,
      limit: DETOUR * best.length + DETOUR_SIDES * solver.meanSide,
    });
    if (!other) continue;
    const path = shortenSleeve(solver, from, to, other);
    if (Math.abs(path.length - best.length) <= EQUAL_SHARE * best.length) unique = false;
    else if (path.length < best.length) {
      best = path;
      unique = true;
    }
  }
  if (shortest && isDomed(solver, from, to, best.length)) {
    const bends = (v: number) => solver.onBoundary[v] === 1 || measureAngle(solver, v) > 2 * Math.PI;
    const shorter = findShorterSleeve(solver, [from, to], best.length, bends);
    if (shorter) {
      const path = shortenSleeve(solver, from, to, shorter);
      if (path.length < best.length) {
        best = path;
        unique = true;
      }
    }
  }
  return { ...best, touchesBoundary: touchesBoundary(solver, best.points), unique };
}

/**
 * The geodesic between two places on mesh edges or vertices: straight across every side it crosses, bending only at boundary
 * and saddle vertices; the shortest of the ways round the holes unless asked otherwise. Same length in both directions.
 * @units m
 * @throws PlanError surface-point: a place not on the mesh; surface-pieces: ends on different pieces; seam-point: both ends are
 *   one place; geodesic-open: no straight line within the rounds allowed; surface-vertex: two boundary runs touch
 * @source sleeve.ts, sleeveSearch.ts
 */
export function traceGeodesic(
  surface: Surface,
  adjacency: Adjacency,
  from: SurfacePoint,
  to: SurfacePoint,
  options: GeodesicOptions = {},
): SurfacePath {
  const solver = options.solver ?? createGeodesicSolver(surface, adjacency);
  const p = checkPoint(surface, adjacency, from);
  const q = checkPoint(surface, adjacency, to);
  if (isSamePoint(p, q))
    throw new PlanError(
      "seam-point",
      `both ends of the path are one place (${namePoint(p)}): choose two different places`,
      namePoint(p),
      { a: p.a, b: p.b, t: p.t },
    );
  const { piece } = solver.cuts;
  if (piece[p.a] !== piece[q.a])
    throw new PlanError(
      "surface-pieces",
      `${namePoint(p)} lies on piece ${piece[p.a] + 1} of the membrane and ${namePoint(q)} on piece ${piece[q.a] + 1}: choose both ends on one piece`,
      [`piece ${piece[p.a] + 1}`, `piece ${piece[q.a] + 1}`],
      { from: p.a, to: q.a },
    );
  const short = findShortCut(solver, p, q);
  if (short) return short;
  const shortest = options.homotopy !== "start";
  if (isInOrder(p, q)) return traceOrdered(solver, p, q, shortest);
  const path = traceOrdered(solver, q, p, shortest);
  path.points.reverse();
  return path;
}

/**
 * Geodesics from place to place, joined to one path that may bend at the places between.
 * @throws PlanError as traceGeodesic; seam-point also for fewer than two places
 */
export function traceThrough(
  surface: Surface,
  adjacency: Adjacency,
  places: readonly SurfacePoint[],
  options: GeodesicOptions = {},
): SurfacePath {
  if (places.length < 2)
    throw new PlanError("seam-point", `a path needs two places at least, not ${places.length}`, [], {
      places: places.length,
    });
  const solver = options.solver ?? createGeodesicSolver(surface, adjacency);
  const joined: SurfacePath = { points: [], length: 0, touchesBoundary: false, unique: true };
  for (let i = 1; i < places.length; i++) {
    const path = traceGeodesic(surface, adjacency, places[i - 1], places[i], { ...options, solver });
    joined.points.push(...(i > 1 ? path.points.slice(1) : path.points));
    joined.length += path.length;
    joined.unique &&= path.unique;
  }
  joined.touchesBoundary = touchesBoundary(solver, joined.points);
  return joined;
}
