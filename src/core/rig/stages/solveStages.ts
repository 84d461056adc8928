// The stages: lengths that give each share of the targets, rounded to whole notches from the hanging lengths on, and solved again.
import type { Check, StationContext } from "../../problem.ts";
import type { EquilibriumSolver } from "../../structure/equilibrium.ts";
import type { Rig } from "../build/buildRig.ts";
import { linearise, measureNotch, readMembers, roundLengths, type Stage } from "../moves/planMoves.ts";
import type { RigInput } from "../rigInput.ts";
import { listMembers } from "./readState.ts";
import { checkLengths, type RigState, solveLengths, turnTo } from "./solveLengths.ts";

/** Way an adjuster is let out beyond its first stage so that the cloth can be hung slack, m (common practice). */
export const hangingSlack = 0.04;

/** Name of a stage on the papers: its share in per cent. */
export function nameStage(fraction: number): string {
  return `${Math.round(1000 * fraction) / 10} %`;
}

/** Whole millimetres among which a hanging length is chosen. */
const hangingChoices = 6;

/**
 * Lengths to hang the cloth at: let out beyond the first stage, to the whole millimetre a tape sets, never past the longest; of
 * the next few millimetres the one from which whole notches come nearest the finished length.
 */
function hangingLengths(rig: Rig, firstStage: RigState, finished: RigState): number[] {
  return rig.adjusters.map((a, i) => {
    const end = firstStage.L0[a.link];
    const longest = a.turnbuckle.longest / 1000;
    const notch = measureNotch(rig, i);
    const least = Math.ceil(1000 * (end + hangingSlack));
    let best = least / 1000;
    let nearest = Infinity;
    for (let mm = least; mm < least + hangingChoices; mm++) {
      const notches = (mm / 1000 - finished.L0[a.link]) / notch;
      const off = Math.abs(notches - Math.round(notches));
      if (off > nearest - 1e-6 || mm / 1000 > longest) continue;
      best = mm / 1000;
      nearest = off;
    }
    return Math.max(Math.min(best, longest), end);
  });
}

/**
 * Stage ends on whole notches from the hanging lengths. Exact lengths are found downwards from the finished state, where
 * everything is taut. The state the cloth hangs in is not solved: it is slack, and a slack sail has no one place.
 */
export function solveStages(
  input: RigInput,
  rig: Rig,
  solver: EquilibriumSolver,
  exact: RigState,
  out: { checks: Check[]; context: StationContext },
): Stage[] {
  const fractions = input.rig.stages;
  const { context } = out;
  const home = rig.adjusters.map((a) => exact.L0[a.link]);
  const targets = rig.adjusters.map((a) => a.target);
  const cancelled = context.cancelled ? { cancelled: context.cancelled } : {};
  const ends: { state: RigState; influence: Float64Array<ArrayBuffer> }[] = new Array(fractions.length);
  let near: RigState = exact;
  for (let k = fractions.length - 1; k >= 0; k--) {
    const name = nameStage(fractions[k]);
    context.onProgress?.(0.1 + (0.4 * (fractions.length - 1 - k)) / fractions.length, `stage ${name}`);
    if (fractions[k] < 1) {
      const wanted = targets.map((t) => t * fractions[k]);
      const solved = solveLengths(rig, solver, near, wanted, home, cancelled);
      out.checks.push(checkLengths(name, solved.off));
      near = solved;
    }
    ends[k] = { state: near, influence: linearise(rig, solver, near) };
  }
  const members = listMembers(rig);
  let from = hangingLengths(rig, ends[0].state, exact);
  let begin: RigState | null = null;
  return ends.map(({ state, influence }, k) => {
    const wanted = rig.adjusters.map((a) => state.L0[a.link]);
    // on the way what lies within the gauge's window need not be visited
    const to = roundLengths(rig, influence, wanted, from, fractions[k] === 1 ? 0 : input.rig.readingError);
    const end = turnTo(rig, solver, state, to, { ...context, sharp: fractions[k] === 1 });
    const linear = { from, to, members, forces: readMembers(rig, end), influence };
    const stage = { name: nameStage(fractions[k]), fraction: fractions[k], from, begin, end, linear };
    from = to;
    begin = end;
    return stage;
  });
}
