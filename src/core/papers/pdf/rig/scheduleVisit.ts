// The visit after the cloth has settled: what is read again, in which window, and how much travel is there for it.
import { holdReadings, type RigFacts } from "../../tables/rigReadings.ts";
import { travelOf } from "../../tables/rigTables.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import type { Book } from "../layout/book.ts";
import { LARGE } from "../layout/pen.ts";
import { type Column, flowGapInPlace, flowTableInPlace, flowTextInPlace, openFlow } from "../layout/table.ts";
import { BODY } from "./scheduleCover.ts";

/** One row an adjuster, to be filled in on the visit. */
export function flowVisit(book: Book, rig: RigFacts): void {
  const { force, travel, temperature, pins } = paperUnits(rig.facts.job);
  const flow = openFlow(book, "Re-tension visit after settling");
  const words = `Coated cloth relaxes and ropes that were not prestretched grow: forces fall in the first weeks. Read all adjusters again after a week, and after the first warm and cold days; the engineer names the day of this visit. Read at ${temperature.whole(rig.tensioning.referenceTemperature)} or take the forces from the table of temperatures. Inside the window: leave it, lock it, paint it. Outside: turn nothing by feel; send the readings in, the corrections come back with the reading to expect after each turn. Unlock and lock again every turnbuckle that is touched.`;
  flowTextInPlace(flow, words, { size: BODY });
  flowGapInPlace(flow, 2);
  const columns: readonly Column[] = [
    { head: ["", "Adjuster"], width: 30, bold: true },
    { head: ["Final", force.unit], width: 24, align: "end", bold: true },
    { head: ["Window", force.unit], width: 36, align: "end" },
    { head: ["Pins, by", `tape, ${pins.unit}`], width: 28, align: "end" },
    { head: ["Left to", `shorten, ${travel.unit}`], width: 34, align: "end" },
    { head: ["Read", force.unit], width: 22 },
    { head: ["Pins read", pins.unit], width: 26 },
    { head: ["Turned,", "turns"], width: 22 },
    { head: ["Then", `read, ${force.unit}`], width: 26 },
    { head: ["", "Locked"], width: 25 },
  ];
  const last = rig.tensioning.stages[rig.tensioning.stages.length - 1];
  const windows = new Map(holdReadings(rig, last).map((r) => [r.id, r]));
  const rows = rig.adjusters.map((a) => {
    const window = windows.get(a.id);
    return [
      a.id,
      window ? force.of(window.planned) : "–",
      window ? `${force.of(window.low)} – ${force.of(window.high)}` : "–",
      pins.of(a.pinLength),
      travel.of(travelOf(rig, a).leftIn),
      ...new Array<string>(5).fill(""),
    ];
  });
  flowTableInPlace(flow, columns, rows, { size: LARGE });
}
