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
  words: string[];
}

/** An end this near the table's edge still lies on it, mm. */
const HAIR = 1e-6;

/**
 * The roll in lengths the table takes at once, as the roll's record feeds it: each begins at the first piece not yet cut and holds
 * every piece that ends within it. A piece longer than the table is fed on along its length, the findings tell of it. [] where the
 * table takes the whole roll.
 */
export function tableBites(facts: Facts, roll: NestedRoll): TableBite[] {
  const bite = roll.bite ?? Infinity;
  if (!(bite < roll.used)) return [];
  const parts: { from: number; cloth: PlacedCloth[] }[] = [];
  let left = placedInOrder(facts, roll);
  while (left.length > 0) {
    const from = Math.min(...left.map((c) => c.start));
    const within = left.filter((c) => c.start === from || c.end <= from + bite + HAIR);
    parts.push({ from, cloth: within });
    left = left.filter((c) => !within.includes(c));
  }
  return parts.map(({ from, cloth }, k) => {
    const used = Math.max(...cloth.map((c) => c.end)) - from;
    const placements = cloth.map((c) => ({ ...c.p, x: c.p.x - from }));
    const flaws = roll.flaws.flatMap((f) => {
      const [x0, x1] = [Math.max(0, f.x - from), f.x + f.length - from];
      return x1 > 0 ? [{ ...f, x: x0, length: x1 - x0 }] : [];
    });
    const words = [
      `TABLE LENGTH ${k + 1} OF ${parts.length}: X = 0 IS ${Math.round(from)} MM FROM THE START OF THE ROLL. CUT IN THIS ORDER.`,
    ];
    const long = used > bite + HAIR;
    if (long) words.push("LONGER THAN THE TABLE: CUT UP TO A FEED MARK, FEED ON TO IT, CUT ON FROM THERE.");
    const feeds = (roll.feeds ?? []).map((x) => x - from).filter((x) => long && x > HAIR && x < used);
    return { roll: { ...roll, used, placements, flaws, feeds }, from, words };
  });
}
