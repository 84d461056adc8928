// From the facts to what the solid view draws: points with normals and values, triangles, lines. Knows no three.
import type { Facts, FactsForm } from "../../core/records/facts.ts";
import type { FieldName } from "../store/bookStore.ts";
import type { SentFields } from "../worker/messages.ts";

/** A line over the surface. */
export interface ModelLine {
  id: string;
  kind: "seam" | "cable" | "clamped" | "free" | "inner" | "adjuster" | "strut";
  points: number[][];
}

/**
 * A surface ready to draw. Points belong to one patch each: its vertices, or each triangle's own corners where values are those of
 * triangles.
 * @shape position, normal 3*nP; triangles 3*nT; value nP (NaN: none) or empty; owner nP, index into owners
 */
export interface Model {
  position: Float32Array<ArrayBuffer>;
  normal: Float32Array<ArrayBuffer>;
  triangles: Uint32Array<ArrayBuffer>;
  value: Float32Array<ArrayBuffer>;
  owner: Uint16Array<ArrayBuffer>;
  owners: string[];
  lines: ModelLine[];
  labels: { id: string; at: number[] }[];
}

interface Patch {
  id: string;
  vertices: number[][];
  triangles: number[][];
}

/** Patches of the surface at the place the field lives on. */
function patchesOf(facts: Facts, form: FactsForm, field: FieldName): Patch[] {
  const { panels } = facts;
  const built = facts.rig ?? facts.assembled;
  if ((field === "builtWarp" || field === "builtWeft") && built) {
    return [{ id: "", vertices: built.nodes, triangles: built.cloth.map((c) => c.nodes) }];
  }
  if (panels === undefined || field === "residual" || field === "curvature") {
    return [{ id: "", vertices: form.vertices, triangles: form.triangles }];
  }
  return panels.map((p) => ({ id: p.id, vertices: p.erected, triangles: p.triangles }));
}

/** Sums of the triangles' vector areas at each vertex: directions of the normals. */
function sumNormals({ vertices, triangles }: Patch): Float64Array {
  const sum = new Float64Array(3 * vertices.length);
  for (const [a, b, c] of triangles) {
    const [p, q, r] = [vertices[a], vertices[b], vertices[c]];
    const u = [q[0] - p[0], q[1] - p[1], q[2] - p[2]];
    const v = [r[0] - p[0], r[1] - p[1], r[2] - p[2]];
    const n = [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
    for (const i of [a, b, c]) for (let k = 0; k < 3; k++) sum[3 * i + k] += n[k];
  }
  return sum;
}

function valuesOf(
  fields: SentFields | null,
  field: FieldName,
): { values: Float32Array; of: "triangle" | "vertex" } | null {
  const found = {
    none: undefined,
    residual: fields?.residual,
    curvature: fields?.curvature,
    warp: fields?.patterned?.warp,
    weft: fields?.patterned?.weft,
    builtWarp: fields?.built?.warp,
    builtWeft: fields?.built?.weft,
  }[field];
  if (found === undefined) return null;
  return { values: found, of: field === "residual" || field === "curvature" ? "vertex" : "triangle" };
}

/** The values a field has, for the scale. */
export function fieldValues(fields: SentFields | null, field: FieldName): Float32Array | null {
  return valuesOf(fields, field)?.values ?? null;
}

function linesOf(facts: Facts, form: FactsForm): ModelLine[] {
  const inner = ["ridge", "valley", "belt"];
  const lines: ModelLine[] = form.edges.map((e) => ({
    id: e.id,
    kind: inner.includes(e.kind) ? "inner" : (e.kind as ModelLine["kind"]),
    points: e.vertices.map((v) => form.vertices[v]),
  }));
  for (const s of facts.seams ?? []) lines.push({ id: s.id, kind: "seam", points: s.path });
  const { rig } = facts;
  for (const a of rig?.adjusters ?? [])
    lines.push({ id: a.id, kind: "adjuster", points: a.nodes.map((n) => rig?.nodes[n] ?? []) });
  for (const s of (rig?.struts ?? []).filter((q) => !q.brace))
    lines.push({ id: s.id, kind: "strut", points: s.nodes.map((n) => rig?.nodes[n] ?? []) });
  return lines;
}

function middleOf(points: readonly number[][]): number[] {
  return points[Math.floor(points.length / 2)] ?? [0, 0, 0];
}

function labelsOf(facts: Facts, form: FactsForm, lines: readonly ModelLine[]): Model["labels"] {
  const labels = lines.filter((l) => l.kind !== "strut").map((l) => ({ id: l.id, at: middleOf(l.points) }));
  for (const p of facts.panels ?? []) {
    const mean = [0, 1, 2].map((k) => p.erected.reduce((s, v) => s + v[k], 0) / p.erected.length);
    const near = (v: number[]) => v.reduce((s, x, k) => s + (x - mean[k]) ** 2, 0);
    labels.push({
      id: p.id,
      at: p.erected.reduce((best: number[], v) => (near(v) < near(best) ? v : best), p.erected[0]),
    });
  }
  for (const a of form.anchors.slice(0, 40)) labels.push({ id: a.id, at: form.vertices[a.vertex] });
  return labels;
}

/** The model of a plan, coloured by a field; null before the form is there. */
export function buildModel(facts: Facts, fields: SentFields | null, field: FieldName): Model | null {
  const { form } = facts;
  if (form === undefined) return null;
  const patches = patchesOf(facts, form, field);
  const found = valuesOf(fields, field);
  const apart = found?.of === "triangle";
  const nT = patches.reduce((n, p) => n + p.triangles.length, 0);
  const nP = apart ? 3 * nT : patches.reduce((n, p) => n + p.vertices.length, 0);
  const position = new Float32Array(3 * nP);
  const normal = new Float32Array(3 * nP);
  const triangles = new Uint32Array(3 * nT);
  const value = new Float32Array(found === null ? 0 : nP);
  const owner = new Uint16Array(nP);
  let point = 0;
  let corner = 0;
  patches.forEach((patch, i) => {
    const sums = sumNormals(patch);
    const put = (v: number) => {
      const [x, y, z] = [sums[3 * v], sums[3 * v + 1], sums[3 * v + 2]];
      const size = Math.sqrt(x * x + y * y + z * z) || 1;
      const [p, q, r] = patch.vertices[v];
      position.set([p, q, r], 3 * point);
      normal.set([x / size, y / size, z / size], 3 * point);
      owner[point] = i;
      if (found !== null) value[point] = found.values[apart ? Math.floor(point / 3) : v];
      point++;
    };
    const first = point;
    if (!apart) for (let v = 0; v < patch.vertices.length; v++) put(v);
    for (const triangle of patch.triangles) {
      for (const v of triangle) {
        triangles[corner++] = apart ? point : first + v;
        if (apart) put(v);
      }
    }
  });
  const lines = linesOf(facts, form);
  return {
    position,
    normal,
    triangles,
    value,
    owner,
    owners: patches.map((p) => p.id),
    lines,
    labels: labelsOf(facts, form, lines),
  };
}
