// Cuts the form along all seam lines and inner cables and tells which triangles make which strip, and what every piece of a
// strip's outline belongs to. Sides, ends and names are made of it in stripSides.ts and nameStrips.ts.
import { type Finding, PlanError } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import { type Adjacency, nextHalfedge } from "../surface/adjacency.ts";
import { cutSurface } from "../surface/cut.ts";
import { markCuts, partSurface, traceOutlineSides } from "../surface/pieces.ts";
import type { Surface, SurfacePoint } from "../surface/surface.ts";
import { segmentKey } from "./region.ts";
import type { RegionPlan, SeamPath } from "./seamPath.ts";

/** What a piece of outline lies on. */
export interface BorderMark {
  /** Form edge (index), or -1. */
  edge: number;
  /** Seam path (index), or -1. */
  path: number;
  /** End of the strip: 1 from, 2 to, 0 none. */
  end: 0 | 1 | 2;
}

/** A strip as cut, not yet named. */
export interface RawStrip {
  region: number;
  /** Place among its region's strips, -1 where not known beforehand. */
  place: number;
  triangles: number[];
  /** Half-edges of the cut surface along its outline. */
  outline: number[];
}

/** The form cut into strips. */
export interface CutForm {
  surface: Surface;
  adjacency: Adjacency;
  /** Strip of each triangle. @shape nT */
  stripOf: Int32Array<ArrayBuffer>;
  strips: RawStrip[];
  /** By half-edge of the cut surface, for all strip borders. */
  marks: Map<number, BorderMark>;
  /** Place on the form of each vertex beyond the form's own, in order. */
  inserted: SurfacePoint[];
  /** Seam paths that were cut, the others fell out with a stop. */
  paths: SeamPath[];
  findings: Finding[];
}

/** Shares of an edge within which a crossing is moved to its end; the smaller one where the larger pinches a narrow strip. */
export const SNAPS = [0.004, 0.0005];
/** … but no further than this, m: a crossing moved by more makes a jog in the seam that fairing (0.2 mm) must keep. */
export const SNAP_REACH = 1.5e-4;

function formPoints(plans: readonly RegionPlan[], path: SeamPath): SurfacePoint[] {
  const of = plans[path.region].region.formVertex;
  return path.line.points.map((p) => ({ a: of[p.a], b: of[p.b], t: p.t }));
}

/** Cuts, leaving out any path that crosses an earlier one. */
function cutPaths(form: FoundForm, adjacency: Adjacency, plans: readonly RegionPlan[], all: SeamPath[], snap: number) {
  const paths = [...all];
  const findings: Finding[] = [];
  for (;;) {
    try {
      const points = paths.map((path) => formPoints(plans, path));
      return { cut: cutSurface(form.surface, points, { adjacency, snap, reach: SNAP_REACH }), paths, findings };
    } catch (error) {
      if (!(error instanceof PlanError) || error.code !== "seam-crossing" || paths.length === 0) throw error;
      const { first, second, x, y, z } = error.facts;
      const place = [x, y, z].map((c) => Number(c).toFixed(3)).join(", ");
      const [gone] = paths.splice(Math.max(Number(first), Number(second)), 1);
      findings.push({
        code: "seam-crosses",
        level: "stop",
        station: "seams",
        where: gone.weld,
        value: place,
        limit: null,
        text: `The seam of ${gone.weld} crosses another at (${place}) m; it was left out.`,
        remedy: "Move one of its ends so that both seams keep to their sides.",
        basis: "own argument",
      });
    }
  }
}

/** Marks of all border half-edges: form edges with what was inserted on them, and seam paths. */
function markBorders(
  form: FoundForm,
  labels: Map<number, number>,
  plans: readonly RegionPlan[],
  paths: readonly SeamPath[],
  cut: ReturnType<typeof cutSurface>,
) {
  const nV = form.surface.xyz.length / 3;
  const nCut = cut.surface.xyz.length / 3;
  const inserted = new Map<number, { t: number; v: number }[]>();
  cut.vertexPlace.forEach((p, i) => {
    const key = segmentKey(p.a, p.b, nV);
    const list = inserted.get(key) ?? [];
    list.push({ t: p.t, v: nV + i });
    inserted.set(key, list);
  });
  const marks = new Map<number, BorderMark>();
  const endOf = new Map<number, 1 | 2>();
  for (const plan of plans) for (const [key, end] of plan.endOf) endOf.set(key, end);
  for (const [key, edge] of labels) {
    const a = Math.floor(key / nV);
    const b = key % nV;
    const list = [...(inserted.get(key) ?? [])].sort((p, q) => p.t - q.t).map((s) => s.v);
    const run = [a, ...list, b];
    for (let i = 1; i < run.length; i++) {
      const forward = endOf.get(segmentKey(a, b, nV)) ?? 0;
      const backward = endOf.get(segmentKey(b, a, nV)) ?? 0;
      marks.set(segmentKey(run[i - 1], run[i], nCut), { edge, path: -1, end: forward });
      marks.set(segmentKey(run[i], run[i - 1], nCut), { edge, path: -1, end: backward });
    }
  }
  cut.pathVertices.forEach((run, path) => {
    const { across } = paths[path];
    for (let i = 1; i < run.length; i++) {
      const forward = segmentKey(run[i - 1], run[i], nCut);
      if (marks.has(forward)) continue;
      marks.set(forward, { edge: -1, path, end: across?.left ?? 0 });
      marks.set(segmentKey(run[i], run[i - 1], nCut), { edge: -1, path, end: across?.right ?? 0 });
    }
  });
  return marks;
}

/**
 * Cuts the form into strips.
 * @throws PlanError seam-panel-ring: a panel has more than one outline; seam-panel-count: seams do not part a region as laid out
 */
export function cutStrips(
  form: FoundForm,
  adjacency: Adjacency,
  labels: Map<number, number>,
  plans: readonly RegionPlan[],
  all: SeamPath[],
): CutForm {
  let last: CutForm | null = null;
  for (const snap of SNAPS) {
    last = cutOnce(form, adjacency, labels, plans, all, snap);
    if (all.length === last.paths.length && isAsLaid(plans, last.strips)) return last;
    if (last.paths.length < all.length) break;
  }
  if (!last) throw new PlanError("seam-panel-count", "nothing was cut", "seams");
  const { strips, paths } = last;
  plans.forEach((plan, r) => {
    const count = strips.filter((strip) => strip.region === r).length;
    if (plan.strips !== null && count !== plan.strips && paths.length === all.length)
      throw new PlanError(
        "seam-panel-count",
        `the seams part ${plan.region.id} into ${count} panels in place of ${plan.strips}: they run too close to each other or to the edge; ask for fewer strips or a finer mesh`,
        plan.region.id,
        { panels: count, expected: plan.strips },
      );
  });
  return last;
}

function isAsLaid(plans: readonly RegionPlan[], strips: readonly RawStrip[]): boolean {
  return plans.every((plan, r) => {
    if (plan.strips === null) return true;
    const own = strips.filter((strip) => strip.region === r);
    return own.length === plan.strips && new Set(own.map((strip) => strip.place)).size === own.length;
  });
}

function cutOnce(
  form: FoundForm,
  before: Adjacency,
  labels: Map<number, number>,
  plans: readonly RegionPlan[],
  all: SeamPath[],
  snap: number,
): CutForm {
  const { cut, paths, findings } = cutPaths(form, before, plans, all, snap);
  const { surface, adjacency } = cut;
  const nCut = adjacency.nV;
  const byEnds = markBorders(form, labels, plans, paths, cut);
  const cuts: [number, number][] = [];
  const keyOf = (h: number) => segmentKey(surface.tri[h], surface.tri[nextHalfedge(h)], nCut);
  for (let h = 0; h < surface.tri.length; h++)
    if (adjacency.twin[h] > h && byEnds.has(keyOf(h))) cuts.push([surface.tri[h], surface.tri[nextHalfedge(h)]]);
  const stripOf = partSurface(surface, cuts, adjacency);
  const regionOf = new Int32Array(form.surface.tri.length / 3);
  plans.forEach((plan, r) => {
    for (const t of plan.region.triangles) regionOf[t] = r;
  });
  const members: number[][] = [];
  stripOf.forEach((s, t) => {
    members[s] ??= [];
    members[s].push(t);
  });
  const marks = new Map<number, BorderMark>();
  const cutMarks = markCuts(surface, adjacency, cuts);
  const strips = members.map((triangles): RawStrip => {
    const region = regionOf[cut.parent[triangles[0]]];
    const loops = traceOutlineSides(surface, triangles, cutMarks, adjacency);
    if (loops.length !== 1) refuseRing(form, plans[region], loops.length);
    let place = plans[region].strips === 1 ? 0 : -1;
    let told = place >= 0;
    for (const h of loops[0]) {
      const mark = byEnds.get(keyOf(h));
      if (!mark) continue;
      marks.set(h, mark);
      // a seam along its flank knows only the first panel of a strip that is cut across; a seam across knows better
      if (mark.path < 0 || told || (place >= 0 && !paths[mark.path].across)) continue;
      const path = paths[mark.path];
      told = path.across !== undefined;
      place = isAlong(cut.pathVertices[mark.path], surface.tri[h], surface.tri[nextHalfedge(h)])
        ? path.left
        : path.right;
    }
    return { region, place, triangles, outline: loops[0] };
  });
  return { surface, adjacency, stripOf, strips, marks, inserted: cut.vertexPlace, paths, findings };
}

/** True where a → b runs the path's way. */
function isAlong(path: readonly number[], a: number, b: number): boolean {
  const i = path.indexOf(a);
  return path[i + 1] === b;
}

function refuseRing(form: FoundForm, plan: RegionPlan, loops: number): never {
  const rings = [...new Set(plan.region.outlines.flatMap((o) => [...o.edge].map((e) => form.edges[e].id)))];
  throw new PlanError(
    "seam-panel-ring",
    `a panel of ${plan.region.id} has ${loops} outlines: it runs round a hole and joins itself, which cannot be laid flat; lay two seams or more from the inner loop to the outer one (edges ${rings.join(", ")})`,
    plan.region.id,
    { loops },
  );
}
