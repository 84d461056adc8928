// Which pieces can be nested at all, and what to say of those that cannot. Does not: nest.
// Source: limits are the roll's own; common practice for the table's bite.
import type { Finding } from "../problem.ts";
import type { NestDecision } from "../records/job.ts";
import type { NestPiece, StockRoll } from "../records/roll.ts";
import { isSimpleRing, ringArea, ringBox } from "../surface/ring.ts";

/** Whether a piece may lie on a roll by cloth and batch. */
export function suits(piece: NestPiece, roll: StockRoll): boolean {
  if (piece.fabric !== roll.fabric) return false;
  return piece.batch === null || piece.batch === roll.batch || (roll.assumed && roll.batch === null);
}

/** Usable width of a roll. */
export function usableWidth(roll: StockRoll): number {
  return roll.width - 2 * roll.selvedge;
}

/** A stop of the rolls station. */
export function stopFinding(
  code: string,
  where: string | string[],
  value: number | string | null,
  limit: number | string | null,
  words: { text: string; remedy: string },
): Finding {
  return { code, level: "stop", station: "rolls", where, value, limit, ...words, basis: "own argument" };
}

const mm = (v: number) => `${Math.round(v * 10) / 10} mm`;

function outlineFault(piece: NestPiece): string | null {
  if (piece.cut.length < 6) return `has ${piece.cut.length / 2} points`;
  if (!piece.cut.every(Number.isFinite)) return "has points that are no numbers";
  const box = ringBox(piece.cut);
  const size = Math.max(box.x1 - box.x0, box.y1 - box.y0);
  if (Math.abs(ringArea(piece.cut)) <= 1e-9 * size * size) return "encloses no area";
  return isSimpleRing(piece.cut) ? null : "crosses or touches itself";
}

type Table = Pick<NestDecision, "bite" | "pastBite">;

function faultOf(piece: NestPiece, stock: StockRoll[], { bite, pastBite }: Table): Finding | null {
  const fault = outlineFault(piece);
  if (fault)
    return stopFinding("piece-outline", piece.id, null, null, {
      text: `The outline of ${piece.id} ${fault}: it cannot be nested.`,
      remedy: "Correct the outline: a closed line that does not meet itself.",
    });
  const box = ringBox(piece.cut);
  const size = { length: box.x1 - box.x0, height: box.y1 - box.y0 };
  const rolls = stock.filter((r) => suits(piece, r));
  if (rolls.length === 0)
    return stopFinding("roll-cloth", piece.id, piece.batch ?? piece.fabric, null, {
      text: `No roll holds cloth ${piece.fabric}${piece.batch === null ? "" : ` of batch ${piece.batch}`} for ${piece.id}.`,
      remedy: "Add a roll of this cloth and batch to the stock, or change the panel's batch.",
    });
  const widest = Math.max(...rolls.map(usableWidth));
  if (size.height > widest + 1e-6)
    return stopFinding("roll-width", piece.id, size.height, widest, {
      text: `${piece.id} is ${mm(size.height)} wide with allowances, ${mm(size.height - widest)} more than the widest usable roll (${mm(widest)}).`,
      remedy: "Lay narrower strips, smaller allowances, or take a wider roll.",
    });
  const longest = Math.max(...rolls.filter((r) => usableWidth(r) >= size.height - 1e-6).map((r) => r.length - r.start));
  if (size.length > longest + 1e-6)
    return stopFinding("roll-length", piece.id, size.length, longest, {
      text: `${piece.id} is ${mm(size.length)} long with allowances, longer than any roll it fits across (${mm(longest)} after trim).`,
      remedy: "Divide the strip with a cross seam (seams.maxLength), or take a longer roll.",
    });
  if (bite !== null && size.length > bite + 1e-6 && pastBite === "feed")
    return {
      ...stopFinding("roll-feed", piece.id, size.length, bite, {
        text: `${piece.id} is ${mm(size.length)} long, more than the cutting table takes at once (${mm(bite)}): it is cut in ${Math.ceil(size.length / bite - 1e-9)} feeds.`,
        remedy: "Set the cloth to the feed marks each time it is fed on, and measure the panel before it is joined.",
      }),
      level: "note",
    };
  if (bite !== null && size.length > bite + 1e-6)
    return stopFinding("roll-bite", piece.id, size.length, bite, {
      text: `${piece.id} is ${mm(size.length)} long, more than the cutting table takes at once (${mm(bite)}).`,
      remedy:
        "Divide the strip with a cross seam (seams.maxLength), cut on a longer table, or let it be fed on (nest.pastBite).",
    });
  return null;
}

/** The pieces that can be nested, and a finding for each that cannot (a piece past the bite is nested all the same). */
export function sortPieces(
  pieces: NestPiece[],
  stock: StockRoll[],
  table: Table,
): { fit: NestPiece[]; findings: Finding[] } {
  const fit: NestPiece[] = [];
  const findings: Finding[] = [];
  for (const piece of pieces) {
    const fault = faultOf(piece, stock, table);
    if (fault) findings.push(fault);
    if (!fault || fault.code === "roll-bite" || fault.code === "roll-feed") fit.push(piece);
  }
  return { fit, findings };
}
