// A share of the relaxed search, as a plain record that can cross to another thread: the same order gives the same answer
// wherever it is worked. Does not: start threads.
import { isDone, openSearch, tryShorter } from "./shortenStrip.ts";
import type { StripState, StripTask } from "./strip.ts";

/** Places priced in one step: a millisecond or two. */
export const PLACES_A_STEP = 2000;

/** Steps of search from a layout. */
export interface ShareOrder {
  kind: "shorten strip";
  task: StripTask;
  from: StripState;
  /** How far what cannot move reaches, and no strip need be shorter. */
  fixed: number;
  seed: number;
  /** Number of the share among those of its round. */
  share: number;
  /** Steps done before these, how many to do, and of how many in all. */
  done: number;
  steps: number;
  of: number;
}

/** Seeds of rounds lie this far apart, those of shares by one. */
const SPREAD = 7919;

/** The shortest layout found; what it began from where none is shorter. */
export function workShare(order: ShareOrder, stop: () => boolean): StripState {
  const search = openSearch(order.task, order.from, {
    seed: order.seed + order.share + SPREAD * order.done,
    share: order.share,
    fixed: order.fixed,
  });
  const { strip } = search;
  const spent = () => strip.priced >= order.steps * PLACES_A_STEP;
  // An attempt that prices nothing (all is apart at once) still counts, so that the work ends.
  for (let tries = 0; !spent() && tries < order.steps * PLACES_A_STEP && !isDone(search) && !stop(); tries++)
    tryShorter(search, (order.done + strip.priced / PLACES_A_STEP) / order.of, () => spent() || stop());
  return search.best;
}
