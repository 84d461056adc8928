// A number of strips the job asks for that the cloth has no room for: which number does, found by laying it out and flattening it.
// The number asked for stands (it may follow bolts or a drawing), so this is a stop with its remedy, not another layout.
// Source: own; strips of one region share its width, so the number needed grows with what is too wide.
import { type Finding, PlanError } from "../problem.ts";
import type { LayoutEstimate } from "../records/stripLayout.ts";
import type { ClothRoom } from "./clothRoom.ts";
import type { Fitted } from "./fitted.ts";

/** Numbers tried at most before the finding says only that more are needed. */
const TRIES = 4;

/** What is asked, the cloth's room, and how to lay out and measure another number. */
export interface AskedCount {
  count: number;
  room: ClothRoom;
  /** m: one finished overlap. */
  lap: number;
  /** m: widest cut panel of an estimate's strips. */
  widestOf: (fitted: Fitted, estimate: LayoutEstimate) => number;
  /** Lays out a number, flattened and fitted; may throw a PlanError where that cannot be laid. */
  layOut: (count: number) => Fitted;
}

/** The least number worth trying: as much more as the widest strip is too wide, its lap left aside. */
function nextNumber(asked: number, widest: number, width: number, lap: number): number {
  return Math.max(asked + 1, Math.ceil((asked * (widest - lap)) / Math.max(width - lap, 0.01) - 1e-9));
}

/** The first number from the one asked for on whose panels all fit across; null where none of those tried does. */
function searchCount(first: number, { count: asked, room, lap, layOut }: AskedCount, measure: (f: Fitted) => number) {
  let last = { count: asked, widest: first };
  for (let k = 0; k < TRIES; k++) {
    const count = nextNumber(last.count, last.widest, room.width, lap);
    let widest: number;
    try {
      widest = measure(layOut(count));
    } catch (error) {
      if (!(error instanceof PlanError) || error.code === "cancelled") throw error;
      break;
    }
    if (widest <= room.width) return { fits: count, tried: count };
    last = { count, widest };
  }
  return { fits: null, tried: last.count };
}

/** The stop for panels that are too wide because the job fixes their number, or null where all fit across. */
export function findCount(fitted: Fitted, asked: AskedCount): Finding | null {
  const { count, room, widestOf } = asked;
  const estimates = fitted.seams.output.estimates ?? [];
  const wide = estimates.filter((e) => widestOf(fitted, e) > room.width);
  if (wide.length === 0) return null;
  const measure = (f: Fitted) => Math.max(0, ...(f.seams.output.estimates ?? []).map((e) => widestOf(f, e)));
  const { fits, tried } = searchCount(measure(fitted), asked, measure);
  const widest = (1000 * measure(fitted)).toFixed(0);
  const limit = (1000 * room.width).toFixed(0);
  const strips = count === 1 ? "1 strip, as asked, is" : `${count} strips, as asked, are`;
  const more = fits === null ? `more than ${tried} are needed` : `${fits} fit`;
  return {
    code: "seam-count-wide",
    level: "stop",
    station: "seams",
    where: [...wide.map((e) => e.region), "seams.count"],
    value: count,
    limit: fits,
    text: `${strips} too few for this cloth: the widest panel is ${widest} mm with allowances, ${limit} mm can be used; ${more}.`,
    remedy: `${fits === null ? "Ask for more strips" : `Ask for ${fits} strips`}, leave the number to the program (seams.count "auto"), or take a wider roll.`,
    basis: fits === null ? "own argument" : `own: ${fits} strips were laid out and flattened, all fit across`,
  };
}
