// The structure the tensioning is worked out on: all cloth with its flat panels, cables, masts, stays and adjusters.
// Leaves out what structure.ts leaves out. Nodes 0 … nV-1 are those of the cut surface, then pins, mast heads and feet.
import { PlanError } from "../problem.ts";
import type { Fabric } from "../records/fabric.ts";
import type { FlatPanel } from "../records/flatPanel.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { CableType, RigDecision, RigPlace, Turnbuckle } from "../records/rig.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import { buildStiffness } from "../structure/cloth.ts";
import { buildStructure, type Structure } from "../structure/structure.ts";
import { measureDistance, vertexAt } from "../surface/measures.ts";
import type { Vec3 } from "../surface/surface.ts";
import { balanceHeads } from "./balanceHeads.ts";
import { traceCable } from "./traceCable.ts";

/** What the rig station is given. */
export interface RigInput {
  form: FoundForm;
  layout: StripLayout;
  panels: FlatPanel[];
  fabric: Fabric;
  /** Cable of every cable edge, by edge id. */
  cables: Record<string, { type: CableType; prestretched: boolean }>;
  /** Far pin of an anchor, where the job gives it, by anchor id. */
  supports: Record<string, Vec3>;
  rig: RigDecision;
}

/** A cable or stay: a run of links that share one EA. */
export interface RigCable {
  id: string;
  edge: string | null;
  nodes: number[];
  EA: number;
  /** Intended force, kN. */
  force: number;
  minBreakingForce: number | null;
  firstLink: number;
}

/** A link with a turnbuckle. */
export interface RigAdjuster {
  id: string;
  anchor: string;
  nodes: [number, number];
  EA: number;
  target: number;
  turnbuckle: Turnbuckle;
  link: number;
}

export interface RigStrut {
  id: string;
  nodes: [number, number];
  EA: number;
  link: number;
}

/** The rig: names on a structure, and slack lengths as the form asks for them (m, one for each link). */
export interface Rig {
  structure: Structure;
  cables: RigCable[];
  struts: RigStrut[];
  adjusters: RigAdjuster[];
  L0: Float64Array<ArrayBuffer>;
  /** Panel of every cloth triangle, and its corners in that panel's cut cloth, mm. */
  panelOf: string[];
  flat: [number, number][][];
}

/** Pull of the structure on each anchor by id. */
function readPulls(form: FoundForm): Map<string, Vec3> {
  return new Map(form.reactions.map((r) => [r.anchor, r.force]));
}

interface NodeList {
  xyz: number[];
  held: number[];
}

function addNode(nodes: NodeList, at: Vec3, held: boolean): number {
  nodes.xyz.push(...at);
  nodes.held.push(...(held ? [1, 1, 1] : [0, 0, 0]));
  return nodes.xyz.length / 3 - 1;
}

/** Flat cloth of all panels, relaxed (permanent strain put back), m. */
function gatherCloth(input: RigInput) {
  const tri: number[] = [];
  const flat: number[] = [];
  const panelOf: string[] = [];
  const cut: [number, number][][] = [];
  for (const p of input.panels) {
    const scale = [(1 + p.permanent.warp) / 1000, (1 + p.permanent.weft) / 1000];
    for (let h = 0; h < p.tri.length; h++) {
      const v = p.tri[h];
      tri.push(p.surfaceVertex[v]);
      flat.push(p.flat[2 * v] * scale[0], p.flat[2 * v + 1] * scale[1]);
      if (h % 3 === 0) {
        panelOf.push(p.id);
        cut.push([]);
      }
      cut[cut.length - 1].push([p.flat[2 * v], p.flat[2 * v + 1]]);
    }
  }
  const cloth = {
    tri: new Uint32Array(tri),
    flat: new Float64Array(flat),
    law: new Uint16Array(tri.length / 3),
    laws: [buildStiffness(input.fabric)],
  };
  return { cloth, panelOf, cut };
}

/** Adjusters with their far pins; frees the anchors they stand at. */
function placeAdjusters(input: RigInput, nodes: NodeList): Omit<RigAdjuster, "link">[] {
  const pulls = readPulls(input.form);
  const out: Omit<RigAdjuster, "link">[] = [];
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
    if (!a.turnbuckle)
      throw new PlanError(
        "adjuster-turnbuckle",
        `adjuster ${a.name} has no turnbuckle; name one of the catalogue or give perTurn, shortest, longest and capacity`,
        a.name,
      );
    const at = vertexAt({ xyz: new Float64Array(nodes.xyz), tri: new Uint32Array(0) }, anchor.vertex);
    // outward along the pull, 1.0 m pin to pin, unless the far pin is given
    const pin: Vec3 = input.supports[anchor.id] ?? [
      at[0] - pull[0] / target,
      at[1] - pull[1] / target,
      at[2] - pull[2] / target,
    ];
    nodes.held.fill(0, 3 * anchor.vertex, 3 * anchor.vertex + 3);
    const far = findNode(nodes, pin, input.layout.surface.xyz.length / 3) ?? addNode(nodes, pin, true);
    out.push({
      id: a.name,
      anchor: anchor.id,
      nodes: [anchor.vertex, far],
      EA: a.EA ?? 0,
      target,
      turnbuckle: a.turnbuckle,
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
function resolvePlace(
  input: RigInput,
  nodes: NodeList,
  adjusters: Omit<RigAdjuster, "link">[],
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

/**
 * Builds the rig of a form.
 * @throws PlanError adjuster-anchor, adjuster-slack, adjuster-turnbuckle, rig-place, rig-cable, structure-link
 */
export function buildRig(input: RigInput): Rig {
  const { form, layout } = input;
  const nV = layout.surface.xyz.length / 3;
  const nodes: NodeList = { xyz: [...layout.surface.xyz], held: new Array(3 * nV).fill(0) };
  for (let v = 0; v < form.fixed.length; v++) if (form.fixed[v]) nodes.held.fill(1, 3 * v, 3 * v + 3);
  holdClampedEdges(input, nodes);
  const placed = placeAdjusters(input, nodes);
  const struts = input.rig.struts.map((s) => {
    const foot = resolvePlace(input, nodes, placed, s.from, s.name);
    const head = resolvePlace(input, nodes, placed, s.to, s.name);
    nodes.held.fill(0, 3 * head, 3 * head + 3);
    return { id: s.name, nodes: [foot, head] as [number, number], EA: s.EA };
  });
  const stays = input.rig.stays.map((s) => ({
    ...s,
    nodes: [resolvePlace(input, nodes, placed, s.from, s.name), resolvePlace(input, nodes, placed, s.to, s.name)],
  }));
  const link: number[] = [];
  const EA: number[] = [];
  const strut: number[] = [];
  const L0: number[] = [];
  const place = (v: number): Vec3 => [nodes.xyz[3 * v], nodes.xyz[3 * v + 1], nodes.xyz[3 * v + 2]];
  const add = (a: number, b: number, ea: number, force: number, compressive: boolean) => {
    link.push(a, b);
    EA.push(ea);
    strut.push(compressive ? 1 : 0);
    L0.push(measureDistance(place(a), place(b)) / (1 + force / ea));
    return EA.length - 1;
  };
  const cables: RigCable[] = [];
  for (const edge of form.edges) {
    const cable = input.cables[edge.id];
    if (!cable || edge.force === null) continue;
    const run = traceCable(layout, edge);
    const firstLink = EA.length;
    for (let i = 1; i < run.length; i++) add(run[i - 1], run[i], cable.type.EA, edge.force, false);
    cables.push({
      id: edge.id,
      edge: edge.id,
      nodes: run,
      EA: cable.type.EA,
      force: edge.force,
      minBreakingForce: cable.type.minBreakingForce,
      firstLink,
    });
  }
  const heads = balanceHeads(nodes.xyz, placed, struts, stays);
  stays.forEach((s, i) => {
    const firstLink = add(s.nodes[0], s.nodes[1], s.EA, heads.stay[i], false);
    cables.push({
      id: s.name,
      edge: null,
      nodes: s.nodes,
      EA: s.EA,
      force: heads.stay[i],
      minBreakingForce: s.minBreakingForce,
      firstLink,
    });
  });
  const built = struts.map((s, i) => ({ ...s, link: add(s.nodes[0], s.nodes[1], s.EA, -heads.strut[i], true) }));
  const adjusters = placed.map((a) => ({ ...a, link: add(a.nodes[0], a.nodes[1], a.EA, a.target, false) }));
  const { cloth, panelOf, cut } = gatherCloth(input);
  const structure = buildStructure({ xyz: new Float64Array(nodes.xyz), held: new Uint8Array(nodes.held) }, cloth, {
    link: new Uint32Array(link),
    EA: new Float64Array(EA),
    strut: new Uint8Array(strut),
  });
  return { structure, cables, struts: built, adjusters, L0: new Float64Array(L0), panelOf, flat: cut };
}

/** Seam ends inserted in a clamped edge are held as its own vertices are. */
function holdClampedEdges(input: RigInput, nodes: NodeList): void {
  for (const strip of input.layout.strips) {
    for (const side of strip.sides)
      if (side.kind === "clamped") for (const v of side.vertices) nodes.held.fill(1, 3 * v, 3 * v + 3);
  }
}
