// The surface vertex nearest to a place. One pass, for a handful of questions.
import { nextHalfedge } from "../../surface/adjacency.ts";
import type { Surface } from "../../surface/surface.ts";

/** Nearest vertex among those the filter lets pass, and its distance; vertex -1 where none passes. @units m */
export function findNearestVertex(
  surface: Surface,
  place: ArrayLike<number>,
  passes: (v: number) => boolean = () => true,
): { vertex: number; distance: number } {
  const { xyz } = surface;
  let vertex = -1;
  let best = Infinity;
  for (let v = 0; v < xyz.length / 3; v++) {
    const d = (xyz[3 * v] - place[0]) ** 2 + (xyz[3 * v + 1] - place[1]) ** 2 + (xyz[3 * v + 2] - place[2]) ** 2;
    if (d >= best || !passes(v)) continue;
    best = d;
    vertex = v;
  }
  return { vertex, distance: Math.sqrt(best) };
}

/** Mean length of the triangles' sides, m. */
export function measureMeanSide(surface: Surface): number {
  const { xyz, tri } = surface;
  let sum = 0;
  for (let h = 0; h < tri.length; h++) {
    const a = 3 * tri[h];
    const b = 3 * tri[nextHalfedge(h)];
    sum += Math.sqrt((xyz[a] - xyz[b]) ** 2 + (xyz[a + 1] - xyz[b + 1]) ** 2 + (xyz[a + 2] - xyz[b + 2]) ** 2);
  }
  return sum / tri.length;
}
