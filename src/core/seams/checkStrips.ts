// The invariants of a strip layout: nothing lost, every strip a disc, every border a seam, both sides the same points.
import type { Check } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import { buildAdjacency, nextHalfedge } from "../surface/adjacency.ts";
import { measureArea, measureAreas } from "../surface/measures.ts";

/** Share of the area that cutting may lose to rounding. */
const AREA_SHARE = 1e-9;

/** Vertices less sides plus triangles of a strip, its outline taken as traced: 1 for a disc. */
function countEuler(layout: StripLayout, triangles: readonly number[]): number {
  const { tri } = layout.surface;
  const vertices = new Set<number>();
  const sides = new Set<string>();
  for (const t of triangles)
    for (let h = 3 * t; h < 3 * t + 3; h++) {
      const a = tri[h];
      const b = tri[nextHalfedge(h)];
      vertices.add(a);
      sides.add(a < b ? `${a}|${b}` : `${b}|${a}`);
    }
  return vertices.size - sides.size + triangles.length;
}

/** Checks of the layout, held or not. */
export function checkStrips(form: FoundForm, layout: StripLayout): Check[] {
  const { surface, strips, seams } = layout;
  const before = measureArea(form.surface);
  const areas = measureAreas(surface);
  let after = 0;
  for (const strip of strips) for (const t of strip.triangles) after += areas[t];
  const loss = Math.abs(after - before) / before;
  const odd = strips.filter((strip) => countEuler(layout, strip.triangles) !== 1);
  const stripOf = new Int32Array(surface.tri.length / 3).fill(-1);
  strips.forEach((strip, s) => {
    for (const t of strip.triangles) stripOf[t] = s;
  });
  const sewn = new Set<string>();
  for (const seam of seams)
    for (let i = 1; i < seam.vertices.length; i++) {
      sewn.add(`${seam.vertices[i - 1]}|${seam.vertices[i]}`);
      sewn.add(`${seam.vertices[i]}|${seam.vertices[i - 1]}`);
    }
  const { twin } = buildAdjacency(surface);
  let open = 0;
  for (let h = 0; h < surface.tri.length; h++)
    if (twin[h] > h && stripOf[Math.floor(h / 3)] !== stripOf[Math.floor(twin[h] / 3)])
      if (!sewn.has(`${surface.tri[h]}|${surface.tri[nextHalfedge(h)]}`)) open++;
  const uneven = seams.filter((seam) => {
    const sides = strips.flatMap((strip) => strip.sides.filter((side) => side.kind === "seam" && side.id === seam.id));
    if (sides.length !== 2) return true;
    const [a, b] = sides.map((side) => side.vertices);
    return a.length !== b.length || a.some((v, i) => v !== b[b.length - 1 - i]);
  });
  const check = (text: string, value: number, limit: number): Check => ({
    station: "seams",
    text,
    value,
    limit,
    holds: value <= limit,
  });
  return [
    check("share of the form's area lost or gained by cutting", loss, AREA_SHARE),
    check("panels that are no disc", odd.length, 0),
    check("pieces of border between panels that lie on no seam", open, 0),
    check("seams whose two sides do not list the same points", uneven.length, 0),
  ];
}
