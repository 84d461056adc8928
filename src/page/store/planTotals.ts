// The few figures two plans are held against each other by: what is cut, what is welded, what cloth it takes.
import type { Facts } from "../../core/records/facts.ts";

/** What a plan comes to; 0 where it has not come that far. */
export interface PlanTotals {
  panels: number;
  /** Length of all seams on the form, m. */
  weld: number;
  /** Panels and other pieces that lie on no roll: their cloth is in none of the figures below. */
  left: number;
  /** Cloth taken off the rolls, m along them. */
  taken: number;
  /** The same over the whole width of the rolls, m². */
  cloth: number;
  /** Of that, what lies in no piece, m². */
  offcut: number;
}

/** Totals of a plan's facts. */
export function totalPlan(facts: Facts): PlanTotals {
  const sum = <T>(list: readonly T[] | undefined, of: (one: T) => number) =>
    list?.reduce((total, one) => total + of(one), 0) ?? 0;
  const laid = new Set(facts.rolls?.flatMap((r) => r.placements.map((p) => p.panel)));
  const pieces = facts.rolls === undefined ? [] : [...(facts.panels ?? []), ...(facts.pieces ?? [])];
  return {
    panels: facts.panels?.length ?? 0,
    weld: sum(facts.seams, (s) => s.length),
    left: pieces.filter((p) => !laid.has(p.id)).length,
    taken: sum(facts.rolls, (r) => r.used) / 1e3,
    cloth: sum(facts.rolls, (r) => r.used * r.width) / 1e6,
    offcut: sum(facts.rolls, (r) => (1 - r.utilisation) * r.used * r.width) / 1e6,
  };
}
