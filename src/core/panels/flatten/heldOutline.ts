// Cut lengths along the outline of a panel that stays as it is, for the seams it shares with panels that are flattened anew.
import type { FlatPanel } from "../../records/flatPanel.ts";
import { measureDistance, vertexAt } from "../../surface/measures.ts";
import type { Surface, Vec3 } from "../../surface/surface.ts";

/** A panel's outline: its vertices in order, the first repeated at the end. */
export interface HeldOutline {
  /** On the form, m. */
  erected: Vec3[];
  /** Cut length from the first vertex, m. */
  arc: number[];
  /** Place in the outline of each vertex of the surface. */
  at: Map<number, number>;
}

/** The outline of a flat panel. */
export function buildHeldOutline(panel: Pick<FlatPanel, "sides" | "flat" | "erected" | "surfaceVertex">): HeldOutline {
  const ring = panel.sides.flatMap((side) => side.vertices.slice(0, -1));
  const at = new Map(ring.map((v, i) => [panel.surfaceVertex[v], i]));
  ring.push(ring[0]);
  const arc = [0];
  for (let i = 1; i < ring.length; i++) {
    const [p, q] = [2 * ring[i - 1], 2 * ring[i]];
    const step = Math.sqrt((panel.flat[q] - panel.flat[p]) ** 2 + (panel.flat[q + 1] - panel.flat[p + 1]) ** 2);
    arc.push(arc[i - 1] + step / 1000);
  }
  const surface = { xyz: panel.erected, tri: new Uint32Array(0) };
  return { erected: ring.map((v) => vertexAt(surface, v)), arc, at };
}

/** Arc of a place that is no vertex of the outline: on the piece it lies on, shared as on the form. */
function arcOf({ erected, arc }: HeldOutline, place: Vec3): number {
  let least = Number.POSITIVE_INFINITY;
  let out = 0;
  for (let i = 1; i < arc.length; i++) {
    const from = measureDistance(erected[i - 1], place);
    const to = measureDistance(place, erected[i]);
    const detour = from + to - measureDistance(erected[i - 1], erected[i]);
    if (detour >= least) continue;
    least = detour;
    out = arc[i - 1] + ((arc[i] - arc[i - 1]) * from) / (from + to);
  }
  return out;
}

/**
 * Cut length on a held panel of every piece of a seam, m. The panel need not have all of the seam's vertices, nor the seam all of the
 * panel's: where a seam that ended on a cable is moved, the panels beyond the cable still have its old end.
 */
export function measureAlong(outline: HeldOutline, surface: Surface, vertices: readonly number[]): number[] {
  const around = outline.arc[outline.arc.length - 1];
  const arcs = vertices.map((v) => {
    const at = outline.at.get(v);
    return at === undefined ? arcOf(outline, vertexAt(surface, v)) : outline.arc[at];
  });
  return arcs.slice(1).map((s, k) => {
    const way = Math.abs(s - arcs[k]);
    return Math.min(way, around - way);
  });
}
