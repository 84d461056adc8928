// The tensioning as a run of steps: what moves at each, and which force each adjuster is last known to have. Pure.
import type { FactsMove, FactsTensioning } from "../../core/records/rig.ts";

export interface RigStep {
  step: number;
  stage: string;
  /** Last step of its stage: everything is read and compared before going on. */
  hold: boolean;
  moves: FactsMove[];
  /** Expected force by adjuster after the step, kN: of those that moved, and at a stage's end of all. */
  forces: Record<string, number>;
  greatest: FactsMove["greatest"] | null;
}

/** Steps in order. */
export function listSteps(tensioning: FactsTensioning): RigStep[] {
  const steps: RigStep[] = [];
  const known: Record<string, number> = {};
  for (const stage of tensioning.stages) {
    const numbers = [...new Set(stage.moves.map((m) => m.step))].sort((a, b) => a - b);
    numbers.forEach((step, i) => {
      const moves = stage.moves.filter((m) => m.step === step);
      const hold = i === numbers.length - 1;
      for (const m of moves) known[m.adjuster] = m.expect;
      if (hold) Object.assign(known, stage.forces);
      const greatest = moves.reduce<FactsMove["greatest"] | null>(
        (g, m) => (g === null || m.greatest.share > g.share ? m.greatest : g),
        null,
      );
      steps.push({ step, stage: stage.name, hold, moves, forces: { ...known }, greatest });
    });
  }
  return steps;
}
