// Which corners of a panel hang from an anchor: what is tagged, patched and laid to its place on site carries that name.
import type { Facts, FactsPanel, FactsPiece } from "../../records/facts.ts";
import { distance } from "./flatGeometry.ts";

/** An erected point is an anchor's within this, m: both are vertices of one form. */
const SAME = 1e-3;

/** Of each corner, in the order of the sides (corner k is where side k begins), the anchor it hangs from, or null. */
export function cornerAnchors(facts: Facts, panel: FactsPanel): (string | null)[] {
  const { vertices = [], anchors = [] } = facts.form ?? {};
  return panel.sides.map((side) => {
    const corner = panel.net[side.netFrom];
    const ends = [side.vertices[0], side.vertices[side.vertices.length - 1]];
    const near = (v: number) => distance(panel.flat[v] ?? [Infinity, Infinity], corner);
    const at = panel.erected[near(ends[0]) <= near(ends[1]) ? ends[0] : ends[1]];
    if (!at) return null;
    const hangs = anchors.find((a) => {
      const p = vertices[a.vertex];
      return p !== undefined && Math.hypot(p[0] - at[0], p[1] - at[1], p[2] - at[2]) < SAME;
    });
    return hangs?.id ?? null;
  });
}

/** The panel and corner a patch lies on, "C1 of P1", or null for other cloth. */
export function patchPlace(facts: Facts, piece: FactsPiece): string | null {
  if (piece.kind !== "patch") return null;
  const panel = (facts.panels ?? []).find((p) => piece.id === `${piece.for}-patch-${p.id}`);
  const corner = panel ? cornerAnchors(facts, panel).indexOf(piece.for) : -1;
  return panel && corner >= 0 ? `C${corner + 1} of ${panel.id}` : null;
}
