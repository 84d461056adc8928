// One pass of settling: from a state of the form to the next, far from balance and near it.
import type { Surface } from "../../surface/surface.ts";
import { stepForceDensity } from "./naturalForceDensity.ts";
import { measureSettleBalance } from "./settleBalance.ts";
import { type Iteration, measureEnergy, measureState } from "./settleState.ts";

/** A step under unequal stress far from balance is shortened when it leaves the form this much further out. */
const STRAYED = 2;

/** Halvings of a step that gains energy. */
const HALVINGS = 8;

/** Steps near balance become DAMPING times shorter, down to LEAST_SHARE, where this share of the force comes back turned round. */
const OVERSHOT = 0.5;
const DAMPING = 0.7;
const LEAST_SHARE = 0.3;

/** Shortens the steps where the last one overshot: what counts came out turned round and hardly smaller. */
function dampInPlace(it: Iteration, kept: Float64Array<ArrayBuffer>): void {
  const before = it.before;
  it.before = kept;
  if (before === null) return;
  let turned = 0;
  let square = 0;
  for (let i = 0; i < kept.length; i++) {
    turned -= kept[i] * before[i];
    square += before[i] * before[i];
  }
  if (turned > OVERSHOT * square) it.share = Math.max(LEAST_SHARE, DAMPING * it.share);
}

/**
 * Next state while far from balance: all of every vertex moves. Where the stress is unequal it shapes the form, and the equal
 * one spreads the vertices within it: unequal stress would drive them along without end.
 */
export function takeFarStep(it: Iteration, now: Surface): Surface {
  const even = measureState(it, now, true);
  if (it.even) {
    const to = stepForceDensity(it.system, now, even);
    return shortenStep(now, { xyz: to, tri: now.tri }, 1, gains(it, now));
  }
  const { fixed, cables, system } = it;
  const unequal = measureState(it, now, false);
  const { force: spread } = measureSettleBalance(now, fixed, cables, system.lines, even);
  const { force, keepInPlace } = measureSettleBalance(now, fixed, cables, system.lines, unequal);
  const load = spread.map((f, i) => f - force[i]);
  const across = load.slice();
  const kept = force.slice();
  keepInPlace(across);
  keepInPlace(kept);
  for (let i = 0; i < load.length; i++) load[i] -= across[i];
  const to = stepForceDensity(system, now, unequal, load);
  return shortenStep(now, { xyz: to, tri: now.tri }, 1, strays(it, kept, STRAYED));
}

/** Next state near balance: forces within the surface and along cables are held by the opposite load. */
export function takeNearStep(it: Iteration, now: Surface): Surface {
  const densities = measureState(it, now, it.even);
  const balance = measureSettleBalance(now, it.fixed, it.cables, it.system.lines, densities);
  const kept = balance.force.slice();
  balance.keepInPlace(kept);
  dampInPlace(it, kept);
  const load = balance.force.map((f, i) => kept[i] - f);
  const move = stepForceDensity(it.system, now, densities, load).map((value, i) => value - now.xyz[i]);
  balance.keepInPlace(move);
  const to = { xyz: now.xyz.map((value, i) => value + move[i]), tri: now.tri };
  return shortenStep(now, to, it.share, it.even ? gains(it, now) : strays(it, kept, STRAYED));
}

/** Whether a state is `times` further out of balance than the one before. */
function strays(it: Iteration, before: Float64Array<ArrayBuffer>, times: number): (next: Surface) => boolean {
  const size = (f: Float64Array<ArrayBuffer>) => f.reduce((s, c) => s + c * c, 0);
  const bound = times * times * size(before);
  return (next) => {
    const balance = measureSettleBalance(next, it.fixed, it.cables, it.system.lines, measureState(it, next, it.even));
    const kept = balance.force.slice();
    balance.keepInPlace(kept);
    return size(kept) > bound;
  };
}

/** Whether a state has more energy than the one before, beyond rounding. */
function gains(it: Iteration, now: Surface): (next: Surface) => boolean {
  const bound = measureEnergy(it, now) * (1 + 1e-12);
  return (next) => measureEnergy(it, next) > bound;
}

/** Part of the way from one state to another, halved while it is refused. */
function shortenStep(now: Surface, to: Surface, first: number, refuses: (next: Surface) => boolean): Surface {
  let next = to;
  for (let halving = 0, share = first; halving <= HALVINGS; halving++, share /= 2) {
    if (share < 1) next = { xyz: now.xyz.map((value, i) => value + share * (to.xyz[i] - value)), tri: now.tri };
    if (!refuses(next)) break;
  }
  return next;
}
