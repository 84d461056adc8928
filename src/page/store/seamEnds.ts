// Where the welds of a plan begin and end, as places along the edges of the form: what takes them over into the job.
import type { Facts, FactsForm } from "../../core/records/facts.ts";

export interface EdgePlace {
  edge: string;
  at: number;
}

/** The place on an edge nearest to a point, and its distance. */
function placeOn(
  form: FactsForm,
  edge: FactsForm["edges"][number],
  p: readonly number[],
): { at: number; distance: number } {
  const points = edge.vertices.map((v) => form.vertices[v]);
  let along = 0;
  let best = { along: 0, distance: Number.POSITIVE_INFINITY };
  for (let i = 1; i < points.length; i++) {
    const [a, b] = [points[i - 1], points[i]];
    const d = [b[0] - a[0], b[1] - a[1], b[2] - a[2]];
    const length = Math.hypot(...d);
    const share = d.reduce((s, x, k) => s + x * (p[k] - a[k]), 0) / (length * length || 1);
    const t = Math.min(Math.max(share, 0), 1);
    const distance = Math.hypot(...d.map((x, k) => a[k] + t * x - p[k]));
    if (distance < best.distance) best = { along: along + t * length, distance };
    along += length;
  }
  return { at: best.along / (along || 1), distance: best.distance };
}

/** The place at a share of an edge, m. */
export function pointOnEdge(form: FactsForm, place: EdgePlace): number[] | null {
  const edge = form.edges.find((e) => e.id === place.edge);
  if (edge === undefined) return null;
  const points = edge.vertices.map((v) => form.vertices[v]);
  const arc = [0];
  for (let i = 1; i < points.length; i++)
    arc.push(arc[i - 1] + Math.hypot(...points[i].map((x, k) => x - points[i - 1][k])));
  const s = place.at * (arc.at(-1) ?? 0);
  let i = 1;
  while (i < points.length - 1 && arc[i] < s) i++;
  const t = Math.min(Math.max((s - arc[i - 1]) / (arc[i] - arc[i - 1] || 1), 0), 1);
  return points[i - 1].map((x, k) => x + t * (points[i][k] - x));
}

/** Nearest place on any edge of the form, and its distance. */
function nearestPlace(form: FactsForm, p: readonly number[]): { place: EdgePlace; distance: number } | null {
  let found: { place: EdgePlace; distance: number } | null = null;
  for (const edge of form.edges) {
    const { at, distance } = placeOn(form, edge, p);
    if (found === null || distance < found.distance) found = { place: { edge: edge.id, at }, distance };
  }
  return found;
}

/** Ends farther than this from every edge lie within the cloth, m. */
const ON_EDGE = 1e-3;

/**
 * The two ends of each weld, in the plan's order. Seams on inner cables are no pairs, they follow their cable; seams across strips
 * end within the cloth and come of the strips' length.
 */
export function findSeamEnds(facts: Facts): { weld: string; places: EdgePlace[] }[] {
  const { form, seams } = facts;
  if (form === undefined || seams === undefined) return [];
  const welds = new Map<string, readonly number[][][]>();
  for (const s of seams) if (s.cable === null) welds.set(s.weld, [...(welds.get(s.weld) ?? []), s.path]);
  const same = (a: readonly number[] | undefined, b: readonly number[] | undefined) =>
    a?.every((x, k) => x === b?.[k]) === true;
  return [...welds].flatMap(([weld, paths]) => {
    const ends = paths.flatMap((p) => [p[0], p.at(-1)]);
    const open = ends.filter((e) => ends.filter((o) => same(o, e)).length === 1);
    const [a, b] = open.slice(0, 2).map((e) => nearestPlace(form, e ?? []));
    if (!a || !b || a.distance > ON_EDGE || b.distance > ON_EDGE) return [];
    return [{ weld, places: [a.place, b.place] }];
  });
}
