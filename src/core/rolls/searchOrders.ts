// Tries orders of the pieces and keeps the layout of least cloth: a few sorted orders, then seeded changes to the best one.
// Stops by steps or when told to; same seed, same layout. Source: own (hill climbing over orders, ties accepted).
import { buildRandom, drawInteger, type Random } from "../numeric/random.ts";
import { compactInPlace, isLess, type Layout, layPieces, type NestTask, type TurnRule } from "./layPieces.ts";

export interface SearchLimits {
  /** Layouts built. */
  steps: number;
  seed: number;
  /** True: stop with the best layout so far. */
  stop: () => boolean;
  onProgress?: (share: number, words: string) => void;
}

const RULES: TurnRule[] = ["least x", "least end", "least y"];

/** Orders worth trying first: by length, height, area, box and slimness, greatest first. */
function sortedOrders(task: NestTask): number[][] {
  const first = (p: number) => task.shapes[p][0];
  const keys: ((p: number) => number)[] = [
    (p) => task.areas[p],
    (p) => first(p).length,
    (p) => first(p).height,
    (p) => first(p).length * first(p).height,
    (p) => Math.max(first(p).length, first(p).height),
    (p) => first(p).length + first(p).height,
  ];
  return keys.map((key) => [...task.loose].sort((a, b) => key(b) - key(a) || a - b));
}

/** A changed copy: two places swapped, one piece moved, or a run turned round. */
function changeOrder(order: number[], random: Random, kind: (p: number) => string): number[] {
  const next = [...order];
  const n = next.length;
  for (let tries = 0; tries < 20; tries++) {
    const i = drawInteger(random, n);
    const near = random() < 0.5;
    const j = near ? Math.min(n - 1, i + 1 + drawInteger(random, Math.min(8, n))) : drawInteger(random, n);
    if (i === j || kind(next[i]) === kind(next[j])) continue;
    if (random() < 0.6) [next[i], next[j]] = [next[j], next[i]];
    else next.splice(j, 0, ...next.splice(i, 1));
    if (random() < 0.7) break;
  }
  return next;
}

/** The best layout found, compacted, with how many layouts were built. Null only where it was stopped before the first. */
export function searchOrders(task: NestTask, limits: SearchLimits): { layout: Layout; steps: number } | null {
  const random = buildRandom(limits.seed);
  const kind = (p: number) => task.shapes[p][0].key;
  let best: Layout | null = null;
  let bestOrder: number[] = [];
  let bestRule: TurnRule = RULES[0];
  const sorted = sortedOrders(task);
  const starts = sorted.flatMap((order) => RULES.map((rule) => ({ order, rule })));
  let steps = 0;
  for (; steps < Math.max(1, limits.steps); steps++) {
    if (limits.stop()) break;
    const { order, rule }: { order: number[]; rule: TurnRule } =
      steps < starts.length
        ? starts[steps]
        : {
            order: task.loose.length > 1 ? changeOrder(bestOrder, random, kind) : bestOrder,
            rule: random() < 0.1 ? RULES[drawInteger(random, RULES.length)] : bestRule,
          };
    if (steps >= starts.length && task.loose.length < 2) break;
    const layout = layPieces(task, order, rule, best?.cost ?? null);
    if (layout && (!best || !isLess(best.cost, layout.cost))) {
      best = layout;
      bestOrder = order;
      bestRule = rule;
    }
    limits.onProgress?.((steps + 1) / limits.steps, `nest ${steps + 1} of ${limits.steps}`);
  }
  if (!best) return null;
  compactInPlace(best, task.areas, 12);
  return { layout: best, steps };
}
