// The structure the tensioning is worked out on: all cloth with its flat panels, cables, masts, stays and adjusters.
// Leaves out what structure.ts leaves out. Nodes 0 … nV-1 are those of the cut surface, then pins, mast heads and feet.
import { type Finding, PlanError } from "../../problem.ts";
import type { AdjusterDecision, CableMaking, Turnbuckle } from "../../records/rig.ts";
import { buildStiffness } from "../../structure/cloth.ts";
import { listLapLines, measureLapShares } from "../../structure/lapShares.ts";
import { buildStructure, type Structure } from "../../structure/structure.ts";
import type { Vec3 } from "../../surface/surface.ts";
import { traceCable } from "../cables/traceCable.ts";
import type { RigInput } from "../rigInput.ts";
import { balanceHeads, type HeadPull } from "./balanceHeads.ts";
import { moveClampedInPlace } from "./edgeShift.ts";
import { findPinsBehind } from "./pinDirections.ts";
import { findRingsOff, placeRings, type RingBrace, ringEA } from "./placeRings.ts";
import {
  addNode,
  holdClampedEdges,
  type NodeList,
  type PlacedAdjuster,
  placeAdjusters,
  resolvePlace,
  settleTurnbuckle,
} from "./rigNodes.ts";
import { weighStructure } from "./selfWeight.ts";

/** A cable or stay: a run of links that share one EA. */
export interface RigCable {
  id: string;
  edge: string | null;
  nodes: number[];
  EA: number;
  /** Intended force, kN. */
  force: number;
  minBreakingForce: number | null;
  /** What it may be held to, kN: the least of breaking force and end fittings; null where the job gives neither. */
  capacity: number | null;
  making: CableMaking;
  /** Length as drawn, m. */
  erected: number;
  firstLink: number;
}

/** A link with a turnbuckle: between a corner and its far pin, or the first or last link of a cable. */
export interface RigAdjuster {
  id: string;
  /** Anchor it stands at, or the edge at whose end it sits. */
  anchor: string;
  nodes: [number, number];
  EA: number;
  target: number;
  turnbuckle: Turnbuckle;
  /** Least capacity of turnbuckle, fittings and anchor, kN, and whose it is; null where the job gives none. */
  capacity: number | null;
  weakest: "turnbuckle" | "fitting" | "anchor" | null;
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
  /** Stiffening of hauled rings: no member of its own. */
  braces: (RingBrace & { link: number })[];
  L0: Float64Array<ArrayBuffer>;
  /** Panel of every cloth triangle, and its corners in that panel's cut cloth, mm. */
  panelOf: string[];
  flat: [number, number][][];
  /** Stops that leave the rig without a finished state: it must not be solved. */
  stops: Finding[];
}

/** Flat cloth of all panels, relaxed (permanent strain put back), m. */
function gatherCloth(input: RigInput) {
  const tri: number[] = [];
  const flat: number[] = [];
  const panelOf: string[] = [];
  const cut: [number, number][][] = [];
  const layers: number[] = [];
  for (const p of input.panels) {
    const lines = input.lap ? listLapLines(input.layout, p.id, p.sides, input.lap) : [];
    for (const share of measureLapShares({ xyz: p.erected, tri: p.tri }, lines)) layers.push(1 + share);
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
    layers: new Float64Array(layers),
  };
  return { cloth, panelOf, cut };
}

/** Links while they are gathered, with the nodes' places. */
interface LinkList {
  link: number[];
  EA: number[];
  strut: number[];
  L0: number[];
  xyz: readonly number[];
}

function measureGap(xyz: readonly number[], a: number, b: number): number {
  return Math.sqrt([0, 1, 2].reduce((sum, k) => sum + (xyz[3 * b + k] - xyz[3 * a + k]) ** 2, 0));
}

/** Appends a link whose slack length gives it the force where its nodes are; returns its number. */
function addLink(list: LinkList, nodes: readonly number[], EA: number, force: number, strut = 0): number {
  const [a, b] = [3 * nodes[0], 3 * nodes[1]];
  const { xyz } = list;
  const length = Math.hypot(xyz[b] - xyz[a], xyz[b + 1] - xyz[a + 1], xyz[b + 2] - xyz[a + 2]);
  list.link.push(nodes[0], nodes[1]);
  list.EA.push(EA);
  list.strut.push(strut);
  list.L0.push(length / (1 + force / EA));
  return list.EA.length - 1;
}

function takeLeast(a: number | null, b: number | undefined): number | null {
  if (b === undefined) return a;
  return a === null ? b : Math.min(a, b);
}

/** The part of an adjuster that carries least. */
function findWeakest(
  turnbuckle: Turnbuckle,
  decision: Pick<AdjusterDecision, "fitting" | "anchorCapacity"> | undefined,
): Pick<RigAdjuster, "capacity" | "weakest"> {
  const parts = [
    ["turnbuckle", turnbuckle.capacity],
    ["fitting", decision?.fitting],
    ["anchor", decision?.anchorCapacity],
  ] as const;
  let least: Pick<RigAdjuster, "capacity" | "weakest"> = { capacity: null, weakest: null };
  for (const [weakest, capacity] of parts)
    if (capacity !== null && capacity !== undefined && (least.capacity === null || capacity < least.capacity))
      least = { capacity, weakest };
  return least;
}

/** Cables along edges; where an adjuster sits at a cable's end, the link there is the adjuster's. */
function layCables(input: RigInput, list: LinkList): { cables: RigCable[]; atEnds: PlacedAdjuster[] } {
  const cables: RigCable[] = [];
  const atEnds: PlacedAdjuster[] = [];
  for (const edge of input.form.edges) {
    const cable = input.cables[edge.id];
    if (!cable || edge.force === null) continue;
    const force = edge.force;
    const making = cable.making ?? {};
    const whole = traceCable(input.layout, edge);
    const ends = input.rig.adjusters.filter((a) => a.edge === edge.id);
    const first = ends.find((a) => a.end === "first");
    const last = ends.find((a) => a.end === "last");
    const nodes = whole.slice(first ? 1 : 0, last ? -1 : undefined);
    if (nodes.length < 2)
      throw new PlanError(
        "adjuster-end",
        `edge ${edge.id} has only ${whole.length - 1} links, too few for adjusters at its ends`,
        edge.id,
      );
    const put = (a: AdjusterDecision, near: number, end: number) => {
      const pins = Math.hypot(...[0, 1, 2].map((i) => list.xyz[3 * near + i] - list.xyz[3 * end + i]));
      atEnds.push({
        id: a.name,
        anchor: edge.id,
        nodes: [near, end],
        EA: a.EA,
        target: force,
        turnbuckle: settleTurnbuckle(a.turnbuckle, pins),
      });
    };
    if (first) put(first, whole[1], whole[0]);
    if (last) put(last, whole[whole.length - 2], whole[whole.length - 1]);
    const firstLink = list.EA.length;
    const erected = nodes.slice(1).reduce((sum, v, i) => sum + measureGap(list.xyz, nodes[i], v), 0);
    for (let i = 1; i < nodes.length; i++) addLink(list, [nodes[i - 1], nodes[i]], cable.type.EA, force);
    cables.push({
      id: edge.id,
      edge: edge.id,
      nodes,
      EA: cable.type.EA,
      force,
      minBreakingForce: cable.type.minBreakingForce,
      capacity: takeLeast(cable.type.minBreakingForce, making.fitting),
      making,
      erected,
      firstLink,
    });
  }
  return { cables, atEnds };
}

/** Length of a turnbuckle with its fork at the end of a stay, m (common practice); at most half the stay. */
const stayEnd = 1;

/** Where an adjuster sits at a stay's end, the stay ends at a new node and the adjuster bridges the rest. */
function fitStay(
  input: RigInput,
  nodes: NodeList,
  stay: { name: string; nodes: number[] },
  force: number,
): { nodes: number[]; adjusters: PlacedAdjuster[] } {
  const run = stay.nodes.slice();
  const adjusters: PlacedAdjuster[] = [];
  const at = (v: number) => [0, 1, 2].map((k) => nodes.xyz[3 * v + k]);
  for (const a of input.rig.adjusters.filter((q) => q.edge === stay.name)) {
    if (!(force > 0))
      throw new PlanError(
        "adjuster-slack",
        `adjuster ${a.name} sits in ${stay.name}, which carries no force at the finished state: give the stay a force or take the adjuster away`,
        a.name,
      );
    const end = a.end === "first" ? 0 : 1;
    const far = stay.nodes[end];
    const [p, q] = [at(far), at(stay.nodes[1 - end])];
    const length = Math.sqrt((q[0] - p[0]) ** 2 + (q[1] - p[1]) ** 2 + (q[2] - p[2]) ** 2);
    const pins = Math.min(stayEnd, length / 2.5);
    const near = addNode(nodes, p.map((c, k) => c + ((q[k] - c) * pins) / length) as Vec3, false);
    run[end] = near;
    const turnbuckle = settleTurnbuckle(a.turnbuckle, pins);
    adjusters.push({ id: a.name, anchor: stay.name, nodes: [near, far], EA: a.EA, target: force, turnbuckle });
  }
  return { nodes: run, adjusters };
}

/** Masts between their places, and the heads they free: ends named by an anchor or adjuster, else the end `to`. */
function placeStruts(input: RigInput, nodes: NodeList, placed: PlacedAdjuster[]) {
  const heads: number[] = [];
  const struts = input.rig.struts.map((s) => {
    const ends: [number, number] = [
      resolvePlace(input, nodes, placed, s.from, s.name),
      resolvePlace(input, nodes, placed, s.to, s.name),
    ];
    const named = [s.from, s.to].map((place) => typeof place === "string");
    if (!named[0] && !named[1]) named[1] = true;
    ends.forEach((v, end) => {
      if (!named[end] || heads.includes(v)) return;
      heads.push(v);
      nodes.held.fill(0, 3 * v, 3 * v + 3);
    });
    return { id: s.name, nodes: ends, EA: s.EA };
  });
  return { struts, heads };
}

/** What pulls at mast heads: adjusters whose far pin they are, and the form itself where a corner sits on the mast. */
function listPulls(input: RigInput, nodes: NodeList, placed: PlacedAdjuster[]): HeadPull[] {
  const { xyz } = nodes;
  const adjusters = placed.map(({ nodes: [near, head], target }) => {
    const d = [0, 1, 2].map((k) => xyz[3 * near + k] - xyz[3 * head + k]);
    const l = Math.sqrt(d[0] ** 2 + d[1] ** 2 + d[2] ** 2);
    return { head, force: d.map((q) => (q * target) / l) };
  });
  const taken = new Set(placed.map((a) => a.anchor));
  const direct = input.form.reactions.flatMap((r) => {
    const anchor = input.form.anchors.find((a) => a.id === r.anchor);
    return anchor && !taken.has(anchor.id) ? [{ head: anchor.vertex, force: r.force }] : [];
  });
  return [...adjusters, ...direct];
}

/** Anchors without an adjuster stand where they were surveyed; lengths are cut as drawn, so they are moved last. */
function moveAnchorsInPlace(input: RigInput, nodes: NodeList, placed: readonly PlacedAdjuster[]): void {
  for (const [id, at] of Object.entries(input.survey)) {
    const anchor = input.form.anchors.find((a) => a.id === id);
    if (!anchor?.isolated || placed.some((a) => a.anchor === id)) continue;
    for (let k = 0; k < 3; k++) nodes.xyz[3 * anchor.vertex + k] = at[k];
  }
}

/**
 * Builds the rig of a form.
 * @throws PlanError adjuster-anchor, adjuster-slack, adjuster-end, rig-place, rig-cable, structure-link
 */
export function buildRig(input: RigInput): Rig {
  const { form, layout } = input;
  const nV = layout.surface.xyz.length / 3;
  const nodes: NodeList = { xyz: [...layout.surface.xyz], held: new Array(3 * nV).fill(0) };
  for (let v = 0; v < form.fixed.length; v++) if (form.fixed[v]) nodes.held.fill(1, 3 * v, 3 * v + 3);
  holdClampedEdges(input, nodes);
  const rings = placeRings(input, nodes);
  const placed = placeAdjusters(input, nodes);
  const { struts, heads } = placeStruts(input, nodes, placed);
  const stays = input.rig.stays.map((s) => ({
    ...s,
    nodes: [resolvePlace(input, nodes, placed, s.from, s.name), resolvePlace(input, nodes, placed, s.to, s.name)],
  }));
  const list: LinkList = { link: [], EA: [], strut: [], L0: [], xyz: nodes.xyz };
  const { cables, atEnds } = layCables(input, list);
  const forces = balanceHeads(nodes.xyz, heads, listPulls(input, nodes, placed), { struts, stays });
  stays.forEach((s, i) => {
    const force = forces.stay[i];
    const ends = fitStay(input, nodes, s, force);
    const firstLink = addLink(list, ends.nodes, s.EA, force);
    const { name, EA, minBreakingForce, making = {} } = s;
    const capacity = takeLeast(minBreakingForce, making.fitting);
    const erected = measureGap(nodes.xyz, ends.nodes[0], ends.nodes[1]);
    const limits = { minBreakingForce, capacity };
    cables.push({ id: name, edge: null, nodes: ends.nodes, EA, force, ...limits, making, erected, firstLink });
    atEnds.push(...ends.adjusters);
  });
  const built = struts.map((s, i) => ({ ...s, link: addLink(list, s.nodes, s.EA, -forces.strut[i], 1) }));
  const braces = rings.braces.map((b) => ({ ...b, link: addLink(list, b.nodes, ringEA, 0, 1) }));
  const adjusters = [...placed, ...rings.adjusters, ...atEnds].map((a) => {
    const decision = input.rig.adjusters.find((d) => d.name === a.id);
    return { ...a, ...findWeakest(a.turnbuckle, decision), link: addLink(list, a.nodes, a.EA, a.target) };
  });
  moveAnchorsInPlace(input, nodes, placed);
  moveClampedInPlace(input, nodes);
  const { cloth, panelOf, cut } = gatherCloth(input);
  const structure = buildStructure({ xyz: new Float64Array(nodes.xyz), held: new Uint8Array(nodes.held) }, cloth, {
    link: new Uint32Array(list.link),
    EA: new Float64Array(list.EA),
    strut: new Uint8Array(list.strut),
  });
  const load = weighStructure(input, nodes.xyz.length / 3, { ...structure, cables, L0: list.L0 });
  return {
    structure: load ? { ...structure, load } : structure,
    cables,
    struts: built,
    adjusters,
    braces,
    L0: new Float64Array(list.L0),
    panelOf,
    flat: cut,
    stops: [
      ...(forces.unbalanced ? [forces.unbalanced] : []),
      ...findPinsBehind(input, nodes.xyz, placed),
      ...findRingsOff(input).filter((f) => f.level === "stop"),
    ],
  };
}
