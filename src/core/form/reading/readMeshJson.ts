// The job's own inline mesh into mesh parts: { vertices, triangles | faces, lines, points }. Indices from 0. Repairs nothing.
import { PlanError } from "../../problem.ts";
import type { MeshParts } from "./readObj.ts";

type Loose = Record<string, unknown>;

function fail(where: string, text: string): never {
  throw new PlanError("mesh-json", `${where}: ${text}`, where);
}

function readList(value: unknown, where: string, what: string): unknown[] {
  if (!Array.isArray(value))
    fail(where, `${what} expected, ${value === null ? "null" : typeof value} found; give a list`);
  return value;
}

function readIndex(value: unknown, nV: number, where: string): number {
  if (typeof value !== "number" || !Number.isInteger(value) || value < 0 || value >= nV)
    fail(
      where,
      `${JSON.stringify(value) ?? "nothing"} is no vertex index; whole numbers from 0 to ${nV - 1} are, correct it`,
    );
  return value;
}

function readIndices(value: unknown, nV: number, least: number, where: string): number[] {
  const list = readList(value, where, "a list of vertex indices");
  if (list.length < least)
    fail(where, `${list.length} vertices given, at least ${least} are needed; complete or delete it`);
  return list.map((v, k) => readIndex(v, nV, `${where}[${k}]`));
}

function readVertices(value: unknown, where: string): Float64Array<ArrayBuffer> {
  const rows = readList(value, where, "a list of [x, y, z]");
  const xyz = new Float64Array(3 * rows.length);
  rows.forEach((row, i) => {
    const point = readList(row, `${where}[${i}]`, "[x, y, z]");
    for (let k = 0; k < 3; k++) {
      const x = point[k];
      if (typeof x !== "number" || !Number.isFinite(x))
        fail(`${where}[${i}][${k}]`, `${JSON.stringify(x) ?? "nothing"} is no finite number; correct the coordinate`);
      xyz[3 * i + k] = x;
    }
  });
  return xyz;
}

function readNamed(value: unknown, where: string): Loose[] {
  if (value === undefined) return [];
  return readList(value, where, "a list").map((entry, i) => {
    if (typeof entry !== "object" || entry === null || Array.isArray(entry))
      fail(`${where}[${i}]`, "an object with a name expected");
    return entry as Loose;
  });
}

function readNameOf(entry: Loose, where: string): string | null {
  const name = entry.name;
  if (name === undefined || name === null || name === "") return null;
  if (typeof name !== "string") fail(`${where}.name`, "a name is a text; put it in quotes");
  return name;
}

/**
 * Mesh parts of the inline mesh of a job.
 * @throws PlanError mesh-json (with the path of the value), mesh-empty, mesh-no-faces
 */
export function readMeshJson(value: unknown, where: string): MeshParts {
  if (typeof value !== "object" || value === null || Array.isArray(value))
    fail(where, "an object with vertices and triangles expected");
  const mesh = value as Loose;
  const xyz = readVertices(mesh.vertices, `${where}.vertices`);
  const nV = xyz.length / 3;
  if (nV === 0)
    throw new PlanError("mesh-empty", `${where}.vertices: the mesh has no vertices: nothing to plan; give them`, where);
  const key = mesh.triangles === undefined ? "faces" : "triangles";
  const faces = readList(mesh[key] ?? [], `${where}.${key}`, "a list of faces");
  if (faces.length === 0)
    throw new PlanError("mesh-no-faces", `${where}.${key}: the mesh has no faces; give its triangles or faces`, where, {
      vertices: nV,
    });
  const faceStart = new Uint32Array(faces.length + 1);
  const corners: number[] = [];
  faces.forEach((face, f) => {
    for (const v of readIndices(face, nV, 3, `${where}.${key}[${f}]`)) corners.push(v);
    faceStart[f + 1] = corners.length;
  });
  const lines = readNamed(mesh.lines, `${where}.lines`).map((entry, i) => {
    const at = `${where}.lines[${i}]`;
    return { name: readNameOf(entry, at), vertices: readIndices(entry.vertices, nV, 2, `${at}.vertices`) };
  });
  const points = readNamed(mesh.points, `${where}.points`).map((entry, i) => {
    const at = `${where}.points[${i}]`;
    return { name: readNameOf(entry, at), vertices: [readIndex(entry.vertex, nV, `${at}.vertex`)] };
  });
  return { xyz, faceStart, faceVertex: Uint32Array.from(corners), lines, points };
}
