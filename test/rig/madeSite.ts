// A site for tests and bench: a solved rig, adjusters that are off, what a crew reads of them, and what one round of correction does.
import type { Reading } from "../../src/core/records/rig.ts";
import { buildRig, type Rig } from "../../src/core/rig/build/buildRig.ts";
import { correctSolved, type EarlierRound } from "../../src/core/rig/correct/correctRig.ts";
import { turnUntil } from "../../src/core/rig/moves/playByForce.ts";
import type { RigInput } from "../../src/core/rig/rigInput.ts";
import { readAdjusters } from "../../src/core/rig/stages/readState.ts";
import { type RigState, turnTo } from "../../src/core/rig/stages/solveLengths.ts";
import { type SolvedRig, solveRig } from "../../src/core/rig/stages/solveRig.ts";

export interface Site {
  input: RigInput;
  rig: Rig;
  solved: SolvedRig;
}

/** Windows a correction is judged by: forces within a tenth, corners within 5 mm. */
const windows = { force: 0.1, corner: 0.005 };

/** A rig with M16 turnbuckles (4 mm a turn), read with a gauge good to 3 %. */
export function openSite(plain: RigInput): Site {
  const adjusters = plain.rig.adjusters.map((a) => ({ ...a, turnbuckle: { ...a.turnbuckle, perTurn: 4 } }));
  const input = { ...plain, rig: { ...plain.rig, readingError: 0.03, adjusters } };
  const rig = buildRig(input);
  return { input, rig, solved: solveRig(input, rig, {}) };
}

export const blank = { time: "", by: "", temperature: null, force: null, vibration: null, at: null };

/** How a crew reads: forces with normal noise of a share, corners within a survey's error each way (m); null: not surveyed. */
export interface Noise {
  random: () => number;
  force: number;
  place: number | null;
}

/** What a crew reads of a state. */
export function readSite({ rig }: Site, truth: RigState, noise: Noise): Reading[] {
  const { random } = noise;
  const normal = () => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());
  const forces = readAdjusters(rig, truth);
  return rig.adjusters.flatMap((a, i): Reading[] => {
    const force = Math.max(0, forces[i] * (1 + noise.force * normal()));
    const place = noise.place;
    const out: Reading[] = [{ ...blank, row: 2 + 2 * i, id: a.id, force }];
    if (place === null) return out;
    const at = [0, 1, 2].map((k) => truth.x[3 * a.nodes[0] + k] + place * (2 * random() - 1));
    return [...out, { ...blank, row: 3 + 2 * i, id: a.id, at: at as [number, number, number] }];
  });
}

/** Adjusters let out or taken in at random, each by up to `spread`, m. */
export function disturb({ rig, solved }: Site, spread: number, random: () => number): RigState {
  const lengths = rig.adjusters.map((a) => solved.finished.L0[a.link] + spread * (2 * random() - 1));
  return turnTo(rig, solved.solver, solved.finished, lengths);
}

/** Greatest share of its window by which a true force or corner is off: 1 or less is good. */
export function judgeSite({ rig, solved }: Site, state: RigState): number {
  const forces = readAdjusters(rig, state);
  return Math.max(
    ...rig.adjusters.map((a, i) => {
      const v = 3 * a.nodes[0];
      const way = Math.hypot(...[0, 1, 2].map((k) => state.x[v + k] - solved.exact.x[v + k]));
      return Math.max(Math.abs(forces[i] / a.target - 1) / windows.force, way / windows.corner);
    }),
  );
}

/** One round: read, corrected, turned. */
export function correctSite(site: Site, truth: RigState, readings: Reading[], earlier: EarlierRound[] = []) {
  const { correction, findings } = correctSolved(site.input, site.rig, site.solved, { readings, earlier });
  const change = site.rig.adjusters.map((a) =>
    correction.moves.filter((m) => m.adjuster === a.id).reduce((sum, m) => sum - m.travel / 1000, 0),
  );
  const lengths = site.rig.adjusters.map((a, i) => truth.L0[a.link] + change[i]);
  const travel = Object.fromEntries(site.rig.adjusters.map((a, i) => [a.id, -1000 * change[i]]));
  return {
    correction,
    findings,
    change,
    round: { readings, travel },
    next: turnTo(site.rig, site.solved.solver, truth, lengths),
  };
}

/** The plain way: every adjuster once, turned until its own true force is its target. */
export function setOnce({ rig, solved }: Site, truth: RigState): RigState {
  let state = truth;
  rig.adjusters.forEach((a, i) => {
    state = turnUntil(rig, solved.solver, state, { i, wanted: a.target }, {});
  });
  return state;
}

/** States tried, and how many of them stand within all windows after one and two rounds, and after setting each once. */
export interface SiteScore {
  states: number;
  one: number;
  two: number;
  once: number;
}

/** Plays `states` seeded sites: off by up to 8 mm, gauge noise 3 %, survey 3 mm. */
export function playSites(site: Site, states: number, random: () => number): SiteScore {
  const score: SiteScore = { states, one: 0, two: 0, once: 0 };
  for (let c = 0; c < states; c++) {
    const truth = disturb(site, 0.008, random);
    const noise = { random, force: 0.03, place: 0.003 };
    const first = correctSite(site, truth, readSite(site, truth, noise));
    if (judgeSite(site, first.next) <= 1) score.one++;
    const second = correctSite(site, first.next, readSite(site, first.next, noise), [first.round]);
    if (judgeSite(site, second.next) <= 1) score.two++;
    if (judgeSite(site, setOnce(site, truth)) <= 1) score.once++;
  }
  return score;
}
