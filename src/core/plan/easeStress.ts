// Narrower strips where the cloth is curved so much that the stress as patterned is too far off: as many as it takes and no more,
// down to a least width. Region by region, each judged by its worst panel. Source: own; the error of a strip on constant
// curvature grows with the square of its width, less where the strip is short (shear lag), so the power is read off the tries.
import { PlanError } from "../problem.ts";
import type { CutPanel } from "../records/flatPanel.ts";
import type { LayoutEstimate } from "../records/stripLayout.ts";
import type { SeamOptions } from "../seams/runSeams.ts";
import { isTurned, measureExtent } from "./clothRoom.ts";
import type { Fitted, RunBoth } from "./fitted.ts";

/** Stress error of a panel that is let pass: rms as a share of the target, and share of the area compressed (issue of seams and panels, 7). */
const MOST_RMS = 0.25;
const MOST_COMPRESSED = 0.02;
/** No strip is made narrower than this for the sake of the stress where the job states no least width, m. own: below it seams and their double cloth rule the stiffness. */
const LEAST_WIDTH = 0.75;
/** Layouts tried at most. */
const ROUNDS = 6;
/** Power of the width that the error is taken to grow with at first, and the least that makes narrower strips worth it. */
const FIRST_POWER = 1.25;
const LEAST_POWER = 0.3;
/** Where the least width does not help either: at most this times the strips that fit, if the error falls to this share. own */
const MOST_TIMES = 2;
const WORTH = 0.7;

/** A number of strips and the error of the worst panel over what is let pass. */
interface Try {
  count: number;
  error: number;
}

interface RegionState {
  region: string;
  way: string;
  tries: Try[];
  /** Most strips that keep the least width. */
  most: number;
  /** Number that stands; null while it is looked for. */
  chosen: number | null;
}

/** Stress error of a panel over what is let pass: above 1 it is out of bounds. */
export function measureStressExcess(panel: CutPanel): number {
  let worst = 0;
  for (const way of ["warp", "weft"] as const)
    worst = Math.max(worst, panel.stress[way].rmsError / (MOST_RMS * Math.max(Math.abs(panel.target[way]), 1e-9)));
  const { compressedShare } = panel.stress;
  return compressedShare > MOST_COMPRESSED ? Math.max(worst, 1 + Math.min(1, 5 * compressedShare)) : worst;
}

function listPanels(estimate: LayoutEstimate, fitted: Fitted): CutPanel[] {
  const ids = new Set(estimate.strips.flatMap((strip) => strip.panels));
  return fitted.panels.output.filter((p) => ids.has(p.id) && !isTurned(p));
}

function worstOf(estimate: LayoutEstimate, fitted: Fitted): number {
  return Math.max(0, ...listPanels(estimate, fitted).map(measureStressExcess));
}

/** The next number of strips to try, or null where the search of this region is over. */
export function nextCount(tries: readonly Try[], most: number): number | null {
  const sorted = [...tries].sort((a, b) => a.count - b.count);
  const good = sorted.find((t) => t.error <= 1);
  const bad = sorted.filter((t) => t.error > 1 && (!good || t.count < good.count));
  const last = bad[bad.length - 1];
  if (!last) return null;
  if (good) {
    if (good.count - last.count <= Math.max(1, Math.floor(0.04 * good.count))) return null;
    const power = Math.log(last.error / good.error) / Math.log(good.count / last.count);
    const count = Math.ceil(last.count * (last.error / 0.98) ** (1 / power));
    return Math.min(Math.max(count, last.count + 1), good.count - 1);
  }
  let power = FIRST_POWER;
  if (bad.length > 1) {
    const before = bad[bad.length - 2];
    power = Math.min(2, Math.log(before.error / last.error) / Math.log(last.count / before.count));
    if (power < LEAST_POWER) return null;
  }
  const count = Math.min(Math.max(Math.ceil(last.count * last.error ** (1 / power)), last.count + 1), most);
  return count > last.count ? count : null;
}

/** What stands where no number within the least width brings the error into bounds; or one more number to try. */
function settleBad(tries: readonly Try[], most: number): { stands: number } | { next: number } {
  const [first] = tries;
  const twice = Math.min(MOST_TIMES * first.count, most);
  if (twice > first.count && tries.length > 1 && !tries.some((t) => t.count === twice)) return { next: twice };
  const there = tries.find((t) => t.count === twice);
  return { stands: there && there.error <= WORTH * first.error ? twice : first.count };
}

function openStates(fitted: Fitted, least: number): RegionState[] {
  return (fitted.seams.output.estimates ?? []).flatMap((estimate): RegionState[] => {
    const error = worstOf(estimate, fitted);
    const count = estimate.strips.length;
    if (error <= 1) return [];
    const widths = listPanels(estimate, fitted).map((p) => measureExtent(p.net).width);
    const most = Math.max(count, Math.floor((count * Math.max(...widths)) / least));
    return [{ region: estimate.region, way: estimate.way, tries: [{ count, error }], most, chosen: null }];
  });
}

/** The number for the next layout; sets `chosen` where the search is over. */
function advanceInPlace(state: RegionState): number {
  if (state.chosen !== null) return state.chosen;
  const next = nextCount(state.tries, state.most);
  if (next !== null) return next;
  const good = state.tries.filter((t) => t.error <= 1).map((t) => t.count);
  if (good.length === 0) {
    const settled = settleBad(state.tries, state.most);
    if ("next" in settled) return settled.next;
    state.chosen = settled.stands;
  } else state.chosen = Math.min(...good);
  return state.chosen;
}

/** Strips made narrower, what was asked of the seams station for them, and the words on it for the findings. */
export interface Eased {
  fitted: Fitted;
  options: SeamOptions;
  tell: (fitted: Fitted) => Fitted;
}

/** Lays regions out of bounds in narrower strips; `minWidth` is the least the job states, mm. */
export function easeStress(base: Fitted, options: SeamOptions, runBoth: RunBoth, minWidth: number | null): Eased {
  const least = minWidth === null ? LEAST_WIDTH : minWidth / 1000;
  const states = openStates(base, least);
  if (states.length === 0) return { fitted: base, options, tell: (f) => f };
  let fitted = base;
  let asked = options;
  let made = states.map((s) => s.tries[0].count).join();
  const runWith = (counts: readonly number[]) => {
    if (counts.join() === made) return;
    const forced = Object.fromEntries(states.map((s, i) => [s.region, { way: s.way, count: counts[i] }]));
    asked = { ...options, counts: forced };
    fitted = runBoth(asked);
    made = counts.join();
  };
  for (let round = 0; round < ROUNDS && states.some((s) => s.chosen === null); round++) {
    const counts = states.map(advanceInPlace);
    if (states.every((s) => s.chosen !== null)) break;
    try {
      runWith(counts);
    } catch (error) {
      if (!(error instanceof PlanError) || error.code === "cancelled") throw error;
      states.forEach((s, i) => {
        if (s.chosen === null) s.most = Math.min(s.most, counts[i] - 1);
      });
      made = "";
      continue;
    }
    for (const [i, s] of states.entries()) {
      const estimate = fitted.seams.output.estimates?.find((e) => e.region === s.region);
      if (!estimate || s.chosen !== null || s.tries.some((t) => t.count === counts[i])) continue;
      s.tries.push({ count: counts[i], error: worstOf(estimate, fitted) });
    }
  }
  const final = states.map((s) => s.chosen ?? Math.min(...s.tries.filter((t) => t.error <= 1).map((t) => t.count)));
  final.forEach((count, i) => {
    if (!Number.isFinite(count)) final[i] = states[i].tries[0].count;
  });
  if (final.every((count, i) => count === states[i].tries[0].count)) {
    fitted = base;
    asked = options;
  } else runWith(final);
  return { fitted, options: asked, tell: (f) => tellStress(f, states, final, least) };
}

/** The result with a word on every region that was tried in narrower strips. */
function tellStress(fitted: Fitted, states: readonly RegionState[], final: readonly number[], least: number): Fitted {
  const percent = (error: number) => `${(100 * MOST_RMS * error).toFixed(1).replace(/\.0$/, "")} %`;
  const { seams } = fitted;
  const findings = [...seams.findings];
  const words = new Map<string, string>();
  states.forEach((s, i) => {
    if (s.tries.length < 2) return;
    const [first] = s.tries;
    const stands = s.tries.find((t) => t.count === final[i]) ?? first;
    const tried = s.tries.map((t) => `${t.count} strips ${percent(t.error)}`).join(", ");
    const held = stands.error <= 1;
    if (held)
      words.set(
        s.region,
        ` ${first.count} fit the cloth; ${stands.count} keep the stress as patterned within ${percent(1)}.`,
      );
    findings.push({
      code: held ? "seam-stress-narrowed" : "seam-stress-left",
      level: held ? "note" : "caution",
      station: "seams",
      where: s.region,
      value: MOST_RMS * stands.error,
      limit: MOST_RMS,
      text: held
        ? `${s.region} has ${stands.count} strips in place of the ${first.count} that fit the cloth: the stress as patterned of its worst panel would be off by ${percent(first.error)} of the intended one, ${percent(1)} is let pass (tried: ${tried}).`
        : `${s.region}: the stress as patterned of its worst panel is off by ${percent(stands.error)} of the intended one, ${percent(1)} is let pass. Narrower strips were tried (${tried}) down to ${least} m; ${stands.count} stand.`,
      remedy: held
        ? "None needed; give seams.count to have another number."
        : "Lay the strips along the weaker curvature, give more prestress or a cloth that is less stiff, or accept the error and say so.",
      basis: "own argument: error of the stress as patterned, least width of a strip",
    });
  });
  const choices = seams.output.choices.map((c) => ({ ...c, why: c.why + (words.get(c.region) ?? "") }));
  return { ...fitted, seams: { ...seams, output: { ...seams.output, choices }, findings } };
}
