// The rolls a nest may use, in order: those of the store, and copies of a roll that is taken for granted, as many as needed.
// Does not: nest.
import type { NestPiece, StockRoll } from "../records/roll.ts";
import { suits } from "./sortPieces.ts";

/** A roll of the store, or a copy of an assumed one with its own id. */
export interface OfferedRoll {
  roll: StockRoll;
  /** Pieces that may lie on it, by place in the list. */
  takes: Set<number>;
}

/** Copies of an assumed roll, one batch after the other: at worst one roll a piece. */
function copiesOf(roll: StockRoll, pieces: NestPiece[]): { batch: string | null; takes: number[] }[] {
  const batches = new Map<string | null, number[]>();
  pieces.forEach((piece, i) => {
    if (!suits(piece, roll)) return;
    const batch = roll.batch ?? piece.batch;
    batches.set(batch, [...(batches.get(batch) ?? []), i]);
  });
  return [...batches].map(([batch, takes]) => ({ batch, takes }));
}

/** The rolls on offer in the order in which they are filled; R1, R2, … for the copies, past ids that are taken. */
export function offerRolls(stock: StockRoll[], pieces: NestPiece[], pinned: string[]): OfferedRoll[] {
  const offers: OfferedRoll[] = [];
  const taken = new Set(stock.filter((r) => !r.assumed).map((r) => r.id));
  let number = 0;
  const nextId = () => {
    do number++;
    while (taken.has(`R${number}`));
    return `R${number}`;
  };
  for (const roll of stock) {
    if (!roll.assumed) {
      offers.push({ roll, takes: new Set(pieces.flatMap((p, i) => (suits(p, roll) ? [i] : []))) });
      continue;
    }
    for (const { batch, takes } of copiesOf(roll, pieces)) {
      const least = Math.max(0, ...pinned.map((id) => (/^R\d+$/.test(id) ? Math.min(999, Number(id.slice(1))) : 0)));
      for (let k = 0; k < Math.max(takes.length, least); k++)
        offers.push({ roll: { ...roll, id: nextId(), batch }, takes: new Set(takes) });
    }
  }
  return offers;
}
