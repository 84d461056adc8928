// Last sheets of the tensioning schedule: what to do outside a window, forces by temperature, the log to fill in, the sign-off.

import { allMoves, type RigFacts } from "../../tables/rigReadings.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import type { Book } from "../layout/book.ts";
import { drawRun, drawText, LARGE } from "../layout/pen.ts";
import {
  type Column,
  flowGapInPlace,
  flowHeadingInPlace,
  flowTableInPlace,
  flowTextInPlace,
  needInPlace,
  openFlow,
  tableHeight,
} from "../layout/table.ts";
import { BODY } from "./scheduleCover.ts";

/** Height a heading asks for, mm. */
const HEADING = 20;

/** The sheet to turn to when a reading does not fit. */
export function flowOutside(book: Book, rig: RigFacts): void {
  const flow = openFlow(book, "When a reading lies outside its window");
  const { travel, force } = paperUnits(rig.facts.job);
  const perTurn = rig.adjusters[0];
  const steps = [
    "STOP. Turn nothing on, let nothing out. Everybody out of the lines of the cables.",
    "Read again: second gauge or second method, zero of the gauge, temperature, wind, is the tape on the middles of the pins, does a cable hang on something, is cloth caught.",
    "Too HIGH before the travel is done: leave the adjuster where it stands, write down pin length and force. Do not turn on to reach the length.",
    "Too LOW when the travel is done: do not turn on to reach the force. Read the other adjusters of the step and its neighbours; look whether a corner stands off its place, a pin is not home, a cable is longer than its mark.",
    "All adjusters off by the same share and the same way: compare temperature with the table of temperatures before anything else.",
    "Anything bent, slipping, noisy, a wrinkle that was not there, an anchor or mast that moved: secure, clear the area, call the engineer.",
    `The engineer decides how it goes on. Readings as they are in the log go back into the plan and come out as corrections; nobody on site corrects by feel: one sixth of a turn (${travel.whole(perTurn.perTurn / 6)} at ${perTurn.id}) moves the forces of all adjusters.`,
  ];
  flowGapInPlace(flow, 2);
  steps.forEach((text, i) => {
    needInPlace(flow, 12);
    const size = LARGE;
    drawText(flow.sheet.page, `${i + 1}.`, { x: flow.sheet.left, y: flow.y - 4.4, size, font: book.bold });
    flowTextInPlace(flow, text, { size, indent: 9 });
    flowGapInPlace(flow, 2);
  });
  const share = Number((100 * rig.tensioning.readingError).toPrecision(3));
  const perForce = `${perTurn.id}: ${force.whole(perTurn.target)}, so ± ${force.whole(rig.tensioning.readingError * perTurn.target)}`;
  const words = `How wide a window is: ± ${share} % of the force an adjuster is aimed at in the end (${perForce}), at every stage, because a gauge errs by its range and not by its reading. At the first stages the window is wide against the force: there the pin lengths and the corners count more.`;
  flowTextInPlace(flow, words, { size: BODY });
}

/** Finished forces when everything is warmer or colder. */
export function flowTemperature(book: Book, rig: RigFacts): void {
  const table = rig.tensioning.temperatureTable;
  if (table.length === 0) return;
  const { temperature, force } = paperUnits(rig.facts.job);
  const flow = openFlow(book, "Finished forces by temperature");
  const columns: readonly Column[] = [
    { head: ["Member", force.unit], width: 60, bold: true },
    ...table.map((row): Column => {
      const here = row.temperature === rig.tensioning.referenceTemperature;
      const head = `${temperature.whole(row.temperature)}`;
      return { head: [head, here ? "reference" : ""], width: 30, align: "end", bold: here };
    }),
  ];
  const ids = Object.keys(table[0].forces);
  const rows = ids.map((id) => [id, ...table.map((r) => (r.forces[id] === undefined ? "–" : force.of(r.forces[id])))]);
  const alpha = rig.tensioning.frameAlpha ?? 0;
  const anchors =
    alpha === 0
      ? "anchors where they are"
      : `anchors moving with their frame (${(1e6 * alpha).toFixed(1)}e-6 a K, as the job says)`;
  flowTextInPlace(
    flow,
    `Cloth, cables and adjusters at one temperature, ${anchors}. Between two columns take the share that lies between. Moves stay as they are, in travel and pins; the forces to read shift. While the roof is taut the difference to the reference column is about the same in amount at earlier stages too (own argument: same stiffness), less while it is slack. Whether a window moves with it, the engineer says.`,
    { size: BODY },
  );
  flowGapInPlace(flow, 2);
  flowTableInPlace(flow, columns, rows, { size: LARGE });
}

/** One line a move to fill in by hand, and lines for what was not planned. */
export function flowLog(book: Book, rig: RigFacts): void {
  const { force, pins, temperature } = paperUnits(rig.facts.job);
  const flow = openFlow(book, "Log");
  const columns: readonly Column[] = [
    { head: ["", "Step"], width: 16, bold: true },
    { head: ["", "Adjuster"], width: 34, bold: true },
    { head: ["Planned", pins.unit], width: 26, align: "end" },
    { head: ["Planned", force.unit], width: 24, align: "end" },
    { head: ["Pins read", pins.unit], width: 30 },
    { head: ["Gauge read", force.unit], width: 30 },
    { head: ["Temp.", temperature.unit], width: 20 },
    { head: ["", "Wind"], width: 20 },
    { head: ["", "Day, time"], width: 32 },
    { head: ["", "By"], width: 24 },
  ];
  const rows = allMoves(rig.tensioning).map((m) => [
    `${m.step}`,
    m.adjuster,
    pins.of(m.pinTo),
    force.of(m.expect),
    ...new Array<string>(6).fill(""),
  ]);
  flowTableInPlace(flow, columns, rows, { size: LARGE });
  // What was not planned is written below: the rest of the sheet, or one more where little is left.
  const row = tableHeight(columns, 1, LARGE) - tableHeight(columns, 0, LARGE);
  const fits = (height: number) => Math.floor((height - tableHeight(columns, 0, LARGE)) / row);
  if (fits(flow.y - flow.sheet.bottom - HEADING) < 4) needInPlace(flow, Infinity);
  flowHeadingInPlace(flow, "Not in the plan");
  const blank = Array.from({ length: Math.min(12, fits(flow.y - flow.sheet.bottom)) }, () =>
    new Array<string>(10).fill(""),
  );
  flowTableInPlace(flow, columns, blank, { size: LARGE });
}

/** Who accepts the roof, and as what. */
export function flowSignOff(book: Book): void {
  const flow = openFlow(book, "Sign-off");
  const text = (words: string) => flowTextInPlace(flow, words, { size: BODY });
  text(
    "Signed when the finished forces lie within their windows, the corners stand where the engineer allows, every turnbuckle is locked and marked, and the log is complete. Read all forces again after a week and after the first warm and cold days: coated cloth relaxes. Keep these sheets with the building.",
  );
  flowGapInPlace(flow, 6);
  const { page, left, right } = flow.sheet;
  const width = (right - left) / 4;
  for (const who of ["In charge on site", "Read and wrote the log", "Engineer, licence no.", "For the owner"]) {
    needInPlace(flow, 18);
    flowGapInPlace(flow, 14);
    ["Name", "Date", "Signature"].forEach((what, i) => {
      const x = left + (i + 1) * width;
      drawText(page, what, { x, y: flow.y, size: BODY, font: book.regular });
      drawRun(
        page,
        [
          [x + 20, flow.y - 0.7],
          [x + width - 4, flow.y - 0.7],
        ],
        { width: 0.2 },
      );
    });
    drawText(page, who, { x: left, y: flow.y, size: LARGE, font: book.bold });
  }
}
