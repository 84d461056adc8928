// Mesh coordinates into metres with z up, and whether the size can be a roof at all.
import { type Finding, PlanError } from "../../problem.ts";
import type { MeshSource } from "../../records/job.ts";
import { buildFormFinding } from "../formFinding.ts";

/** Metres in one unit. International foot and inch (ISO 80000-3:2019). */
const METRES: Record<MeshSource["unit"], number> = { m: 1, mm: 0.001, cm: 0.01, ft: 0.3048, in: 0.0254 };

/** Greatest extent of a membrane roof, m: outside is a stop. Common practice: none smaller or larger is known to the trade. */
const EXTENT = { least: 0.5, most: 1500 };

/** Distance from the origin beyond which a coordinate is an error of the file, m. No place on earth is further from another. */
const FARTHEST = 1e8;

/** Extent that makes a unit worth suggesting, m. */
const LIKELY = { least: 2, most: 400 };

/**
 * Coordinates in metres, z up; y-up (x, y, z) becomes (x, -z, y).
 * @shape 3*nV @units source.unit -> m
 * @throws PlanError mesh-coordinate: one lies more than 1e8 m from the origin
 */
export function convertToMetres(source: MeshSource): Float64Array<ArrayBuffer> {
  // mm and cm are divided, so that 8000 mm is 8 m to the last bit
  const divide = source.unit === "mm" || source.unit === "cm";
  const factor = divide ? Math.round(1 / METRES[source.unit]) : METRES[source.unit];
  const out = new Float64Array(source.xyz.length);
  for (let i = 0; i < out.length; i++) out[i] = divide ? source.xyz[i] / factor : source.xyz[i] * factor;
  const far = out.findIndex((c) => !(Math.abs(c) <= FARTHEST));
  if (far >= 0) {
    const vertex = Math.floor(far / 3);
    throw new PlanError(
      "mesh-coordinate",
      `coordinate ${"xyz"[far % 3]} of vertex ${vertex} (counted from 0) is ${source.xyz[far]} ${source.unit}, more than ${FARTHEST} m from the origin; correct it, or export the mesh anew`,
      `vertex ${vertex}`,
      { vertex },
    );
  }
  if (source.up === "y")
    for (let i = 0; i < out.length; i += 3) {
      const y = out[i + 1];
      out[i + 1] = -out[i + 2];
      out[i + 2] = y;
    }
  return out;
}

/** Diagonal and greatest extent of the vertices that carry faces. @units as xyz */
export function measureExtent(
  xyz: Float64Array<ArrayBuffer>,
  used: Uint32Array<ArrayBuffer>,
): { diagonal: number; extent: number } {
  const low = [Infinity, Infinity, Infinity];
  const high = [-Infinity, -Infinity, -Infinity];
  for (const v of used)
    for (let k = 0; k < 3; k++) {
      low[k] = Math.min(low[k], xyz[3 * v + k]);
      high[k] = Math.max(high[k], xyz[3 * v + k]);
    }
  const d = high.map((h, k) => h - low[k]);
  return { diagonal: Math.sqrt(d[0] ** 2 + d[1] ** 2 + d[2] ** 2), extent: Math.max(...d) };
}

/** A stop where the extent is no roof's, with the unit that would make it one. */
export function checkSize(extent: number, unit: MeshSource["unit"]): Finding[] {
  if (extent >= EXTENT.least && extent <= EXTENT.most) return [];
  const raw = extent / METRES[unit];
  const order: MeshSource["unit"][] = ["m", "mm", "cm", "ft", "in"];
  const better = order.find((u) => u !== unit && raw * METRES[u] >= LIKELY.least && raw * METRES[u] <= LIKELY.most);
  const remedy = better
    ? `set mesh.unit to "${better}": the form is then ${(raw * METRES[better]).toPrecision(4)} m across`
    : "correct mesh.unit, or export the mesh anew at its true size";
  return [
    buildFormFinding("stop", {
      code: "mesh-size",
      where: "mesh.unit",
      value: extent,
      limit: extent < EXTENT.least ? EXTENT.least : EXTENT.most,
      text: `the form is ${extent.toPrecision(4)} m across, read in ${unit}; a membrane roof measures ${EXTENT.least} to ${EXTENT.most} m`,
      remedy,
      basis: "common practice",
    }),
  ];
}
