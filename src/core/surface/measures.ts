// Areas, angles and normals of a triangle surface, one small kernel each.
import type { Surface, SurfacePoint, Vec3 } from "./surface.ts";

/** Position of vertex v. */
export function vertexAt(surface: Surface, v: number): Vec3 {
  const x = surface.xyz;
  return [x[3 * v], x[3 * v + 1], x[3 * v + 2]];
}

/** Position of a point on a mesh edge. */
export function pointAt(surface: Surface, p: SurfacePoint): Vec3 {
  const a = vertexAt(surface, p.a);
  if (p.t === 0) return a;
  const b = vertexAt(surface, p.b);
  return [a[0] + p.t * (b[0] - a[0]), a[1] + p.t * (b[1] - a[1]), a[2] + p.t * (b[2] - a[2])];
}

/** Distance between two places, m. */
export function measureDistance(a: Vec3, b: Vec3): number {
  return Math.sqrt((a[0] - b[0]) ** 2 + (a[1] - b[1]) ** 2 + (a[2] - b[2]) ** 2);
}

/** Length of a polyline of places, m. */
export function measurePathLength(path: readonly Vec3[]): number {
  let sum = 0;
  for (let i = 1; i < path.length; i++) sum += measureDistance(path[i - 1], path[i]);
  return sum;
}

/**
 * Doubled vector areas of the triangles: e1 × e2, pointing to the outer face.
 * @shape 3*nT @units m2
 */
export function measureVectorAreas(surface: Surface): Float64Array<ArrayBuffer> {
  const { xyz: x, tri } = surface;
  const out = new Float64Array(tri.length);
  for (let t = 0; t < tri.length; t += 3) {
    const a = 3 * tri[t];
    const b = 3 * tri[t + 1];
    const c = 3 * tri[t + 2];
    const ux = x[b] - x[a];
    const uy = x[b + 1] - x[a + 1];
    const uz = x[b + 2] - x[a + 2];
    const vx = x[c] - x[a];
    const vy = x[c + 1] - x[a + 1];
    const vz = x[c + 2] - x[a + 2];
    out[t] = uy * vz - uz * vy;
    out[t + 1] = uz * vx - ux * vz;
    out[t + 2] = ux * vy - uy * vx;
  }
  return out;
}

/** Areas of the triangles. @shape nT @units m2 */
export function measureAreas(surface: Surface): Float64Array<ArrayBuffer> {
  const n = measureVectorAreas(surface);
  const out = new Float64Array(n.length / 3);
  for (let t = 0; t < out.length; t++) out[t] = Math.sqrt(n[3 * t] ** 2 + n[3 * t + 1] ** 2 + n[3 * t + 2] ** 2) / 2;
  return out;
}

/** Area of the whole surface, m2. */
export function measureArea(surface: Surface): number {
  let sum = 0;
  for (const a of measureAreas(surface)) sum += a;
  return sum;
}

/** Unit vertex normals, weighted by area; zero where a vertex has no triangle. @shape 3*nV */
export function measureVertexNormals(surface: Surface): Float64Array<ArrayBuffer> {
  const n = measureVectorAreas(surface);
  const out = new Float64Array(surface.xyz.length);
  for (let h = 0; h < surface.tri.length; h++) {
    const t = 3 * Math.floor(h / 3);
    const v = 3 * surface.tri[h];
    out[v] += n[t];
    out[v + 1] += n[t + 1];
    out[v + 2] += n[t + 2];
  }
  for (let v = 0; v < out.length; v += 3) {
    const l = Math.sqrt(out[v] ** 2 + out[v + 1] ** 2 + out[v + 2] ** 2);
    if (l > 0) for (let k = 0; k < 3; k++) out[v + k] /= l;
  }
  return out;
}
