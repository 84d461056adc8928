// The one door to the polygon boolean library: millimetre rings in and out, integer micrometres inside. Booleans only:
// the library's offsets are wrong, and its output shares point objects with its input, so every point is copied.
// Does not: offset, simplify, judge. Micrometre integers are exact over a span of 67 m (differences below 2^26).
import { Clipper, FillRule, type IPoint64 } from "clipper2-js";
import { PlanError } from "../../problem.ts";
import type { Ring } from "../../records/flatPanel.ts";

/** Integer units in one mm. */
const PER_MM = 1000;
/** Largest span for which the library's cross products are exact, in units. */
const SPAN = 2 ** 26;

function toPath(ring: Ring, ox: number, oy: number): IPoint64[] {
  const path: IPoint64[] = [];
  for (let i = 0; i < ring.length; i += 2) {
    const x = Math.round((ring[i] - ox) * PER_MM);
    const y = Math.round((ring[i + 1] - oy) * PER_MM);
    if (!(Math.abs(x) <= SPAN && Math.abs(y) <= SPAN))
      throw new PlanError(
        "outline-span",
        `An outline reaches ${ring[i]}, ${ring[i + 1]} mm, further than ${SPAN / PER_MM} mm from its first point: ` +
          "outlines are worked exactly only up to there. Split the panel.",
        [],
        { x: ring[i], y: ring[i + 1], limit: SPAN / PER_MM },
      );
    path.push({ x, y });
  }
  return path;
}

/** Copies out, dropping doubled points and rings that have shrunk to a line. */
function toRings(paths: IPoint64[][], ox: number, oy: number): Ring[] {
  const rings: Ring[] = [];
  for (const path of paths) {
    const kept: number[] = [];
    for (let i = 0; i < path.length; i++) {
      const before = path[(i + path.length - 1) % path.length];
      if (path[i].x !== before.x || path[i].y !== before.y) kept.push(path[i].x / PER_MM + ox, path[i].y / PER_MM + oy);
    }
    if (kept.length >= 6) rings.push(Float64Array.from(kept));
  }
  return rings;
}

function origin(rings: Ring[]): [number, number] {
  const first = rings.find((r) => r.length > 0);
  return first ? [Math.round(first[0]), Math.round(first[1])] : [0, 0];
}

/**
 * The region wound round at least once counter-clockwise: loops that an offset has turned inside out fall away.
 * @units mm; outer rings counter-clockwise, holes clockwise
 * @throws PlanError outline-span: a point further than 67 m from the first
 */
export function unionPositive(rings: Ring[]): Ring[] {
  const [ox, oy] = origin(rings);
  const paths = rings.map((r) => toPath(r, ox, oy));
  return toRings(Clipper.Union(paths, undefined, FillRule.Positive), ox, oy);
}

/**
 * What is left of counter-clockwise rings when others are taken away (non-zero rule).
 * @units mm
 * @throws PlanError outline-span: a point further than 67 m from the first
 */
export function subtractRings(from: Ring[], away: Ring[]): Ring[] {
  const [ox, oy] = origin(from);
  const subject = from.map((r) => toPath(r, ox, oy));
  const clip = away.map((r) => toPath(r, ox, oy));
  return toRings(Clipper.Difference(subject, clip, FillRule.NonZero), ox, oy);
}

/**
 * What counter-clockwise rings have in common (non-zero rule).
 * @units mm
 * @throws PlanError outline-span: a point further than 67 m from the first
 */
export function intersectRings(a: Ring[], b: Ring[]): Ring[] {
  const [ox, oy] = origin(a);
  const subject = a.map((r) => toPath(r, ox, oy));
  const clip = b.map((r) => toPath(r, ox, oy));
  return toRings(Clipper.Intersect(subject, clip, FillRule.NonZero), ox, oy);
}
