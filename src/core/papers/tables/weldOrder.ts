// An order of welding in which the cloth that is handled stays light as long as it can: always the weld next whose joined piece weighs
// least. Own argument, not a rule of the trade: the floor may choose another. A weld that joins a piece to itself closes a ring.
import type { Facts } from "../../records/facts.ts";
import { massOf } from "./clothTables.ts";

export interface WeldStep {
  weld: string;
  seams: string[];
  /** Panels that lie at this weld. */
  panels: string[];
  /** m, on the form */
  length: number;
  /** All panels of the piece after this weld. */
  joined: number;
  /** kg as cut, without patches, cables and fittings; null where a fabric's mass is not known. */
  mass: number | null;
  closes: boolean;
}

export interface WeldOrder {
  steps: WeldStep[];
  /** Pieces that no weld joins further: what is lifted. */
  pieces: { panels: string[]; mass: number | null }[];
}

interface Lump {
  panels: string[];
  mass: number | null;
}

function together(lumps: readonly Lump[]): Lump {
  const mass = lumps.some((l) => l.mass === null) ? null : lumps.reduce((s, l) => s + (l.mass ?? 0), 0);
  return { panels: lumps.flatMap((l) => l.panels), mass };
}

/** Welds in the order that keeps the joined piece lightest; ties by panels joined, then in the order of the plan. */
export function orderWelds(facts: Facts): WeldOrder {
  const lumpOf = new Map(
    (facts.panels ?? []).map((p): [string, Lump] => [p.id, { panels: [p.id], mass: massOf(facts, p) }]),
  );
  const welds = new Map<string, { seams: string[]; panels: Set<string>; length: number }>();
  for (const seam of facts.seams ?? []) {
    const weld = welds.get(seam.weld) ?? { seams: [], panels: new Set<string>(), length: 0 };
    weld.seams.push(seam.id);
    weld.length += seam.length;
    for (const side of seam.sides) if (lumpOf.has(side.panel)) weld.panels.add(side.panel);
    welds.set(seam.weld, weld);
  }
  const left = new Map(welds);
  const steps: WeldStep[] = [];
  const lumpsAt = (panels: Iterable<string>) => [...new Set([...panels].flatMap((id) => lumpOf.get(id) ?? []))];
  while (left.size > 0) {
    let best: { name: string; lump: Lump; lumps: Lump[] } | null = null;
    for (const [name, weld] of left) {
      const lumps = lumpsAt(weld.panels);
      const lump = together(lumps);
      const lighter =
        best === null ||
        (lump.mass ?? 0) < (best.lump.mass ?? 0) ||
        (lump.mass === best.lump.mass && lump.panels.length < best.lump.panels.length);
      if (lighter) best = { name, lump, lumps };
    }
    if (best === null) break;
    const weld = left.get(best.name);
    left.delete(best.name);
    for (const id of best.lump.panels) lumpOf.set(id, best.lump);
    steps.push({
      weld: best.name,
      seams: weld?.seams ?? [],
      panels: [...(weld?.panels ?? [])],
      length: weld?.length ?? 0,
      joined: best.lump.panels.length,
      mass: best.lump.mass,
      closes: best.lumps.length === 1,
    });
  }
  return { steps, pieces: [...new Set(lumpOf.values())] };
}
