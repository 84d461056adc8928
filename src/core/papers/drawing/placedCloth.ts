// What lies on a roll, in the order it is cut, and how the roll is cut where the table takes only so much at once.
import { PlanError } from "../../problem.ts";
import type { Facts, FactsPanel, FactsPiece, Vec2 } from "../../records/facts.ts";
import type { NestedRoll, Placement } from "../../records/roll.ts";
import { plainText } from "../words/plainText.ts";
import { placed } from "./clothDrawing.ts";
import { boxOf } from "./flatGeometry.ts";

/** A piece of cloth where it lies. @units mm along the roll */
export interface PlacedCloth {
  p: Placement;
  panel: FactsPanel | undefined;
  piece: FactsPiece | undefined;
  /** Cut outline as it lies. */
  cut: Vec2[];
  start: number;
  end: number;
}

/**
 * The cloth on a roll in its cutting order; where the record has none, from the start of the roll to its end, ties by id.
 * @throws PlanError "papers-unknown-piece" for a placement of cloth that the facts do not hold
 */
export function placedInOrder(facts: Facts, roll: NestedRoll): PlacedCloth[] {
  const panels = new Map((facts.panels ?? []).map((p) => [p.id, p]));
  const pieces = new Map((facts.pieces ?? []).map((p) => [p.id, p]));
  return roll.placements
    .map((p): PlacedCloth => {
      const [panel, piece] = [panels.get(p.panel), pieces.get(p.panel)];
      if (!panel && !piece) {
        throw new PlanError(
          "papers-unknown-piece",
          `Roll ${plainText(roll.id)} places ${plainText(p.panel)}, but the plan holds no panel or piece of that name. Nest the job again.`,
          [roll.id, p.panel],
        );
      }
      const cut = (panel?.cut ?? piece?.cut ?? []).map((q) => placed(q, p));
      const box = boxOf(cut);
      return { p, panel, piece, cut, start: box.min[0], end: box.max[0] };
    })
    .sort(
      (a, b) =>
        (a.p.order ?? 0) - (b.p.order ?? 0) ||
        a.start - b.start ||
        (a.p.panel < b.p.panel ? -1 : a.p.panel > b.p.panel ? 1 : 0),
    );
}

export interface TableBite {
  /** The part of the roll, as a roll of its own: x = 0 where it begins. */
  roll: NestedRoll;
  /** Where it begins on the whole roll, mm: the cloth is fed on to there. */
  from: number;
  /** What earlier table lengths have cut, as it lies on this one. */
  before: Placement[];
  words: string[];
}

/** An end this near the table's edge still lies on it, mm. */
const HAIR = 1e-6;

/** The feeds at which a table length begins: all but those at which a piece longer than the table is still being cut. */
function partStarts(feeds: readonly number[], cloth: readonly PlacedCloth[], bite: number): number[] {
  const parted = (k: number) =>
    cloth.some((c) => c.end - c.start > bite + HAIR && c.start < feeds[k] - HAIR && c.end > feeds[k - 1] + bite + HAIR);
  return feeds.flatMap((x, k) => (k > 0 && parted(k) ? [] : [x]));
}

/**
 * The roll in lengths the table takes at once, as the roll's record feeds it: each begins at a feed and holds every piece that is
 * done before the next. Where a piece longer than the table is fed on, its feeds are one length with marks inside it. [] where
 * the table takes the whole roll.
 */
export function tableBites(facts: Facts, roll: NestedRoll): TableBite[] {
  const bite = roll.bite ?? Infinity;
  if (!(bite < roll.used)) return [];
  const cloth = placedInOrder(facts, roll);
  const feeds = roll.feeds ?? [];
  const starts = partStarts(feeds, cloth, bite);
  // A piece is done at the first feed from which the table reaches its end.
  const doneAt = (c: PlacedCloth) => feeds.find((x) => c.end <= x + bite + HAIR) ?? feeds[feeds.length - 1];
  return starts.map((from, k) => {
    const next = starts[k + 1] ?? Infinity;
    const own = cloth.filter((c) => doneAt(c) >= from && doneAt(c) < next);
    const used = Math.max(...own.map((c) => c.end)) - from;
    const shifted = (c: PlacedCloth) => ({ ...c.p, x: c.p.x - from });
    const before = cloth.filter((c) => doneAt(c) < from).map(shifted);
    const placements = own.map(shifted);
    const flaws = roll.flaws.flatMap((f) => {
      const [x0, x1] = [Math.max(0, f.x - from), f.x + f.length - from];
      return x1 > 0 ? [{ ...f, x: x0, length: x1 - x0 }] : [];
    });
    const words = [
      `TABLE LENGTH ${k + 1} OF ${starts.length}: X = 0 IS ${Math.round(from)} MM FROM THE START OF THE ROLL. CUT IN THIS ORDER.`,
    ];
    if (used > bite + HAIR)
      words.push(
        "LONGER THAN THE TABLE: CUT WHAT LIES WHOLE ON IT, THE LONG PIECE UP TO THE NEXT FEED MARK; FEED ON TO IT.",
      );
    const marks = feeds.filter((x) => x > from && x < next).map((x) => x - from);
    return { roll: { ...roll, used, placements, flaws, feeds: marks }, from, before, words };
  });
}
