// One block a stage: its cautions, its moves with what belongs before each of them, and the hold point at its end. Step tables are
// set in 11 pt. A step that wants a word of its own interrupts the table: the word stands before the step.
import type { FactsMove, FactsStage } from "../../../records/rig.ts";
import { jackStep, limitOf, type RigFacts, stopForce } from "../../tables/rigReadings.ts";
import { turnsText } from "../../tables/turnbuckleWork.ts";
import { cautionsNamed } from "../../words/cautions.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import type { Book } from "../layout/book.ts";
import { flowCautionsInPlace } from "../layout/cautionBlock.ts";
import { LARGE, SMALL } from "../layout/pen.ts";
import {
  type Column,
  type Flow,
  flowGapInPlace,
  flowHeadingInPlace,
  flowTableInPlace,
  flowTextInPlace,
  needInPlace,
  openFlow,
  type TableCell,
} from "../layout/table.ts";
import { BODY } from "./scheduleCover.ts";
import { flowHoldInPlace } from "./scheduleHold.ts";

/** From this share of a limit on a step gets a warning of its own. */
const NEAR_LIMIT = 0.9;
/** Below this share of its final force an adjuster counts as slack: a gauge shows nothing that can be trusted. */
const SLACK = 0.01;

/** A block for each stage, each on a new sheet. */
export function flowStages(book: Book, rig: RigFacts): void {
  const { stages } = rig.tensioning;
  stages.forEach((stage, k) => {
    const flow = openFlow(
      book,
      `Stage ${k + 1} of ${stages.length}: to ${percent(stage.fraction)} of the final forces`,
    );
    const own = k === 0 ? "reading-force" : "order-of-steps";
    flowCautionsInPlace(flow, cautionsNamed(book.facts, "cable-release", own), SMALL);
    flowMovesInPlace(flow, rig, stage);
    flowHoldInPlace(flow, rig, stage, k);
  });
}

function percent(share: number): string {
  return `${Number((100 * share).toPrecision(3))} %`;
}

function moveColumns(rig: RigFacts): Column[] {
  const { pins, force } = paperUnits(rig.facts.job);
  return [
    { head: ["", "Step"], width: 17, bold: true },
    { head: ["", "Adjuster"], width: 26, bold: true },
    { head: ["", "Way"], width: 31, bold: true },
    { head: ["Turn by", "travel"], width: 36, bold: true },
    { head: ["Pins, by tape", pins.unit], width: 41 },
    { head: ["Gauge", force.unit], width: 19, align: "end", bold: true },
    { head: ["Window", force.unit], width: 34, align: "end" },
    { head: ["STOP at first", "of the two"], width: 36, bold: true },
    { head: ["Nearest", "its limit"], width: 34 },
  ];
}

function moveRow(rig: RigFacts, move: FactsMove): TableCell[] {
  const { pins, travel, force } = paperUnits(rig.facts.job);
  const { greatest } = move;
  const known = limitOf(rig, greatest.id) !== null;
  const target = rig.adjusters.find((a) => a.id === move.adjuster)?.target ?? 0;
  const gauge = move.expect < SLACK * target ? "slack" : force.of(move.expect);
  return [
    `${move.step}`,
    move.adjuster,
    move.travel >= 0 ? "SHORTEN" : "LENGTHEN",
    [turnsText(move.turns), travel.whole(Math.abs(move.travel))],
    [`from ${pins.of(move.pinFrom)}`, `to ${pins.of(move.pinTo)}`],
    gauge,
    `${force.of(move.low)}\u00a0–\u00a0${force.of(move.high)}`,
    [force.whole(stopForce(rig, move)), pins.whole(move.pinTo)],
    known ? [greatest.id, percent2(greatest.share)] : "no limit known",
  ];
}

function percent2(share: number): string {
  return `${Math.round(100 * share)}\u00a0%`;
}

/** What must be known before a step, beyond its row. */
function stepNotes(rig: RigFacts, moves: readonly FactsMove[]): string[] {
  const { force } = paperUnits(rig.facts.job);
  const step = moves[0].step;
  const names = (list: readonly FactsMove[]) => list.map((m) => m.adjuster).join(", ");
  const notes: string[] = [];
  const near = moves.find((m) => m.greatest.share > NEAR_LIMIT);
  if (near) {
    const { id, kN, share } = near.greatest;
    notes.push(
      `WARNING before step ${step}: ${id} comes to ${percent(Math.round(100 * share) / 100)} of its limit (${force.whole(kN)}). Too much breaks it without warning and kills. Turn by sixths, one person only watches its gauge.`,
    );
  }
  const out = moves.filter((m) => m.travel < 0);
  if (out.length > 0) {
    notes.push(
      `WARNING before step ${step}: ${names(out)} is let OUT. Threads that hold by a few turns pull apart. See that at least one thread diameter stays in the body at each end.`,
    );
  }
  const heavy = moves.filter((m) => {
    const adjuster = rig.adjusters.find((a) => a.id === m.adjuster);
    return adjuster !== undefined && jackStep(rig, adjuster) === step;
  });
  if (heavy.length > 0) {
    notes.push(
      `CAUTION before step ${step}: ${names(heavy)} from here on too heavy for a hand (estimate). A bar that slips or a pipe on it injures. Take the load over with the jack, turn the body free, set down slowly, read again.`,
    );
  }
  return notes;
}

function flowMovesInPlace(flow: Flow, rig: RigFacts, stage: FactsStage): void {
  flowHeadingInPlace(flow, "Moves");
  const together = stage.moves.some((m, i) => i > 0 && m.step === stage.moves[i - 1].step);
  const { temperature } = paperUnits(rig.facts.job);
  const at = `${temperature.whole(rig.tensioning.referenceTemperature)}`;
  const words = `One step after the other. ${together ? "Adjusters with the same step number are moved together, never more than one turn apart, and read after all of them. " : ""}Stop at the force OR the pin length in the column STOP, whichever comes first. Pins by tape are under force, which lengthens them a little. Forces hold at ${at}: see the table of temperatures. ${openLimits(rig)}`;
  flowTextInPlace(flow, words, { size: BODY });
  flowGapInPlace(flow, 1.5);
  const columns = moveColumns(rig);
  let rows: TableCell[][] = [];
  let groups: number[] = [];
  const flush = () => {
    if (rows.length > 0) flowTableInPlace(flow, columns, rows, { size: LARGE, groups });
    rows = [];
    groups = [];
  };
  for (const step of [...new Set(stage.moves.map((m) => m.step))]) {
    const moves = stage.moves.filter((m) => m.step === step);
    const notes = stepNotes(rig, moves);
    if (notes.length > 0) {
      flush();
      // Words and the first row of their step stay on one sheet.
      needInPlace(flow, notes.length * 11 + 40);
      flowGapInPlace(flow, 1);
      for (const note of notes) flowTextInPlace(flow, note, { size: BODY, bold: true });
      flowGapInPlace(flow, 1.5);
    }
    rows.push(...moves.map((m) => moveRow(rig, m)));
    groups.push(moves.length);
  }
  flush();
  if (stage.moves.length === 0) flowTextInPlace(flow, "No move: read and hold.", { size: LARGE, bold: true });
}

/** Members whose limit nobody gave: no step is checked against them. */
function openLimits(rig: RigFacts): string {
  const ids = [...rig.adjusters.map((a) => a.id), ...(rig.facts.cables ?? []).map((c) => c.id)];
  const open = ids.filter((id) => limitOf(rig, id) === null);
  if (open.length === 0) return "";
  const shown = open.length > 8 ? `${open.slice(0, 8).join(", ")} and ${open.length - 8} more` : open.join(", ");
  return `No limit is known for ${shown}: no step is checked against them.`;
}
