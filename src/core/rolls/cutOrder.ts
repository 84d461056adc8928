// In which order the pieces of a roll are cut, and where the cloth is fed on the table. Does not: nest, or divide pieces.
// Source: common practice: from the free end towards the roll, so that what is not yet cut stays one web and keeps the cloth lying;
// the table feeds forward only.

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
 * Ids in cutting order, and the places along the roll that are fed to the table's beginning, rising. A piece is cut whole while all
 * of it lies on the table; one longer than the bite is cut up to each next feed, beside whatever else lies there, and is done where
 * its end lies on the table.
 * @param bite length of cloth the table takes at once, null for all of it
 * @units mm
 */
export function cutOrder(pieces: CutPiece[], bite: number | null): { order: string[]; feeds: number[] } {
  const rising = [...pieces].sort((a, b) => a.x1 - b.x1 || a.y0 - b.y0 || (a.id < b.id ? -1 : 1));
  if (bite === null || pieces.length === 0) return { order: rising.map((p) => p.id), feeds: [] };
  const feeds: number[] = [];
  let left = rising;
  for (let at = Math.min(...left.map((p) => p.x0)); left.length > 0; ) {
    feeds.push(at);
    const end = at + bite;
    left = left.filter((p) => p.x1 > end + HAIR);
    // Fed on to the first piece not begun; one that is longer than the table goes on where the table ended.
    at = Math.min(...left.map((p) => (p.x1 - p.x0 > bite + HAIR ? Math.max(p.x0, end) : p.x0)));
  }
  return { order: rising.map((p) => p.id), feeds };
}
