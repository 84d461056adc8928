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

/** Nearest place on any edge of the form. */
export function nearestPlace(
  form: FactsForm,
  p: readonly number[],
  kinds = ["cable", "clamped", "free", "ridge", "valley", "belt"],
): EdgePlace | null {
  let found: EdgePlace | null = null;
  let least = Number.POSITIVE_INFINITY;
  for (const edge of form.edges) {
    if (!kinds.includes(edge.kind)) continue;
    const { at, distance } = placeOn(form, edge, p);
    if (distance >= least) continue;
    least = distance;
    found = { edge: edge.id, at };
  }
  return found;
}

/** One pair for each weld, in the plan's order; seams on inner cables are no pairs, they follow their cable. */
export function findSeamEnds(facts: Facts): EdgePlace[][] {
  const { form, seams } = facts;
  if (form === undefined || seams === undefined) return [];
  const welds = new Map<string, readonly number[][][]>();
  for (const s of seams) if (s.cable === null) welds.set(s.weld, [...(welds.get(s.weld) ?? []), s.path]);
  const same = (a: readonly number[] | undefined, b: readonly number[] | undefined) =>
    a?.every((x, k) => x === b?.[k]) === true;
  return [...welds.values()].flatMap((paths) => {
    const ends = paths.flatMap((p) => [p[0], p.at(-1)]);
    const open = ends.filter((e) => ends.filter((o) => same(o, e)).length === 1);
    const places = open.slice(0, 2).map((e) => nearestPlace(form, e ?? []));
    const [a, b] = places;
    const round = (p: EdgePlace): EdgePlace => ({ edge: p.edge, at: Math.round(p.at * 1e4) / 1e4 });
    return a && b ? [[round(a), round(b)]] : [];
  });
}
