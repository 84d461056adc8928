// Takes the overlap out of a strip: pieces that overlap are moved one by one to cheaper places, pairs that stay in conflict
// grow dearer; small overlaps are pushed apart all together. Does not: shorten the strip (shortenStrip.ts).
// Source: guided local search (Egeblad et al. 2007; S. Umetani et al., ITOR 16, 2009); settings own, by trial.
import { drawInteger, type Random } from "../../numeric/random.ts";
import { movePiece } from "./movePiece.ts";
import { pushApart } from "./pushApart.ts";
import { copyState, measureOverlap, type Strip, type StripState, setState, visitOverlaps } from "./strip.ts";

/** How long to try. */
export interface Patience {
  /** Passes without a gain before the weights are taken back to the best state. */
  passes: number;
  /** How often that is done. */
  strikes: number;
}

/** Weights of the worst pair grow by this, of the least by the lower; pairs apart sink back towards 1. */
const GROW = 1.6;
const GROW_LEAST = 1.2;
const SINK = 0.95;
/** Pushing all apart is tried once the overlap left is below this share of a piece's size. */
const PUSH_BELOW = 0.05;
const PUSH_ROUNDS = 40;
/** A gain below this share does not count as one. */
const GAIN = 0.02;

/** Weights of pairs in conflict grow, the others sink back to 1. Returns the overlap. */
function reweighInPlace(strip: Strip, depth: Float64Array): number {
  const { n, weight } = strip;
  let most = 0;
  let sum = 0;
  depth.fill(0);
  visitOverlaps(strip, (i, j, d) => {
    depth[i * n + j] = d;
    sum += d;
    if (d > most) most = d;
  });
  for (let i = 0; i < n; i++)
    for (let j = i + 1; j < n; j++) {
      const k = i * n + j;
      const d = depth[k];
      const by = GROW_LEAST + (GROW - GROW_LEAST) * (d / most);
      const w = d > 0 ? weight[k] * by : Math.max(1, weight[k] * SINK);
      weight[k] = w;
      weight[j * n + i] = w;
    }
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

/** Moves each overlapping piece once, then pushes where little is left. Returns the overlap. */
function passInPlace(strip: Strip, least: number, depth: Float64Array, random: Random): number {
  for (const i of drawOrder(strip, random)) movePiece(strip, i, random);
  const total = reweighInPlace(strip, depth);
  const { none, size } = strip.task;
  if (total <= none || total > PUSH_BELOW * size || total > 1.5 * least) return total;
  const kept = copyState(strip);
  if (pushApart(strip, PUSH_ROUNDS)) return measureOverlap(strip);
  setState(strip, kept);
  return total;
}

/** True once nothing overlaps; else the strip is left at the least overlap found. */
export function separate(strip: Strip, patience: Patience, random: Random, stop: () => boolean): boolean {
  const { none } = strip.task;
  strip.weight.fill(1);
  const depth = new Float64Array(strip.n ** 2);
  let best: StripState = copyState(strip);
  let least = measureOverlap(strip);
  for (let strike = 0; strike < patience.strikes && least > none; strike++) {
    const began = least;
    for (let idle = 0; idle < patience.passes && least > none; idle++) {
      if (stop()) {
        setState(strip, best);
        return false;
      }
      const total = passInPlace(strip, least, depth, random);
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
