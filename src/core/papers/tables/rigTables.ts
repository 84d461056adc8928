// The lists of the rig for store, crew and engineer: moves, cables, hardware. Metric whatever the sheets are; every row carries
// issue, revision and status, because rows are copied out of lists and travel alone.

import type { Facts, FactsJob } from "../../records/facts.ts";
import type { FactsAdjuster } from "../../records/rig.ts";
import { edgeStart } from "../drawing/stripPlace.ts";
import { stampOf } from "../words/stamp.ts";
import { typeText } from "../words/typeText.ts";
import { type Cell, numberCell, writeCsv } from "./csv.ts";
import { allMoves, type RigFacts, startPins, stopForce } from "./rigReadings.ts";
import { turnsText } from "./turnbuckleWork.ts";

const TAIL = ["reference_temperature_degC", "issue", "revision", "status"];

function tailOf(facts: Facts): Cell[] {
  const { job, tensioning }: { job: FactsJob; tensioning?: Facts["tensioning"] } = facts;
  const at = tensioning ? numberCell(tensioning.referenceTemperature, 1) : null;
  return [at, job.issue, job.revision, stampOf(facts, "rig") || "no stop open, no default taken"];
}

function maybe(value: number | null | undefined, decimals: number): Cell {
  return value === null || value === undefined ? null : numberCell(value, decimals);
}

/** tensioning.csv: one row a move, in the order of the work. */
export function moveTable(rig: RigFacts): string {
  const header = ["stage", "stage_fraction", "step", "adjuster", "way", "turns", "turns_decimal", "travel_mm"];
  header.push("pin_from_mm", "pin_to_mm", "expect_kN", "low_kN", "high_kN", "stop_at_kN", "nearest_limit_member");
  header.push("nearest_limit_kN", "nearest_limit_percent", ...TAIL);
  const rows = rig.tensioning.stages.flatMap((stage) =>
    stage.moves.map((m): Cell[] => [
      stage.name,
      numberCell(stage.fraction, 3),
      numberCell(m.step, 0),
      m.adjuster,
      m.travel >= 0 ? "shorten" : "lengthen",
      turnsText(m.turns).replace("\u00a0", " "),
      numberCell(Math.abs(m.turns), 3),
      numberCell(Math.abs(m.travel), 2),
      numberCell(m.pinFrom * 1000, 1),
      numberCell(m.pinTo * 1000, 1),
      numberCell(m.expect, 2),
      numberCell(m.low, 2),
      numberCell(m.high, 2),
      numberCell(stopForce(rig, m), 2),
      m.greatest.id,
      numberCell(m.greatest.kN, 2),
      m.greatest.share > 0 ? numberCell(100 * m.greatest.share, 1) : null,
      ...tailOf(rig.facts),
    ]),
  );
  return writeCsv(header, rows);
}

/** cables.csv: one row a cable; stations as "seam at metres", counted along the erected cable. */
export function cableTable(facts: Facts): string {
  const header = ["cable", "edge", "type", "EA_kN", "force_kN", "erected_length_m", "slack_length_m", "cut_length_m"];
  header.push("terminals_deducted", "mark_force_kN", "mark_temperature_degC", "min_breaking_force_kN");
  header.push("utilisation_percent", "stations_from", "stations_erected_m", ...TAIL);
  const rows = (facts.cables ?? []).map((c): Cell[] => [
    c.id,
    c.edge,
    typeText(c.type),
    numberCell(c.EA, 0),
    numberCell(c.force, 2),
    numberCell(c.erectedLength, 4),
    numberCell(c.slackLength, 4),
    numberCell(c.cutLength, 4),
    c.terminals ? `${c.terminals.map((t) => `${(1000 * t).toFixed(0)} mm`).join(" and ")}` : "no",
    numberCell(c.markAt.force, 2),
    numberCell(c.markAt.temperature, 1),
    maybe(c.minBreakingForce, 1),
    maybe(c.utilisation === null ? null : 100 * c.utilisation, 1),
    c.stations.length > 0 ? edgeStart(facts, c.edge) : null,
    c.stations.map((s) => `${s.for} at ${s.at.toFixed(4)}`).join("; "),
    ...tailOf(facts),
  ]);
  return writeCsv(header, rows);
}

/** How far an adjuster has been and can still be turned, mm: `used` from the start to the finished state. */
export function travelOf(rig: RigFacts, adjuster: FactsAdjuster) {
  const pins = adjuster.pinLength * 1000;
  const moves = allMoves(rig.tensioning).filter((m) => m.adjuster === adjuster.id);
  return {
    start: startPins(rig, adjuster) * 1000,
    finished: pins,
    used: moves.reduce((s, m) => s + m.travel, 0),
    leftIn: pins - adjuster.range.shortest * 1000,
    leftOut: adjuster.range.longest * 1000 - pins,
  };
}

/** Least thread in the body at each threaded end over the whole sequence, its start too, mm; null where the job does not say. */
function leastEngaged(rig: RigFacts, adjuster: FactsAdjuster): number | null {
  if (adjuster.engagement === undefined) return null;
  const moves = allMoves(rig.tensioning).filter((m) => m.adjuster === adjuster.id);
  const longest = 1000 * Math.max(adjuster.pinLength, ...moves.flatMap((m) => [m.pinFrom, m.pinTo]));
  const out = adjuster.range.longest * 1000 - longest;
  return adjuster.engagement + (adjuster.ends === "single" ? out : out / 2);
}

/** hardware.csv: one row an adjuster; blank cells are what the job does not say. */
export function hardwareTable(rig: RigFacts): string {
  const header = ["adjuster", "anchor", "turnbuckle", "thread_mm", "ends", "travel_per_turn_mm", "shortest_mm"];
  header.push("longest_mm", "engagement_at_longest_mm", "engagement_least_mm");
  header.push("start_pin_to_pin_mm", "finished_pin_to_pin_mm", "travel_used_mm", "left_to_shorten_mm");
  header.push("left_to_lengthen_mm", "target_kN", "capacity_kN", "weakest_part", "utilisation_percent", ...TAIL);
  const rows = rig.adjusters.map((a): Cell[] => {
    const travel = travelOf(rig, a);
    return [
      a.id,
      a.anchor,
      typeText(a.turnbuckle),
      maybe(a.thread, 1),
      a.ends === undefined ? null : a.ends === "both" ? "right and left hand" : "single",
      numberCell(a.perTurn, 2),
      numberCell(a.range.shortest * 1000, 1),
      numberCell(a.range.longest * 1000, 1),
      maybe(a.engagement, 1),
      maybe(leastEngaged(rig, a), 1),
      numberCell(travel.start, 1),
      numberCell(travel.finished, 1),
      numberCell(travel.used, 1),
      numberCell(travel.leftIn, 1),
      numberCell(travel.leftOut, 1),
      numberCell(a.target, 2),
      maybe(a.capacity, 1),
      a.weakest ?? null,
      a.capacity === null ? null : numberCell((100 * a.target) / a.capacity, 1),
      ...tailOf(rig.facts),
    ];
  });
  return writeCsv(header, rows);
}
