// Lays pieces on rolls one after the other in a given order: the constructive half of the nest. Stops as soon as the layout
// cannot beat a known one. Does not: choose the order (searchOrders.ts). Source: bottom-left placement, common practice.
import {
  type Bed,
  type BedSize,
  bedReach,
  type ColumnStore,
  findPlace,
  type LaidShape,
  layInPlace,
  openBed,
  settle,
} from "./bed.ts";
import type { NestShape } from "./nestShape.ts";

/** A roll that may be used. */
export interface BedOffer {
  size: BedSize;
  /** Pieces that may lie on it, by number. */
  takes: (piece: number) => boolean;
  /** Laid before anything else. */
  pins: LaidShape[];
}

/** All a layout is made of. */
export interface NestTask {
  /** The rotations of each piece. */
  shapes: NestShape[][];
  /** Cloth area of each piece. */
  areas: number[];
  offers: BedOffer[];
  /** Pieces to be laid (those pinned left out). */
  loose: number[];
  store: ColumnStore;
  /** Asked before each piece; true gives the layout up. */
  stop: () => boolean;
}

/** A layout. */
export interface Layout {
  beds: Bed[];
  /** Pieces for which no roll had room. */
  left: number[];
  cost: LayoutCost;
}

/** First what could not be laid (area), then cloth spent (length × width, remnants of no use too), then the mean reach of the pieces. */
export interface LayoutCost {
  left: number;
  cloth: number;
  /** Cloth taken off the rolls alone, remnants left out. */
  used: number;
  reach: number;
}

/** Whether a cost is less than another: first by what is left out, then cloth, then how far left all lies. */
export function isLess(a: LayoutCost, b: LayoutCost): boolean {
  if (a.left !== b.left) return a.left < b.left;
  if (Math.abs(a.cloth - b.cloth) > 1e-9 * b.cloth) return a.cloth < b.cloth;
  return a.reach < b.reach * (1 - 1e-12);
}

/** Whether a layout takes no more cloth off the rolls than another that lays as much. */
export function takesNoMore(a: LayoutCost, than: LayoutCost): boolean {
  return a.left < than.left || a.used <= than.used * (1 + 1e-9);
}

/** How rotations of one piece are weighed against each other. */
export type TurnRule = "least x" | "least end" | "least y";

/** Rounds of sliding left and down after each placement. */
const ROUNDS = 6;

/** The best of a piece's rotations on one roll, settled, or null. */
function bestOn(bed: Bed, piece: number, task: NestTask, rule: TurnRule): LaidShape | null {
  let best: LaidShape | null = null;
  let bestKey = Infinity;
  for (const shape of task.shapes[piece]) {
    const place = findPlace(bed, shape, task.store);
    if (!place) continue;
    const trial: LaidShape = { piece, shape, ...place, pinned: false };
    Object.assign(trial, settle(bed, trial, ROUNDS));
    if (trial.x + shape.length > bed.length + 1e-9 * bed.width) continue;
    const end = trial.x + shape.length;
    const key = rule === "least x" ? trial.x + 1e-3 * end : rule === "least end" ? end + 1e-6 * trial.y : end + trial.y;
    if (key < bestKey - 1e-9 * bed.width) {
      best = trial;
      bestKey = key;
    }
  }
  return best;
}

/** Length of a roll that is gone: what is used, and a remnant too short to be useful (common practice: shorter than wide). */
function spentLength(bed: Bed): number {
  const used = bedReach(bed);
  return used > 0 && bed.length - used < bed.width ? bed.length : used;
}

/** Width by which a roll's cloth is counted. */
const countedWidth = (bed: Bed) => bed.overall ?? bed.width;

/** Cost of what lies so far. */
export function measureLayout(beds: Bed[], left: number[], areas: number[]): LayoutCost {
  const laid = beds.flatMap((b) => b.laid);
  return {
    left: left.reduce((sum, p) => sum + areas[p], 0),
    cloth: beds.reduce((sum, b) => sum + spentLength(b) * countedWidth(b), 0),
    used: beds.reduce((sum, b) => sum + bedReach(b) * countedWidth(b), 0),
    reach: laid.reduce((sum, p) => sum + p.x + p.shape.length, 0) / Math.max(1, laid.length),
  };
}

/** What decides a layout, beside the task. */
export interface LayRecipe {
  order: readonly number[];
  rule: TurnRule;
  /** Rolls on which something lies already; left out: empty ones with their pins. */
  begun?: Bed[];
}

/** The rolls on offer, with nothing on them but their pins. */
export function openBeds(task: NestTask): Bed[] {
  return task.offers.map((offer) => {
    const bed = openBed(offer.size);
    for (const pin of offer.pins) layInPlace(bed, pin);
    return bed;
  });
}

/** Lays a piece on the first roll that has room; false where none has. */
function layOne(beds: Bed[], piece: number, task: NestTask, rule: TurnRule): boolean {
  for (let b = 0; b < beds.length; b++) {
    if (!task.offers[b].takes(piece)) continue;
    const laid = bestOn(beds[b], piece, task, rule);
    if (!laid) continue;
    layInPlace(beds[b], laid);
    return true;
  }
  return false;
}

/**
 * Lays the pieces in order, each on the first roll that has room, at the least x, then least y.
 * @returns null where the layout grew past the cost to beat, or was told to stop
 */
export function layPieces(task: NestTask, recipe: LayRecipe, beat: LayoutCost | null): Layout | null {
  const { order, rule } = recipe;
  const beds = recipe.begun ?? openBeds(task);
  const left: number[] = [];
  let leftArea = 0;
  for (const piece of order) {
    if (task.stop()) return null;
    if (!layOne(beds, piece, task, rule)) {
      left.push(piece);
      leftArea += task.areas[piece];
    }
    if (!beat) continue;
    if (leftArea > beat.left) return null;
    if (leftArea < beat.left) continue;
    const cloth = beds.reduce((sum, b) => sum + bedReach(b) * countedWidth(b), 0);
    if (cloth > beat.cloth * (1 + 1e-9)) return null;
  }
  return { beds, left, cost: measureLayout(beds, left, task.areas) };
}

/** Slides all that is not pinned left and down, from the start of the roll on, until nothing moves. */
export function compactInPlace(layout: Layout, areas: number[], rounds: number): void {
  for (const bed of layout.beds) {
    for (let round = 0; round < rounds; round++) {
      let moved = 0;
      for (const laid of [...bed.laid].sort((a, b) => a.x - b.x || a.y - b.y)) {
        if (laid.pinned) continue;
        const to = settle(bed, laid, 2);
        moved = Math.max(moved, laid.x - to.x + laid.y - to.y);
        Object.assign(laid, to);
      }
      if (moved < 1e-3 * bed.dx) break;
    }
  }
  layout.cost = measureLayout(layout.beds, layout.left, areas);
}
