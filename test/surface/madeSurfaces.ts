// Surfaces with known geometry for the tests of surface/: grids, rings, bumps; moved and renumbered copies.
import { existsSync, readFileSync } from "node:fs";
import { buildRandom } from "../../src/core/numeric/random.ts";
import type { Surface, SurfacePoint, Vec3 } from "../../src/core/surface/surface.ts";

/** (n+1) × (m+1) vertices at f(u, v), u and v from 0 to 1; diagonals by a seeded coin; u runs first. */
export function makeGrid(n: number, m: number, f: (u: number, v: number) => Vec3, seed = 1): Surface {
  const random = buildRandom(seed);
  const xyz: number[] = [];
  const tri: number[] = [];
  for (let j = 0; j <= m; j++) for (let i = 0; i <= n; i++) xyz.push(...f(i / n, j / m));
  for (let j = 0; j < m; j++)
    for (let i = 0; i < n; i++) {
      const a = j * (n + 1) + i;
      const [b, c, d] = [a + 1, a + n + 2, a + n + 1];
      if (random() < 0.5) tri.push(a, b, c, a, c, d);
      else tri.push(a, b, d, b, c, d);
    }
  return { xyz: new Float64Array(xyz), tri: new Uint32Array(tri) };
}

/** Grid over 0…size squared at height f(x, y), inner vertices shaken by `shake` of a cell. */
export function makeHeights(
  n: number,
  size: number,
  f: (x: number, y: number) => number,
  shake = 0,
  seed = 7,
): Surface {
  const random = buildRandom(seed);
  return makeGrid(
    n,
    n,
    (u, v) => {
      const inner = u > 0 && u < 1 && v > 0 && v < 1 ? (shake * size) / n : 0;
      const x = u * size + inner * (random() - 0.5);
      const y = v * size + inner * (random() - 0.5);
      return [x, y, f(x, y)];
    },
    seed,
  );
}

/** Closed round: n vertices a ring, m + 1 rings, at f(angle, v); counter-clockwise seen from outside where v rises. */
export function makeRing(n: number, m: number, f: (angle: number, v: number) => Vec3): Surface {
  const xyz: number[] = [];
  const tri: number[] = [];
  for (let j = 0; j <= m; j++) for (let i = 0; i < n; i++) xyz.push(...f((2 * Math.PI * i) / n, j / m));
  for (let j = 0; j < m; j++)
    for (let i = 0; i < n; i++) {
      const a = j * n + i;
      const b = j * n + ((i + 1) % n);
      tri.push(a, b, b + n, a, b + n, a + n);
    }
  return { xyz: new Float64Array(xyz), tri: new Uint32Array(tri) };
}

/** Rolling hills without symmetry. */
export function makeHills(n: number, seed = 3): Surface {
  return makeHeights(n, 10, (x, y) => 0.8 * Math.sin(0.9 * x) * Math.cos(0.7 * y + 0.3) + 0.05 * x * y, 0.5, seed);
}

/** Turned and shifted copy. */
export function moveSurface(s: Surface): Surface {
  const xyz = s.xyz.slice();
  const [c, d] = [Math.cos(0.7), Math.sin(0.7)];
  const [e, g] = [Math.cos(-1.1), Math.sin(-1.1)];
  for (let v = 0; v < xyz.length; v += 3) {
    const [x, y, z] = [c * xyz[v] - d * xyz[v + 1], d * xyz[v] + c * xyz[v + 1], xyz[v + 2]];
    xyz[v] = x + 3;
    xyz[v + 1] = e * y - g * z - 5;
    xyz[v + 2] = g * y + e * z + 11;
  }
  return { xyz, tri: s.tri.slice() };
}

/** Copy with vertices and triangles in another order; `number` maps an old vertex to its new one. */
export function renumberSurface(s: Surface, seed = 11): { surface: Surface; number: Uint32Array } {
  const random = buildRandom(seed);
  const shuffle = (n: number) => {
    const p = Uint32Array.from({ length: n }, (_, i) => i);
    for (let i = n - 1; i > 0; i--) {
      const j = Math.floor(random() * (i + 1));
      [p[i], p[j]] = [p[j], p[i]];
    }
    return p;
  };
  const number = shuffle(s.xyz.length / 3);
  const order = shuffle(s.tri.length / 3);
  const xyz = new Float64Array(s.xyz.length);
  number.forEach((n, v) => {
    for (let k = 0; k < 3; k++) xyz[3 * n + k] = s.xyz[3 * v + k];
  });
  const tri = new Uint32Array(s.tri.length);
  order.forEach((t, i) => {
    for (let k = 0; k < 3; k++) tri[3 * i + k] = number[s.tri[3 * t + ((k + i) % 3)]];
  });
  return { surface: { xyz, tri }, number };
}

/** Places on boundary sides drawn from numbers 0…1: a third of them vertices. */
export function drawBoundaryPlace(loops: number[][], where: number, share: number): SurfacePoint {
  const sides = loops.flatMap((l) => l.map((v, i) => [v, l[(i + 1) % l.length]]));
  const [a, b] = sides[Math.min(sides.length - 1, Math.floor(where * sides.length))];
  return share < 1 / 3 ? { a, b: a, t: 0 } : { a, b, t: (share - 1 / 3) * 1.5 };
}

/** Folder of found forms made by other programs, beside the project; "" where it is absent. */
export const sharedMeshes = existsSync("../shared/meshes/geodesics.json") ? "../shared/meshes/" : "";

/** Vertices and triangles of one of those OBJ files. */
export function readSharedMesh(name: string): Surface {
  const xyz: number[] = [];
  const tri: number[] = [];
  for (const line of readFileSync(sharedMeshes + name, "utf8").split("\n")) {
    const [word, ...rest] = line.trim().split(/\s+/);
    if (word === "v") xyz.push(...rest.slice(0, 3).map(Number));
    if (word === "f") tri.push(...rest.slice(0, 3).map((r) => Number.parseInt(r, 10) - 1));
  }
  return { xyz: new Float64Array(xyz), tri: new Uint32Array(tri) };
}
