// Seams across strips that are longer than the cloth: each runs from one flank of its strip to the other at one share of both,
// ends on crossings that the flank has anyway, and keeps off its neighbours' where there is room. Not here: cutting. Source: own.
import { measureDistance, pointAt } from "../surface/measures.ts";
import type { Surface, SurfacePoint } from "../surface/surface.ts";
import type { Chain } from "./chain.ts";
import type { Region } from "./region.ts";
import { type SeamLine, traceSeam } from "./seamLine.ts";
import type { RegionLayout } from "./trial.ts";

/** A seam across one strip. */
export interface CrossSeam {
  /** From the flank before the strip to the one after it. */
  line: SeamLine;
  /** Strip (index) of its region. */
  strip: number;
  /** Pieces before it, counted from the start. */
  piece: number;
}

/** Seams across of a region. */
export interface CrossPlan {
  seams: CrossSeam[];
  /** Pieces of each strip. */
  pieces: number[];
}

/** Neighbours' seams across keep this distance where the cloth allows, m. own: no place where four cloths meet lies within a weld's reach. */
const STAGGER = 0.6;
/** Below this distance they are led to one point instead, m. own: a shorter piece of seam cannot be welded by itself. */
const TOGETHER = 0.15;
/** A flank may end a seam only this share of a mesh side away from a vertex, or in it. */
const KEEP_OFF = 0.05;

/** Places this far from where a seam across should end are tried, m; beside being square to the strip, being there counts this much. */
const REACH = 0.6;
const ASIDE = 0.25;
/** Pairs of places traced at most for one seam. */
const TRIES = 6;

/** A flank of strips: places with arc lengths. */
export interface Flank {
  points: readonly SurfacePoint[];
  arc: number[];
  /** Arc lengths of seams that end on it already. */
  taken: number[];
}

function buildFlank(surface: Surface, points: readonly SurfacePoint[]): Flank {
  const arc = [0];
  for (let i = 1; i < points.length; i++)
    arc.push(arc[i - 1] + measureDistance(pointAt(surface, points[i - 1]), pointAt(surface, points[i])));
  return { points, arc, taken: [] };
}

function chainPoints(chain: Chain): SurfacePoint[] {
  return chain.vertices.map((v) => ({ a: v, b: v, t: 0 }));
}

/** Flanks of a region's strips in order; round a ring the first stands again at the end. */
function listFlanks(layout: RegionLayout): Flank[] {
  const { region, candidate, placement } = layout;
  const lines = placement.lines.map((line) => buildFlank(region.surface, line.points));
  if (!candidate.left || !candidate.right) return [...lines, lines[0]];
  const rim = (chain: Chain) => buildFlank(region.surface, chainPoints(chain));
  return [rim(candidate.left), ...lines, rim(candidate.right)];
}

/** A place on a flank that may end a seam. */
interface Stop {
  point: SurfacePoint;
  at: number;
  share: number;
}

/** The flank's own places within reach of a share of it: clear of vertices, of the seam across before, and of others' ends or on them. */
function listStops(flank: Flank, share: number, after: number): Stop[] {
  const { points, arc, taken } = flank;
  const total = arc[arc.length - 1];
  if (points.length === 1) return [{ point: points[0], at: 0, share }];
  const stops: Stop[] = [];
  for (let i = 1; i < points.length - 1; i++) {
    const { a, b, t } = points[i];
    const at = arc[i];
    if (Math.abs(at - share * total) > REACH || at < after + TOGETHER || at < TOGETHER || at > total - TOGETHER)
      continue;
    if (a !== b && (t < KEEP_OFF || t > 1 - KEEP_OFF)) continue;
    if (taken.some((s) => s !== at && Math.abs(s - at) < TOGETHER)) continue;
    stops.push({ point: points[i], at, share: at / total });
  }
  return stops;
}

/** Pairs of places for a seam at a share of both flanks, the squarest and nearest first. */
function pairStops(before: readonly Stop[], after: readonly Stop[], share: number): [Stop, Stop][] {
  const cost = ([p, q]: [Stop, Stop]) =>
    Math.abs(p.share - q.share) + ASIDE * (Math.abs(p.share - share) + Math.abs(q.share - share));
  const pairs = before.flatMap((p) => after.map((q): [Stop, Stop] => [p, q]));
  return pairs.sort((x, y) => cost(x) - cost(y)).slice(0, TRIES);
}

/** Shares at which a strip of this length is parted into n pieces no longer than most, moved by `shift` m. */
function shareOut(length: number, n: number, shift: number): number[] {
  return Array.from({ length: n - 1 }, (_, k) => (k + 1) / n + shift / length);
}

/** A seam across, and where on its two flanks it ends. */
interface LaidAcross {
  line: SeamLine;
  ends: [number, number];
}

/** Seams of one strip, or null where one finds no place or would leave the strip. */
function crossStrip(region: Region, [before, after]: [Flank, Flank], shares: readonly number[]): LaidAcross[] | null {
  const seams: LaidAcross[] = [];
  for (const share of shares) {
    const last = seams[seams.length - 1]?.ends ?? [0, 0];
    const pairs = pairStops(listStops(before, share, last[0]), listStops(after, share, last[1]), share);
    let laid = false;
    for (const [p, q] of pairs) {
      const line = traceSeam(region, p.point, q.point);
      if (!line.clear) continue;
      seams.push({ line, ends: [p.at, q.at] });
      laid = true;
      break;
    }
    if (!laid) return null;
  }
  return seams;
}

/**
 * Seams that part a strip longer than `maxLength` into the fewest pieces, square to its flanks, both of which run from its start;
 * `odd` strips are parted a little before, others a little after. Null where there is no place for them.
 * @units m
 */
export function partStrip(
  region: Region,
  flanks: [Flank, Flank],
  { length, maxLength, odd }: { length: number; maxLength: number; odd: boolean },
): LaidAcross[] | null {
  const n = Math.ceil(length / maxLength - 1e-9);
  const room = maxLength - length / n;
  const shift = room < TOGETHER ? 0 : ((odd ? -1 : 1) * Math.min(STAGGER, room)) / 2;
  return crossStrip(region, flanks, shareOut(length, n, shift)) ?? crossStrip(region, flanks, shareOut(length, n, 0));
}

/**
 * Seams across for all strips of a region that are longer than `maxLength`, each strip in the fewest pieces.
 * A strip that cannot be parted so is left whole.
 * @units m
 */
export function layCrossSeams(layout: RegionLayout, maxLength: number | null): CrossPlan {
  const { sizes, hugging } = layout.placement;
  const plan: CrossPlan = { seams: [], pieces: sizes.map(() => 1) };
  if (maxLength === null || hugging.length > 0 || sizes.every((size) => size.length <= maxLength)) return plan;
  const flanks = listFlanks(layout);
  sizes.forEach(({ length }, j) => {
    if (length <= maxLength) return;
    const own: [Flank, Flank] = [flanks[j], flanks[j + 1]];
    const seams = partStrip(layout.region, own, { length, maxLength, odd: j % 2 === 1 });
    if (!seams) return;
    for (const [p, q] of seams.map(({ ends }) => ends)) {
      own[0].taken.push(p);
      own[1].taken.push(q);
    }
    plan.seams.push(...seams.map(({ line }, piece) => ({ line, strip: j, piece })));
    plan.pieces[j] = seams.length + 1;
  });
  return plan;
}
