// From what the crew read to the turns that set it right: the state fitted to the readings, the fewest and smallest moves, each
// played on the full structure, and a word on what the readings cannot tell or cannot all mean.
import { type Finding, PlanError, type StationContext } from "../../problem.ts";
import type { Correction, CorrectionMove, Reading } from "../../records/rig.ts";
import { measureResponse } from "../../structure/influence.ts";
import { buildRig, type Rig } from "../build/buildRig.ts";
import { measureNotch, type Stage } from "../moves/planMoves.ts";
import { growCloth, warmAnchors, warmLengths } from "../otherwise/warmRig.ts";
import type { RigInput } from "../rigInput.ts";
import { findGreatest, readAdjusters, readCorners, readForces } from "../stages/readState.ts";
import { type RigState, turnTo } from "../stages/solveLengths.ts";
import { type SolvedRig, solveRig } from "../stages/solveRig.ts";
import { chooseMoves } from "./chooseMoves.ts";
import {
  believePlan,
  believeTurned,
  fitReadings,
  type LengthBelief,
  type ReadingFit,
  type ReadingTrust,
  trustDefaults,
} from "./fitReadings.ts";
import { type SortedReadings, sortReadings } from "./sortReadings.ts";

/**
 * Windows that hold a roof: forces within a tenth, corners within 5 mm (site habit). Moves aim at a fifth of them, for error.
 */
export const correctionWindows = { force: 0.1, corner: 0.005, aim: 0.2 };

/**
 * What is let be: a force that lies three deviations of its fit inside its window, but never less than a quarter of it; a corner
 * within three fifths of its own. Nearer the middle noise alone would turn adjusters to and fro.
 */
const patience = { deviations: 3, least: 0.25, corner: 0.6 };

/** Misfit in deviations from which on a reading is taken out as contradicting the others. */
const contradicts = 4;

/** Deviation of a length from which on readings are said not to tell it, m. */
const untold = 0.006;

/** How finely a hand makes the turns it is told, m: ten degrees of a body with 4 mm a turn (own default). */
const turnError = 1e-4;

/** Readings taken before these, held against the same stage, and what was turned after them, mm by adjuster, positive shortens. */
export interface EarlierRound {
  readings: readonly Reading[];
  travel: Record<string, number>;
}

/** A correction with what must be known beside it. */
export interface CorrectedRig {
  correction: Correction;
  findings: Finding[];
}

/** What the crew read. */
export interface SiteReadings {
  readings: readonly Reading[];
  /** Sets read before at the same stage, oldest first. */
  earlier?: readonly EarlierRound[];
  /** The stage at whose end was read, in per cent of the targets; null: the finished roof. */
  percent?: number | null;
}

/**
 * Works out the correction.
 * @throws PlanError as buildRig; reading-unknown; correct-stage; correct-none: the form has no adjuster; correct-stopped: the rig cannot be worked out
 */
export function correctRig(input: RigInput, read: SiteReadings, context: StationContext): CorrectedRig {
  const rig = buildRig(input);
  if (rig.adjusters.length === 0)
    throw new PlanError("correct-none", "the form has no adjuster, so there is nothing to set right by turning", []);
  const [stop] = rig.stops;
  if (stop) throw new PlanError("correct-stopped", `the plan has no rig to correct: ${stop.text}`, stop.where);
  const solved = solveRig(input, rig, context);
  return correctSolved(input, rig, solved, read);
}

/** The same for a rig that is solved already. */
export function correctSolved(input: RigInput, rig: Rig, solved: SolvedRig, read: SiteReadings): CorrectedRig {
  const stage = findStage(solved, read.percent ?? null);
  const trust: ReadingTrust = { ...trustDefaults, force: Math.max(input.rig.readingError, 1e-3) };
  const fitRound = (readings: readonly Reading[], belief: LengthBelief) => {
    const sorted = sortReadings(input, rig, readings);
    const stood = standAs(rig, solved, stage.end, sorted, input.rig.temperature);
    return { sorted, ...stood, ...fitWithoutDoubted(stood.model, stood.solver, stood.planned, sorted, trust, belief) };
  };
  const plan = believePlan(rig, trust);
  let belief = plan;
  for (const { readings, travel } of read.earlier ?? []) {
    const turned = rig.adjusters.map((a) => -(travel[a.id] ?? 0) / 1000);
    belief = believeTurned(fitRound(readings, belief).fit, turned, turnError);
  }
  const together = fitRound(read.readings, belief);
  const alone = belief !== plan && seemsOtherwise(together) ? fitRound(read.readings, plan) : null;
  // where these readings agree among themselves, it is the earlier ones that no longer hold
  const otherwise = alone !== null && alone.doubted.length === 0;
  const { sorted, model, planned, solver, fit, doubted } = otherwise ? alone : together;
  const links = rig.adjusters.map((a) => a.link);
  const nodes = rig.adjusters.map((a) => a.nodes[0]);
  const response = measureResponse(solver, planned.x, planned.L0, links, { links, nodes });
  const wanted = wantForces(model, solved, planned, stage);
  const change = chooseMoves({
    off: fit.off,
    forces: wanted,
    bias: readAdjusters(model, planned).map((f, i) => f - wanted[i]),
    forceShare: correctionWindows.aim * correctionWindows.force,
    cornerWay: correctionWindows.aim * correctionWindows.corner,
    patience: {
      force: wanted.map((kN, i) => {
        const { force } = correctionWindows;
        return Math.max(force - (patience.deviations * fit.sureForce[i]) / kN, patience.least * force);
      }),
      corner: patience.corner * correctionWindows.corner,
    },
    influence: response.forces,
    moves: response.moves,
    notch: rig.adjusters.map((_, i) => measureNotch(rig, i)),
  });
  const played = playChange(input, model, solver, fit.state, change);
  const findings = [
    ...sorted.findings,
    ...doubted,
    ...(otherwise ? [dropEarlier(together.fit.strain)] : []),
    ...findUntold(rig, fit),
    ...findImpossible(rig, fit, change, played.moves),
  ];
  const fitted = rig.adjusters.map((a, i) => ({
    adjuster: a.id,
    off: 1000 * fit.off[i],
    sure: 1000 * fit.sure[i],
    force: readAdjusters(model, fit.state)[i],
  }));
  const forecast = { forces: readForces(model, played.end), corners: readCorners(model, played.end) };
  return { correction: { stage: stage.name, fitted, moves: played.moves, forecast }, findings };
}

/** Squared deviations of n lengths from what was believed, beyond which they are not as believed: four deviations of their sum. */
function strainLimit(n: number): number {
  return n + 4 * Math.sqrt(2 * n);
}

function seemsOtherwise({ fit, doubted }: { fit: ReadingFit; doubted: Finding[] }): boolean {
  return doubted.length > 0 || fit.strain > strainLimit(fit.off.length);
}

function dropEarlier(strain: number): Finding {
  return {
    code: "reading-earlier",
    level: "caution",
    station: "rig",
    where: [],
    value: strain,
    limit: null,
    text: "what is read now does not follow from the earlier readings and the turns told after them: an adjuster was turned otherwise than told, or the roof has settled. The earlier readings are left out",
    remedy: "compare the pin lengths with the log, and keep to the turns told from here on",
    basis: "own argument: squared deviations of the lengths from what the earlier readings told",
  };
}

/** The stage named by its share of the targets in per cent, or the last. @throws PlanError correct-stage */
function findStage(solved: SolvedRig, percent: number | null): Stage {
  const { stages } = solved;
  const found = percent === null ? stages.at(-1) : stages.find((s) => Math.abs(100 * s.fraction - percent) < 0.05);
  if (found) return found;
  throw new PlanError(
    "correct-stage",
    `the plan has no stage of ${percent} %; it has ${stages.map((s) => s.name).join(", ")}`,
    [],
  );
}

/** Forces wanted of the adjusters: the stage's share of the targets, changed as a change of temperature changes the plan's own. */
function wantForces(model: Rig, solved: SolvedRig, planned: RigState, stage: Stage): number[] {
  const cold = readAdjusters({ ...model, structure: solved.solver.structure }, stage.end);
  const now = readAdjusters(model, planned);
  return model.adjusters.map((a, i) => {
    const share = cold[i] > 0 ? now[i] / cold[i] : 1;
    return Math.max(stage.fraction * a.target * share, 0.02 * a.target);
  });
}

/** The rig as it stood when it was read: anchors where they were surveyed, everything at the temperature of the readings. */
function standAs(rig: Rig, solved: SolvedRig, end: RigState, sorted: SortedReadings, reference: number) {
  const step = sorted.temperature === null ? 0 : sorted.temperature - reference;
  if (step === 0 && sorted.anchors.length === 0) return { model: rig, planned: end, solver: solved.solver };
  const growth = solved.expansion.cloth * step;
  const structure = growCloth(rig.structure, { warp: growth, weft: growth });
  const model = { ...rig, structure };
  const solver = { ...solved.solver, structure, near: false };
  const x = warmAnchors(rig, end.x, solved.expansion, step);
  for (const a of sorted.anchors) x.set(a.at, 3 * a.node);
  const L0 = warmLengths(rig, end.L0, solved.expansion, step);
  const planned = turnTo(
    model,
    solver,
    { x, L0 },
    rig.adjusters.map((a) => L0[a.link]),
  );
  return { model, planned, solver };
}

/** Fits, takes out the reading that contradicts the others most, and fits again, twice at most. */
function fitWithoutDoubted(
  rig: Rig,
  solver: SolvedRig["solver"],
  planned: RigState,
  readings: SortedReadings,
  trust: ReadingTrust,
  belief: LengthBelief,
): { fit: ReadingFit; doubted: Finding[] } {
  let kept = readings;
  const doubted: Finding[] = [];
  for (let round = 0; ; round++) {
    const fit = fitReadings(rig, solver, planned, kept, trust, belief);
    const worst = fit.misfit.reduce((a, b) => (b.times > a.times ? b : a), { row: 0, id: "", times: 0 });
    if (worst.times < contradicts || round === 2) return { fit, doubted };
    kept = {
      ...kept,
      forces: kept.forces.filter((f) => f.row !== worst.row),
      corners: kept.corners.filter((c) => c.row !== worst.row),
    };
    doubted.push({
      code: "reading-contradiction",
      level: "caution",
      station: "rig",
      where: [`row ${worst.row}`, worst.id],
      value: worst.times,
      limit: contradicts,
      text: `readings, row ${worst.row}: ${worst.id} cannot be true together with the other readings: it lies ${worst.times.toFixed(1)} times its own error from what they make of it`,
      remedy: "read it again; it is left out meanwhile",
      basis: "own argument: least squares of all readings",
    });
  }
}

/** Turns in their order (what lets out first, then what takes in, longest first), each played on the full structure. */
function playChange(
  input: RigInput,
  rig: Rig,
  solver: SolvedRig["solver"],
  from: RigState,
  change: readonly number[],
): { moves: CorrectionMove[]; end: RigState } {
  const order = change
    .map((_, i) => i)
    .filter((i) => change[i] !== 0)
    .sort((p, q) => change[q] - change[p] || p - q);
  let state = from;
  const moves = order.map((i, k): CorrectionMove => {
    const a = rig.adjusters[i];
    const lengths = rig.adjusters.map((b, j) => state.L0[b.link] + (j === i ? change[i] : 0));
    state = turnTo(rig, solver, state, lengths);
    const expect = readAdjusters(rig, state)[i];
    const window = input.rig.readingError * a.target;
    const travel = -1000 * change[i];
    return {
      step: k + 1,
      adjuster: a.id,
      travel,
      turns: travel / a.turnbuckle.perTurn,
      expect,
      low: Math.max(0, expect - window),
      high: expect + window,
      greatest: findGreatest(rig, state, input.rig.limit),
    };
  });
  return { moves, end: state };
}

function findUntold(rig: Rig, fit: ReadingFit): Finding[] {
  const who = rig.adjusters.filter((_, i) => fit.sure[i] > untold).map((a) => a.id);
  if (who.length === 0) return [];
  const worst = Math.max(...fit.sure);
  return [
    {
      code: "reading-untold",
      level: "note",
      station: "rig",
      where: who,
      value: 1000 * worst,
      limit: 1000 * untold,
      text: `the readings do not tell how long ${who.join(", ")} ${who.length > 1 ? "are" : "is"}: known to ${(1000 * worst).toFixed(0)} mm only; there the plan is believed`,
      remedy: `survey the corner${who.length > 1 ? "s" : ""} at ${who.join(", ")}`,
      basis: "standard deviation of the fit",
    },
  ];
}

function findImpossible(rig: Rig, fit: ReadingFit, change: readonly number[], moves: CorrectionMove[]): Finding[] {
  const findings: Finding[] = [];
  rig.adjusters.forEach((a, i) => {
    const pins = 1000 * (fit.state.L0[a.link] + change[i]);
    const { shortest, longest } = a.turnbuckle;
    if (change[i] === 0 || (pins >= shortest && pins <= longest)) return;
    findings.push({
      code: "adjuster-reach",
      level: "stop",
      station: "rig",
      where: a.id,
      value: pins,
      limit: pins < shortest ? shortest : longest,
      text: `${a.id} would have to be ${pins.toFixed(0)} mm long; its turnbuckle reaches from ${shortest.toFixed(0)} to ${longest.toFixed(0)} mm`,
      remedy: "take another link there, or ask the engineer for other lengths",
      basis: "turnbuckle lengths as given",
    });
  });
  for (const m of moves)
    if (m.greatest.share > 1)
      findings.push({
        code: "limit-passed",
        level: "stop",
        station: "rig",
        where: m.greatest.id,
        value: m.greatest.kN,
        limit: m.greatest.kN / m.greatest.share,
        text: `${m.greatest.id} would carry ${m.greatest.kN.toFixed(1)} kN after step ${m.step} of the correction; its limit is ${(m.greatest.kN / m.greatest.share).toFixed(1)} kN`,
        remedy: "let the roof down a stage first; the engineer decides",
        basis: "limit as given in the job",
      });
  return findings;
}
