// Rings that a jack hauls: a closed clamped edge freed from its supports and held by one adjuster on its axis. The ring is rigid: rim,
// spokes to its middle and to two hubs on its axis are struts so stiff that their stretch does not count (steel rings are).
import { type Finding, PlanError } from "../../problem.ts";
import type { FormEdge } from "../../records/foundForm.ts";
import type { AdjusterDecision } from "../../records/rig.ts";
import { measureDistance } from "../../surface/measures.ts";
import type { Vec3 } from "../../surface/surface.ts";
import type { RigInput } from "../rigInput.ts";
import { addNode, type NodeList, type PlacedAdjuster, settleTurnbuckle } from "./rigNodes.ts";

/**
 * Stiffness of a ring's struts, kN: steel of 500 mm2; own. Far stiffer than any cloth between them (stretch below 0.1 mm), and no
 * stiffer than needed: rounding of their lengths is out-of-balance force.
 */
export const ringEA = 1e5;

/** Way of the pull from the ring's middle, as a share of its radius, from which on the ring would tilt. */
const offAxis = 0.02;

/** Two nodes of a ring's stiffening. */
export interface RingBrace {
  id: string;
  nodes: [number, number];
}

/** A closed clamped edge. */
export function isRing(edge: FormEdge): boolean {
  return edge.kind === "clamped" && edge.vertices.length > 3 && edge.vertices[0] === edge.vertices.at(-1);
}

/** Pieces of the ring on the cut surface, seam ends in them. */
function listPieces(input: RigInput, ring: string): [number, number][] {
  return input.layout.strips.flatMap((strip) =>
    strip.sides.flatMap((side) =>
      side.kind === "clamped" && side.id === ring
        ? side.vertices.slice(1).map((v, i): [number, number] => [side.vertices[i], v])
        : [],
    ),
  );
}

interface RingShape {
  middle: Vec3;
  radius: number;
}

function measureRing(xyz: readonly number[], vertices: readonly number[]): RingShape {
  const at = (v: number): Vec3 => [xyz[3 * v], xyz[3 * v + 1], xyz[3 * v + 2]];
  const middle = [0, 1, 2].map((k) => vertices.reduce((sum, v) => sum + at(v)[k], 0) / vertices.length) as Vec3;
  return { middle, radius: vertices.reduce((sum, v) => sum + measureDistance(at(v), middle), 0) / vertices.length };
}

function along(from: Vec3, way: Vec3, by: number): Vec3 {
  return [0, 1, 2].map((k) => from[k] + by * way[k]) as Vec3;
}

function placeRing(input: RigInput, nodes: NodeList, a: AdjusterDecision & { ring: string }) {
  const edge = input.form.edges.find((e) => e.id === a.ring);
  const pull = edge?.reaction?.resultant;
  const target = pull ? Math.hypot(...pull) : 0;
  if (!edge || !pull || !(target > 0))
    throw new PlanError(
      "adjuster-slack",
      `adjuster ${a.name} at ring ${a.ring} would carry no force: the structure does not pull there. Take the adjuster away or give the cloth its stress`,
      a.name,
    );
  const pieces = listPieces(input, a.ring);
  const vertices = [...new Set(pieces.flat())];
  const { middle, radius } = measureRing(nodes.xyz, vertices);
  for (const v of vertices) nodes.held.fill(0, 3 * v, 3 * v + 3);
  const drawn = a.support ?? along(middle, pull, -1 / target);
  const gap = measureDistance(middle, drawn);
  const axis = [0, 1, 2].map((k) => (drawn[k] - middle[k]) / gap) as Vec3;
  // the near pin is the ring's middle: its height is the ring's
  const near = addNode(nodes, middle, false);
  const hubs = [0.5, -0.5].map((share) => addNode(nodes, along(middle, axis, share * radius), false));
  const far = addNode(nodes, input.survey[a.ring] ?? drawn, true);
  const pairs: [number, number][] = [
    ...pieces,
    ...[near, ...hubs].flatMap((hub) => vertices.map((v): [number, number] => [hub, v])),
    ...hubs.map((hub): [number, number] => [near, hub]),
  ];
  const turnbuckle = settleTurnbuckle(a.turnbuckle, gap);
  const adjuster: PlacedAdjuster = { id: a.name, anchor: a.ring, nodes: [near, far], EA: a.EA, target, turnbuckle };
  return { adjuster, braces: pairs.map((pair, i): RingBrace => ({ id: `${a.ring}:${i + 1}`, nodes: pair })) };
}

/**
 * Rings with their jacks; frees the edges' nodes.
 * @throws PlanError adjuster-slack
 */
export function placeRings(input: RigInput, nodes: NodeList): { adjusters: PlacedAdjuster[]; braces: RingBrace[] } {
  const placed = input.rig.adjusters.flatMap((a) =>
    a.ring === undefined ? [] : [placeRing(input, nodes, { ...a, ring: a.ring })],
  );
  return { adjusters: placed.map((p) => p.adjuster), braces: placed.flatMap((p) => p.braces) };
}

/** Rings whose jack stands off the line in which the cloth pulls: they tilt and move aside until both agree. */
export function findRingsOff(input: RigInput): Finding[] {
  return input.rig.adjusters.flatMap((a): Finding[] => {
    const pull = input.form.edges.find((e) => e.id === a.ring)?.reaction?.resultant;
    if (a.ring === undefined || !pull || !a.support) return [];
    const vertices = [...new Set(listPieces(input, a.ring).flat())];
    const { middle, radius } = measureRing([...input.layout.surface.xyz], vertices);
    const way = a.support.map((q, k) => q - middle[k]);
    const cos = -way.reduce((sum, q, k) => sum + q * pull[k], 0) / (Math.hypot(...way) * Math.hypot(...pull));
    const off = Math.hypot(...way) * Math.sqrt(Math.max(0, 1 - cos * cos));
    if (off <= offAxis * radius && cos > 0) return [];
    return [
      {
        code: "ring-axis",
        level: cos > 0 ? "caution" : "stop",
        station: "rig",
        where: a.name,
        value: off,
        limit: offAxis * radius,
        text: `${a.name}: its far pin stands ${(1000 * off).toFixed(0)} mm off the line in which the cloth pulls ring ${a.ring}${cos > 0 ? "; the ring tilts and moves aside until it lines up" : ", on the cloth's side; the ring cannot be hauled there"}`,
        remedy: "put the pin on the line of the pull through the ring's middle",
        basis: "own argument: 2 % of the ring's radius",
      },
    ];
  });
}
