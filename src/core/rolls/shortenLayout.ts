// A layout made to need less cloth after its orders were tried: each roll by the relaxed search, then pieces of the roll that
// holds least moved into the free cloth of others. Never more cloth than it began with. Source: own.
import { type Bed, bedReach, findPlace, type LaidShape, layInPlace, openBed, settle } from "./bed.ts";
import { compactInPlace, isLess, type Layout, measureLayout, type NestTask, takesNoMore } from "./layPieces.ts";
import { relaxBeds, type WorkShares } from "./relax/relaxBed.ts";

export interface ShortenLimits {
  /** Attempts over all rolls. */
  steps: number;
  seed: number;
  onStep: (done: number, layout: Layout) => void;
  work?: WorkShares;
}

/** Rounds of sliding after a piece was moved to another roll. */
const ROUNDS = 6;

/** The bed without one of its pieces; told by its number, since beds hold copies. */
function bedWithout(bed: Bed, piece: number): Bed {
  const fresh = openBed(bed);
  for (const p of bed.laid) if (p.piece !== piece) layInPlace(fresh, { ...p });
  return fresh;
}

/** The bed with one piece more, or null where it has no room. */
function bedWith(bed: Bed, piece: number, task: NestTask): Bed | null {
  const fresh = openBed(bed);
  for (const p of bed.laid) layInPlace(fresh, { ...p });
  for (const shape of task.shapes[piece]) {
    const place = findPlace(fresh, shape, task.store);
    if (!place) continue;
    const laid: LaidShape = { piece, shape, ...place, pinned: false };
    Object.assign(laid, settle(fresh, laid, ROUNDS));
    if (laid.x + shape.length > bed.length + 1e-9 * bed.width) continue;
    layInPlace(fresh, laid);
    return fresh;
  }
  return null;
}

/** Moves pieces from the least filled rolls into others while that saves cloth. */
function movePieces(layout: Layout, task: NestTask): Layout {
  let best = layout;
  const order = layout.beds.map((_, i) => i).filter((i) => layout.beds[i].laid.some((p) => !p.pinned));
  order.sort((a, b) => bedReach(layout.beds[a]) - bedReach(layout.beds[b]) || b - a);
  for (const from of order)
    for (const p of [...best.beds[from].laid].sort((a, b) => b.x + b.shape.length - a.x - a.shape.length)) {
      for (let to = 0; to < best.beds.length && !task.stop(); to++) {
        if (to === from || p.pinned || !task.offers[to].takes(p.piece) || best.beds[to].laid.length === 0) continue;
        const into = bedWith(best.beds[to], p.piece, task);
        if (!into) continue;
        const beds = best.beds.map((b, i) => (i === to ? into : i === from ? bedWithout(b, p.piece) : b));
        const trial: Layout = { beds, left: best.left, cost: measureLayout(beds, best.left, task.areas) };
        if (!isLess(trial.cost, best.cost) || !takesNoMore(trial.cost, layout.cost)) continue;
        best = trial;
        break;
      }
    }
  return best;
}

/** The layout, or one of less cloth; no more cloth is taken off the rolls than it took. */
export function shortenLayout(layout: Layout, task: NestTask, limits: ShortenLimits): Layout {
  const loose = layout.beds.map((b) => b.laid.filter((p) => !p.pinned).length);
  const all = loose.reduce((sum, n) => sum + n, 0);
  const shares = layout.beds.map((bed, i) => ({
    bed,
    steps: Math.round((limits.steps * loose[i]) / Math.max(1, all)),
  }));
  const { seed, onStep, work } = limits;
  const onRound = (done: number) => onStep(Math.min(limits.steps, done), layout);
  let best = layout;
  relaxBeds(shares, task, { seed, onRound }, work).forEach((bed, i) => {
    if (bed === best.beds[i]) return;
    const beds = best.beds.map((b, k) => (k === i ? bed : b));
    const trial = { beds, left: best.left, cost: measureLayout(beds, best.left, task.areas) };
    if (isLess(trial.cost, best.cost)) best = trial;
  });
  const moved = best.beds.filter((b) => b.laid.length > 0).length > 1 ? movePieces(best, task) : best;
  if (moved !== best) compactInPlace(moved, task.areas, 12);
  return isLess(moved.cost, best.cost) && takesNoMore(moved.cost, best.cost) ? moved : best;
}
