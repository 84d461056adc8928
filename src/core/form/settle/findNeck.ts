// The narrowest ring round a tube of cloth, from one held ring or point to the rest of what is held. Tells where a surface
// that does not exist pinches off; judges nothing.

import { buildAdjacency, nextHalfedge } from "../../surface/adjacency.ts";
import type { Surface, Vec3 } from "../../surface/surface.ts";
import { buildForceDensitySystem, measureIsotropicDensities, stepForceDensity } from "./naturalForceDensity.ts";

/** A closed ring round the cloth between a held group and the others. */
export interface Neck {
  centre: Vec3;
  /** Length round it over 2π, m: now and in the start form. */
  radius: number;
  startRadius: number;
  /** Vertices of the held group that it rings. */
  group: readonly number[];
}

/** Rings that are tried between the held group and the rest. */
const RINGS = 96;

/** The held group that is fewest sides away from a vertex. */
function findNearestGroup(surface: Surface, groups: readonly (readonly number[])[], from: number): number {
  const { tri } = surface;
  const group = new Int32Array(surface.xyz.length / 3).fill(-1);
  groups.forEach((vertices, g) => {
    for (const v of vertices) group[v] = g;
  });
  const { fan, fanStart } = buildAdjacency(surface);
  const seen = new Uint8Array(group.length);
  let front = [from];
  seen[from] = 1;
  while (front.length > 0) {
    const found = front.filter((v) => group[v] >= 0).sort((a, b) => a - b);
    if (found.length > 0) return group[found[0]];
    const next: number[] = [];
    for (const v of front)
      for (let i = fanStart[v]; i < fanStart[v + 1]; i++)
        for (const h of [nextHalfedge(fan[i]), nextHalfedge(nextHalfedge(fan[i]))])
          if (!seen[tri[h]]) {
            seen[tri[h]] = 1;
            next.push(tri[h]);
          }
    front = next;
  }
  return -1;
}

/** A function that is 1 on the group, 0 where else the cloth is held, and as even as can be between. */
function spreadValues(
  surface: Surface,
  fixed: Uint8Array<ArrayBuffer>,
  group: readonly number[],
): Float64Array<ArrayBuffer> {
  const system = buildForceDensitySystem(surface, fixed, new Uint32Array(0));
  const side = measureIsotropicDensities(surface, 1);
  const places = new Float64Array(surface.xyz.length);
  for (const v of group) places[3 * v] = 1;
  const spread = stepForceDensity(system, { xyz: places, tri: surface.tri }, { side, line: new Float64Array(0) });
  return Float64Array.from({ length: fixed.length }, (_, v) => spread[3 * v]);
}

/** Closed rings where the function passes a level: the half-edges they cross, each ring in order. */
function traceRings(
  tri: Uint32Array<ArrayBuffer>,
  twin: Int32Array<ArrayBuffer>,
  value: Float64Array<ArrayBuffer>,
  level: number,
): number[][] {
  const above = (h: number) => value[tri[h]] > level;
  // half-edges that lead from above to below: the ring enters a triangle there and leaves it by the one that leads up
  const enters = (h: number) => above(h) && !above(nextHalfedge(h));
  const seen = new Uint8Array(tri.length);
  const rings: number[][] = [];
  for (let h = 0; h < tri.length; h++) {
    if (seen[h] || !enters(h)) continue;
    const ring: number[] = [];
    let g = h;
    while (g >= 0 && !seen[g]) {
      seen[g] = 1;
      ring.push(g);
      let out = nextHalfedge(g);
      while (above(out) || !above(nextHalfedge(out))) out = nextHalfedge(out);
      g = twin[out];
    }
    if (g === h) rings.push(ring);
  }
  return rings;
}

function measureRing(
  { xyz: x, tri }: Surface,
  ring: readonly number[],
  value: Float64Array<ArrayBuffer>,
  level: number,
): { length: number; centre: Vec3 } {
  const points = ring.map((h): Vec3 => {
    const [a, b] = [tri[h], tri[nextHalfedge(h)]];
    const t = (value[a] - level) / (value[a] - value[b]);
    return [0, 1, 2].map((k) => x[3 * a + k] + t * (x[3 * b + k] - x[3 * a + k])) as Vec3;
  });
  let length = 0;
  const sum: Vec3 = [0, 0, 0];
  points.forEach((p, i) => {
    const q = points[(i + 1) % points.length];
    const l = Math.sqrt((p[0] - q[0]) ** 2 + (p[1] - q[1]) ** 2 + (p[2] - q[2]) ** 2);
    length += l;
    for (let k = 0; k < 3; k++) sum[k] += (l * (p[k] + q[k])) / 2;
  });
  return { length, centre: length > 0 ? (sum.map((c) => c / length) as Vec3) : points[0] };
}

/** Levels between the values, as many below as above each share; none within rounding of a value. */
function chooseLevels(values: Float64Array<ArrayBuffer>): number[] {
  const sorted = values.toSorted();
  const levels = new Set<number>();
  for (let i = 0; i < RINGS; i++) {
    const at = Math.floor(((sorted.length - 1) * (i + 0.5)) / RINGS);
    let next = at + 1;
    while (next < sorted.length && sorted[next] - sorted[at] < 1e-9) next++;
    if (next < sorted.length) levels.add((sorted[at] + sorted[next]) / 2);
  }
  return [...levels];
}

/**
 * The narrowest ring of the cloth between the held group that is nearest a vertex and all else that is held; null where the
 * cloth is held by one group alone or no ring closes.
 * @shape groups: vertices of each held ring or point @units m
 * @source own: level lines of a harmonic function on the start form, measured where they are now
 */
export function findNeck(
  now: Surface,
  start: Surface,
  fixed: Uint8Array<ArrayBuffer>,
  groups: readonly (readonly number[])[],
  from: number,
): Neck | null {
  const nearest = findNearestGroup(start, groups, from);
  if (nearest < 0) return null;
  const inside = new Set(groups[nearest]);
  // rings round the other groups are not asked for: the cloth counts as loose there, where the rim holds it
  const others = new Set(groups.flatMap((g, i) => (i === nearest ? [] : g)));
  const rim = fixed.map((held, v) => (held && !others.has(v) ? 1 : 0));
  const reaches = (held: Uint8Array<ArrayBuffer>) => held.some((h, v) => h === 1 && !inside.has(v));
  if (!reaches(fixed)) return null;
  const value = spreadValues(start, reaches(rim) ? rim : fixed, groups[nearest]);
  const { twin } = buildAdjacency(start);
  const levels = chooseLevels(value.filter((_, v) => !fixed[v]));
  let best: Neck | null = null;
  for (const level of levels) {
    for (const ring of traceRings(start.tri, twin, value, level)) {
      const { length, centre } = measureRing(now, ring, value, level);
      if (best !== null && length >= 2 * Math.PI * best.radius) continue;
      const startRadius = measureRing(start, ring, value, level).length / (2 * Math.PI);
      best = { centre, radius: length / (2 * Math.PI), startRadius, group: groups[nearest] };
    }
  }
  return best;
}
