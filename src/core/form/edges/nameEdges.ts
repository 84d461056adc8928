// Ids, kinds and given forces of the form's edges: the job's word first, then the mesh's, then the shape; defaults are said.
import { type Finding, PlanError } from "../../problem.ts";
import type { EdgeKind, FormEdge } from "../../records/foundForm.ts";
import type { EdgeDecision } from "../../records/job.ts";
import { measureStations, removeAlong } from "../balance/cablePull.ts";
import { buildFormFinding } from "../formFinding.ts";
import type { BoundaryRun } from "./cutLoops.ts";
import type { SurfaceLine } from "./matchLines.ts";

/** Sag over chord below which a run counts as straight. Common practice: no edge cable is drawn that flat. */
const STRAIGHT = 0.005;

const ON_BOUNDARY: readonly EdgeKind[] = ["cable", "clamped", "free"];
const INSIDE: readonly EdgeKind[] = ["ridge", "valley", "belt"];

/** Share of the cloth's pull that a cable along a curved run must hold for the run to be taken for one. Own argument. */
const HOLDS = 0.5;

/** Vertices, and the pull of evenly stressed cloth at them. @shape 3*nV each */
export interface FormShape {
  xyz: Float64Array<ArrayBuffer>;
  pull: Float64Array<ArrayBuffer>;
}

/** An edge with what it was made from. */
export interface NamedEdge {
  edge: FormEdge;
  /** Name of the line it lies on, null where it has none. */
  lineName: string | null;
  tear: boolean;
}

interface Draft {
  vertices: number[];
  loop: number;
  lineName: string | null;
  run: BoundaryRun | null;
}

/** Greatest distance of a run's vertices from its chord over the chord; Infinity where it closes on itself. */
export function measureSag(xyz: Float64Array<ArrayBuffer>, vertices: readonly number[]): number {
  const p = 3 * vertices[0];
  const q = 3 * vertices[vertices.length - 1];
  const c = [0, 1, 2].map((k) => xyz[q + k] - xyz[p + k]);
  const chord = Math.sqrt(c[0] ** 2 + c[1] ** 2 + c[2] ** 2);
  if (chord === 0) return Infinity;
  let sag = 0;
  for (const v of vertices) {
    const d = [0, 1, 2].map((k) => xyz[3 * v + k] - xyz[p + k]);
    const n = [d[1] * c[2] - d[2] * c[1], d[2] * c[0] - d[0] * c[2], d[0] * c[1] - d[1] * c[0]];
    sag = Math.max(sag, Math.sqrt(n[0] ** 2 + n[1] ** 2 + n[2] ** 2) / chord);
  }
  return sag / chord;
}

/** One id for each draft: the line's name, with -1, -2, … where it was parted; E1… on the boundary, K1… inside. */
function giveIds(drafts: readonly Draft[], taken: ReadonlySet<string>): string[] {
  const groups = new Map<string, Draft[]>();
  for (const d of drafts) if (d.lineName !== null) groups.set(d.lineName, [...(groups.get(d.lineName) ?? []), d]);
  const ids = new Map<Draft, string>();
  const used = new Set<string>();
  for (const [name, group] of groups) {
    // where a cable's line runs on over a fixed plate, the cable keeps the name
    const loose = group.filter((d) => !d.run?.held);
    const bearers = loose.length === 1 ? loose : group;
    bearers.forEach((d, i) => {
      let id = bearers.length === 1 ? name : `${name}-${i + 1}`;
      while (used.has(id)) id += "'";
      used.add(id);
      ids.set(d, id);
    });
  }
  const count = { E: 0, K: 0 };
  return drafts.map((d) => {
    const known = ids.get(d);
    if (known !== undefined) return known;
    const letter = d.run ? "E" : "K";
    let id = "";
    do id = `${letter}${++count[letter]}`;
    while (used.has(id) || taken.has(id));
    return id;
  });
}

/**
 * How far the cloth's pull at a run is against that of a cable along it: 1 where a cable would hold the cloth, 0 where the run
 * bends square to it, -1 where it bends towards the outside and could only be pushed.
 * @shape pull: of the cloth at each vertex, 3*nV
 */
export function measureHold(
  xyz: Float64Array<ArrayBuffer>,
  pull: Float64Array<ArrayBuffer>,
  vertices: readonly number[],
): number {
  let sum = 0;
  let size = 0;
  for (const s of measureStations(xyz, vertices)) {
    if (s.along === null) continue;
    const f = removeAlong([pull[3 * s.vertex], pull[3 * s.vertex + 1], pull[3 * s.vertex + 2]], [s.along]);
    sum -= f[0] * s.pull[0] + f[1] * s.pull[1] + f[2] * s.pull[2];
    size += Math.sqrt((f[0] ** 2 + f[1] ** 2 + f[2] ** 2) * (s.pull[0] ** 2 + s.pull[1] ** 2 + s.pull[2] ** 2));
  }
  return size > 0 ? sum / size : 0;
}

/** Kind of a boundary run with no word of the job, and whether that is a default. */
function takeBoundaryKind(shape: FormShape, run: BoundaryRun): { kind: EdgeKind; byDefault: boolean } {
  if (run.tear) return { kind: "free", byDefault: false };
  if (run.held) return { kind: "clamped", byDefault: false };
  if (run.line) return { kind: "cable", byDefault: false };
  const straight = run.closed || measureSag(shape.xyz, run.vertices) < STRAIGHT;
  const firm = straight || measureHold(shape.xyz, shape.pull, run.vertices) < HOLDS;
  return { kind: firm ? "clamped" : "cable", byDefault: true };
}

function takeInnerKind(name: string | null): EdgeKind {
  if (name !== null && /ridge/i.test(name)) return "ridge";
  return name !== null && /valley/i.test(name) ? "valley" : "belt";
}

function checkKind(id: string, kind: EdgeKind, allowed: readonly EdgeKind[]): void {
  if (allowed.includes(kind)) return;
  const place = allowed === INSIDE ? "lies inside the surface" : "lies on the boundary";
  throw new PlanError(
    "edge-kind",
    `edges.${id}.kind: "${kind}" cannot be, the edge ${place}; give one of ${allowed.join(", ")}${allowed === INSIDE ? ", or fix its points in the mesh if something rigid holds it" : ""}`,
    `edges.${id}.kind`,
    { kind },
  );
}

function checkNames(decisions: Record<string, EdgeDecision>, named: readonly NamedEdge[]): void {
  const exist = new Set(named.flatMap((n) => (n.lineName === null ? [n.edge.id] : [n.edge.id, n.lineName])));
  const unknown = Object.keys(decisions).filter((k) => k !== "default" && !exist.has(k));
  if (unknown.length === 0) return;
  throw new PlanError(
    "edge-unknown",
    `edges.${unknown[0]}: the form has no edge of that name; it has ${named.map((n) => n.edge.id).join(", ")}`,
    unknown.map((k) => `edges.${k}`),
  );
}

function reportDefaults(ids: readonly string[], kind: EdgeKind): Finding[] {
  if (ids.length === 0) return [];
  const many = ids.length > 1;
  const why =
    kind === "clamped"
      ? `${many ? "they run" : "it runs"} straight, round a ring, or bulging outwards where no cable could hold the cloth`
      : `${many ? "they are" : "it is"} curved`;
  return [
    buildFormFinding("note", {
      code: "edge-kind-default",
      where: [...ids],
      value: kind,
      text: `neither job nor mesh says what ${many ? "edges" : "edge"} ${ids.join(", ")} ${many ? "are" : "is"}: taken as ${kind}, because ${why}`,
      remedy: `give edges.${ids[0]}.kind in the job`,
      basis: "common practice",
    }),
  ];
}

/**
 * Edges of the form: boundary runs in their order, then lines inside the surface.
 * @throws PlanError edge-unknown, edge-kind
 */
export function nameEdges(
  form: FormShape,
  runs: readonly BoundaryRun[],
  inner: readonly SurfaceLine[],
  decisions: Record<string, EdgeDecision>,
  taken: ReadonlySet<string>,
): { edges: NamedEdge[]; findings: Finding[] } {
  const drafts: Draft[] = [
    ...runs.map((run) => ({ vertices: run.vertices, loop: run.loop, lineName: run.line?.name ?? null, run })),
    ...inner.map((line) => ({ vertices: line.vertices, loop: -1, lineName: line.name, run: null })),
  ];
  const ids = giveIds(drafts, taken);
  const fallback = decisions.default ?? {};
  const defaults: Record<"cable" | "clamped", string[]> = { cable: [], clamped: [] };
  const edges = drafts.map((d, i): NamedEdge => {
    const id = ids[i];
    const own = { ...(d.lineName === null ? {} : decisions[d.lineName]), ...decisions[id] };
    const allowed = d.run ? ON_BOUNDARY : INSIDE;
    if (own.kind) checkKind(id, own.kind, allowed);
    const general = fallback.kind && allowed.includes(fallback.kind) ? fallback.kind : undefined;
    const shape = d.run ? takeBoundaryKind(form, d.run) : { kind: takeInnerKind(d.lineName), byDefault: false };
    const kind = own.kind ?? general ?? shape.kind;
    if (own.kind === undefined && general === undefined && shape.byDefault && (kind === "cable" || kind === "clamped"))
      defaults[kind].push(id);
    const carries = kind !== "clamped" && kind !== "free";
    const force = carries ? ((own.force === undefined ? fallback.force : own.force) ?? null) : null;
    const edge: FormEdge = {
      id,
      kind,
      vertices: d.vertices,
      loop: d.loop,
      force,
      forceFrom: force === null ? "none" : "job",
      reaction: null,
    };
    const acknowledged = own.kind !== undefined || general !== undefined;
    return { edge, lineName: d.lineName, tear: d.run?.tear === true && !acknowledged };
  });
  checkNames(decisions, edges);
  return {
    edges,
    findings: [...reportDefaults(defaults.clamped, "clamped"), ...reportDefaults(defaults.cable, "cable")],
  };
}
