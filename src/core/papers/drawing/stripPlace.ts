// Where a pocket strip belongs along its edge: the parts of an edge are numbered from its first end and are of one length, butted end
// to end, so each knows from where to where it lies. What is written on it, so that it is sewn or welded in its place and way round.
import type { Facts, FactsPiece } from "../../records/facts.ts";
import { boxOf } from "./flatGeometry.ts";

export interface StripPlace {
  /** Number of this part, from 1, of so many. */
  part: number;
  parts: number;
  /** mm along the edge, in the cut cloth, from the counting end. */
  from: number;
  to: number;
  /** The end that is counted from: the anchor there, or "the first end". */
  start: string;
}

/** The anchor at the first end of an edge, from which stations and strips are counted. */
export function edgeStart(facts: Facts, edge: string | null): string {
  const first = facts.form?.edges.find((e) => e.id === edge)?.vertices[0];
  return facts.form?.anchors.find((a) => a.vertex === first)?.id ?? "the first end";
}

/** The place of a pocket strip, or null for other cloth. */
export function stripPlace(facts: Facts, piece: FactsPiece): StripPlace | null {
  if (piece.kind !== "strip") return null;
  const all = (facts.pieces ?? []).filter((p) => p.kind === "strip" && p.for === piece.for);
  const lengths = all.map((p) => boxOf(p.cut)).map((b) => b.max[0] - b.min[0]);
  const k = all.findIndex((p) => p.id === piece.id);
  const from = lengths.slice(0, k).reduce((s, l) => s + l, 0);
  return { part: k + 1, parts: all.length, from, to: from + lengths[k], start: edgeStart(facts, piece.for) };
}
