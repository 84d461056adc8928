// Parts the outline of every strip into sides: a side ends where the edge of the form, the neighbour or the strip's end changes,
// where the form has a corner, and where a neighbour's side ends (so that both sides of a seam list the same points).
import { nextHalfedge } from "../surface/adjacency.ts";
import type { CutForm } from "./cutStrips.ts";
import type { RegionPlan } from "./seamPath.ts";

/** A side before it is named. */
export interface RawSide {
  /** Form edge (index) or -1. */
  edge: number;
  /** Seam path (index) or -1. */
  path: number;
  end: 0 | 1 | 2;
  /** Strip on the other side, -1 outside. */
  neighbour: number;
  vertices: number[];
}

function describeStep(cut: CutForm, h: number) {
  const mark = cut.marks.get(h) ?? { edge: -1, path: -1, end: 0 as const };
  const twin = cut.adjacency.twin[h];
  return { ...mark, neighbour: twin < 0 ? -1 : cut.stripOf[Math.floor(twin / 3)] };
}

/** Sides of all strips, counter-clockwise, strip by strip; `forced` vertices end a side too. */
export function listSides(
  plans: readonly RegionPlan[],
  cut: CutForm,
  forced: ReadonlySet<number> = new Set(),
): RawSide[][] {
  const { tri } = cut.surface;
  const corners = new Set<number>(forced);
  for (const { region } of plans)
    for (const outline of region.outlines)
      for (const i of outline.corners) corners.add(region.formVertex[outline.vertices[i]]);
  const steps = cut.strips.map((strip) => strip.outline.map((h) => describeStep(cut, h)));
  cut.strips.forEach((strip, s) => {
    strip.outline.forEach((h, i) => {
      const a = steps[s][i];
      const b = steps[s][(i + strip.outline.length - 1) % strip.outline.length];
      if (a.edge !== b.edge || a.path !== b.path || a.end !== b.end || a.neighbour !== b.neighbour) corners.add(tri[h]);
    });
  });
  return cut.strips.map((strip, s) => {
    const n = strip.outline.length;
    const start = Math.max(
      0,
      strip.outline.findIndex((h) => corners.has(tri[h])),
    );
    const sides: RawSide[] = [];
    for (let k = 0; k < n; k++) {
      const i = (start + k) % n;
      const h = strip.outline[i];
      if (k === 0 || corners.has(tri[h])) sides.push({ ...steps[s][i], vertices: [tri[h]] });
      sides[sides.length - 1].vertices.push(tri[nextHalfedge(h)]);
    }
    return sides;
  });
}
