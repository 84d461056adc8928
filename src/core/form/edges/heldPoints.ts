// Which surface vertices are held: the mesh file's points and the job's anchors. Names them only where the words are plain.
import { type Finding, PlanError } from "../../problem.ts";
import type { AnchorDecision, MeshSource } from "../../records/job.ts";
import { buildFormFinding, describeVertex } from "../formFinding.ts";
import type { SoundSurface } from "../repair/soundSurface.ts";
import { findNearestVertex, measureMeanSide } from "./nearestVertex.ts";

/** A held vertex; `order` is its place among job anchors, then points of the file. */
export interface HeldPoint {
  vertex: number;
  name: string | null;
  order: number;
  /** True where the job, not the mesh, speaks of it. */
  byJob: boolean;
}

/** Share of the mean side within which a position means a vertex. */
const REACH = 0.5;

/** Points of the file by surface vertex. A name counts where it stands for one point alone and no line bears it. */
export function readHeldPoints(
  sound: SoundSurface,
  source: Pick<MeshSource, "points" | "lines">,
): { held: Map<number, HeldPoint>; findings: Finding[] } {
  const reach = REACH * measureMeanSide(sound.surface);
  const held = new Map<number, HeldPoint>();
  const bearers = new Map<string, Set<number>>();
  const off: number[] = [];
  for (const { name, vertices } of source.points)
    for (const p of vertices) {
      let vertex = sound.fromSource[p];
      if (vertex < 0) {
        const near = findNearestVertex(sound.surface, sound.sourceXyz.subarray(3 * p, 3 * p + 3));
        if (near.distance > reach) {
          off.push(p);
          continue;
        }
        vertex = near.vertex;
      }
      if (name !== null) bearers.set(name, (bearers.get(name) ?? new Set()).add(vertex));
      const known = held.get(vertex);
      if (known) known.name ??= name;
      else held.set(vertex, { vertex, name, order: held.size, byJob: false });
    }
  const lineNames = new Set(source.lines.map((l) => l.name));
  for (const h of held.values())
    if (h.name !== null && (lineNames.has(h.name) || (bearers.get(h.name)?.size ?? 0) > 1)) h.name = null;
  // a pinched point was parted: its copies stand in the same place and are held too
  const bySource = new Map([...held.values()].map((h) => [sound.toSource[h.vertex], h]));
  for (const [v, s] of sound.toSource.entries()) {
    const h = bySource.get(s);
    if (h && !held.has(v)) held.set(v, { vertex: v, name: null, order: h.order, byJob: false });
  }
  const findings = off.slice(0, 1).map((p) =>
    buildFormFinding("note", {
      code: "mesh-point-off",
      where: `vertex ${p}`,
      value: off.length,
      limit: reach,
      text: `${off.length} fixed point${off.length > 1 ? "s lie" : " lies"} off the surface, first ${describeVertex(sound.sourceXyz, p)}: nothing of the cloth is held there`,
      remedy: "nothing to do for a mast foot or an outer anchor; else move the point onto a vertex of the surface",
    }),
  );
  return { held, findings };
}

/** The vertex a decision of the job speaks of: given, or that of the mesh's point of its name; -1 where there is none yet. */
function findDecided(sound: SoundSurface, d: AnchorDecision, reach: number, held: Map<number, HeldPoint>): number {
  if (d.vertex !== undefined) {
    const n = sound.fromSource.length;
    const v = d.vertex >= 0 && d.vertex < n && Number.isInteger(d.vertex) ? sound.fromSource[d.vertex] : -1;
    if (v >= 0) return v;
    throw new PlanError(
      "anchor-unknown",
      `anchor ${d.name}: the surface has no vertex ${d.vertex} (the mesh has ${n}, counted from 0${d.vertex < n ? ", and no face uses this one" : ""}); correct its vertex, or give its position with "at"`,
      `anchors.${d.name}`,
      { vertex: d.vertex, vertices: n },
    );
  }
  if (d.at === undefined) {
    for (const h of held.values()) if (h.name === d.name && !h.byJob) return h.vertex;
    return -1;
  }
  const near = findNearestVertex(sound.surface, d.at, (v) => held.has(v));
  if (near.vertex >= 0 && near.distance <= reach) return near.vertex;
  const any = findNearestVertex(sound.surface, d.at);
  if (any.distance <= reach) return any.vertex;
  throw new PlanError(
    "anchor-unknown",
    `anchor ${d.name}: no vertex of the surface within ${reach.toFixed(3)} m of (${d.at.join(", ")}) m; the nearest is ${any.distance.toFixed(3)} m away, ${describeVertex(sound.surface.xyz, any.vertex)}; give the position in metres, z up, or the vertex`,
    `anchors.${d.name}`,
    { distance: any.distance, limit: reach },
  );
}

/**
 * Adds the job's anchors that give a vertex, a position or the name of a point of the mesh; they outrank the mesh's names and order.
 * @throws PlanError anchor-unknown, anchor-double
 */
export function addJobAnchorsInPlace(
  held: Map<number, HeldPoint>,
  sound: SoundSurface,
  anchors: readonly AnchorDecision[],
): void {
  const reach = REACH * measureMeanSide(sound.surface);
  const names = new Set<string>();
  anchors.forEach((d, i) => {
    const fail = (text: string) => {
      throw new PlanError("anchor-double", `anchor ${d.name}: ${text}; keep one of them`, `anchors.${d.name}`);
    };
    if (names.has(d.name)) fail("the job names it twice");
    names.add(d.name);
    const vertex = findDecided(sound, d, reach, held);
    if (vertex < 0) return;
    const known = held.get(vertex);
    if (known?.byJob) fail(`it stands on the same vertex as anchor ${known.name}`);
    held.set(vertex, { vertex, name: d.name, order: i - anchors.length, byJob: true });
  });
  for (const h of held.values()) if (!h.byJob && h.name !== null && names.has(h.name)) h.name = null;
}
