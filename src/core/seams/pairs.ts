// Seams given one by one: places along edges of the form, from first to last through those between. Each leg is traced in the
// region that both its places border; legs of one pair are one weld.
import { type Finding, PlanError } from "../problem.ts";
import type { FormEdge, FoundForm } from "../records/foundForm.ts";
import type { EdgePlace } from "../records/job.ts";
import { measureDistance, vertexAt } from "../surface/measures.ts";
import type { SurfacePoint } from "../surface/surface.ts";
import { isSamePoint } from "../surface/surfacePoint.ts";
import { AT_VERTEX } from "./chain.ts";
import { type Region, segmentKey } from "./region.ts";
import { type SeamLine, traceSeam } from "./seamLine.ts";

/** A leg of a given seam. */
export interface PairLeg {
  region: Region;
  line: SeamLine;
  /** Index of the pair it belongs to. */
  pair: number;
}

/** An edge of the form by name. @throws PlanError seam-edge-name */
export function findEdge(form: FoundForm, id: string, where: string): FormEdge {
  const edge = form.edges.find((e) => e.id === id);
  if (!edge)
    throw new PlanError(
      "seam-edge-name",
      `${where} names edge "${id}", which the form does not have; its edges are ${form.edges.map((e) => e.id).join(", ")}`,
      where,
      { edge: id },
    );
  return edge;
}

/** The place on the form's surface at share `at` of an edge's arc length. */
export function placeOnEdge(form: FoundForm, edge: FormEdge, at: number): SurfacePoint {
  const length: number[] = [0];
  for (let i = 1; i < edge.vertices.length; i++)
    length.push(
      length[i - 1] +
        measureDistance(vertexAt(form.surface, edge.vertices[i - 1]), vertexAt(form.surface, edge.vertices[i])),
    );
  const s = Math.min(1, Math.max(0, at)) * length[length.length - 1];
  let i = 1;
  while (i < length.length - 1 && length[i] < s) i++;
  const t = (s - length[i - 1]) / (length[i] - length[i - 1]);
  if (t < AT_VERTEX) return { a: edge.vertices[i - 1], b: edge.vertices[i - 1], t: 0 };
  if (t > 1 - AT_VERTEX) return { a: edge.vertices[i], b: edge.vertices[i], t: 0 };
  return { a: edge.vertices[i - 1], b: edge.vertices[i], t };
}

/** A form place on the outlines of a region; more than one where a cable slits the region. */
export function findInRegion(form: FoundForm, region: Region, p: SurfacePoint): SurfacePoint[] {
  const nV = form.surface.xyz.length / 3;
  const out: SurfacePoint[] = [];
  for (const outline of region.outlines)
    outline.vertices.forEach((v, i) => {
      const w = outline.vertices[(i + 1) % outline.vertices.length];
      const a = region.formVertex[v];
      const b = region.formVertex[w];
      if (p.t === 0) {
        if (a === p.a) out.push({ a: v, b: v, t: 0 });
      } else if (segmentKey(a, b, nV) === segmentKey(p.a, p.b, nV)) out.push({ a: v, b: w, t: p.t });
      else if (segmentKey(b, a, nV) === segmentKey(p.a, p.b, nV)) out.push({ a: w, b: v, t: p.t });
    });
  return out;
}

/** The shortest leg between two form places over all regions that both border, or null. */
function traceLeg(form: FoundForm, regions: readonly Region[], p: SurfacePoint, q: SurfacePoint) {
  let best: { region: Region; line: SeamLine } | null = null;
  for (const region of regions)
    for (const from of findInRegion(form, region, p))
      for (const to of findInRegion(form, region, q)) {
        const line = traceSeam(region, from, to);
        const better = !best || (line.clear && !best.line.clear) || line.length < best.line.length * (1 - 1e-9);
        if (better && !(best?.line.clear && !line.clear)) best = { region, line };
      }
  return best;
}

/**
 * Legs of all pairs; a pair that cannot be laid is left out with a stop.
 * @throws PlanError seam-edge-name: a pair names an edge that is not there
 */
export function tracePairs(form: FoundForm, regions: readonly Region[], pairs: readonly EdgePlace[][]) {
  const legs: PairLeg[] = [];
  const findings: Finding[] = [];
  const refuse = (code: string, pair: number, text: string, remedy: string) =>
    findings.push({
      code,
      level: "stop",
      station: "seams",
      where: `seams.pairs[${pair}]`,
      value: null,
      limit: null,
      text,
      remedy,
      basis: "own argument",
    });
  pairs.forEach((places, pair) => {
    const where = `seams.pairs[${pair}]`;
    const points = places.map((place) => placeOnEdge(form, findEdge(form, place.edge, where), place.at));
    const name = (k: number) => `${places[k].edge} at ${places[k].at}`;
    const own: PairLeg[] = [];
    for (let k = 1; k < points.length; k++) {
      if (isSamePoint(points[k - 1], points[k])) {
        refuse("seam-point", pair, `Both ends of a seam are one place (${name(k)}).`, "Give two different places.");
        return;
      }
      const leg = traceLeg(form, regions, points[k - 1], points[k]);
      if (!leg) {
        refuse(
          "seam-leaves",
          pair,
          `No piece of the cloth borders both ${name(k - 1)} and ${name(k)}: an inner cable lies between them.`,
          "Give the place on that cable which the seam runs through.",
        );
        return;
      }
      if (!leg.line.clear) {
        refuse(
          "seam-hugs-edge",
          pair,
          `The straight way from ${name(k - 1)} to ${name(k)} touches the edge of the cloth between its ends: it would leave the surface.`,
          "Move an end away from the hollow edge, or split the seam at a place on that edge.",
        );
        return;
      }
      own.push({ ...leg, pair });
    }
    legs.push(...own);
  });
  return { legs, findings };
}
