// Meshes with closed-form answers for the form tests, and the same mesh renumbered, moved or in another unit.
import { readFileSync } from "node:fs";
import { type MeshParts, readObj } from "../../src/core/form/reading/readObj.ts";
import { buildRandom } from "../../src/core/numeric/random.ts";

/** A mesh of test/fixtures/meshes. */
export function readFixture(name: string): MeshParts {
  return readObj(readFileSync(new URL(`../fixtures/meshes/${name}.obj`, import.meta.url), "utf8"));
}

/** Triangles of a grid of nu × nv fields, vertex (i, j) at j·(nu+1)+i; round: the last column joins the first. */
export function buildGrid(
  nu: number,
  nv: number,
  place: (u: number, v: number) => [number, number, number],
  round = false,
): MeshParts {
  const wide = round ? nu : nu + 1;
  const xyz = new Float64Array(3 * wide * (nv + 1));
  for (let j = 0; j <= nv; j++) for (let i = 0; i < wide; i++) xyz.set(place(i / nu, j / nv), 3 * (j * wide + i));
  const corners: number[] = [];
  for (let j = 0; j < nv; j++)
    for (let i = 0; i < nu; i++) {
      const a = j * wide + i;
      const b = j * wide + ((i + 1) % wide);
      corners.push(a, b, b + wide, a, b + wide, a + wide);
    }
  const faceStart = Uint32Array.from({ length: corners.length / 3 + 1 }, (_, f) => 3 * f);
  return { xyz, faceStart, faceVertex: Uint32Array.from(corners), lines: [], points: [] };
}

/** Rim of a grid, its four sides in order from corner (0, 0), each with both ends. */
export function listSides(nu: number, nv: number): number[][] {
  const w = nu + 1;
  return [
    Array.from({ length: nu + 1 }, (_, i) => i),
    Array.from({ length: nv + 1 }, (_, j) => j * w + nu),
    Array.from({ length: nu + 1 }, (_, i) => nv * w + nu - i),
    Array.from({ length: nv + 1 }, (_, j) => (nv - j) * w),
  ];
}

/**
 * A level sheet between four circular arcs that bend inwards, of one radius, over a square of side 2·half.
 * Vertices of the rim lie on the arcs at even angles.
 */
export function buildArcSail(n: number, half: number, radius: number): MeshParts {
  const open = Math.asin(half / radius);
  const sag = (t: number) => {
    const a = (2 * t - 1) * open;
    return [radius * Math.sin(a), radius * (Math.cos(a) - Math.cos(open))];
  };
  const parts = buildGrid(n, n, (u, v) => {
    const [xu, du] = sag(u);
    const [yv, dv] = sag(v);
    // Coons patch of the four arcs: south and north over u, west and east over v
    return [xu + dv * (1 - u) - dv * u, yv + du * (1 - v) - du * v, 3];
  });
  parts.lines = listSides(n, n).map((vertices, k) => ({ name: `arc_${k + 1}`, vertices }));
  parts.points = listSides(n, n).map((s) => ({ name: "corners", vertices: [s[0]] }));
  return parts;
}

/** A vertical catenoid of neck radius c between z = ±h. */
export function buildCatenoid(nu: number, nv: number, c: number, h: number): MeshParts {
  return buildGrid(
    nu,
    nv,
    (u, v) => {
      const z = (2 * v - 1) * h;
      const r = c * Math.cosh(z / c);
      return [r * Math.cos(2 * Math.PI * u), r * Math.sin(2 * Math.PI * u), z];
    },
    true,
  );
}

/** The same mesh with its vertices and faces in another order (seeded). */
export function renumber(parts: MeshParts, seed: number): MeshParts {
  const random = buildRandom(seed);
  const shuffle = (n: number) => {
    const order = Array.from({ length: n }, (_, i) => i);
    for (let i = n - 1; i > 0; i--) {
      const j = Math.floor(random() * (i + 1));
      [order[i], order[j]] = [order[j], order[i]];
    }
    return order;
  };
  const to = shuffle(parts.xyz.length / 3);
  const xyz = new Float64Array(parts.xyz.length);
  to.forEach((t, v) => {
    xyz.set(parts.xyz.subarray(3 * v, 3 * v + 3), 3 * t);
  });
  const faces = shuffle(parts.faceStart.length - 1).map((f) =>
    [...parts.faceVertex.subarray(parts.faceStart[f], parts.faceStart[f + 1])].map((v) => to[v]),
  );
  const faceStart = new Uint32Array(faces.length + 1);
  faces.forEach((f, i) => {
    faceStart[i + 1] = faceStart[i] + f.length;
  });
  return {
    xyz,
    faceStart,
    faceVertex: Uint32Array.from(faces.flat()),
    lines: parts.lines.map((l) => ({ ...l, vertices: l.vertices.map((v) => to[v]) })),
    points: parts.points.map((p) => ({ ...p, vertices: p.vertices.map((v) => to[v]) })),
  };
}

/** The same mesh with every place changed. */
export function mapPlaces(parts: MeshParts, move: (x: number, y: number, z: number) => number[]): MeshParts {
  const xyz = new Float64Array(parts.xyz.length);
  for (let v = 0; v < xyz.length; v += 3) xyz.set(move(parts.xyz[v], parts.xyz[v + 1], parts.xyz[v + 2]), v);
  return { ...parts, xyz };
}
