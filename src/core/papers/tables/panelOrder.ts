// How panels follow on each other over the seams: the row in which they are drawn unrolled, and the order in which a roof is folded so
// that one corner leaves the bundle first. Own argument, not a rule of the trade: the papers say so.
import type { Facts, FactsPanel, Vec2 } from "../../records/facts.ts";
import type { Vec3 } from "../../surface/surface.ts";
import { allMoves, rigFacts } from "./rigReadings.ts";

/** A panel of the row, with the seam by which it meets the one before, or null where a row begins. */
export interface RowPanel {
  panel: string;
  seam: string | null;
}

interface Neighbour {
  panel: string;
  seam: string;
}

/** Neighbours of each panel over seams, in the order of the plan. */
function neighboursOf(facts: Facts): Map<string, Neighbour[]> {
  const next = new Map((facts.panels ?? []).map((p): [string, Neighbour[]] => [p.id, []]));
  for (const s of facts.seams ?? []) {
    const [a, b] = s.sides.map((side) => side.panel);
    if (a === undefined || b === undefined || a === b) continue;
    next.get(a)?.push({ panel: b, seam: s.id });
    next.get(b)?.push({ panel: a, seam: s.id });
  }
  return next;
}

/**
 * All panels, each if it can be a neighbour of the one before: from a panel at an end on, always to the neighbour with the fewest
 * neighbours left, so that none is stranded.
 */
export function panelRow(facts: Facts): RowPanel[] {
  const next = neighboursOf(facts);
  const left = new Set(next.keys());
  const open = (id: string) => (next.get(id) ?? []).filter((n) => left.has(n.panel));
  const fewest = <T>(list: readonly T[], idOf: (t: T) => string) =>
    list.reduce<T | null>(
      (best, t) => (best === null || open(idOf(t)).length < open(idOf(best)).length ? t : best),
      null,
    );
  const row: RowPanel[] = [];
  while (left.size > 0) {
    const last = row.at(-1);
    const on = last ? fewest(open(last.panel), (n) => n.panel) : null;
    const step: RowPanel = on ?? { panel: fewest([...left], (id) => id) ?? "", seam: null };
    left.delete(step.panel);
    row.push({ panel: step.panel, seam: step.seam });
  }
  return row;
}

/** Corners in the order in which they are wanted, names as on site: adjusters as they are moved first, else anchors from the first on. */
function cornersOf(facts: Facts): { name: string; at: Vec3 }[] {
  const anchors = facts.form?.anchors ?? [];
  const place = (id: string): Vec3 => {
    const vertex = anchors.find((a) => a.id === id)?.vertex ?? 0;
    return facts.form?.vertices[vertex] ?? [0, 0, 0];
  };
  const rig = rigFacts(facts);
  if (!rig) {
    const all = anchors.map((a) => ({ name: a.id, at: place(a.id) }));
    const first = all[0]?.at;
    return first ? all.sort((a, b) => gap(a.at, first) - gap(b.at, first)) : [];
  }
  const order = [...new Set(allMoves(rig.tensioning).map((m) => m.adjuster))];
  return order.flatMap((id) => {
    const adjuster = rig.adjusters.find((a) => a.id === id);
    return adjuster ? [{ name: `${adjuster.anchor} (${id})`, at: place(adjuster.anchor) }] : [];
  });
}

function gap(a: Vec3, b: Vec3): number {
  return Math.hypot(b[0] - a[0], b[1] - a[1], b[2] - a[2]);
}

export interface FoldOrder {
  /** Corners in the order in which they leave the bundle, where the piece has any. */
  corners: string[];
  /** Panels as they are folded in: the first lies lowest, the last holds the corner that leaves first. */
  panels: string[];
}

/** Order of folding of one piece: the panels farthest over the seams from the first corner are folded in first. */
export function foldOrder(facts: Facts, piece: readonly string[]): FoldOrder {
  const own = (facts.panels ?? []).filter((p) => piece.includes(p.id));
  const near = (at: Vec3) =>
    own.reduce(
      (best, p) => {
        const d = Math.min(...p.erected.map((q) => gap(q, at)));
        return d < best.gap ? { id: p.id, gap: d } : best;
      },
      { id: own[0]?.id ?? "", gap: Infinity },
    );
  const corners = cornersOf(facts);
  const start = corners[0] ? near(corners[0].at).id : (own[0]?.id ?? "");
  const next = neighboursOf(facts);
  const steps = new Map([[start, 0]]);
  for (const [id, n] of steps) {
    for (const { panel } of next.get(id) ?? []) if (!steps.has(panel) && piece.includes(panel)) steps.set(panel, n + 1);
  }
  const panels = own.map((p) => p.id).sort((a, b) => (steps.get(b) ?? 0) - (steps.get(a) ?? 0));
  return { corners: corners.map((c) => c.name), panels };
}

/** Whether the seam lies in the upper half of the panel's flat outline. */
export function seamAbove(panel: FactsPanel, seam: string): boolean {
  const side = panel.sides.find((s) => s.id === seam);
  if (!side) return true;
  const mean = (points: readonly Vec2[]) => points.reduce((s, p) => s + p[1], 0) / Math.max(1, points.length);
  return mean(side.vertices.map((v) => panel.flat[v])) >= mean(panel.net);
}
