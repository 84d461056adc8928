// Nodes of the rig: those of the cut surface, far pins, mast heads and feet; and the adjusters that free an anchor.
import { PlanError } from "../../problem.ts";
import type { FoundForm } from "../../records/foundForm.ts";
import type { RigPlace, Turnbuckle } from "../../records/rig.ts";
import { measureDistance, vertexAt } from "../../surface/measures.ts";
import type { Vec3 } from "../../surface/surface.ts";
import type { RigInput } from "../rigInput.ts";

/** An adjuster with its two nodes, before it is a link. */
export interface PlacedAdjuster {
  id: string;
  anchor: string;
  nodes: [number, number];
  EA: number;
  target: number;
  turnbuckle: Turnbuckle;
}

/** A catalogue turnbuckle sits in a link with a rod where the pins lie further apart than it reaches: half its take-up each way. */
export function settleTurnbuckle(t: Turnbuckle, pins: number): Turnbuckle {
  if (t.id === "job" || (1000 * pins >= t.shortest && 1000 * pins <= t.longest)) return t;
  const rod = Math.round(1000 * pins - (t.shortest + t.longest) / 2);
  return { ...t, shortest: t.shortest + rod, longest: t.longest + rod };
}

/** Pull of the structure on each anchor by id. */
function readPulls(form: FoundForm): Map<string, Vec3> {
  return new Map(form.reactions.map((r) => [r.anchor, r.force]));
}

/** Nodes of a rig while it is built. @shape both 3 a node */
export interface NodeList {
  xyz: number[];
  held: number[];
}

/** Appends a node and returns its number. */
export function addNode(nodes: NodeList, at: Vec3, held: boolean): number {
  nodes.xyz.push(...at);
  nodes.held.push(...(held ? [1, 1, 1] : [0, 0, 0]));
  return nodes.xyz.length / 3 - 1;
}

/** Seam ends inserted in a clamped edge are held as its own vertices are. */
export function holdClampedEdges(input: RigInput, nodes: NodeList): void {
  for (const strip of input.layout.strips) {
    for (const side of strip.sides)
      if (side.kind === "clamped") for (const v of side.vertices) nodes.held.fill(1, 3 * v, 3 * v + 3);
  }
}

/** Far pin of an adjuster as drawn: the job's support, else outward along the pull, 1.0 m pin to pin. */
export function drawPin(input: Pick<RigInput, "supports">, anchor: string, at: Vec3, pull: Vec3): Vec3 {
  const given = input.supports[anchor];
  if (given) return given;
  const l = Math.sqrt(pull[0] ** 2 + pull[1] ** 2 + pull[2] ** 2);
  return [at[0] - pull[0] / l, at[1] - pull[1] / l, at[2] - pull[2] / l];
}

/** Adjusters with their far pins; frees the anchors they stand at. */
export function placeAdjusters(input: RigInput, nodes: NodeList): PlacedAdjuster[] {
  const pulls = readPulls(input.form);
  const out: PlacedAdjuster[] = [];
  for (const a of input.rig.adjusters) {
    if (a.anchor === null) continue;
    const anchor = input.form.anchors.find((q) => q.id === a.anchor);
    if (!anchor)
      throw new PlanError(
        "adjuster-anchor",
        `adjuster ${a.name} stands at anchor "${a.anchor}", which the form has not; it has ${input.form.anchors.map((q) => q.id).join(", ") || "none"}`,
        a.name,
      );
    const pull = pulls.get(anchor.id) ?? [0, 0, 0];
    const target = Math.sqrt(pull[0] ** 2 + pull[1] ** 2 + pull[2] ** 2);
    if (!(target > 0))
      throw new PlanError(
        "adjuster-slack",
        `adjuster ${a.name} at anchor ${anchor.id} would carry no force: the structure does not pull there. Take the adjuster away or give the edges their forces`,
        a.name,
      );
    const at = vertexAt({ xyz: new Float64Array(nodes.xyz), tri: new Uint32Array(0) }, anchor.vertex);
    const pin = input.survey[anchor.id] ?? drawPin(input, anchor.id, at, pull);
    nodes.held.fill(0, 3 * anchor.vertex, 3 * anchor.vertex + 3);
    const far = findNode(nodes, pin, input.layout.surface.xyz.length / 3) ?? addNode(nodes, pin, true);
    out.push({
      id: a.name,
      anchor: anchor.id,
      nodes: [anchor.vertex, far],
      EA: a.EA,
      target,
      turnbuckle: settleTurnbuckle(a.turnbuckle, measureDistance(at, pin)),
    });
  }
  return out;
}

/** Extra node within a millimetre of a place. */
function findNode(nodes: NodeList, at: Vec3, from: number): number | null {
  for (let v = from; v < nodes.xyz.length / 3; v++) {
    if (measureDistance([nodes.xyz[3 * v], nodes.xyz[3 * v + 1], nodes.xyz[3 * v + 2]], at) < 1e-3) return v;
  }
  return null;
}

/** Node of a place named by an anchor (its far pin where an adjuster stands there) or by coordinates. */
export function resolvePlace(
  input: RigInput,
  nodes: NodeList,
  adjusters: PlacedAdjuster[],
  place: RigPlace,
  who: string,
): number {
  if (typeof place !== "string")
    return findNode(nodes, place, input.layout.surface.xyz.length / 3) ?? addNode(nodes, place, true);
  const adjuster = adjusters.find((a) => a.anchor === place || a.id === place);
  if (adjuster) return adjuster.nodes[1];
  const anchor = input.form.anchors.find((a) => a.id === place);
  if (anchor) return anchor.vertex;
  throw new PlanError(
    "rig-place",
    `${who} ends at "${place}", which is no anchor or adjuster of the form; name one of ${input.form.anchors.map((a) => a.id).join(", ")} or give coordinates in m`,
    who,
  );
}
