// The rig station: cables, the finished state in balance, stages, moves, temperature. Does not read readings back (site).
import type { Check, Finding, StationContext, StationResult } from "../problem.ts";
import type {
  FactsAsBuilt,
  FactsAssembled,
  FactsCable,
  FactsRig,
  FactsSensitivity,
  FactsTensioning,
} from "../records/rig.ts";
import { measureLink } from "../structure/elements.ts";
import { createEquilibriumSolver } from "../structure/equilibrium.ts";
import { buildRig, type Rig } from "./build/buildRig.ts";
import { findRingsOff } from "./build/placeRings.ts";
import { buildCableLine } from "./cables/cableSchedule.ts";
import { playPlan } from "./moves/playPlan.ts";
import { measureSensitivity } from "./otherwise/sensitivity.ts";
import { buildTemperatureTable } from "./otherwise/temperatureTable.ts";
import { measureAsBuilt } from "./review/asBuilt.ts";
import { reviewBuilt } from "./review/reviewBuilt.ts";
import { reviewLimits, reviewPulls } from "./review/reviewLimits.ts";
import { findTargetMisses, reviewRig, roundedLimit } from "./review/reviewRig.ts";
import { reviewShift } from "./review/reviewShift.ts";
import { reviewSlackCloth, reviewTravelAlone } from "./review/reviewSite.ts";
import { reviewLean, reviewNotches, reviewRest } from "./review/reviewSteps.ts";
import type { RigInput } from "./rigInput.ts";
import { countModes, type RigState, solveState } from "./stages/solveLengths.ts";
import { solveRig } from "./stages/solveRig.ts";

/** Output of the rig station; without adjusters only the cables and the roof as built. */
export interface RigResult {
  cables: FactsCable[];
  rig: FactsRig | null;
  assembled: FactsAssembled | null;
  asBuilt: FactsAsBuilt | null;
  tensioning: FactsTensioning | null;
  sensitivity: FactsSensitivity[] | null;
}

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
    return buildCableLine(input, c, { type: spec?.type ?? null, prestretched: spec?.prestretched ?? true });
  });
  const without = { rig: null, assembled: null, asBuilt: null, tensioning: null, sensitivity: null };
  if (rig.stops.length > 0) return { output: { cables: lines, ...without }, findings: rig.stops, checks };
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
    const proof = proveHeld(input, rig, context);
    findings.push(...proof.findings);
    checks.push(...proof.checks);
    return { output: { cables: lines, ...without, ...proof.output }, findings, checks };
  }
  const solved = solveRig(input, rig, context);
  checks.push(...solved.checks);
  const { solver, exact, stages, finished, singular, expansion } = solved;
  const played = playPlan(input.rig, rig, solver, stages, { modes: countModes(singular), context });
  context.onProgress?.(0.92, "temperature table");
  const tensioning: FactsTensioning = {
    referenceTemperature: input.rig.temperature,
    stages: played.stages,
    frameAlpha: input.rig.frameAlpha,
    temperatureTable: buildTemperatureTable(rig, solver, finished, expansion, input.rig.temperature),
    readingError: input.rig.readingError,
    limit: input.rig.limit,
    ...(played.ways ? { ways: played.ways } : {}),
    issuable: input.rig.defaults.length === 0,
  };
  const asBuilt = measureAsBuilt(rig, finished, input);
  const built = reviewBuilt(asBuilt);
  const review = reviewRig(input, rig, { stages: played.stages, finished, singular });
  const rest = reviewRest([exact, ...stages.map((stage) => stage.end), ...played.states]);
  const { influence } = stages[stages.length - 1].linear;
  const laterStates = played.states.slice(stages[0].begin === null ? 1 : 0);
  const pulls = reviewPulls(input, rig, finished, played.states);
  findings.push(
    ...findTargetMisses(rig, exact),
    ...rest.findings,
    ...built.findings,
    ...reviewLimits(rig, played.states, input.rig.limit),
    ...review.findings,
    ...pulls.findings,
    ...reviewSlackCloth(played.stages, input.proof.slack),
    ...reviewTravelAlone(rig, solver, finished),
    ...reviewShift(input, asBuilt),
    ...findRingsOff(input),
    ...reviewLean(rig, finished, laterStates),
    ...reviewNotches(rig, finished, influence, roundedLimit),
  );
  checks.push(...rest.checks, ...built.checks, ...review.checks, ...pulls.checks);
  context.onProgress?.(0.97, "sensitivity");
  const sensitivity = measureSensitivity(rig, solver, finished);
  const output = { cables: lines, rig: writeRig(rig, finished), assembled: null, asBuilt, tensioning, sensitivity };
  return { output, findings, checks };
}

/** The proof of a roof that nothing is turned on: panels and cables as they are cut, its points held as the form holds them. */
function proveHeld(
  input: RigInput,
  rig: Rig,
  context: StationContext,
): StationResult<Pick<RigResult, "assembled" | "asBuilt">> {
  // A form that nothing holds has no place of its own.
  if (!rig.structure.held.includes(1)) return { output: { assembled: null, asBuilt: null }, findings: [], checks: [] };
  context.onProgress?.(0.3, "assembled roof in balance");
  const solver = createEquilibriumSolver(rig.structure);
  const state = solveState(rig, solver, { x: rig.structure.xyz, L0: rig.L0 }, { sharp: true, ...context });
  const asBuilt = measureAsBuilt(rig, state, input);
  const built = reviewBuilt(asBuilt);
  const { nodes, cloth } = writeRig(rig, state);
  const rest = reviewRest([state]);
  return {
    output: { assembled: { nodes, cloth }, asBuilt },
    findings: [...rest.findings, ...built.findings, ...reviewShift(input, asBuilt)],
    checks: [...rest.checks, ...built.checks],
  };
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
      ...(s.layers[t] === 1 ? {} : { layers: s.layers[t] }),
    })),
    cables: rig.cables.map((c) => ({
      id: c.id,
      nodes: c.nodes,
      EA: c.EA,
      slackLengths: [...finished.L0.subarray(c.firstLink, c.firstLink + c.nodes.length - 1)],
    })),
    struts: [
      ...rig.struts.map((q) => ({ id: q.id, nodes: q.nodes, EA: q.EA, slackLength: finished.L0[q.link] })),
      ...rig.braces.map(({ id, nodes: ends, link }) => {
        return { id, nodes: ends, EA: s.EA[link], slackLength: finished.L0[link], brace: true as const };
      }),
    ],
    ...(s.load.some((kN) => kN !== 0) ? { selfWeight: s.load.reduce((sum, kN) => sum - kN, 0) } : {}),
    adjusters: rig.adjusters.map((a) => ({
      id: a.id,
      nodes: a.nodes,
      EA: a.EA,
      slackLength: finished.L0[a.link],
      pinLength: measureLink(s, finished.x, finished.L0, a.link).length,
      target: a.target,
      capacity: a.capacity,
      ...(a.weakest ? { weakest: a.weakest } : {}),
      range: { shortest: a.turnbuckle.shortest / 1000, longest: a.turnbuckle.longest / 1000 },
      perTurn: a.turnbuckle.perTurn,
      ...(a.turnbuckle.thread === undefined ? {} : { thread: a.turnbuckle.thread }),
      ...(a.turnbuckle.ends === undefined ? {} : { ends: a.turnbuckle.ends }),
      ...(a.turnbuckle.engagement === undefined ? {} : { engagement: a.turnbuckle.engagement }),
      anchor: a.anchor,
      turnbuckle: a.turnbuckle.id,
    })),
  };
}
