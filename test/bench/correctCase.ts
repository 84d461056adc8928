// How well corrections do: seeded sites on rigs with three or more independent tension modes, judged against the true state.
import { buildRandom } from "../../src/core/numeric/random.ts";
import { countModes } from "../../src/core/rig/stages/solveLengths.ts";
import { openSite, playSites, type SiteScore } from "../rig/madeSite.ts";
import { makeRandomRig, type RigKind } from "../rig/randomRigs.ts";

/** Rigs and seeds that no setting was chosen on; tried while settings were chosen: cable-ends 3, 4, 5 and 9. */
const rigs: [RigKind, number][] = [
  ["cable-ends", 2],
  ["cable-ends", 7],
  ["cable-ends", 15],
  ["cable-ends", 21],
  ["mast-ends", 1],
  ["mast-ends", 8],
];

interface CorrectFigures extends SiteScore {
  rig: string;
  adjusters: number;
  modes: number;
}

/** Plays N states on each rig: how many stand within all windows after one round, after two, and with each set to its target once. */
export function benchCorrect(states: number): { rigs: CorrectFigures[] } {
  return {
    rigs: rigs.map(([kind, seed]) => {
      const site = openSite(makeRandomRig(seed, kind).input);
      const score = playSites(site, states, buildRandom(5000 + seed));
      const { length: adjusters } = site.rig.adjusters;
      return { rig: `${kind} ${seed}`, adjusters, modes: countModes(site.solved.singular), ...score };
    }),
  };
}
