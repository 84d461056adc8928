// What a cable of unit force does to the vertices it passes. Pure geometry of one polyline.
import type { FormEdge } from "../../records/foundForm.ts";
import type { Vec3 } from "../../surface/surface.ts";

/** One station of a cable: a vertex, the pull there of 1 kN in the cable, and its direction. */
export interface CableStation {
  vertex: number;
  /** Arc length from the start over the whole length, 0…1. */
  share: number;
  /** Sum of the unit vectors along the links at this vertex. */
  pull: Vec3;
  /** Unit vector along the cable; null at an end, where nothing is to be left out of the balance. */
  along: Vec3 | null;
}

/** True for the kinds that carry a force. */
export function isCable(edge: FormEdge): boolean {
  return edge.kind !== "clamped" && edge.kind !== "free";
}

/** Stations of an edge in order; a closed one has no ends and its first vertex once. */
export function measureStations(xyz: Float64Array<ArrayBuffer>, vertices: readonly number[]): CableStation[] {
  const n = vertices.length - 1;
  const closed = vertices[0] === vertices[n];
  const unit: Vec3[] = [];
  const at = [0];
  for (let i = 0; i < n; i++) {
    const a = 3 * vertices[i];
    const b = 3 * vertices[i + 1];
    const d: Vec3 = [xyz[b] - xyz[a], xyz[b + 1] - xyz[a + 1], xyz[b + 2] - xyz[a + 2]];
    const l = Math.sqrt(d[0] ** 2 + d[1] ** 2 + d[2] ** 2);
    unit.push([d[0] / l, d[1] / l, d[2] / l]);
    at.push(at[i] + l);
  }
  return Array.from({ length: closed ? n : n + 1 }, (_, i): CableStation => {
    const next = unit[i] ?? null;
    const before = i > 0 ? unit[i - 1] : closed ? unit[n - 1] : null;
    const pull: Vec3 = [0, 0, 0];
    const sum: Vec3 = [0, 0, 0];
    for (let k = 0; k < 3; k++) {
      pull[k] = (next?.[k] ?? 0) - (before?.[k] ?? 0);
      sum[k] = (next?.[k] ?? 0) + (before?.[k] ?? 0);
    }
    const l = Math.sqrt(sum[0] ** 2 + sum[1] ** 2 + sum[2] ** 2);
    const along: Vec3 | null = next && before && l > 0 ? [sum[0] / l, sum[1] / l, sum[2] / l] : null;
    return { vertex: vertices[i], share: at[i] / at[n], pull, along };
  });
}

/**
 * Orthonormal directions at each vertex along which the balance does not count: those of the cables that pass it.
 * @shape by vertex number
 */
export function collectAlong(cables: readonly CableStation[][]): Map<number, Vec3[]> {
  const out = new Map<number, Vec3[]>();
  for (const stations of cables)
    for (const { vertex, along } of stations) {
      if (along === null) continue;
      const known = out.get(vertex) ?? [];
      const rest = removeAlong(along, known);
      const l = Math.sqrt(rest[0] ** 2 + rest[1] ** 2 + rest[2] ** 2);
      if (l > 1e-6) out.set(vertex, [...known, [rest[0] / l, rest[1] / l, rest[2] / l]]);
    }
  return out;
}

/** A vector without its parts along some orthonormal directions. */
export function removeAlong(vector: Vec3, directions: readonly Vec3[]): Vec3 {
  const out: Vec3 = [...vector];
  for (const d of directions) {
    const part = out[0] * d[0] + out[1] * d[1] + out[2] * d[2];
    for (let k = 0; k < 3; k++) out[k] -= part * d[k];
  }
  return out;
}
