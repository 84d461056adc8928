// The cable list: forces, erected, slack and cut lengths, marks and stations. No size is ever chosen here.
// Leaves out what terminals take off: the job does not know them, and the paper says so.
import type { CableType, FactsCable } from "../../records/rig.ts";
import type { StripLayout } from "../../records/stripLayout.ts";
import { measureDistance, vertexAt } from "../../surface/measures.ts";
import type { RigCable } from "../build/buildRig.ts";

/** Share a cable that was not prestretched may grow for good: rope with steel core, normal load (trade note, read second hand). */
export const permanentStretch = 0.0025;

/**
 * One line of the cable list.
 * @units m, kN; stations along the erected cable from its first node; utilisation: intended force over breaking force
 */
export function buildCableLine(
  cable: RigCable,
  layout: StripLayout,
  xyz: Float64Array<ArrayBuffer>,
  spec: { type: CableType | null; prestretched: boolean },
  temperature: number,
): FactsCable {
  const surface = { xyz, tri: new Uint32Array(0) };
  const seams = new Map<number, string>();
  for (const seam of layout.seams) {
    if (seam.cable === cable.edge) continue;
    for (const v of [seam.vertices[0], seam.vertices[seam.vertices.length - 1]])
      seams.set(v, seams.has(v) ? `${seams.get(v)}, ${seam.id}` : seam.id);
  }
  let erectedLength = 0;
  const stations: FactsCable["stations"] = [];
  cable.nodes.forEach((v, i) => {
    if (i > 0) erectedLength += measureDistance(vertexAt(surface, cable.nodes[i - 1]), vertexAt(surface, v));
    const seam = cable.edge === null ? undefined : seams.get(v);
    if (seam !== undefined) stations.push({ at: erectedLength, for: seam });
  });
  const slackLength = erectedLength / (1 + cable.force / cable.EA);
  return {
    id: cable.id,
    edge: cable.edge,
    type: spec.type?.id ?? "stay",
    EA: cable.EA,
    force: cable.force,
    erectedLength,
    slackLength,
    cutLength: spec.prestretched ? slackLength : slackLength / (1 + permanentStretch),
    markAt: { force: cable.force, temperature },
    minBreakingForce: cable.minBreakingForce,
    utilisation: cable.minBreakingForce === null ? null : cable.force / cable.minBreakingForce,
    stations,
  };
}
