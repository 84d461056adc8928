// Takes the overlap out of a strip: pieces that overlap are moved one by one to cheaper places, pairs that stay in conflict
// grow dearer. Does not: shorten the strip (shortenStrip.ts).
// Source: guided local search (Egeblad et al. 2007; S. Umetani et al., ITOR 16, 2009); settings own, by trial.
import { drawInteger, type Random } from "../../numeric/random.ts";
import { movePiece } from "./movePiece.ts";
import { copyState, measureOverlap, type Strip, type StripState, setState, visitOverlaps } from "./strip.ts";

/** How long to try. */
export interface Patience {
  /** Passes without a gain before the weights are taken back to the best state. */
  passes: number;
  /** How often that is done. */
  strikes: number;
}

/** Weights of the worst pair grow by this, of the least by the lower; pairs apart sink back towards their least. */
const GROW = 2;
const GROW_LEAST = 1.2;
const SINK = 0.95;
/** A gain below this share does not count as one. */
const GAIN = 0.02;

/** Pairs dearer than their least, by their place in the weights, and a price for every place, zero between two passes. */
interface Raised {
  pairs: number[];
  price: Float64Array;
}

function setWeight(strip: Strip, pair: number, weight: number): void {
  const { n } = strip;
  strip.weight[pair] = weight;
  strip.weight[(pair % n) * n + Math.floor(pair / n)] = weight;
}

/** Weights of pairs in conflict grow, the others sink back. Returns the overlap. */
function reweighInPlace(strip: Strip, raised: Raised): number {
  const { n, weight, least } = strip;
  const { price } = raised;
  const hit: number[] = [];
  let most = 0;
  let sum = 0;
  visitOverlaps(strip, (i, j, d) => {
    hit.push(i * n + j);
    price[i * n + j] = d;
    sum += d;
    if (d > most) most = d;
  });
  const pairs = [...hit];
  for (const k of raised.pairs) {
    if (price[k] > 0) continue;
    setWeight(strip, k, Math.max(least[k], weight[k] * SINK));
    if (weight[k] > least[k]) pairs.push(k);
  }
  for (const k of hit) {
    setWeight(strip, k, weight[k] * (GROW_LEAST + (GROW - GROW_LEAST) * (price[k] / most)));
    price[k] = 0;
  }
  raised.pairs = pairs;
  return sum;
}

/** Pieces that overlap and may move, in random order. */
function drawOrder(strip: Strip, random: Random): number[] {
  const hit = new Uint8Array(strip.n);
  visitOverlaps(strip, (i, j) => {
    hit[i] = 1;
    hit[j] = 1;
  });
  const order: number[] = [];
  for (let i = 0; i < strip.task.movable; i++) if (hit[i]) order.push(i);
  for (let k = order.length - 1; k > 0; k--) {
    const o = drawInteger(random, k + 1);
    [order[k], order[o]] = [order[o], order[k]];
  }
  return order;
}

/** True once nothing overlaps; else the strip is left at the least overlap found. */
export function separate(strip: Strip, patience: Patience, random: Random, stop: () => boolean): boolean {
  const { none } = strip.task;
  strip.weight.set(strip.least);
  const raised: Raised = { pairs: [], price: new Float64Array(strip.n ** 2) };
  let best: StripState = copyState(strip);
  let least = measureOverlap(strip);
  for (let strike = 0; strike < patience.strikes && least > none; strike++) {
    const began = least;
    for (let idle = 0; idle < patience.passes && least > none; idle++) {
      if (stop()) {
        setState(strip, best);
        return false;
      }
      for (const i of drawOrder(strip, random)) movePiece(strip, i, random);
      const total = reweighInPlace(strip, raised);
      if (total >= least) continue;
      if (total < (1 - GAIN) * least) idle = -1;
      least = total;
      best = copyState(strip);
    }
    setState(strip, best);
    if (strike > 0 && least > (1 - GAIN) * began) break;
  }
  return least <= none;
}
