// Seams across the strips between seams that were given one by one, where a strip is longer than the cloth. The strips are not known
// before they are cut, so this cuts once for itself.
import type { FoundForm } from "../records/foundForm.ts";
import type { Adjacency } from "../surface/adjacency.ts";
import { measureDistance, vertexAt } from "../surface/measures.ts";
import type { SurfacePoint } from "../surface/surface.ts";
import { type Flank, partStrip } from "./crossSeams.ts";
import { type CutForm, cutStrips } from "./cutStrips.ts";
import type { Region } from "./region.ts";
import type { RegionPlan, SeamPath } from "./seamPath.ts";
import { findEnds } from "./stripEnds.ts";
import { listSides } from "./stripSides.ts";

/** Vertices of the outline after the last of one end to the first of the other, both included. */
function runBetween(ring: readonly number[], from: ReadonlySet<number>, to: ReadonlySet<number>): number[] {
  const n = ring.length;
  const last = ring.findIndex((v, i) => from.has(v) && !from.has(ring[(i + 1) % n]));
  const out: number[] = [];
  for (let i = last; i >= 0 && out.length <= n; i++) {
    out.push(ring[i % n]);
    if (i > last && to.has(ring[i % n])) break;
  }
  return out;
}

/** Form vertices in numbers of a region; null where a vertex stands on it more than once (a cable slits it). */
function numberRegion(region: Region): Map<number, number> | null {
  const own = new Map(Array.from(region.formVertex, (f, v) => [f, v]));
  return own.size === region.formVertex.length ? own : null;
}

/** A flank of a strip as places of its region, with the seams that end on it already; null where it leaves the region. */
function buildFlank(form: FoundForm, cut: CutForm, own: Map<number, number>, run: number[], ends: Set<number>) {
  const nV = form.surface.xyz.length / 3;
  const points: SurfacePoint[] = [];
  const arc = [0];
  for (const [i, v] of run.entries()) {
    const p = v < nV ? { a: v, b: v, t: 0 } : cut.inserted[v - nV];
    const [a, b] = [own.get(p.a), own.get(p.b)];
    if (a === undefined || b === undefined) return null;
    points.push(a <= b ? { a, b, t: p.t } : { a: b, b: a, t: 1 - p.t });
    if (i > 0) arc.push(arc[i - 1] + measureDistance(vertexAt(cut.surface, run[i - 1]), vertexAt(cut.surface, v)));
  }
  const flank: Flank = { points, arc, taken: arc.filter((_, i) => ends.has(run[i])) };
  return flank;
}

/** Strips that share a border, by strip. */
function listNeighbours(cut: CutForm): Set<number>[] {
  return cut.strips.map(
    ({ outline }) =>
      new Set(
        outline.flatMap((h) => {
          const twin = cut.adjacency.twin[h];
          return twin < 0 ? [] : [cut.stripOf[Math.floor(twin / 3)]];
        }),
      ),
  );
}

/**
 * Seams across all strips between the given ones that are longer than `maxLength`, m. A strip that cannot be parted so is left whole;
 * the rolls then name it.
 * @throws PlanError as cutStrips
 */
export function crossGivenStrips(
  laid: {
    form: FoundForm;
    adjacency: Adjacency;
    labels: Map<number, number>;
    plans: readonly RegionPlan[];
    paths: SeamPath[];
  },
  maxLength: number,
): SeamPath[] {
  const { form, plans } = laid;
  const cut = cutStrips(form, laid.adjacency, laid.labels, plans, laid.paths);
  const numbers = plans.map(({ region }) => numberRegion(region));
  const beside = listNeighbours(cut);
  const shifted = new Map<number, boolean>();
  const ends = new Set<number>();
  const out: SeamPath[] = [];
  listSides(plans, cut).forEach((sides, s) => {
    const own = numbers[cut.strips[s].region];
    const { from, to, split } = findEnds(cut, s, sides);
    if (!own || split !== undefined) return;
    const ring = sides.flatMap((side) => side.vertices.slice(0, -1));
    const runs = [runBetween(ring, new Set(from), new Set(to)), runBetween(ring, new Set(to), new Set(from)).reverse()];
    const [right, left] = runs.map((run) => buildFlank(form, cut, own, run, ends));
    if (!right || !left) return;
    const length = Math.max(...[right, left].map((flank) => flank.arc[flank.arc.length - 1]));
    if (!(length > maxLength)) return;
    const odd = [...beside[s]].some((o) => shifted.get(o) === false);
    shifted.set(s, odd);
    const { region } = plans[cut.strips[s].region];
    const seams = partStrip(region, [right, left], { length, maxLength, odd });
    seams?.forEach(({ line, ends: stops }, piece) => {
      [right, left].forEach((flank, k) => {
        ends.add(runs[k][flank.arc.indexOf(stops[k])]);
      });
      // it runs from the flank on the right of the strip's way to the one on its left: behind it lies the piece it ends
      const weld = `given strip ${s + 1}, seam across ${piece + 1}`;
      out.push({ region: cut.strips[s].region, line, weld, left: -1, right: -1, across: { left: 2, right: 1 } });
    });
  });
  return out;
}

/** True where no strip can be longer than `maxLength`, m: no seam and no edge of a region is. */
export function isShort(plans: readonly RegionPlan[], paths: readonly SeamPath[], maxLength: number): boolean {
  if (paths.some((path) => path.line.length > maxLength)) return false;
  return plans.every(({ region }) =>
    region.outlines.every(({ vertices, corners, arc }) => {
      const at = corners.length > 0 ? corners : [0];
      return at.every((i, k) => {
        const next = k + 1 < at.length ? arc[at[k + 1]] : arc[vertices.length] + arc[at[0]];
        return next - arc[i] <= maxLength;
      });
    }),
  );
}
