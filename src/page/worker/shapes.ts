// Surfaces as the solid view draws them, made where the plan is: points with normals, triangles, the place of each name. Knows no three.
import type { Facts, FactsForm } from "../../core/records/facts.ts";

/**
 * A surface of one or more patches; a point belongs to one of them.
 * @shape position, normal 3*nP; triangles 3*nT; owner nP, index into owners; middles: a point in the middle of each patch, m
 */
export interface Shape {
  position: Float32Array<ArrayBuffer>;
  normal: Float32Array<ArrayBuffer>;
  triangles: Uint32Array<ArrayBuffer>;
  owner: Uint16Array<ArrayBuffer>;
  owners: string[];
  middles: number[][];
}

interface Patch {
  id: string;
  vertices: readonly number[][];
  triangles: readonly number[][];
}

/** The point of a patch nearest to the mean of all. */
function middleOf(vertices: readonly number[][]): number[] {
  const mean = [0, 1, 2].map((k) => vertices.reduce((s, v) => s + v[k], 0) / vertices.length);
  const near = (v: number[]) => v.reduce((s, x, k) => s + (x - mean[k]) ** 2, 0);
  return vertices.reduce((best: number[], v) => (near(v) < near(best) ? v : best), vertices[0]);
}

/** Adds the vector areas of triangles at their points, then makes them one long: normals. */
function addNormalsInPlace(normal: Float32Array, position: Float32Array, triangles: Uint32Array): void {
  for (let t = 0; t < triangles.length; t += 3) {
    const [a, b, c] = [3 * triangles[t], 3 * triangles[t + 1], 3 * triangles[t + 2]];
    const [ux, uy, uz] = [0, 1, 2].map((k) => position[b + k] - position[a + k]);
    const [vx, vy, vz] = [0, 1, 2].map((k) => position[c + k] - position[a + k]);
    for (const at of [a, b, c]) {
      normal[at] += uy * vz - uz * vy;
      normal[at + 1] += uz * vx - ux * vz;
      normal[at + 2] += ux * vy - uy * vx;
    }
  }
  for (let i = 0; i < normal.length; i += 3) {
    const size = Math.sqrt(normal[i] ** 2 + normal[i + 1] ** 2 + normal[i + 2] ** 2) || 1;
    for (let k = 0; k < 3; k++) normal[i + k] /= size;
  }
}

function buildShape(patches: readonly Patch[]): Shape {
  const nP = patches.reduce((n, p) => n + p.vertices.length, 0);
  const nT = patches.reduce((n, p) => n + p.triangles.length, 0);
  const position = new Float32Array(3 * nP);
  const triangles = new Uint32Array(3 * nT);
  const owner = new Uint16Array(nP);
  let first = 0;
  let corner = 0;
  patches.forEach((patch, i) => {
    patch.vertices.forEach((v, k) => {
      position.set(v, 3 * (first + k));
      owner[first + k] = i;
    });
    for (const triangle of patch.triangles) for (const v of triangle) triangles[corner++] = first + v;
    first += patch.vertices.length;
  });
  const normal = new Float32Array(3 * nP);
  addNormalsInPlace(normal, position, triangles);
  return {
    position,
    normal,
    triangles,
    owner,
    owners: patches.map((p) => p.id),
    middles: patches.map((p) => middleOf(p.vertices)),
  };
}

/** The form, one patch without a name. */
export function shapeForm({ vertices, triangles }: FactsForm): Shape {
  return buildShape([{ id: "", vertices, triangles }]);
}

/** The panels as erected, a patch each. */
export function shapePanels(panels: NonNullable<Facts["panels"]>): Shape {
  return buildShape(panels.map((p) => ({ id: p.id, vertices: p.erected, triangles: p.triangles })));
}

/** The roof as built, one patch without a name. */
export function shapeBuilt(built: NonNullable<Facts["assembled"]>): Shape {
  return buildShape([{ id: "", vertices: built.nodes, triangles: built.cloth.map((c) => c.nodes) }]);
}
