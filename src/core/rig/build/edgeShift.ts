// Clamped edges that stand elsewhere than drawn: the shift at any length along an edge.
import type { FormEdge, FoundForm } from "../../records/foundForm.ts";
import { measureDistance, vertexAt } from "../../surface/measures.ts";
import type { Surface, Vec3 } from "../../surface/surface.ts";
import type { EdgeShift, RigInput } from "../rigInput.ts";
import type { NodeList } from "./rigNodes.ts";

/** Shift between the known points of an edge, straight by length. @units m */
export function shiftAt(known: readonly EdgeShift[], at: number): Vec3 {
  let i = 1;
  while (i < known.length - 1 && known[i].at < at) i++;
  const [p, q] = [known[i - 1], known[i]];
  const t = q.at > p.at ? Math.min(1, Math.max(0, (at - p.at) / (q.at - p.at))) : 0;
  return [0, 1, 2].map((k) => p.by[k] + t * (q.by[k] - p.by[k])) as Vec3;
}

/** Length along the edge as drawn at the point of it nearest to p, m. */
function measureAlong(form: FoundForm, edge: FormEdge, p: Vec3): number {
  let [best, least, before] = [0, Infinity, 0];
  for (let i = 1; i < edge.vertices.length; i++) {
    const [a, b] = [vertexAt(form.surface, edge.vertices[i - 1]), vertexAt(form.surface, edge.vertices[i])];
    const length = measureDistance(a, b);
    const t = [0, 1, 2].reduce((sum, k) => sum + (p[k] - a[k]) * (b[k] - a[k]), 0) / (length * length);
    const s = Math.min(1, Math.max(0, t));
    const gap = measureDistance(p, [0, 1, 2].map((k) => a[k] + s * (b[k] - a[k])) as Vec3);
    if (gap < least - 1e-12) [best, least] = [before + s * length, gap];
    before += length;
  }
  return best;
}

/** Moves the nodes along clamped edges, seam ends too, to where the edges were surveyed. */
export function moveClampedInPlace(input: RigInput, nodes: NodeList): void {
  const surface: Surface = input.layout.surface;
  for (const strip of input.layout.strips)
    for (const side of strip.sides) {
      const known = input.shifts[side.id ?? ""];
      const edge = input.form.edges.find((e) => e.id === side.id);
      if (side.kind !== "clamped" || !known || !edge) continue;
      for (const v of side.vertices) {
        const drawn = vertexAt(surface, v);
        const by = shiftAt(known, measureAlong(input.form, edge, drawn));
        for (let k = 0; k < 3; k++) nodes.xyz[3 * v + k] = drawn[k] + by[k];
      }
    }
}
