// The cable schedule and the hardware list as sheets: what is ordered, marked and hung. No size is chosen here; terminals are not
// deducted, because the job does not know them.

import type { Facts } from "../../../records/facts.ts";
import { edgeStart } from "../../drawing/stripPlace.ts";
import { finalForce, limitOf, type RigFacts, rigFacts } from "../../tables/rigReadings.ts";
import { travelOf } from "../../tables/rigTables.ts";
import { threadText } from "../../tables/turnbuckleWork.ts";
import { cautionsOf } from "../../words/cautions.ts";
import { decimal } from "../../words/decimal.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import { typeText } from "../../words/typeText.ts";
import { type Book, closeBook, type FontFiles, openBook } from "../layout/book.ts";
import { flowCautionsInPlace } from "../layout/cautionBlock.ts";
import {
  type Column,
  flowGapInPlace,
  flowHeadingInPlace,
  flowTableInPlace,
  flowTextInPlace,
  openFlow,
} from "../layout/table.ts";

/** Size of the tables: read in the workshop. */
const SIZE = 10;

/** The bytes of cables.pdf. */
export async function writeCableSheets(facts: Facts, fonts: FontFiles): Promise<Uint8Array> {
  const book = await openBook(facts, fonts, "cables and hardware", "rig");
  if ((facts.cables ?? []).length > 0) {
    flowCables(book);
    flowStations(book);
  }
  const rig = rigFacts(facts);
  if (rig) flowHardware(book, rig);
  return closeBook(book);
}

/** Masts are pressed, and nobody reads that off a minus. */
function pressedText(of: (kN: number) => string, kN: number | null): string {
  if (kN === null) return "–";
  return kN < 0 ? `${of(-kN)} pressed` : of(kN);
}

function share(value: number | null): string {
  return value === null ? "–" : `${decimal(100 * value, 0)} %`;
}

function flowCables(book: Book): void {
  const { facts } = book;
  const { force, stiffness, span, temperature } = paperUnits(facts.job);
  const columns: readonly Column[] = [
    { head: ["Cable"], width: 34, bold: true },
    { head: ["Type"], width: 36 },
    { head: ["EA,", stiffness.unit], width: 19, align: "end" },
    { head: ["Force,", force.unit], width: 20, align: "end" },
    { head: ["Erected,", span.unit], width: 33, align: "end" },
    { head: ["Slack,", span.unit], width: 33, align: "end" },
    { head: ["CUT to,", span.unit], width: 34, align: "end", bold: true },
    { head: ["Mark at", `${force.unit}, ${temperature.unit}`], width: 28, align: "end" },
    { head: ["Breaking,", force.unit], width: 28, align: "end" },
    { head: ["Used"], width: 18, align: "end" },
  ];
  const rows = (facts.cables ?? []).map((c) => [
    c.id,
    typeText(c.type),
    stiffness.of(c.EA),
    force.of(c.force),
    span.of(c.erectedLength),
    span.of(c.slackLength),
    span.of(c.cutLength),
    `${force.of(c.markAt.force)}, ${temperature.of(c.markAt.temperature)}`,
    c.minBreakingForce === null ? "not given" : force.of(c.minBreakingForce),
    share(c.utilisation),
  ]);
  const flow = openFlow(book, "Cable schedule");
  flowTableInPlace(flow, columns, rows, { size: SIZE });
  flowGapInPlace(flow, 2);
  const text = (words: string, bold = false) => flowTextInPlace(flow, words, { bold });
  const cables = book.facts.cables ?? [];
  const bare = cables.filter((c) => !c.terminals).map((c) => c.id);
  if (bare.length > 0) {
    text(
      `Terminals are NOT deducted${bare.length < cables.length ? ` for ${bare.join(", ")}` : ""}: lengths run from system point to system point of the structure.`,
      true,
    );
    text(
      "The maker of the cable takes off what sockets, forks, thimbles and plates need at both ends, and the adjuster's length where an edge ends in one.",
    );
  }
  for (const c of cables)
    if (c.terminals) {
      const [first, last] = c.terminals.map((t) => span.of(t));
      text(`${c.id}: cut with ${first} and ${last} ${span.unit} taken off for its terminals, as the job gives them.`);
    }
  text(
    "EA belongs to the metallic area of the rope as the job or the catalogue states it; a modulus of the full circle must not be put with it. A cable of another EA has another slack length: plan again before it is bought.",
  );
  text(
    "Slack: without force at the reference temperature. Cut: the slack length, shorter where the cable is not prestretched and will grow for good. Mark under the force and at the temperature stated, or measure slack and say so on the tag.",
  );
  text(
    "Used: force at prestress over the breaking force given. It is no design: the engineer sizes cables and fittings from design forces.",
  );
  flowGapInPlace(flow, 3);
  flowCautionsInPlace(flow, cautionsOf(facts, "cables"));
}

function flowStations(book: Book): void {
  const { facts } = book;
  const { span } = paperUnits(facts.job);
  const rows = (facts.cables ?? []).flatMap((c) =>
    c.stations.map((s) => [
      c.id,
      edgeStart(facts, c.edge),
      s.for,
      span.of(s.at),
      span.of((s.at * c.slackLength) / c.erectedLength),
      "",
    ]),
  );
  if (rows.length === 0) return;
  const columns: readonly Column[] = [
    { head: ["Cable"], width: 50, bold: true },
    { head: ["Counted from"], width: 40 },
    { head: ["Mark for"], width: 50, bold: true },
    { head: ["Under the mark", `force, ${span.unit}`], width: 46, align: "end", bold: true },
    { head: ["Slack,", span.unit], width: 40, align: "end" },
    { head: ["Marked by, date"], width: 46 },
  ];
  const flow = openFlow(book, "Stations on the cables");
  flowTextInPlace(
    flow,
    "Where seams, plates and clamps meet the cable, along it from the end named. Tape and paint, no notch, no clamp on the strand.",
  );
  flowGapInPlace(flow, 2);
  flowTableInPlace(flow, columns, rows, { size: SIZE });
}

function flowHardware(book: Book, rig: RigFacts): void {
  const { force, pins, travel } = paperUnits(rig.facts.job);
  const columns: readonly Column[] = [
    { head: ["Adjuster"], width: 30, bold: true },
    { head: ["Anchor"], width: 26 },
    { head: ["Thread,", "turnbuckle"], width: 38 },
    { head: ["A turn,", travel.unit], width: 24, align: "end" },
    { head: ["Range, pin to", `pin, ${pins.unit}`], width: 40, align: "end" },
    { head: ["Finished,", pins.unit], width: 30, align: "end", bold: true },
    { head: ["Travel", `used, ${travel.unit}`], width: 28, align: "end" },
    { head: ["Left, in /", `out, ${travel.unit}`], width: 36, align: "end" },
    { head: ["Force,", force.unit], width: 22, align: "end" },
    { head: ["Capac-", `ity, ${force.unit}`], width: 26, align: "end" },
    { head: ["Limit,", force.unit], width: 26, align: "end" },
  ];
  const rows = rig.adjusters.map((a) => {
    const way = travelOf(rig, a);
    const limit = limitOf(rig, a.id);
    return [
      a.id,
      a.anchor,
      `${threadText(a)}: ${typeText(a.turnbuckle)}`,
      travel.of(a.perTurn),
      `${pins.of(a.range.shortest)} – ${pins.of(a.range.longest)}`,
      pins.of(a.pinLength),
      travel.of(way.used),
      `${travel.of(way.leftIn)} / ${travel.of(way.leftOut)}`,
      force.of(finalForce(rig, a.id) ?? a.target),
      a.capacity === null ? "not given" : force.of(a.capacity),
      limit === null ? "not given" : force.of(limit),
    ];
  });
  const flow = openFlow(book, "Hardware list: adjusters");
  flowTableInPlace(flow, columns, rows, { size: SIZE });
  flowGapInPlace(flow, 2);
  flowTextInPlace(
    flow,
    `Left: travel to shorten and to lengthen at the finished state, for re-tensioning. Limit: ${decimal(100 * rig.tensioning.limit, 0)} % of the capacity, which is the least of turnbuckle, fitting and anchor that the job gives. No size is chosen here from prestress: the engineer sizes turnbuckles, pins, plates and anchors from design forces.`,
  );
  const struts = (rig.facts.rig?.struts ?? []).filter((s) => !s.brace);
  if (struts.length > 0) {
    const { span, stiffness } = paperUnits(rig.facts.job);
    flowHeadingInPlace(flow, "Masts and struts");
    const head: readonly Column[] = [
      { head: ["Name"], width: 60, bold: true },
      { head: ["Length without force,", span.unit], width: 60, align: "end" },
      { head: ["EA,", stiffness.unit], width: 40, align: "end" },
      { head: ["Force at prestress,", force.unit], width: 60, align: "end" },
    ];
    const lines = struts.map((s) => [
      s.id,
      span.of(s.slackLength),
      stiffness.of(s.EA),
      pressedText(force.of, finalForce(rig, s.id)),
    ]);
    flowTableInPlace(flow, head, lines, { size: SIZE });
  }
  flowHeadingInPlace(flow, "Caution");
  flowCautionsInPlace(flow, cautionsOf(rig.facts, "hardware"));
}
