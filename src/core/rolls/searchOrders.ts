// Tries orders of the pieces and keeps the layout of least cloth: a few sorted orders, then seeded changes to the best one.
// Stops by steps or when told to; same seed, same layout. Source: late acceptance (E. K. Burke and Y. Bykov, The late acceptance hill-climbing heuristic, 2017; from memory), on orders.
import { buildRandom, drawInteger, type Random } from "../numeric/random.ts";
import { chainRoll, layChain, orderChain } from "./layChain.ts";
import {
  compactInPlace,
  isLess,
  type Layout,
  type LayoutCost,
  layPieces,
  type NestTask,
  type TurnRule,
} from "./layPieces.ts";
import { layStacks, type StackRule } from "./layStacks.ts";

export interface SearchLimits {
  /** Layouts built. */
  steps: number;
  seed: number;
  onStep?: (done: number, best: Layout | null) => void;
}

const RULES: TurnRule[] = ["least x", "least end", "least y"];

/** Orders worth trying first: by length, height, area, box and slimness, greatest first; before all what fewest rolls take. */
function sortedOrders(task: NestTask): number[][] {
  const first = (p: number) => task.shapes[p][0];
  const rolls = new Map(task.loose.map((p) => [p, task.offers.filter((o) => o.takes(p)).length]));
  const choice = (p: number) => rolls.get(p) ?? 0;
  const keys: ((p: number) => number)[] = [
    (p) => task.areas[p],
    (p) => first(p).length,
    (p) => first(p).height,
    (p) => first(p).length * first(p).height,
    (p) => Math.max(first(p).length, first(p).height),
    (p) => first(p).length + first(p).height,
  ];
  return keys.map((key) => [...task.loose].sort((a, b) => choice(a) - choice(b) || key(b) - key(a) || a - b));
}

/** What a layout is built from. */
interface Genome {
  order: number[];
  rule: TurnRule;
  /** How stacks are built, or wide pieces chained; null: piece by piece. */
  stacks: StackRule | "chain" | null;
  /** Rolls in the order in which they are filled. */
  rolls: number[];
}

/** Stacks worth trying: ends flush, and staggered by a quarter or half a length. */
const STACKS: StackRule[] = [{ shifts: [0] }, { shifts: [0, 0.25, -0.25] }, { shifts: [0, 0.5, -0.5] }];

/** Orders of rolls worth trying: as listed, and where they differ narrow, wide, short or long ones first. */
function rollOrders(task: NestTask): number[][] {
  const sizes = task.offers.map((o) => o.size);
  const listed = sizes.map((_, i) => i);
  const alike = sizes.every((s) => s.width === sizes[0].width && s.length === sizes[0].length && s.flaws.length === 0);
  if (alike) return [listed];
  const by = (key: (i: number) => number) => [...listed].sort((a, b) => key(a) - key(b) || a - b);
  return [
    listed,
    by((i) => sizes[i].width),
    by((i) => -sizes[i].width),
    by((i) => sizes[i].length),
    by((i) => -sizes[i].length),
  ];
}

/** The layout of a genome, its beds in the order of the offers. */
function layGenome(task: NestTask, genome: Genome, beat: LayoutCost | null): Layout | null {
  const offers = genome.rolls.map((i) => task.offers[i]);
  const { order, rule, stacks } = genome;
  const own = { ...task, offers };
  const layout =
    stacks === "chain"
      ? layChain(own, order, beat)
      : stacks
        ? layStacks(own, order, stacks, beat)
        : layPieces(own, { order, rule }, beat);
  if (!layout) return null;
  const beds: Layout["beds"] = [];
  genome.rolls.forEach((i, k) => {
    beds[i] = layout.beds[k];
  });
  return { ...layout, beds };
}

/** A genome to start with; the order of a chain is sought first. */
function openGenome(task: NestTask, genome: Genome, seed: number): Genome {
  const roll = genome.stacks === "chain" ? chainRoll(task, genome.rolls) : null;
  return roll === null ? genome : { ...genome, order: orderChain(task, genome.order, roll, seed) };
}

/** A changed copy: places swapped or a piece moved, near or far, never two alike; now and then another rule. */
function changeGenome(genome: Genome, random: Random, kind: (p: number) => string, sorted: boolean): Genome {
  const order = [...genome.order];
  const n = order.length;
  for (let tries = 0; tries < 20; tries++) {
    const i = drawInteger(random, n);
    const near = random() < 0.5;
    const j = near ? Math.min(n - 1, i + 1 + drawInteger(random, Math.min(8, n))) : drawInteger(random, n);
    if (i === j || kind(order[i]) === kind(order[j])) continue;
    if (random() < 0.6) [order[i], order[j]] = [order[j], order[i]];
    else order.splice(j, 0, ...order.splice(i, 1));
    if (random() < 0.7) break;
  }
  const rule = random() < 0.05 ? RULES[drawInteger(random, RULES.length)] : genome.rule;
  if (sorted || random() > 0.1) return { ...genome, order, rule };
  const rolls = [...genome.rolls];
  const a = drawInteger(random, rolls.length);
  const b = drawInteger(random, rolls.length);
  [rolls[a], rolls[b]] = [rolls[b], rolls[a]];
  return { ...genome, order, rule, rolls };
}

const worse = (a: LayoutCost, b: LayoutCost) => (isLess(a, b) ? b : a);

/** How many steps back a changed order is compared with: patience to leave a dead end, none where steps are few. */
function memoryOf(steps: number): number {
  return Math.max(1, Math.min(40, Math.floor(steps / 25)));
}

/** The best layout found, compacted, with how many layouts were built. Null only where it was stopped before the first. */
export function searchOrders(task: NestTask, limits: SearchLimits): { layout: Layout; steps: number } | null {
  const random = buildRandom(limits.seed);
  const kind = (p: number) => task.shapes[p][0].key;
  const rolls = rollOrders(task);
  const orders = sortedOrders(task);
  const single = orders.flatMap((order) => RULES.map((rule) => ({ order, rule, stacks: null })));
  const stacked = orders.slice(0, 3).flatMap((order) => STACKS.map((stacks) => ({ order, rule: RULES[0], stacks })));
  const chained = rolls
    .filter((list) => chainRoll(task, list) !== null)
    .map((list): Genome => ({ order: orders[0], rule: RULES[0], stacks: "chain", rolls: list }));
  const on = (g: Omit<Genome, "rolls">, k: number): Genome => ({ ...g, rolls: rolls[k % rolls.length] });
  const starts = [
    on(single[0], 0),
    ...chained,
    ...single.slice(1, 3).map((g, k) => on(g, k + 1)),
    ...[...stacked, ...single.slice(3)].map(on),
  ];
  let best: Layout | null = null;
  let bestOf: Genome = starts[0];
  let now: { cost: LayoutCost; genome: Genome } | null = null;
  let memory: LayoutCost[] = [];
  let steps = 0;
  for (; steps < Math.max(1, limits.steps); steps++) {
    if (task.stop() || (steps >= starts.length && task.loose.length < 2)) break;
    const sorting = steps < starts.length;
    if (!sorting && !now && best) {
      now = { cost: best.cost, genome: bestOf };
      memory = new Array(memoryOf(limits.steps)).fill(best.cost);
    }
    const genome: Genome =
      sorting || !now
        ? openGenome(task, starts[steps % starts.length], limits.seed)
        : changeGenome(now.genome, random, kind, rolls.length === 1);
    const slot = steps % Math.max(1, memory.length);
    const toBeat: LayoutCost | null = now ? worse(memory[slot], now.cost) : (best?.cost ?? null);
    // A cap may cut the search short, never the first layout.
    const layout = layGenome(best ? task : { ...task, stop: () => false }, genome, toBeat);
    if (layout && (!best || !isLess(best.cost, layout.cost))) {
      best = layout;
      bestOf = genome;
    }
    if (now) {
      if (layout && toBeat && !isLess(toBeat, layout.cost)) now = { cost: layout.cost, genome };
      memory[slot] = now.cost;
    }
    limits.onStep?.(steps + 1, best);
  }
  if (!best) return null;
  compactInPlace(best, task.areas, 12);
  return { layout: best, steps };
}
