// A strip cut loose from the surface: its own vertex numbers, outline and run. Does not flatten.
import { PlanError } from "../../problem.ts";
import type { Strip, StripLayout } from "../../records/stripLayout.ts";
import { buildAdjacency, findBoundaryLoops } from "../../surface/adjacency.ts";

/** @shape surfaceVertex n (ascending), erected 3*n, tri 3*nT; sides, from and to in local vertices */
export interface LocalStrip {
  id: string;
  surfaceVertex: Uint32Array<ArrayBuffer>;
  erected: Float64Array<ArrayBuffer>;
  tri: Uint32Array<ArrayBuffer>;
  sides: { kind: "seam" | "cable" | "clamped" | "free"; id: string; vertices: number[] }[];
  from: number[];
  to: number[];
}

/**
 * The strip in its own numbers: vertices ascending as on the surface.
 * @throws PlanError strip-outline: the strip is no disc, or its sides are not its outline, in order and counter-clockwise
 * @throws PlanError strip-ends: an end names no vertex, or one that is not on the outline, or lies within the other end
 */
export function buildLocalStrip(layout: StripLayout, strip: Strip): LocalStrip {
  const { xyz, tri } = layout.surface;
  const used = new Set<number>();
  for (const t of strip.triangles) for (let k = 0; k < 3; k++) used.add(tri[3 * t + k]);
  const surfaceVertex = Uint32Array.from([...used].sort((a, b) => a - b));
  const local = new Map<number, number>();
  surfaceVertex.forEach((v, i) => {
    local.set(v, i);
  });
  const own = new Uint32Array(3 * strip.triangles.length);
  strip.triangles.forEach((t, i) => {
    for (let k = 0; k < 3; k++) own[3 * i + k] = local.get(tri[3 * t + k]) ?? 0;
  });
  const erected = new Float64Array(3 * surfaceVertex.length);
  surfaceVertex.forEach((v, i) => {
    erected.set(xyz.subarray(3 * v, 3 * v + 3), 3 * i);
  });
  const place = (v: number): number => local.get(v) ?? refuseOutline(strip, `vertex ${v} is not in its triangles`);
  const sides = strip.sides.map((s) => ({ kind: s.kind, id: s.id, vertices: s.vertices.map(place) }));
  const out = {
    id: strip.id,
    surfaceVertex,
    erected,
    tri: own,
    sides,
    from: strip.from.map(place),
    to: strip.to.map(place),
  };
  checkOutline(strip, out);
  return out;
}

function checkOutline(strip: Strip, own: LocalStrip): void {
  const surface = { xyz: own.erected, tri: own.tri };
  const loops = findBoundaryLoops(surface, buildAdjacency(surface));
  if (loops.length !== 1) refuseOutline(strip, `it has ${loops.length} outlines, a flat panel has 1`);
  const around = own.sides.flatMap((s) => s.vertices.slice(0, -1));
  const joined = own.sides.every((s, i) => s.vertices.at(-1) === own.sides[(i + 1) % own.sides.length].vertices[0]);
  const at = loops[0].indexOf(around[0]);
  const same = around.length === loops[0].length && around.every((v, i) => v === loops[0][(at + i) % around.length]);
  if (!joined || !same) refuseOutline(strip, "its sides do not run once, counter-clockwise, round its triangles");
  const rim = new Set(around);
  const { from, to } = own;
  const stray = [...from, ...to].some((v) => !rim.has(v));
  if (stray || from.every((v) => to.includes(v)) || to.every((v) => from.includes(v))) {
    throw new PlanError(
      "strip-ends",
      `strip ${strip.id} has no two ends on its outline (${own.from.length} and ${own.to.length} vertices); each end is all vertices of the sides there, or one point`,
      strip.id,
    );
  }
}

function refuseOutline(strip: Strip, why: string): never {
  throw new PlanError(
    "strip-outline",
    `strip ${strip.id} cannot be flattened: ${why}; cut it once more or mend its sides`,
    strip.id,
  );
}

/**
 * Direction of the strip's run at each triangle, on the form: tangents of the outline between the two ends, led from `from` to `to`,
 * averaged with the inverse fourth power of their distance, turned into the triangle's plane. Zero where the outline gives none.
 * @shape 3*nT, unit or zero @source own: what a welder sees as "along the panel"
 */
export function buildRunDirections(strip: LocalStrip): Float64Array<ArrayBuffer> {
  const { erected: x, tri } = strip;
  const pieces = Float64Array.from(listRunPieces(strip));
  const out = new Float64Array(tri.length);
  for (let t = 0; t < tri.length; t += 3) {
    const [a, b, c] = [3 * tri[t], 3 * tri[t + 1], 3 * tri[t + 2]];
    const mx = (x[a] + x[b] + x[c]) / 3;
    const my = (x[a + 1] + x[b + 1] + x[c + 1]) / 3;
    const mz = (x[a + 2] + x[b + 2] + x[c + 2]) / 3;
    let sx = 0;
    let sy = 0;
    let sz = 0;
    // no small arrays in here: every triangle meets every piece, and they were over half of what dragging a seam had to clear away
    for (let i = 0; i < pieces.length; i += 6) {
      const dx = pieces[i] - mx;
      const dy = pieces[i + 1] - my;
      const dz = pieces[i + 2] - mz;
      const d = dx * dx + dy * dy + dz * dz;
      const w = 1 / (d * d);
      sx += pieces[i + 3] * w;
      sy += pieces[i + 4] * w;
      sz += pieces[i + 5] * w;
    }
    const [px, py, pz] = [x[b] - x[a], x[b + 1] - x[a + 1], x[b + 2] - x[a + 2]];
    const [qx, qy, qz] = [x[c] - x[a], x[c + 1] - x[a + 1], x[c + 2] - x[a + 2]];
    const [nx, ny, nz] = [py * qz - pz * qy, pz * qx - px * qz, px * qy - py * qx];
    const off = (sx * nx + sy * ny + sz * nz) / (nx ** 2 + ny ** 2 + nz ** 2);
    sx -= off * nx;
    sy -= off * ny;
    sz -= off * nz;
    const length = Math.sqrt(sx ** 2 + sy ** 2 + sz ** 2);
    if (!(length > 0)) continue;
    out[t] = sx / length;
    out[t + 1] = sy / length;
    out[t + 2] = sz / length;
  }
  return out;
}

/** Middle and run (its length kept, so that long pieces count more) of every outline piece between the two ends. */
function listRunPieces(strip: LocalStrip): number[] {
  const { erected: x } = strip;
  const ring = strip.sides.flatMap((s) => s.vertices.slice(0, -1));
  const end = new Map<number, number>();
  for (const v of strip.to) end.set(v, -1);
  for (const v of strip.from) end.set(v, 1);
  const first = ring.findIndex((v) => end.has(v));
  const out: number[] = [];
  let sign = 0;
  for (let i = 0; i < ring.length; i++) {
    const a = ring[(first + i) % ring.length];
    const b = ring[(first + i + 1) % ring.length];
    sign = end.get(a) ?? sign;
    if (end.has(a) && end.get(a) === end.get(b)) continue;
    for (let k = 0; k < 3; k++) out.push((x[3 * a + k] + x[3 * b + k]) / 2);
    for (let k = 0; k < 3; k++) out.push(sign * (x[3 * b + k] - x[3 * a + k]));
  }
  return out;
}
