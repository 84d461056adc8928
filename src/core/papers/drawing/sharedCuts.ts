// Edges that two pieces share are cut once: what an earlier cut has parted already is left out of a later outline, which falls into
// open runs. Only where the nest may lay pieces without a gap. Source: own.
import type { Vec2 } from "../../records/facts.ts";
import type { Drawing, Stroke } from "./drawing.ts";
import { boxOf } from "./flatGeometry.ts";

/** Cuts this near each other are one to any knife, mm. own: a tenth of a blade's width. */
const ONE = 0.1;
/** What is shared over less than this is cut twice: crossings and corners that touch; what is left over less is cut by the other, mm. */
const LEAST = 1;

interface Segment {
  a: Vec2;
  b: Vec2;
}

function segmentsOf({ points, closed }: Stroke): Segment[] {
  const ring = closed ? [...points, points[0]] : points;
  return ring.slice(1).map((b, i) => ({ a: ring[i], b }));
}

/** The part of a segment, as lengths from its beginning, that another covers; null where they do not run together. */
function sharedPart({ a, b }: Segment, other: Segment): [number, number] | null {
  const length = Math.hypot(b[0] - a[0], b[1] - a[1]);
  const [ux, uy] = [(b[0] - a[0]) / length, (b[1] - a[1]) / length];
  const along = (p: Vec2) => (p[0] - a[0]) * ux + (p[1] - a[1]) * uy;
  const beside = (p: Vec2) => (p[1] - a[1]) * ux - (p[0] - a[0]) * uy;
  let [p, q] = [other.a, other.b];
  if (along(p) > along(q)) [p, q] = [q, p];
  const [s, t] = [along(p), along(q)];
  const [from, to] = [Math.max(0, s), Math.min(length, t)];
  if (!(to - from > 0)) return null;
  const off = (x: number) => beside(p) + ((x - s) / (t - s)) * (beside(q) - beside(p));
  return Math.abs(off(from)) <= ONE && Math.abs(off(to)) <= ONE ? [from, to] : null;
}

/** What is left of 0…length without the covered parts. */
function openParts(length: number, covered: [number, number][]): [number, number][] {
  const left: [number, number][] = [];
  let at = 0;
  for (const [from, to] of [...covered].sort((p, q) => p[0] - q[0])) {
    if (from > at) left.push([at, from]);
    at = Math.max(at, to);
  }
  if (at < length) left.push([at, length]);
  return left;
}

const lengthOf = (run: readonly Vec2[]) =>
  run.slice(1).reduce((sum, q, i) => sum + Math.hypot(q[0] - run[i][0], q[1] - run[i][1]), 0);

/** The runs of a stroke that none of the segments cut already, and the length left out, mm. */
function openRuns(stroke: Stroke, cut: readonly Segment[]): { runs: Vec2[][]; shared: number } {
  const own = segmentsOf(stroke);
  const covers = own.map((s) => cut.flatMap((c) => [sharedPart(s, c)].filter((part) => part !== null)));
  const lengths = own.map(({ a, b }) => Math.hypot(b[0] - a[0], b[1] - a[1]));
  const runs: Vec2[][] = [];
  own.forEach(({ a, b }, i) => {
    const at = (x: number): Vec2 => [a[0] + ((b[0] - a[0]) * x) / lengths[i], a[1] + ((b[1] - a[1]) * x) / lengths[i]];
    for (const [from, to] of openParts(lengths[i], covers[i])) {
      const begin = from === 0 ? a : at(from);
      const end = to === lengths[i] ? b : at(to);
      const last = runs.at(-1);
      if (from === 0 && last && last[last.length - 1] === a) last.push(end);
      else runs.push([begin, end]);
    }
  });
  // The run over the ring's own beginning is one.
  const [first, last] = [runs[0], runs.at(-1)];
  if (stroke.closed && first && last && first !== last && last[last.length - 1] === first[0]) {
    runs.shift();
    last.push(...first.slice(1));
  }
  const kept = runs.filter((run) => lengthOf(run) >= LEAST);
  const all = lengths.reduce((sum, l) => sum + l, 0);
  return { runs: kept, shared: all - kept.reduce((sum, run) => sum + lengthOf(run), 0) };
}

const isCut = (stroke: Stroke) => stroke.layer === "cut";

/** The drawing with every shared edge cut once, by the first that has it, or before it; and the length saved, mm. */
export function withSharedCuts(drawing: Drawing, before: readonly Stroke[] = []): { drawing: Drawing; shared: number } {
  const done = before.filter(isCut).map((s) => ({ box: boxOf(s.points), segments: segmentsOf(s) }));
  let saved = 0;
  const strokes = drawing.strokes.flatMap((stroke): Stroke[] => {
    if (!isCut(stroke)) return [stroke];
    const box = boxOf(stroke.points);
    const near = done.filter((d) =>
      [0, 1].every((k) => d.box.min[k] <= box.max[k] + ONE && box.min[k] <= d.box.max[k] + ONE),
    );
    done.push({ box, segments: segmentsOf(stroke) });
    const { runs, shared } = openRuns(
      stroke,
      near.flatMap((d) => d.segments),
    );
    if (shared < LEAST) return [stroke];
    saved += shared;
    return runs.map((points) => ({ layer: "cut", points, closed: false }));
  });
  return { drawing: { ...drawing, strokes }, shared: saved };
}
