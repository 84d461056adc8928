// The rig station: cables, the finished state in balance, stages, moves, temperature. Does not read readings back (site).
import type { Check, Finding, StationContext, StationResult } from "../problem.ts";
import type { FactsAsBuilt, FactsCable, FactsRig, FactsStage, FactsTensioning } from "../records/rig.ts";
import { measureLink } from "../structure/elements.ts";
import { createEquilibriumSolver, type EquilibriumSolver } from "../structure/equilibrium.ts";
import { measureAsBuilt } from "./asBuilt.ts";
import { buildRig, type Rig } from "./buildRig.ts";
import { buildCableLine } from "./cableSchedule.ts";
import { playStage, roundLengths } from "./planMoves.ts";
import { findTargetMisses, reviewRig } from "./reviewRig.ts";
import type { RigInput } from "./rigInput.ts";
import { checkLengths, type RigState, solveLengths, solveState } from "./solveLengths.ts";
import { buildTemperatureTable } from "./temperatureTable.ts";

/** Output of the rig station; without adjusters only the cables. */
export interface RigResult {
  cables: FactsCable[];
  rig: FactsRig | null;
  asBuilt: FactsAsBuilt | null;
  tensioning: FactsTensioning | null;
}

/** Way an adjuster is let out beyond its first stage so that the cloth can be hung slack, m (common practice). */
export const hangingSlack = 0.04;

/**
 * Works the rig out.
 * @throws PlanError as buildRig; cancelled
 */
export function runRig(input: RigInput, context: StationContext): StationResult<RigResult> {
  const rig = buildRig(input);
  const findings: Finding[] = [];
  const checks: Check[] = [];
  const lines = rig.cables.map((c) => {
    const spec = c.edge === null ? undefined : input.cables[c.edge];
    return buildCableLine(
      c,
      input.layout,
      rig.structure.xyz,
      { type: spec?.type ?? null, prestretched: spec?.prestretched ?? true },
      input.rig.temperature,
    );
  });
  if (rig.adjusters.length === 0) {
    findings.push({
      code: "rig-none",
      level: "note",
      station: "rig",
      where: [],
      value: 0,
      limit: null,
      text: "the form has no adjuster: it is clamped all round, or no anchor stands alone. There is nothing to tension move by move, so no rig and no tensioning schedule are written",
      remedy: "name adjusters in the job where turnbuckles or jacks stand",
      basis: "rules of the job file",
    });
    return { output: { cables: lines, rig: null, asBuilt: null, tensioning: null }, findings, checks };
  }
  const solver = createEquilibriumSolver(rig.structure);
  const cancelled = context.cancelled ? { cancelled: context.cancelled } : {};
  context.onProgress?.(0.05, "finished state");
  const first = solveState(rig, solver, { x: rig.structure.xyz, L0: rig.L0 }, context);
  const targets = rig.adjusters.map((a) => a.target);
  const geometry = rig.adjusters.map((a) => rig.L0[a.link]);
  const exact = solveLengths(rig, solver, first, targets, geometry, cancelled);
  checks.push(checkLengths("finished", exact.off));
  const stages = solveStages(input, rig, solver, exact, { checks, context });
  const finished = stages[stages.length - 1].end;
  const written: FactsStage[] = [];
  let step = 1;
  stages.forEach((stage, k) => {
    context.onProgress?.(0.5 + (0.4 * k) / stages.length, `moves of stage ${stage.name}`);
    const played = playStage(rig, solver, input.rig, stage, step);
    step = Math.max(step, ...played.stage.moves.map((m) => m.step + 1));
    written.push(played.stage);
  });
  context.onProgress?.(0.92, "temperature table");
  const alpha = {
    cables: rig.cables.map((c) => (c.edge === null ? undefined : input.cables[c.edge])?.type.alpha ?? 12e-6),
    cloth: input.fabric.alpha,
  };
  const tensioning: FactsTensioning = {
    referenceTemperature: input.rig.temperature,
    stages: written,
    temperatureTable: buildTemperatureTable(rig, finished, alpha, input.rig.temperature),
    readingError: input.rig.readingError,
    limit: input.rig.limit,
    issuable: input.rig.defaults.length === 0,
  };
  const asBuilt = measureAsBuilt(rig, finished);
  const review = reviewRig(input, rig, { stages: written, finished, asBuilt, singular: exact.singular });
  findings.push(...findTargetMisses(rig, exact), ...review.findings);
  checks.push(...review.checks);
  return { output: { cables: lines, rig: writeRig(rig, finished), asBuilt, tensioning }, findings, checks };
}

interface Stage {
  name: string;
  fraction: number;
  begin: RigState;
  end: RigState;
  /** Begins with slack cloth. */
  slack: boolean;
}

/** Stage ends on whole notches from the hanging lengths, and the states between them. */
function solveStages(
  input: RigInput,
  rig: Rig,
  solver: EquilibriumSolver,
  exact: RigState,
  out: { checks: Check[]; context: StationContext },
): Stage[] {
  const fractions = input.rig.stages;
  const home = rig.adjusters.map((a) => exact.L0[a.link]);
  const targets = rig.adjusters.map((a) => a.target);
  const cancelled = out.context.cancelled ? { cancelled: out.context.cancelled } : {};
  // downwards from the finished state, where everything is taut
  const ends: RigState[] = new Array(fractions.length);
  let near: RigState = exact;
  for (let k = fractions.length - 1; k >= 0; k--) {
    out.context.onProgress?.(
      0.1 + (0.4 * (fractions.length - 1 - k)) / fractions.length,
      `stage ${nameStage(fractions[k])}`,
    );
    if (fractions[k] === 1) ends[k] = exact;
    else {
      const solved = solveLengths(
        rig,
        solver,
        near,
        targets.map((t) => t * fractions[k]),
        home,
        cancelled,
      );
      out.checks.push(checkLengths(nameStage(fractions[k]), solved.off));
      ends[k] = solved;
    }
    near = ends[k];
  }
  const start = hangingLengths(rig, ends[0]);
  const rounded: RigState[] = [];
  let before = start;
  ends.forEach((end, k) => {
    const to = roundLengths(rig, solver, end, before);
    const L0 = end.L0.slice();
    rig.adjusters.forEach((a, i) => {
      L0[a.link] = to[i];
    });
    rounded[k] = solveState(rig, solver, { x: end.x, L0 }, out.context);
    before = to;
  });
  const hung = rounded[0].L0.slice();
  rig.adjusters.forEach((a, i) => {
    hung[a.link] = start[i];
  });
  const slack = solveState(rig, solver, { x: rounded[0].x, L0: hung }, { slack: true, ...out.context });
  return rounded.map((end, k) => ({
    name: nameStage(fractions[k]),
    fraction: fractions[k],
    begin: k === 0 ? slack : rounded[k - 1],
    end,
    slack: k === 0,
  }));
}

function nameStage(fraction: number): string {
  return `${Math.round(1000 * fraction) / 10} %`;
}

/** Lengths to hang the cloth at: let out beyond the first stage, to the whole millimetre a tape sets, never past the longest. */
function hangingLengths(rig: Rig, firstStage: RigState): number[] {
  return rig.adjusters.map((a) => {
    const end = firstStage.L0[a.link];
    const longest = a.turnbuckle.longest / 1000;
    const wish = Math.ceil(1000 * (end + hangingSlack)) / 1000;
    return Math.max(Math.min(wish, longest), end);
  });
}

function writeRig(rig: Rig, finished: RigState): FactsRig {
  const { structure: s } = rig;
  const nodes: FactsRig["nodes"] = [];
  const fixed: number[] = [];
  for (let v = 0; v < finished.x.length / 3; v++) {
    nodes.push([finished.x[3 * v], finished.x[3 * v + 1], finished.x[3 * v + 2]]);
    if (s.held[3 * v]) fixed.push(v);
  }
  return {
    nodes,
    fixed,
    cloth: rig.panelOf.map((panel, t) => ({
      nodes: [s.tri[3 * t], s.tri[3 * t + 1], s.tri[3 * t + 2]],
      flat: rig.flat[t],
      panel,
    })),
    cables: rig.cables.map((c) => ({
      id: c.id,
      nodes: c.nodes,
      EA: c.EA,
      slackLengths: [...finished.L0.subarray(c.firstLink, c.firstLink + c.nodes.length - 1)],
    })),
    struts: rig.struts.map((q) => ({ id: q.id, nodes: q.nodes, EA: q.EA, slackLength: finished.L0[q.link] })),
    adjusters: rig.adjusters.map((a) => ({
      id: a.id,
      nodes: a.nodes,
      EA: a.EA,
      slackLength: finished.L0[a.link],
      pinLength: measureLink(s, finished.x, finished.L0, a.link).length,
      target: a.target,
      capacity: a.turnbuckle.capacity,
      range: { shortest: a.turnbuckle.shortest / 1000, longest: a.turnbuckle.longest / 1000 },
      perTurn: a.turnbuckle.perTurn,
      anchor: a.anchor,
      turnbuckle: a.turnbuckle.id,
    })),
  };
}
