// In which order the pieces of a roll are cut, and where the cloth is fed on the table. Does not: nest, or divide pieces.
// Source: common practice: from the free end towards the roll, so that what is not yet cut stays one web and keeps the cloth lying.

/** A piece on the roll: where it begins and ends along it, and its lower edge. */
export interface CutPiece {
  id: string;
  x0: number;
  x1: number;
  y0: number;
}

/** mm: an end this near the table's edge still lies on it. */
const HAIR = 1e-6;

/**
 * Ids in cutting order, and the places along the roll that are fed to the table's beginning, one after the other. Each piece is
 * cut whole within one bite; one that is longer than the bite is fed on along its length.
 * @param bite length of cloth the table takes at once, null for all of it
 * @units mm
 */
export function cutOrder(pieces: CutPiece[], bite: number | null): { order: string[]; feeds: number[] } {
  const rising = [...pieces].sort((a, b) => a.x1 - b.x1 || a.y0 - b.y0 || (a.id < b.id ? -1 : 1));
  if (bite === null) return { order: rising.map((p) => p.id), feeds: [] };
  const order: string[] = [];
  const feeds: number[] = [];
  let left = rising;
  while (left.length > 0) {
    const at = Math.min(...left.map((p) => p.x0));
    // A piece longer than the bite may begin where the table lies already.
    if (at !== feeds.at(-1)) feeds.push(at);
    const fits = left.filter((p) => p.x1 <= at + bite + HAIR);
    // Nothing ends on the table: the piece that begins here is longer than the bite.
    const first = left.find((p) => p.x0 === at) as CutPiece;
    if (first.x1 > at + bite + HAIR) for (let x = at + bite; x < first.x1 - HAIR; x += bite) feeds.push(x);
    const cut = first.x1 > at + bite + HAIR ? [...fits.filter((p) => p !== first), first] : fits;
    order.push(...cut.map((p) => p.id));
    left = left.filter((p) => !cut.includes(p));
  }
  return { order, feeds };
}
