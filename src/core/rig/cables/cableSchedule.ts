// The cable list: forces, erected, slack and cut lengths, marks and stations. No size is ever chosen here.
import type { CableType, FactsCable } from "../../records/rig.ts";
import { measureDistance, vertexAt } from "../../surface/measures.ts";
import type { RigCable } from "../build/buildRig.ts";
import type { RigInput } from "../rigInput.ts";

/** Share a cable that was not prestretched may grow for good: rope with steel core, normal load (trade note, read second hand). */
export const permanentStretch = 0.0025;

type Station = FactsCable["stations"][number];

/** Ends of seams on the cable, by vertex. */
function nameSeamEnds(input: RigInput, cable: RigCable): Map<number, string> {
  const seams = new Map<number, string>();
  for (const seam of input.layout.seams) {
    if (seam.cable === cable.edge) continue;
    for (const v of [seam.vertices[0], seam.vertices[seam.vertices.length - 1]])
      seams.set(v, seams.has(v) ? `${seams.get(v)}, ${seam.id}` : seam.id);
  }
  return seams;
}

/** Where the cloth begins beside a corner's plate, and where clamps sit: evenly, no further apart than asked. */
function listFittings(input: RigInput, cable: RigCable, ends: readonly [number, number], length: number): Station[] {
  const stations: Station[] = [];
  const plates = ends.map((v) => input.form.anchors.find((a) => a.vertex === v)?.id);
  const back = plates.map((id) => (id === undefined ? 0 : (input.cutBacks[id] ?? 0) / 1000));
  if (plates[0] !== undefined && back[0] > 0) stations.push({ at: back[0], for: `plate ${plates[0]}` });
  if (plates[1] !== undefined && back[1] > 0) stations.push({ at: length - back[1], for: `plate ${plates[1]}` });
  const { clamps } = cable.making;
  if (clamps === undefined) return stations;
  const run = length - back[0] - back[1];
  const count = Math.max(1, Math.ceil((1000 * run) / clamps - 1e-9));
  for (let i = 0; i <= count; i++) stations.push({ at: back[0] + (run * i) / count, for: `clamp ${i + 1}` });
  return stations;
}

/**
 * One line of the cable list.
 * @units m, kN; stations along the erected cable from its first node, under the mark's force; utilisation: intended force over
 *   breaking force. cutLength: slack length, less what it grows for good, less what its end fittings take off
 */
export function buildCableLine(
  input: RigInput,
  cable: RigCable,
  spec: { type: CableType | null; prestretched: boolean },
): FactsCable {
  const surface = input.layout.surface;
  const seams = nameSeamEnds(input, cable);
  const { erected: erectedLength } = cable;
  const stations: Station[] = [];
  let at = 0;
  if (cable.edge !== null)
    cable.nodes.forEach((v, i) => {
      if (i > 0) at += measureDistance(vertexAt(surface, cable.nodes[i - 1]), vertexAt(surface, v));
      const seam = seams.get(v);
      if (seam !== undefined) stations.push({ at, for: seam });
    });
  const ends = [cable.nodes[0], cable.nodes[cable.nodes.length - 1]] as const;
  if (cable.edge !== null) stations.push(...listFittings(input, cable, ends, erectedLength));
  stations.sort((a, b) => a.at - b.at);
  const slackLength = erectedLength / (1 + cable.force / cable.EA);
  const { terminals, fitting } = cable.making;
  const stretch = cable.making.stretch ?? (spec.prestretched ? 0 : permanentStretch);
  const off = terminals ? ([terminals[0] / 1000, terminals[1] / 1000] as [number, number]) : null;
  return {
    id: cable.id,
    edge: cable.edge,
    type: spec.type?.id ?? "stay",
    EA: cable.EA,
    force: cable.force,
    erectedLength,
    slackLength,
    cutLength: slackLength / (1 + stretch) - (off ? off[0] + off[1] : 0),
    ...(off ? { terminals: off } : {}),
    stretch,
    markAt: { force: cable.force, temperature: input.rig.temperature },
    minBreakingForce: cable.minBreakingForce,
    ...(fitting === undefined ? {} : { fitting }),
    utilisation: cable.minBreakingForce === null ? null : cable.force / cable.minBreakingForce,
    stations,
  };
}
