// Names strips and seams in reading order and makes the records that the panels station takes.
import { type Finding, PlanError } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import type { Seam, Strip, StripSide } from "../records/stripLayout.ts";
import { vertexAt } from "../surface/measures.ts";
import { findSeat } from "./candidate.ts";
import type { CutForm } from "./cutStrips.ts";
import { isOpening } from "./openHoles.ts";
import type { RegionPlan } from "./seamPath.ts";
import { findEnds, measureVertices } from "./stripEnds.ts";
import { listSides, type RawSide } from "./stripSides.ts";
import { LEVEL_SLOPE, laysOver, measureSlope } from "./upperStrip.ts";

/** Strips and seams under their names. */
export interface NamedStrips {
  strips: Strip[];
  seams: Seam[];
  /** Ids of the strips of each region, in order. */
  byRegion: string[][];
  /** Id of the weld of each group of seam paths (SeamPath.weld). */
  weldOf: ReadonlyMap<string, string>;
  findings: Finding[];
}

/** A prefix under which none of n running numbers is taken. */
function pickPrefix(taken: ReadonlySet<string>, n: number, short: string, long: string): string {
  const free = (prefix: string) =>
    Array.from({ length: n }, (_, i) => `${prefix}${i + 1}`).every((id) => !taken.has(id));
  let prefix = short;
  for (let k = 1; !free(prefix); k++) prefix = `${long}${"-".repeat(k)}`;
  return prefix;
}

/** Turn of a place about a ring from where its gores begin, counter-clockwise seen from above, 0 … 2π; null for a region that is no ring. */
function turnAbout({ region }: RegionPlan): ((p: readonly number[]) => number) | null {
  if (region.outlines.length !== 2) return null;
  const [outer, inner] = region.outlines;
  const own = inner.vertices.map((v) => vertexAt(region.surface, v));
  const centre = [0, 1].map((c) => own.reduce((sum, p) => sum + p[c] / own.length, 0));
  const angle = (p: readonly number[]) => Math.atan2(p[1] - centre[1], p[0] - centre[0]);
  const zero = angle(vertexAt(region.surface, outer.vertices[findSeat(region, outer)]));
  return (p) => (angle(p) - zero + 4 * Math.PI) % (2 * Math.PI);
}

/**
 * Reading order of the strips: region by region, then their place in it; where that is not known round a ring from where gores begin, or
 * from one side of the roof to the other.
 */
function sortStrips(plans: readonly RegionPlan[], cut: CutForm): number[] {
  const middle = cut.strips.map((strip) => {
    const sum = [0, 0, 0];
    for (const t of strip.triangles)
      for (let k = 0; k < 3; k++) {
        const x = vertexAt(cut.surface, cut.surface.tri[3 * t + k]);
        for (let c = 0; c < 3; c++) sum[c] += x[c] / (3 * strip.triangles.length);
      }
    return sum;
  });
  const spread = (c: number) => Math.max(...middle.map((m) => m[c])) - Math.min(...middle.map((m) => m[c]));
  const first = spread(0) >= spread(1) * (1 - 1e-6) ? 0 : 1;
  const scale = 1e-6 * Math.max(spread(0), spread(1), 1e-9);
  const turns = plans.map(turnAbout);
  return cut.strips
    .map((_, s) => s)
    .sort((a, b) => {
      const p = cut.strips[a];
      const q = cut.strips[b];
      const turn = p.place < 0 ? turns[p.region] : null;
      const apart = turn ? turn(middle[a]) - turn(middle[b]) : 0;
      const round = Math.abs(apart) > 1e-9 ? apart : 0;
      const steps = [first, 1 - first, 2].map((c) => middle[a][c] - middle[b][c]);
      return p.region - q.region || p.place - q.place || round || (steps.find((d) => Math.abs(d) > scale) ?? a - b);
    });
}

interface RawSeam {
  strips: [number, number];
  side: RawSide;
  order: number[];
}

/** Every seam side once, from the strip that reads first. */
function listSeams(sides: RawSide[][], rank: number[]): RawSeam[] {
  const seams: RawSeam[] = [];
  sides.forEach((list, s) => {
    list.forEach((side, k) => {
      const o = side.neighbour;
      if (o === s)
        throw new PlanError(
          "seam-panel-self",
          `a panel joins itself along ${side.edge >= 0 ? "an inner cable" : "a seam"}: it cannot be welded flat; lay one more seam through it`,
          "seams",
          { strip: rank[s] + 1 },
        );
      if (o >= 0 && rank[s] < rank[o]) seams.push({ strips: [s, o], side, order: [rank[s], rank[o], k] });
    });
  });
  return seams.sort((a, b) => a.order[0] - b.order[0] || a.order[1] - b.order[1] || a.order[2] - b.order[2]);
}

function sideKey(a: number, b: number, first: number, second: number): string {
  return `${a}|${b}|${first}|${second}`;
}

function noteLevel(level: string[]): Finding[] {
  if (level.length === 0) return [];
  return [
    {
      code: "seam-level",
      level: "note",
      station: "seams",
      where: level,
      value: level.length,
      limit: LEVEL_SLOPE,
      text: `${level.length === 1 ? "A seam lies" : `${level.length} seams lie`} level across: the first panel in order laps over the second.`,
      remedy: "None needed; turn the lap in the cutting room where the site wants it otherwise.",
      basis: "own argument: a slope below half a per cent does not steer water",
    },
  ];
}

/** Makes strips, sides, ends and seams of the cut form. */
export function nameStrips(form: FoundForm, job: Job, plans: readonly RegionPlan[], cut: CutForm): NamedStrips {
  const cableOf = (edge: number) => (edge >= 0 && !isOpening(form.edges[edge]) ? form.edges[edge].id : null);
  let sides = listSides(plans, cut);
  const ends = sides.map((list, s) => findEnds(cut, s, list));
  const forced = new Set(ends.flatMap((end) => (end.split === undefined ? [] : [end.split])));
  if (forced.size > 0) sides = listSides(plans, cut, forced);
  const order = sortStrips(plans, cut);
  const rank: number[] = [];
  order.forEach((s, i) => {
    rank[s] = i;
  });
  const raw = listSeams(sides, rank);
  const taken = new Set([
    ...form.edges.map((edge) => edge.id),
    ...form.anchors.map((anchor) => anchor.id),
    ...(job.rolls ?? []).map((roll) => roll.id),
  ]);
  const panel = pickPrefix(taken, order.length, "P", "Panel");
  const seamName = pickPrefix(taken, raw.length, "S", "Seam");
  const stripId = (s: number) => `${panel}${rank[s] + 1}`;
  const seamOf = new Map<string, string>();
  const weldOf = new Map<string, string>();
  const level: string[] = [];
  const seams = raw.map((seam, i): Seam => {
    const { side } = seam;
    const [a, b] = seam.strips;
    const id = `${seamName}${i + 1}`;
    const { vertices } = side;
    seamOf.set(sideKey(a, b, vertices[0], vertices[vertices.length - 1]), id);
    seamOf.set(sideKey(b, a, vertices[vertices.length - 1], vertices[0]), id);
    const group = side.edge >= 0 ? `cable ${side.edge}` : cut.paths[side.path].weld;
    if (!weldOf.has(group)) weldOf.set(group, id);
    if (Math.abs(measureSlope(cut, vertices)) < 2 * LEVEL_SLOPE) level.push(id);
    return {
      id,
      weld: weldOf.get(group) ?? id,
      cable: cableOf(side.edge),
      vertices,
      strips: [stripId(a), stripId(b)],
      upper: laysOver(cut, vertices) ? stripId(a) : stripId(b),
      length: measureVertices(cut.surface, vertices),
    };
  });
  const strips = order.map((s): Strip => {
    const named = sides[s].map((side): StripSide => {
      const { vertices } = side;
      if (side.neighbour >= 0) {
        const id = seamOf.get(sideKey(s, side.neighbour, vertices[0], vertices[vertices.length - 1]));
        if (id === undefined)
          throw new PlanError(
            "seam-sides",
            `${stripId(s)} and ${stripId(side.neighbour)} do not end their common sides at the same points; move one of the seams a little`,
            [stripId(s), stripId(side.neighbour)],
          );
        return { kind: "seam", id, vertices };
      }
      const edge = form.edges[side.edge];
      const kind = edge.kind === "clamped" || edge.kind === "free" ? edge.kind : "cable";
      return { kind, id: edge.id, vertices };
    });
    return { id: stripId(s), triangles: cut.strips[s].triangles, sides: named, from: ends[s].from, to: ends[s].to };
  });
  const byRegion = plans.map((_, r) => order.filter((s) => cut.strips[s].region === r).map(stripId));
  return { strips, seams, byRegion, weldOf, findings: noteLevel(level) };
}
