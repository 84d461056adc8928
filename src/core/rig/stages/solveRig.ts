// The rig solved: finished state, stages with their lengths, tension modes. Plays no moves.
import type { Check, StationContext } from "../../problem.ts";
import { createEquilibriumSolver, type EquilibriumSolver } from "../../structure/equilibrium.ts";
import type { Rig } from "../build/buildRig.ts";
import type { Stage } from "../moves/planMoves.ts";
import type { Expansion } from "../otherwise/warmRig.ts";
import type { RigInput } from "../rigInput.ts";
import { checkLengths, measureModes, type RigState, solveLengths, solveState } from "./solveLengths.ts";
import { solveStages } from "./solveStages.ts";

/** A rig with its states. */
export interface SolvedRig {
  solver: EquilibriumSolver;
  /** Lengths that give the targets, before moves are rounded. */
  exact: RigState & { off: number };
  stages: Stage[];
  /** End of the last stage, on whole notches. */
  finished: RigState;
  /** Singular values of the influence matrix at the finished state, kN/mm, greatest first. */
  singular: number[];
  expansion: Expansion;
  checks: Check[];
}

/**
 * Solves the finished state and the stages of a rig with adjusters.
 * @throws PlanError cancelled, equilibrium-tangent
 */
export function solveRig(input: RigInput, rig: Rig, context: StationContext): SolvedRig {
  const solver = createEquilibriumSolver(rig.structure);
  const cancelled = context.cancelled ? { cancelled: context.cancelled } : {};
  context.onProgress?.(0.05, "finished state");
  const first = solveState(rig, solver, { x: rig.structure.xyz, L0: rig.L0 }, context);
  const targets = rig.adjusters.map((a) => a.target);
  const geometry = rig.adjusters.map((a) => rig.L0[a.link]);
  const exact = solveLengths(rig, solver, first, targets, geometry, cancelled);
  const checks = [checkLengths("finished", exact.off)];
  const stages = solveStages(input, rig, solver, exact, { checks, context });
  const last = stages[stages.length - 1];
  const expansion = {
    cables: rig.cables.map((c) => (c.edge === null ? undefined : input.cables[c.edge])?.type.alpha ?? 12e-6),
    cloth: input.fabric.alpha,
    frame: input.rig.frameAlpha,
  };
  const singular = measureModes(rig, last.linear.influence);
  return { solver, exact, stages, finished: last.end, singular, expansion, checks };
}
