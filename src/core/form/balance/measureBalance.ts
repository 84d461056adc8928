// What is left of the balance at the free vertices, and what the held ones carry.

import type { Check } from "../../problem.ts";
import type { FormAnchor, FormEdge, Residual } from "../../records/foundForm.ts";
import { nextHalfedge } from "../../surface/adjacency.ts";
import { measureVectorAreas, measureVertexNormals } from "../../surface/measures.ts";
import type { Surface, Vec3 } from "../../surface/surface.ts";
import { sideKey } from "../edges/cutLoops.ts";
import type { Stations } from "./cableForces.ts";
import { collectAlong, removeAlong } from "./cablePull.ts";
import { type MembraneForces, measureLinePull, type StressField } from "./membraneForces.ts";

/** Sum of all reactions over the sum of their magnitudes above which the check fails. */
const CLOSED = 0.01;

/** Forces of cloth and cables together. @shape 3*nV @units kN */
export function sumForces(
  membrane: MembraneForces,
  edges: readonly FormEdge[],
  stations: Stations,
): Float64Array<ArrayBuffer> {
  const total = membrane.force.slice();
  edges.forEach((edge, e) => {
    if (edge.force === null) return;
    for (const { vertex, pull } of stations[e] ?? [])
      for (let k = 0; k < 3; k++) total[3 * vertex + k] += edge.force * pull[k];
  });
  return total;
}

/** Residual with what is needed to speak of it. */
export interface ResidualReport {
  residual: Residual;
  /** Vertex where what is judged is greatest, -1 where nothing is free. */
  worst: number;
  /** What the balance is judged by: as residual.max, but under equal stress without the part within plain cloth. */
  judged: number;
  /** Residual force that is judged at each vertex, 0 where held. @shape nV @units kN */
  size: Float64Array<ArrayBuffer>;
}

/** Vertices of cloth alone: on no edge of the form, on no cable. @shape nV */
function findPlainCloth(nV: number, edges: readonly FormEdge[]): Uint8Array<ArrayBuffer> {
  const out = new Uint8Array(nV).fill(1);
  for (const edge of edges) for (const v of edge.vertices) out[v] = 0;
  return out;
}

/**
 * Residual as facts.md defines it, and what of it is judged. Equal stress pulls a smooth surface nowhere along itself, so what
 * is left within the cloth there tells of the mesh alone (its vertices may slide within the surface); beside a cable, and
 * where warp and weft differ, it tells of the form.
 * @source facts.md, form.residual
 */
export function measureResidual(
  surface: Surface,
  membrane: MembraneForces,
  total: Float64Array<ArrayBuffer>,
  fixed: Uint8Array<ArrayBuffer>,
  edges: readonly FormEdge[],
  stations: Stations,
  even: boolean,
): ResidualReport {
  const plain = even ? findPlainCloth(fixed.length, edges) : new Uint8Array(fixed.length);
  const along = collectAlong(stations.filter((s) => s !== null));
  const normal = measureVertexNormals(surface);
  let nFree = 0;
  let scale = 0;
  let max = 0;
  let square = 0;
  let normalMax = 0;
  let tangentialMax = 0;
  let worst = -1;
  let judged = 0;
  const size = new Float64Array(fixed.length);
  for (let v = 0; v < fixed.length; v++) {
    if (fixed[v]) continue;
    nFree++;
    scale += membrane.size[v];
    const r = removeAlong([total[3 * v], total[3 * v + 1], total[3 * v + 2]], along.get(v) ?? []);
    const l = Math.sqrt(r[0] ** 2 + r[1] ** 2 + r[2] ** 2);
    square += l * l;
    const off = Math.abs(r[0] * normal[3 * v] + r[1] * normal[3 * v + 1] + r[2] * normal[3 * v + 2]);
    normalMax = Math.max(normalMax, off);
    tangentialMax = Math.max(tangentialMax, Math.sqrt(Math.max(0, l * l - off * off)));
    max = Math.max(max, l);
    size[v] = plain[v] ? off : l;
    if (size[v] < judged || (worst >= 0 && size[v] === judged)) continue;
    judged = size[v];
    worst = v;
  }
  if (nFree === 0) return { residual: { max: 0, rms: 0, normalMax: 0, tangentialMax: 0 }, worst, judged, size };
  scale /= nFree;
  return {
    residual: {
      max: max / scale,
      rms: Math.sqrt(square / nFree) / scale,
      normalMax: normalMax / scale,
      tangentialMax: tangentialMax / scale,
    },
    worst,
    judged: judged / scale,
    size,
  };
}

/** Greatest pull of the cloth per metre along each clamped edge, kN/m. */
function measureGreatest(surface: Surface, edges: readonly FormEdge[], field: StressField): Map<FormEdge, number> {
  const { tri } = surface;
  const owner = new Map<string, FormEdge>();
  for (const edge of edges)
    if (edge.kind === "clamped")
      for (let i = 1; i < edge.vertices.length; i++) owner.set(sideKey(edge.vertices[i - 1], edge.vertices[i]), edge);
  const out = new Map<FormEdge, number>();
  if (owner.size === 0) return out;
  const areas = measureVectorAreas(surface);
  const onClamp = new Uint8Array(surface.xyz.length / 3);
  for (const edge of owner.values()) for (const v of edge.vertices) onClamp[v] = 1;
  for (let h = 0; h < tri.length; h++) {
    const a = tri[h];
    const b = tri[nextHalfedge(h)];
    if (!onClamp[a] || !onClamp[b]) continue;
    const edge = owner.get(sideKey(a, b));
    if (edge) out.set(edge, Math.max(out.get(edge) ?? 0, measureLinePull(surface, areas, h, field)));
  }
  return out;
}

/**
 * Pull of the structure on what holds it: anchors first, then clamped edges without their anchors, so that each held vertex
 * counts once and all reactions add up to nothing.
 * @units kN; greatest per metre is the cloth's alone, kN/m
 */
export function measureReactionsInPlace(
  surface: Surface,
  total: Float64Array<ArrayBuffer>,
  edges: readonly FormEdge[],
  anchors: readonly FormAnchor[],
  field: StressField,
): { reactions: { anchor: string; force: Vec3 }[]; check: Check } {
  const counted = new Set<number>();
  const sum: Vec3 = [0, 0, 0];
  let size = 0;
  const take = (v: number, into: Vec3) => {
    counted.add(v);
    for (let k = 0; k < 3; k++) {
      into[k] += total[3 * v + k];
      sum[k] += total[3 * v + k];
    }
    size += Math.sqrt(total[3 * v] ** 2 + total[3 * v + 1] ** 2 + total[3 * v + 2] ** 2);
  };
  const reactions = anchors.map((a) => {
    const force: Vec3 = [0, 0, 0];
    take(a.vertex, force);
    return { anchor: a.id, force };
  });
  const greatest = measureGreatest(surface, edges, field);
  for (const edge of edges) {
    if (edge.kind !== "clamped") continue;
    const resultant: Vec3 = [0, 0, 0];
    for (const v of edge.vertices) if (!counted.has(v)) take(v, resultant);
    edge.reaction = { resultant, greatest: greatest.get(edge) ?? 0 };
  }
  const value = size > 0 ? Math.sqrt(sum[0] ** 2 + sum[1] ** 2 + sum[2] ** 2) / size : 0;
  const check: Check = {
    station: "form",
    text: "reactions of anchors and clamped edges add up to nothing (sum over the sum of magnitudes)",
    value,
    limit: CLOSED,
    holds: value <= CLOSED,
  };
  return { reactions, check };
}
