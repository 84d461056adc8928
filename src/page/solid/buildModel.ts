// From the facts to what the solid view draws: points with normals and values, triangles, lines. Knows no three.
import type { Facts, FactsForm } from "../../core/records/facts.ts";
import type { FieldName } from "../store/bookStore.ts";
import type { SentFields } from "../worker/growingFacts.ts";
import type { Shape } from "../worker/shapes.ts";

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

/** The surface a field lives on; null before the form is there. */
export function shapeOf(fields: SentFields | null, field: FieldName): Shape | null {
  if (fields === null) return null;
  const { formShape, panelsShape, builtShape } = fields;
  if ((field === "builtWarp" || field === "builtWeft") && builtShape) return builtShape;
  return isOfPoints(field) ? formShape : (panelsShape ?? formShape);
}

/** Whether the values of a field are those of the form's points; else they are those of triangles. */
export function isOfPoints(field: FieldName): boolean {
  return field === "residual" || field === "curvature";
}

/** The values a field has, of vertices or of triangles. */
export function valuesOf(fields: SentFields | null, field: FieldName): Float32Array<ArrayBuffer> | null {
  const found = {
    none: undefined,
    residual: fields?.residual,
    curvature: fields?.curvature,
    warp: fields?.patterned?.warp,
    weft: fields?.patterned?.weft,
    builtWarp: fields?.built?.warp,
    builtWeft: fields?.built?.weft,
  }[field];
  return found ?? null;
}

/** What of a plan has lines over its surface. */
type Named = { [K in "form" | "seams" | "rig"]: Facts[K] | undefined };

function linesOf({ seams, rig }: Named, form: FactsForm): ModelLine[] {
  const inner = ["ridge", "valley", "belt"];
  const lines: ModelLine[] = form.edges.map((e) => ({
    id: e.id,
    kind: inner.includes(e.kind) ? "inner" : (e.kind as ModelLine["kind"]),
    points: e.vertices.map((v) => form.vertices[v]),
  }));
  for (const s of seams ?? []) lines.push({ id: s.id, kind: "seam", points: s.path });
  for (const a of rig?.adjusters ?? [])
    lines.push({ id: a.id, kind: "adjuster", points: a.nodes.map((n) => rig?.nodes[n] ?? []) });
  for (const s of (rig?.struts ?? []).filter((q) => !q.brace))
    lines.push({ id: s.id, kind: "strut", points: s.nodes.map((n) => rig?.nodes[n] ?? []) });
  return lines;
}

function middleOf(points: readonly number[][]): number[] {
  return points[Math.floor(points.length / 2)] ?? [0, 0, 0];
}

function labelsOf(form: FactsForm, panels: Shape | undefined, lines: readonly ModelLine[]): Model["labels"] {
  const labels = lines.filter((l) => l.kind !== "strut").map((l) => ({ id: l.id, at: middleOf(l.points) }));
  panels?.owners.forEach((id, i) => {
    labels.push({ id, at: panels.middles[i] });
  });
  for (const a of form.anchors.slice(0, 40)) labels.push({ id: a.id, at: form.vertices[a.vertex] });
  return labels;
}

/** A shape whose triangles have their own corners, since values are those of triangles. */
function spread(shape: Shape, values: Float32Array): Omit<Model, "lines" | "labels" | "owners"> {
  const { triangles: corners } = shape;
  const n = corners.length;
  const out = {
    position: new Float32Array(3 * n),
    normal: new Float32Array(3 * n),
    triangles: Uint32Array.from({ length: n }, (_, i) => i),
    value: new Float32Array(n),
    owner: new Uint16Array(n),
  };
  for (let i = 0; i < n; i++) {
    const v = corners[i];
    for (let k = 0; k < 3; k++) {
      out.position[3 * i + k] = shape.position[3 * v + k];
      out.normal[3 * i + k] = shape.normal[3 * v + k];
    }
    out.value[i] = values[(i / 3) | 0];
    out.owner[i] = shape.owner[v];
  }
  return out;
}

/** Lines and names over a surface. */
export function nameModel(facts: Named, panels: Shape | undefined): Pick<Model, "lines" | "labels"> {
  const { form } = facts;
  if (form === undefined) return { lines: [], labels: [] };
  const lines = linesOf(facts, form);
  return { lines, labels: labelsOf(form, panels, lines) };
}

/** What is drawn of a shape, its values with it: one for each point, or, `apart`, one for each triangle. */
export function buildModel(
  shape: Shape,
  values: Float32Array<ArrayBuffer> | null,
  apart: boolean,
  over: Pick<Model, "lines" | "labels">,
): Model {
  const { position, normal, triangles, owner, owners } = shape;
  if (apart && values !== null) return { owners, ...over, ...spread(shape, values) };
  return { position, normal, triangles, value: values ?? new Float32Array(0), owner, owners, ...over };
}
