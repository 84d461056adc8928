// The batch a piece of cloth is cut from. The panels station knows none before the cloth is laid out; then it is that of the roll.
import type { Facts } from "../../records/facts.ts";

/** The piece's own batch, else that of the roll it lies on, else null. */
export function batchOf(facts: Facts, cloth: { id: string; batch: string | null }): string | null {
  if (cloth.batch !== null) return cloth.batch;
  const roll = (facts.rolls ?? []).find((r) => r.placements.some((p) => p.panel === cloth.id));
  return roll?.batch ?? null;
}
