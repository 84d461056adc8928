// How far clamped edges stand from where they are drawn: surveyed points in, a shift along each edge out. Between two known points
// the shift runs straight by length; a named point of the edge that was not surveyed is taken to stand as drawn.
import { PlanError } from "../problem.ts";
import type { FormEdge, FoundForm } from "../records/foundForm.ts";
import type { SurveyPoint } from "../records/job.ts";
import { shiftAt } from "../rig/build/edgeShift.ts";
import type { EdgeShift } from "../rig/rigInput.ts";
import { measureDistance, vertexAt } from "../surface/measures.ts";
import type { Vec3 } from "../surface/surface.ts";

/** Way beyond which a surveyed place is taken for another point, another axis or another unit, m. */
export const strayed = 1;

/** Length along the edge at each of its vertices, m. */
function measureRun(form: FoundForm, edge: FormEdge): number[] {
  const run = [0];
  for (let i = 1; i < edge.vertices.length; i++)
    run.push(
      run[i - 1] +
        measureDistance(vertexAt(form.surface, edge.vertices[i - 1]), vertexAt(form.surface, edge.vertices[i])),
    );
  return run;
}

/** Place at a length along the edge as drawn, m. */
function placeAlong(form: FoundForm, edge: FormEdge, run: readonly number[], at: number): Vec3 {
  let i = 1;
  while (i < run.length - 1 && run[i] < at) i++;
  const [p, q] = [vertexAt(form.surface, edge.vertices[i - 1]), vertexAt(form.surface, edge.vertices[i])];
  const t = (at - run[i - 1]) / (run[i] - run[i - 1]);
  return [0, 1, 2].map((k) => p[k] + t * (q[k] - p[k])) as Vec3;
}

function measureWay(from: Vec3, to: Vec3, who: string): Vec3 {
  const way = measureDistance(from, to);
  if (way > strayed)
    throw new PlanError(
      "survey-place",
      `survey: ${who} is surveyed ${way.toFixed(2)} m from where it is drawn, more than ${strayed} m: another point, axis or unit`,
      who,
      { way },
    );
  return [0, 1, 2].map((k) => to[k] - from[k]) as Vec3;
}

/** Known points of one clamped edge, by length along it. */
function listKnown(form: FoundForm, edge: FormEdge, survey: readonly SurveyPoint[]): EdgeShift[] {
  const run = measureRun(form, edge);
  const known: EdgeShift[] = [];
  edge.vertices.forEach((v, i) => {
    const names = form.anchors.filter((a) => a.vertex === v).map((a) => a.id);
    const end = i === 0 || i === edge.vertices.length - 1;
    if (names.length === 0 && !end) return;
    const read = survey.find((s) => s.anchor !== undefined && names.includes(s.anchor));
    const by: Vec3 = read ? measureWay(vertexAt(form.surface, v), read.at, names[0]) : [0, 0, 0];
    known.push({ at: run[i], by });
  });
  const closed = edge.vertices[0] === edge.vertices[edge.vertices.length - 1];
  for (const s of survey) {
    if (s.edge !== edge.id) continue;
    const at = s.along * run[run.length - 1];
    known.push({ at, by: measureWay(placeAlong(form, edge, run, at), s.at, `${edge.id} at ${s.along}`) });
  }
  // a closed edge without a name at its seam has no point that is known to stand as drawn
  const first = form.anchors.some((a) => a.vertex === edge.vertices[0]);
  const points = known.sort((a, b) => a.at - b.at);
  if (!closed || first || points.length < 3) return points;
  const inner = points.filter((p) => p.at > 0 && p.at < run[run.length - 1]);
  const whole = run[run.length - 1];
  const [head, tail] = [inner[0], inner[inner.length - 1]];
  return [{ at: tail.at - whole, by: tail.by }, ...inner, { at: head.at + whole, by: head.by }];
}

/**
 * Shifts of the clamped edges that stand elsewhere than drawn, by edge; empty where all stand as drawn.
 * @units m; at: length along the edge as drawn, ascending
 * @throws PlanError survey-anchor, survey-edge: no such anchor or clamped edge; survey-place: too far from the drawn place
 */
export function measureShifts(form: FoundForm, survey: readonly SurveyPoint[]): Record<string, EdgeShift[]> {
  const clamped = form.edges.filter((e) => e.kind === "clamped");
  for (const s of survey) {
    if (s.anchor !== undefined && !form.anchors.some((a) => a.id === s.anchor))
      throw new PlanError(
        "survey-anchor",
        `survey: the form has no anchor "${s.anchor}"; it has ${form.anchors.map((a) => a.id).join(", ") || "none"}`,
        s.anchor,
      );
    if (s.edge !== undefined && !clamped.some((e) => e.id === s.edge))
      throw new PlanError(
        "survey-edge",
        `survey: the form has no clamped edge "${s.edge}"; it has ${clamped.map((e) => e.id).join(", ") || "none"}`,
        s.edge,
      );
  }
  const shifts: Record<string, EdgeShift[]> = Object.create(null);
  for (const edge of clamped) {
    const known = listKnown(form, edge, survey);
    if (known.some(({ by }) => by.some((q) => q !== 0))) shifts[edge.id] = known;
  }
  return shifts;
}

/** The greatest shift, m, and the edge it is on. */
export function findGreatestShift(shifts: Record<string, EdgeShift[]>): { edge: string; way: number } {
  let greatest = { edge: "", way: 0 };
  for (const [edge, known] of Object.entries(shifts))
    for (const { by } of known) {
      const way = Math.hypot(...by);
      if (way > greatest.way) greatest = { edge, way };
    }
  return greatest;
}

/** Vertices of the form with the clamped edges where they were surveyed; all else stays. @shape 3*nV */
export function moveEdges(form: FoundForm, shifts: Record<string, EdgeShift[]>): Float64Array<ArrayBuffer> {
  const xyz = form.surface.xyz.slice();
  for (const edge of form.edges) {
    const known = shifts[edge.id];
    if (!known) continue;
    const run = measureRun(form, edge);
    edge.vertices.forEach((v, i) => {
      const by = shiftAt(known, run[i]);
      for (let k = 0; k < 3; k++) xyz[3 * v + k] = form.surface.xyz[3 * v + k] + by[k];
    });
  }
  return xyz;
}
