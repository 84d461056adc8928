// How much of each triangle lies under a second layer of cloth, where seams lap. Knows no stations: lines and widths only.
import type { StripLayout } from "../records/stripLayout.ts";
import { measureAreas } from "../surface/measures.ts";
import type { Surface } from "../surface/surface.ts";

/** A line of a strip's outline and how far the second layer reaches in from it, m. */
export interface LapLine {
  vertices: readonly number[];
  width: number;
}

/** Sub-triangles along a side by which a triangle's share is counted. */
const PARTS = 8;

/**
 * Where the laps of a strip lie: "both" has half the overlap on each side of a seam, "one" all of it under the upper panel's edge.
 * @param overlap finished overlap, m
 */
export function listLapLines(
  layout: Pick<StripLayout, "seams">,
  strip: string,
  sides: readonly { kind: string; id: string; vertices: number[] }[],
  lap: { overlap: number; on: "both" | "one" },
): LapLine[] {
  return sides.flatMap((side) => {
    const seam = side.kind === "seam" ? layout.seams.find((s) => s.id === side.id) : undefined;
    if (seam === undefined) return [];
    const width = lap.on === "both" ? lap.overlap / 2 : seam.upper === strip ? lap.overlap : 0;
    return width > 0 ? [{ vertices: side.vertices, width }] : [];
  });
}

/**
 * Share of each triangle within the widths of the lines, counted on 64 equal parts: 1 + share is the layers of cloth there in the
 * mean.
 * @shape nT, 0 … 1
 */
export function measureLapShares(surface: Surface, lines: readonly LapLine[]): Float64Array<ArrayBuffer> {
  const { xyz, tri } = surface;
  const out = new Float64Array(tri.length / 3);
  if (lines.length === 0) return out;
  const corner = (v: number): [number, number, number] => [xyz[3 * v], xyz[3 * v + 1], xyz[3 * v + 2]];
  const isCovered = (p: readonly number[], slack: number) =>
    lines.some(({ vertices, width }) => {
      for (let i = 1; i < vertices.length; i++)
        if (measureFrom(xyz, vertices[i - 1], vertices[i], p) <= width + slack) return true;
      return false;
    });
  for (let t = 0; t < out.length; t++) {
    const [a, b, c] = [0, 1, 2].map((k) => corner(tri[3 * t + k]));
    const middle = a.map((q, k) => (q + b[k] + c[k]) / 3);
    const reach = Math.max(...[a, b, c].map((p) => Math.hypot(...p.map((q, k) => q - middle[k]))));
    if (!isCovered(middle, reach)) continue;
    let covered = 0;
    for (let i = 0; i < PARTS; i++)
      for (let j = 0; i + j < PARTS; j++)
        for (const up of i + j + 1 < PARTS ? [1 / 3, 2 / 3] : [1 / 3]) {
          const [u, v] = [(i + up) / PARTS, (j + up) / PARTS];
          if (
            isCovered(
              a.map((q, k) => q + u * (b[k] - q) + v * (c[k] - q)),
              0,
            )
          )
            covered++;
        }
    out[t] = covered / PARTS ** 2;
  }
  return out;
}

/** Distance of p from the straight piece between two vertices. */
function measureFrom(x: Float64Array, u: number, v: number, p: readonly number[]): number {
  let along = 0;
  let length = 0;
  for (let k = 0; k < 3; k++) {
    const d = x[3 * v + k] - x[3 * u + k];
    along += d * (p[k] - x[3 * u + k]);
    length += d * d;
  }
  const s = length > 0 ? Math.min(1, Math.max(0, along / length)) : 0;
  let off = 0;
  for (let k = 0; k < 3; k++) off += (x[3 * u + k] + s * (x[3 * v + k] - x[3 * u + k]) - p[k]) ** 2;
  return Math.sqrt(off);
}

/** Share of a surface's area that is doubled. */
export function measureLapArea(surface: Surface, shares: Float64Array): number {
  const areas = measureAreas(surface);
  let all = 0;
  let lapped = 0;
  for (let t = 0; t < areas.length; t++) {
    all += areas[t];
    lapped += areas[t] * shares[t];
  }
  return lapped / all;
}
