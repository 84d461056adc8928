// Settling as the form station does it: what is held and pulled goes in, a surface in balance and plain words come out.
// Where there is no such surface the start form is kept and a stop says why.
import type { Check, Finding, StationContext } from "../../problem.ts";
import type { FormEdge } from "../../records/foundForm.ts";
import { measureArea } from "../../surface/measures.ts";
import type { Surface } from "../../surface/surface.ts";
import { isCable } from "../balance/cablePull.ts";
import type { StressField } from "../balance/membraneForces.ts";
import { buildFormFinding, describePlace } from "../formFinding.ts";
import { findNeck, type Neck } from "./findNeck.ts";
import { measureChord } from "./settleForces.ts";
import { type Settled, settleDefaults, settleForm } from "./settleForm.ts";
import type { SettleInput } from "./settleState.ts";

/** The form that settles; forces of the cables in place. */
export interface SettleTask {
  surface: Surface;
  fixed: Uint8Array<ArrayBuffer>;
  edges: readonly FormEdge[];
  loops: readonly (readonly number[])[];
  field: StressField;
  /** Vertex of the mesh file for each of the surface. */
  toSource: ArrayLike<number>;
}

/** A neck this much narrower than it was is what gave way. */
const NARROWED = 0.6;

const percent = (r: number) => `${(100 * r).toPrecision(2)} %`;

function describeStress({ warp, weft, direction }: StressField): string {
  return warp === weft || direction === null
    ? `${(warp + weft) / 2} kN/m both ways`
    : `${warp} kN/m in warp and ${weft} kN/m in weft`;
}

/** Held rings and held points inside the cloth. */
function collectGroups(task: SettleTask): number[][] {
  const onLoop = new Uint8Array(task.fixed.length);
  for (const loop of task.loops) for (const v of loop) onLoop[v] = 1;
  // the outer rim is not what a neck forms round
  const rings = task.loops.slice(1).map((loop) => loop.filter((v) => task.fixed[v]));
  const points = Array.from(task.fixed.keys()).filter((v) => task.fixed[v] && !onLoop[v]);
  return [...rings.filter((ring) => ring.length > 0), ...points.map((v) => [v])];
}

function reportNeck(task: SettleTask, settled: Settled, neck: Neck): Finding {
  const inGroup = new Set(neck.group);
  const edges = task.edges.filter((e) => e.vertices.some((v) => inGroup.has(v))).map((e) => e.id);
  const vertex = `vertex ${task.toSource[neck.group[0]]}`;
  const point = neck.group.length === 1;
  const at = describePlace(Float64Array.from(neck.centre), 0);
  const name = point ? `the held point at ${vertex}` : `the ring ${edges.join(", ") || vertex}`;
  return buildFormFinding("stop", {
    code: "settle-neck",
    where: edges.length > 0 && !point ? edges : vertex,
    value: neck.radius,
    limit: neck.startRadius,
    text: `no such surface: under ${describeStress(task.field)} the cloth that leaves ${name} draws together into a neck at ${at}, radius ${neck.startRadius.toFixed(3)} m as drawn, ${neck.radius.toFixed(3)} m and closing when given up after ${settled.passes} passes; the form was left as it is`,
    remedy: point
      ? "hold the cloth there by a ring or a loop of cable, or let belts run from the point to the rim"
      : "take a larger ring or bring it nearer to the rim, let belts run from ring to rim, or give more stress up the cloth than round it",
    basis: "between two equal rings no minimal surface spans more than 1.325 radii (closed form of the catenoid)",
  });
}

/** Cables that cannot hold an arc across their chord. */
function findWeakCables(task: SettleTask): { edge: FormEdge; least: number }[] {
  const stress = (task.field.warp + task.field.weft) / 2;
  return task.edges
    .filter((e) => e.kind === "cable")
    .map((edge) => ({ edge, least: (stress * measureChord(task.surface.xyz, edge.vertices)) / 2 }))
    .filter(({ edge, least }) => (edge.force ?? 0) < least);
}

function reportFailure(task: SettleTask, settled: Settled): Finding {
  const { surface, passes, worst, residual } = settled;
  const groups = collectGroups(task);
  const neck = worst >= 0 ? findNeck(surface, task.surface, task.fixed, groups, worst) : null;
  if (neck !== null && neck.radius < NARROWED * neck.startRadius) return reportNeck(task, settled, neck);
  const weak = findWeakCables(task);
  if (weak.length > 0)
    return buildFormFinding("stop", {
      code: "settle-cable-weak",
      where: weak.map(({ edge }) => edge.id),
      value: weak[0].edge.force ?? 0,
      limit: weak[0].least,
      text: `no such surface: under ${describeStress(task.field)} ${weak.map(({ edge, least }) => `cable ${edge.id} with ${(edge.force ?? 0).toFixed(2)} kN cannot span its chord, which takes more than ${least.toFixed(2)} kN`).join("; ")}; given up after ${passes} passes, the form was left as it is`,
      remedy: "give the cables more force in the job (edges.NAME.force) or the cloth less prestress",
      basis: "closed form: an arc of radius force over stress spans at most two radii",
    });
  const eye = task.edges.find(
    (e) => isCable(e) && measureChord(task.surface.xyz, e.vertices) === 0 && e.vertices.every((v) => !task.fixed[v]),
  );
  const vertex = worst >= 0 ? `vertex ${task.toSource[worst]}` : "mesh";
  const at = worst >= 0 ? ` at ${describePlace(surface.xyz, worst)}` : "";
  const ends: Record<Settled["end"], string> = {
    collapsed: `a triangle at ${vertex}${at} draws together to nothing`,
    stalled: `the steps do not shrink: what is out of balance stays at ${percent(residual)} of the cloth's force, worst at ${vertex}${at}`,
    unheld: `nothing holds ${vertex}${at}`,
    slow: "",
    settled: "",
  };
  return buildFormFinding("stop", {
    code: settled.end === "unheld" ? "settle-unheld" : "settle-no-surface",
    where: eye ? eye.id : vertex,
    value: residual,
    limit: settled.limit,
    text: `no such surface: under ${describeStress(task.field)} ${ends[settled.end]}; given up after ${passes} passes, the form was left as it is`,
    remedy: eye
      ? `${eye.id} is a ring of cable that nothing holds: at constant force it has no stable size; fix its points and settle again`
      : "hold more of the cloth there, give the cables more force, add belts, or even out prestress in warp and weft",
  });
}

function reportMoves(task: SettleTask, settled: Settled): Finding {
  const from = task.surface.xyz;
  const to = settled.surface.xyz;
  let far = 0;
  let at = 0;
  let square = 0;
  for (let v = 0; v < task.fixed.length; v++) {
    const d = [0, 1, 2].reduce((s, k) => s + (to[3 * v + k] - from[3 * v + k]) ** 2, 0);
    square += d;
    if (d <= far) continue;
    far = d;
    at = v;
  }
  const rms = Math.sqrt(square / task.fixed.length);
  if (settled.passes === 0)
    return buildFormFinding("note", {
      code: "settle-moved",
      where: "settle",
      value: 0,
      text: `settling moved nothing: under ${describeStress(task.field)} the form is in balance as it is (out of balance across the cloth ${percent(settled.residual)})`,
      remedy: "nothing to do",
    });
  const vertex = `vertex ${task.toSource[at]}`;
  return buildFormFinding("note", {
    code: "settle-moved",
    where: vertex,
    value: Math.sqrt(far),
    text: `settled under ${describeStress(task.field)} in ${settled.passes} passes: vertices moved by up to ${Math.sqrt(far).toFixed(3)} m (${vertex}, to ${describePlace(to, at)}; rms ${rms.toFixed(3)} m), area from ${measureArea(task.surface).toFixed(3)} to ${measureArea(settled.surface).toFixed(3)} m²; out of balance across the cloth ${percent(settled.start)} before, ${percent(settled.residual)} after, within the surface too ${percent(settled.whole)}`,
    remedy: "look at the form before going on: it is no longer the mesh as drawn",
  });
}

/**
 * The surface in balance, or the start form with a stop that says why there is none.
 * @throws PlanError cancelled
 */
export function settleSurface(
  task: SettleTask,
  context: StationContext,
): { surface: Surface; findings: Finding[]; checks: Check[] } {
  const loose = task.edges.filter(
    (e) => e.kind === "free" || (e.kind === "cable" && !(e.force !== null && e.force > 0)),
  );
  if (loose.length > 0)
    return {
      surface: task.surface,
      findings: [
        buildFormFinding("stop", {
          code: "settle-free-edge",
          where: loose.map((e) => e.id),
          value: loose.length,
          limit: 0,
          text: `not settled: nothing holds the cloth along ${loose.map((e) => `${e.id} (${e.kind}${e.kind === "cable" ? " without force" : ""})`).join(", ")}, so that prestress pulls the rim in without end`,
          remedy: "fix its points in the mesh, or make it a cable with a force in the job (edges.NAME)",
        }),
      ],
      checks: [],
    };
  const input: SettleInput = {
    surface: task.surface,
    fixed: task.fixed,
    cables: task.edges.flatMap((e) =>
      isCable(e) && e.force !== null && e.force > 0 ? [{ id: e.id, vertices: e.vertices, force: e.force }] : [],
    ),
    field: task.field,
  };
  const settled = settleForm(input, settleDefaults, context);
  const check: Check = {
    station: "form",
    text: "out-of-balance force across the settled form over the mean summed force of the cloth",
    value: settled.residual,
    limit: settled.limit,
    holds: settled.end === "settled",
  };
  if (settled.end !== "settled" && settled.end !== "slow")
    return { surface: task.surface, findings: [reportFailure(task, settled)], checks: [check] };
  const findings = [reportMoves(task, settled)];
  if (settled.end === "slow")
    findings.push(
      buildFormFinding("caution", {
        code: "settle-slow",
        where: "settle",
        value: settled.residual,
        limit: settled.limit,
        text: `settling came to ${percent(settled.residual)} of the cloth's force in ${settled.passes} passes and not to the limit; the form is soft, near one that does not exist`,
        remedy: "settle the form once more from here, or give it more force or a larger ring",
      }),
    );
  return { surface: settled.surface, findings, checks: [check] };
}
