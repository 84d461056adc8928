// The two ends of a strip, which its warp runs between. Known from the layout, or, where seams were given one by one, read off
// the strip: its longest seam is one flank, what faces it the other, and what lies between are the ends. Source: own.
import { measureDistance, vertexAt } from "../surface/measures.ts";
import type { Surface } from "../surface/surface.ts";
import type { CutForm } from "./cutStrips.ts";
import { measureCornerAngle } from "./region.ts";
import type { RawSide } from "./stripSides.ts";

/** A pointed end is taken below this angle, rad. facts.md: below 60°, less what flattening and the first link of a curve may change. */
const POINTED = (48 / 180) * Math.PI;

/** Ends of a strip; `split` is a vertex at which a side must be parted first. */
export interface StripEnds {
  from: number[];
  to: number[];
  split?: number;
}

function uniteVertices(sides: readonly RawSide[]): number[] {
  return [...new Set(sides.flatMap((side) => side.vertices))];
}

/** Length of a polyline of surface vertices, m. */
export function measureVertices(surface: Surface, vertices: readonly number[]): number {
  let sum = 0;
  for (let i = 1; i < vertices.length; i++)
    sum += measureDistance(vertexAt(surface, vertices[i - 1]), vertexAt(surface, vertices[i]));
  return sum;
}

/** The vertex nearest to the middle of a side, not one of its ends; -1 for a side of one piece. */
function findMiddle(surface: Surface, vertices: readonly number[]): number {
  const half = measureVertices(surface, vertices) / 2;
  let best = -1;
  let gap = Number.POSITIVE_INFINITY;
  for (let i = 1; i < vertices.length - 1; i++) {
    const d = Math.abs(measureVertices(surface, vertices.slice(0, i + 1)) - half);
    if (d < gap) {
      gap = d;
      best = vertices[i];
    }
  }
  return best;
}

/** Angle of a strip at one of its vertices, rad. */
function measureAngleAt(cut: CutForm, strip: number, v: number): number {
  const own = { fanStart: Uint32Array.of(0, 0), fan: new Uint32Array(0) };
  const { adjacency } = cut;
  const corners: number[] = [];
  for (let i = adjacency.fanStart[v]; i < adjacency.fanStart[v + 1]; i++)
    if (cut.stripOf[Math.floor(adjacency.fan[i] / 3)] === strip) corners.push(adjacency.fan[i]);
  own.fan = Uint32Array.from(corners);
  own.fanStart = new Uint32Array(v + 2);
  own.fanStart[v + 1] = corners.length;
  return measureCornerAngle(cut.surface, { ...adjacency, ...own }, v);
}

/** Ends of strip s with these sides. */
export function findEnds(cut: CutForm, s: number, sides: readonly RawSide[]): StripEnds {
  const first = sides.filter((side) => side.end === 1);
  const second = sides.filter((side) => side.end === 2);
  if (first.length > 0 && second.length > 0) return { from: uniteVertices(first), to: uniteVertices(second) };
  const runs = joinRuns(sides);
  const length = (run: readonly RawSide[]) =>
    run.reduce((sum, side) => sum + measureVertices(cut.surface, side.vertices), 0);
  const isSeam = (run: readonly RawSide[]) => run[0].path >= 0;
  const longest = (list: readonly RawSide[][]) => {
    const seams = list.filter(isSeam);
    const pool = seams.length > 0 ? seams : list;
    return pool.reduce((a, b) => (length(b) > length(a) * (1 + 1e-9) ? b : a));
  };
  if (runs.length === 1) {
    const middle = runs[0][0].vertices[0];
    return { from: [middle], to: [middle] };
  }
  const flank = longest(runs);
  const at = runs.indexOf(flank);
  const rest = [...runs.slice(at + 1), ...runs.slice(0, at)];
  const startOf = (run: readonly RawSide[]) => run[0].vertices[0];
  const endOf = (run: readonly RawSide[]) => run[run.length - 1].vertices[run[run.length - 1].vertices.length - 1];
  const head = endOf(flank);
  const tail = startOf(flank);
  const headPointed = measureAngleAt(cut, s, head) < POINTED;
  const tailPointed = measureAngleAt(cut, s, tail) < POINTED;
  if (rest.length === 1) {
    if (headPointed && tailPointed) return { from: [tail], to: [head] };
    return splitSide(cut, rest[0]);
  }
  // the flank that faces: the longest of those that may be one, a pointed end where it meets the first
  const may = rest.filter((_, k) => (k > 0 || headPointed) && (k < rest.length - 1 || tailPointed));
  const facing = rest.length === 2 ? may.filter(isSeam) : may;
  if (facing.length === 0) return { from: uniteVertices(rest[rest.length - 1]), to: uniteVertices(rest[0]) };
  const other = rest.indexOf(longest(facing));
  const to = other === 0 ? [head] : uniteVertices(rest.slice(0, other).flat());
  const from = other === rest.length - 1 ? [tail] : uniteVertices(rest.slice(other + 1).flat());
  return { from, to };
}

/** A strip between one seam and one side: the side is parted at its middle, its halves are the ends. */
function splitSide(cut: CutForm, run: readonly RawSide[]): StripEnds {
  if (run.length > 1) {
    const half = Math.ceil(run.length / 2);
    return { from: uniteVertices(run.slice(half)), to: uniteVertices(run.slice(0, half)) };
  }
  const split = findMiddle(cut.surface, run[0].vertices);
  const i = run[0].vertices.indexOf(split);
  return { from: run[0].vertices.slice(i), to: run[0].vertices.slice(0, i + 1), split };
}

/** Sides of one seam or one edge in a row. */
function joinRuns(sides: readonly RawSide[]): RawSide[][] {
  const runs: RawSide[][] = [];
  for (const side of sides) {
    const last = runs[runs.length - 1]?.[0];
    if (last && last.path >= 0 && last.path === side.path) runs[runs.length - 1].push(side);
    else runs.push([side]);
  }
  const first = runs[0][0];
  if (runs.length > 1 && first.path >= 0 && first.path === runs[runs.length - 1][0].path)
    runs[0] = [...(runs.pop() ?? []), ...runs[0]];
  return runs;
}
