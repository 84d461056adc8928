// One filled roll made shorter by the relaxed search, in shares that may run side by side. What it finds is slid together
// exactly and taken only where it needs less cloth. Same seed and steps: same layout, whoever works the shares.
import { type Bed, bedReach, type LaidShape, layInPlace, openBed } from "../bed.ts";
import { compactInPlace, type NestTask } from "../layPieces.ts";
import { boundLength } from "../lowerBound.ts";
import type { NestShape } from "../nestShape.ts";
import { ringGap } from "../ringGap.ts";
import { openSearch, type StripSearch } from "./shortenStrip.ts";
import type { StripState, StripTask } from "./strip.ts";
import { buildStripShape } from "./stripShapes.ts";
import { type ShareOrder, workShare } from "./workShare.ts";

/** Works orders side by side; null for one that was lost. */
export type WorkShares = (orders: ShareOrder[], stop: () => boolean) => (StripState | null)[];

/** Shares of each round, whatever the number of threads, so that the layout does not depend on it. */
const SHARES = 2;
/** After each round the shares go on from the best of them: at most so many, of so many steps a piece at least. */
const ROUNDS = 8;
const ROUND_LEAST = 4;
/** Fewer steps in all are none: the constructive nest stays as it is. */
const LEAST_STEPS = 2;
/** The overlap in all that counts as none, as a share of the least piece's size. */
const NONE = 1e-7;
const NEAR = 1.001;
/** The exact judge counts as touching what overlaps by so many times as much. */
const TOUCH = 10;

/** A bed seen as a strip. */
export interface Framed {
  task: StripTask;
  from: StripState;
  laid: LaidShape[];
  shapes: NestShape[];
}

/** The bed as a strip: what may move first, pins and flaws after it. */
function frameBed(bed: Bed, nest: NestTask): Framed {
  const shapes: NestShape[] = [];
  const known = new Map<string, number>();
  const place = (shape: NestShape) => {
    const at = known.get(shape.key) ?? shapes.push(shape) - 1;
    known.set(shape.key, at);
    return at;
  };
  const kinds = new Map<string, number[]>();
  const choicesOf = (p: LaidShape) => {
    const key = nest.shapes[p.piece][0].key;
    const own = kinds.get(key) ?? nest.shapes[p.piece].filter((s) => s.height <= bed.width).map(place);
    kinds.set(key, own);
    return own;
  };
  // By piece, whatever the layout: threads that began from other layouts hand states to each other.
  const loose = bed.laid.filter((p) => !p.pinned).sort((a, b) => a.piece - b.piece);
  const held = [...bed.laid.filter((p) => p.pinned), ...bed.flawShapes];
  const laid = [...loose, ...held];
  for (const p of loose) choicesOf(p);
  // A flaw's key says nothing of its size.
  const shapeOf = laid.map((p) => (p.piece < 0 ? shapes.push(p.shape) - 1 : place(p.shape)));
  const choices = laid.map((p, i) => (p.pinned ? [shapeOf[i]] : choicesOf(p)));
  const built = shapes.map(buildStripShape);
  const areas = loose.map((p) => nest.areas[p.piece]);
  const slack = Math.max(...built.map((s) => s.slack + s.over));
  return {
    laid,
    shapes,
    task: {
      shapes: built,
      choices,
      movable: loose.length,
      width: bed.width,
      start: bed.start,
      gap: bed.gap,
      reach: bed.gap + 2 * slack,
      size: Math.sqrt(areas.reduce((sum, a) => sum + a, 0) / areas.length),
      none: NONE * Math.sqrt(Math.min(...areas)),
    },
    from: {
      length: bedReach(bed),
      x: Float64Array.from(laid, (p) => p.x),
      y: Float64Array.from(laid, (p) => p.y),
      shape: Int32Array.from(shapeOf),
    },
  };
}

/** Whether no two things on the bed lie nearer than the gap or overlap, by exact distances. */
function isApart(bed: Bed, touch: number): boolean {
  const all = [...bed.laid, ...bed.flawShapes].map((p) => ({ ...p, ring: p.shape.ring }));
  all.sort((a, b) => a.x - b.x);
  return all.every((a, i) => {
    for (let j = i + 1; j < all.length; j++) {
      const b = all[j];
      const gap = bed.gap + a.shape.slack + b.shape.slack;
      if (b.x >= a.x + a.shape.length + gap) break;
      // Flaws may overlap one another, pins were judged where they were laid.
      if (a.pinned && b.pinned) continue;
      if (ringGap(a, b, gap + touch, touch) < Math.max(0, gap - touch)) return false;
    }
    return true;
  });
}

/** The bed laid as a state has it, slid together where that keeps all apart; null where the exact judge finds an overlap. */
function bedFrom(bed: Bed, framed: Framed, state: StripState, areas: number[]): Bed | null {
  const lay = () => {
    const fresh = openBed(bed);
    framed.laid.forEach((p, i) => {
      if (p.piece < 0) return;
      layInPlace(fresh, { ...p, shape: framed.shapes[state.shape[i]], x: state.x[i], y: state.y[i] });
    });
    return fresh;
  };
  const touch = TOUCH * framed.task.none;
  const slid = lay();
  compactInPlace({ beds: [slid], left: [], cost: { left: 0, cloth: 0, used: 0, reach: 0 } }, areas, 12);
  if (isApart(slid, touch)) return slid;
  const plain = lay();
  return isApart(plain, touch) ? plain : null;
}

/** A search on one bed that the caller drives by a clock of its own, and the way back to a bed. */
export function openSearchOf(bed: Bed, nest: NestTask, way: { seed: number; share: number; fixed: number }) {
  const framed = frameBed(bed, nest);
  const search: StripSearch = openSearch(framed.task, framed.from, way);
  return { search, bedOf: (state: StripState) => bedFrom(bed, framed, state, nest.areas) };
}

/** Asks for orders to be worked, is given the states found; ends with the bed. */
export type Relaxing = Generator<{ orders: ShareOrder[]; done: number }, Bed, (StripState | null)[]>;

/**
 * Makes a bed shorter round by round; the bed itself where no shorter layout was found.
 * @param limits steps in all, shared out; each round is asked for with the steps done before it
 */
export function* relaxRounds(bed: Bed, nest: NestTask, limits: { steps: number; seed: number }): Relaxing {
  const loose = bed.laid.filter((p) => !p.pinned).length;
  if (loose === 0 || limits.steps < LEAST_STEPS) return bed;
  const rings = bed.laid.map((p) => p.shape.ring);
  // No layout is shorter than its bound or its pins; one that meets it to a thousandth is good enough.
  const bound = NEAR * boundLength(rings, bed.width, bed.gap, bed.start);
  const fixed = Math.max(bound, ...bed.laid.filter((p) => p.pinned).map((p) => p.x + p.shape.length));
  if (fixed >= bedReach(bed)) return bed;
  const framed = frameBed(bed, nest);
  // Few steps are not worth sharing.
  const shares = limits.steps >= SHARES * ROUND_LEAST * loose ? SHARES : 1;
  const each = Math.ceil(limits.steps / shares);
  const rounds = Math.max(1, Math.min(ROUNDS, Math.floor(each / (ROUND_LEAST * loose))));
  let best = framed.from;
  for (let round = 0; round < rounds && !nest.stop(); round++) {
    const done = Math.floor((each * round) / rounds);
    const steps = Math.floor((each * (round + 1)) / rounds) - done;
    const { seed } = limits;
    const order = { kind: "shorten strip" as const, task: framed.task, from: best, fixed, seed, done, steps, of: each };
    const orders = Array.from({ length: shares }, (_, share) => ({ ...order, share }));
    const states = yield { orders, done: shares * done };
    for (const state of states) if (state && state.length < best.length) best = state;
  }
  if (best === framed.from) return bed;
  const shorter = bedFrom(bed, framed, best, nest.areas);
  return shorter && bedReach(shorter) < bedReach(bed) ? shorter : bed;
}

const workAll: WorkShares = (orders, stop) => orders.map((o) => workShare(o, stop));

/** Beds made shorter side by side, all that a round asks for worked at once. */
export function relaxBeds(
  tasks: { bed: Bed; steps: number }[],
  nest: NestTask,
  limits: { seed: number; onRound: (done: number) => void },
  work: WorkShares = workAll,
): Bed[] {
  const { seed, onRound } = limits;
  const beds = tasks.map((t) => t.bed);
  const done = tasks.map(() => 0);
  let open = tasks.map(({ bed, steps }, k) => {
    const rounds = relaxRounds(bed, nest, { steps, seed });
    return { k, rounds, asked: rounds.next() };
  });
  for (;;) {
    for (const { k, asked } of open)
      if (asked.done) beds[k] = asked.value;
      else done[k] = asked.value.done;
    open = open.filter((o) => {
      if (o.asked.done) done[o.k] = tasks[o.k].steps;
      return !o.asked.done;
    });
    onRound(done.reduce((sum, d) => sum + d, 0));
    if (open.length === 0) return beds;
    const orders = open.map((o) => (o.asked.done ? [] : o.asked.value.orders));
    const states = work(orders.flat(), nest.stop);
    let next = 0;
    open.forEach((o, i) => {
      const own = states.slice(next, next + orders[i].length);
      next += orders[i].length;
      o.asked = o.rounds.next(own);
    });
  }
}
