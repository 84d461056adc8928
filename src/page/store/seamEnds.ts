// Where the welds of a plan begin and end, as places along the edges of the form: what takes them over into the job.
import type { Facts, FactsForm } from "../../core/records/facts.ts";

export interface EdgePlace {
  edge: string;
  at: number;
}

/** Points of an edge and the way along it to each of them, m. */
interface Run {
  points: readonly (readonly number[])[];
  along: Float64Array;
}

/** Runs of the edges of a form, measured once: grips are put in their places at every drawing. */
const measured = new WeakMap<FactsForm, Map<string, Run>>();

function runsOf(form: FactsForm): Map<string, Run> {
  const known = measured.get(form);
  if (known !== undefined) return known;
  const runs = new Map<string, Run>();
  for (const { id, vertices } of form.edges) {
    const points = vertices.map((v) => form.vertices[v]);
    const along = new Float64Array(points.length);
    for (let i = 1; i < points.length; i++) {
      const [[a, b, c], [p, q, r]] = [points[i - 1], points[i]];
      along[i] = along[i - 1] + Math.hypot(p - a, q - b, r - c);
    }
    runs.set(id, { points, along });
  }
  measured.set(form, runs);
  return runs;
}

/** The place on an edge nearest to a point, and its distance. */
function placeOn({ points, along }: Run, [x, y, z]: readonly number[]): { at: number; distance: number } {
  let at = 0;
  let least = Number.POSITIVE_INFINITY;
  for (let i = 1; i < points.length; i++) {
    const [[a, b, c], [p, q, r]] = [points[i - 1], points[i]];
    const [u, v, w] = [p - a, q - b, r - c];
    const share = (u * (x - a) + v * (y - b) + w * (z - c)) / (u * u + v * v + w * w || 1);
    const t = Math.min(Math.max(share, 0), 1);
    const distance = Math.hypot(a + t * u - x, b + t * v - y, c + t * w - z);
    if (distance < least) {
      least = distance;
      at = along[i - 1] + t * (along[i] - along[i - 1]);
    }
  }
  return { at: at / (along.at(-1) || 1), distance: least };
}

/** The place at a share of an edge, m. */
export function pointOnEdge(form: FactsForm, place: EdgePlace): number[] | null {
  const run = runsOf(form).get(place.edge);
  if (run === undefined) return null;
  const { points, along } = run;
  const s = place.at * (along.at(-1) ?? 0);
  let i = 1;
  while (i < points.length - 1 && along[i] < s) i++;
  const t = Math.min(Math.max((s - along[i - 1]) / (along[i] - along[i - 1] || 1), 0), 1);
  return points[i - 1].map((x, k) => x + t * (points[i][k] - x));
}

/**
 * The place that lies `by` metres on along an edge, negative: back. It stops where the edge ends; from there it goes on along the edge
 * that meets it, or round a closed one.
 */
export function slideAlong(form: FactsForm, place: EdgePlace, by: number): EdgePlace {
  const own = form.edges.find((e) => e.id === place.edge);
  if (own === undefined) return place;
  if (by > 0 ? place.at < 1 : place.at > 0)
    return { edge: own.id, at: Math.min(Math.max(place.at + by / own.length, 0), 1) };
  const corner = own.vertices.at(by > 0 ? -1 : 0);
  const closed = own.vertices[0] === own.vertices.at(-1);
  const next = closed
    ? own
    : form.edges.find((e) => e !== own && (e.vertices[0] === corner || e.vertices.at(-1) === corner));
  if (next === undefined) return place;
  const way = Math.min(Math.abs(by) / next.length, 1);
  const fromStart = closed ? by > 0 : next.vertices[0] === corner;
  return { edge: next.id, at: fromStart ? way : 1 - way };
}

/** Nearest place on any edge of the form, and its distance. */
function nearestPlace(form: FactsForm, p: readonly number[]): { place: EdgePlace; distance: number } | null {
  let found: { place: EdgePlace; distance: number } | null = null;
  for (const [edge, run] of runsOf(form)) {
    const { at, distance } = placeOn(run, p);
    if (found === null || distance < found.distance) found = { place: { edge, at }, distance };
  }
  return found;
}

/** Ends farther than this from every edge lie within the cloth, m. */
const ON_EDGE = 1e-3;

/**
 * The two ends of each weld, in the plan's order. Seams on inner cables are no pairs, they follow their cable; seams across strips
 * end within the cloth and come of the strips' length.
 * @param known ends that need not be sought, by the weld: to seek them all takes a while
 */
export function findSeamEnds(
  facts: Facts,
  known: ReadonlyMap<string, EdgePlace[]> = new Map(),
): { weld: string; places: EdgePlace[] }[] {
  const { form, seams } = facts;
  if (form === undefined || seams === undefined) return [];
  const welds = new Map<string, readonly number[][][]>();
  for (const s of seams) if (s.cable === null) welds.set(s.weld, [...(welds.get(s.weld) ?? []), s.path]);
  const same = (a: readonly number[] | undefined, b: readonly number[] | undefined) =>
    a?.every((x, k) => x === b?.[k]) === true;
  return [...welds].flatMap(([weld, paths]) => {
    const places = known.get(weld);
    if (places !== undefined) return [{ weld, places }];
    const ends = paths.flatMap((p) => [p[0], p.at(-1)]);
    const open = ends.filter((e) => ends.filter((o) => same(o, e)).length === 1);
    const [a, b] = open.slice(0, 2).map((e) => nearestPlace(form, e ?? []));
    if (!a || !b || a.distance > ON_EDGE || b.distance > ON_EDGE) return [];
    return [{ weld, places: [a.place, b.place] }];
  });
}
