// The chain: job and mesh in, facts out. Calls the stations by name, in order, and can stop after any of them.
import { buildPieces } from "../panels/pieces/cutPieces.ts";
import { type Finding, PlanError, type Station, type StationContext, type StationResult } from "../problem.ts";
import type { Facts } from "../records/facts.ts";
import type { Job, MeshSource } from "../records/job.ts";
import type { NestPiece, StockRoll } from "../records/roll.ts";
import { runRig } from "../rig/runRig.ts";
import { totalCloth } from "../rolls/rollFigures.ts";
import { runRolls } from "../rolls/runRolls.ts";
import { runSeams } from "../seams/runSeams.ts";
import { buildFormFacts, buildHead, buildPanelFacts, buildPieceFacts, buildSeamFacts } from "./buildFacts.ts";
import { buildRigInput } from "./buildRigInput.ts";
import { runBuiltForm } from "./builtForm.ts";
import { firstOptions, measureRoom } from "./clothRoom.ts";
import type { MadeRoof } from "./dragSeam.ts";
import { fitPanels } from "./fitPanels.ts";
import { tellBatches } from "./tellBatches.ts";

/** How a plan is asked for. */
export interface PlanOptions {
  /** Last station to run; left out: all. */
  until?: Station;
  /** Short hash of the job and everything it reads. */
  revision: string;
  /** Told when a station begins; for timing by the caller. */
  onStation?: (station: Station) => void;
  /** Handed what dragging a seam needs, once the panels are made. */
  onRoof?: (roof: MadeRoof) => void;
  /** Told the facts so far when the work of a station stands in them; they grow on afterwards. */
  onFacts?: (station: Station, facts: Facts) => void;
}

/** Share of the progress bar at which each station begins. */
const begins: Record<Station, number> = { job: 0, form: 0, seams: 0.1, panels: 0.25, rolls: 0.5, rig: 0.75, papers: 1 };

/** The job's rolls, or one that is taken for granted and opened as often as needed. mm */
function buildStock(job: Job): StockRoll[] {
  const { fabric } = job;
  if (job.rolls) return job.rolls.map((r) => ({ ...r, fabric: fabric.id, assumed: false }));
  return [
    {
      id: "R",
      fabric: fabric.id,
      batch: null,
      width: fabric.rollWidth,
      selvedge: fabric.selvedge,
      length: fabric.rollLength,
      start: 0,
      flaws: [],
      assumed: true,
    },
  ];
}

/** An error that follows a stop, as a finding beside it: the stop says what to mend first. */
function findFollowing(error: PlanError, station: Station): Finding {
  return {
    code: error.code,
    level: "stop",
    station,
    where: error.where,
    value: null,
    limit: null,
    text: `the plan ends here: ${error.message}`,
    remedy: "see to the stops before this one first: it may follow from them",
    basis: "own argument",
  };
}

/**
 * Plans a job. Where a station cannot go on after an earlier one found a stop, the plan ends there and keeps that stop.
 * @throws PlanError of any station; a plan that can be finished but must not be issued holds a finding of level stop instead
 */
export function runPlan(job: Job, source: MeshSource, options: PlanOptions, context: StationContext): Facts {
  const facts = buildHead(job, options.revision);
  let at: Station = "form";
  const onStation = (station: Station) => {
    at = station;
    options.onStation?.(station);
  };
  try {
    runStationsInPlace(facts, job, source, { ...options, onStation }, context);
  } catch (error) {
    const stopped = facts.findings.some((f) => f.level === "stop");
    if (!(error instanceof PlanError) || error.code === "cancelled" || !stopped) throw error;
    facts.findings.push(findFollowing(error, at));
  }
  return facts;
}

/** Fills the facts station by station. */
function runStationsInPlace(
  facts: Facts,
  asked: Job,
  source: MeshSource,
  options: PlanOptions & { onStation: (station: Station) => void },
  context: StationContext,
): void {
  const share = (station: Station, next: Station): StationContext => ({
    ...context,
    onProgress: (s, words, figures) =>
      context.onProgress?.(begins[station] + s * (begins[next] - begins[station]), words, figures),
  });
  const take = <T>(result: StationResult<T>): T => {
    facts.findings.push(...result.findings);
    facts.checks.push(...result.checks);
    return result.output;
  };
  options.onStation("form");
  const { form, shifts } = take(runBuiltForm(source, asked, share("form", "seams")));
  facts.form = buildFormFacts(form);
  options.onFacts?.("form", facts);
  // from here on the stress the form was found to have is the intended one
  const job: Job = asked.prestress.from ? { ...asked, prestress: { ...form.stress } } : asked;
  if (options.until === "form") return;

  if (options.until === "seams") {
    options.onStation("seams");
    const layout = take(
      runSeams(form, job, firstOptions(measureRoom(job), job.allowances.seam / 1000), share("seams", "panels")),
    );
    facts.layouts = layout.choices;
    facts.compared = layout.compared ?? [];
    facts.seams = buildSeamFacts(layout, []);
    return;
  }
  const fitted = fitPanels(form, job, {
    seams: share("seams", "panels"),
    panels: share("panels", "rolls"),
    onStation: options.onStation,
  });
  options.onRoof?.({ form, job, fitted });
  const layout = take(fitted.seams);
  const panels = take(fitted.panels);
  facts.layouts = layout.choices;
  facts.compared = layout.compared ?? [];
  facts.seams = buildSeamFacts(layout, panels);
  facts.panels = panels.map(buildPanelFacts);
  const others = take(buildPieces(panels, { form, seams: layout.seams }, job));
  facts.pieces = others.map(buildPieceFacts);
  options.onFacts?.("panels", facts);
  if (options.until === "panels") return;

  options.onStation("rolls");
  const bare = (p: NestPiece): NestPiece => ({ id: p.id, fabric: p.fabric, batch: p.batch, cut: p.cut });
  const pieces = [...panels.map(bare), ...others.map((p) => ({ ...bare(p), follows: true }))];
  const stock = buildStock(job);
  const nested = take(runRolls(pieces, stock, job.nest, share("rolls", "rig")));
  facts.findings.push(...tellBatches(nested, panels, job));
  facts.rolls = nested;
  facts.cloth = totalCloth(nested, pieces, stock, job.nest.gap);
  options.onFacts?.("rolls", facts);
  if (options.until === "rolls") return;

  options.onStation("rig");
  const rigInput = take(buildRigInput(job, { form, shifts, layout, panels, rolls: nested.map((r) => r.id) }));
  const rig = take(runRig(rigInput, share("rig", "papers")));
  facts.cables = rig.cables;
  if (rig.rig) facts.rig = rig.rig;
  if (rig.assembled) facts.assembled = rig.assembled;
  if (rig.asBuilt) facts.asBuilt = rig.asBuilt;
  if (rig.tensioning) facts.tensioning = rig.tensioning;
  if (rig.sensitivity) facts.sensitivity = rig.sensitivity;
}
