// The hold point at the end of a stage: forces of all members and distances between corners, read, compared and signed before
// anyone goes on.
import type { FactsStage } from "../../../records/rig.ts";
import { cornerDistances, cornerHeights, holdReadings, type RigFacts } from "../../tables/rigReadings.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import { drawBox, drawRun, drawText, LARGE } from "../layout/pen.ts";
import {
  type Column,
  drawTable,
  type Flow,
  flowGapInPlace,
  flowHalvesInPlace,
  flowHeadingInPlace,
  flowTextInPlace,
  needInPlace,
  tableHeight,
} from "../layout/table.ts";
import { BODY } from "./scheduleCover.ts";

const SIGN_HEIGHT = 15.5;
/** Heading and words, mm. */
const HEAD = 25;

interface Table {
  columns: readonly Column[];
  rows: string[][];
}

function forceTable(rig: RigFacts, stage: FactsStage): Table {
  const { force } = paperUnits(rig.facts.job);
  const columns: Column[] = [
    { head: ["", "Member"], width: 44, bold: true },
    { head: ["Planned", force.unit], width: 25, align: "end", bold: true },
    { head: ["Window", force.unit], width: 36, align: "end" },
    { head: ["Read", force.unit], width: 25 },
  ];
  const rows = holdReadings(rig, stage).map((r) => [
    r.id,
    force.of(r.planned),
    // A dash between numbers below nothing reads as a third minus.
    `${force.of(r.low)} ${r.low < 0 ? "to" : "–"} ${force.of(r.high)}`,
    "",
  ]);
  return { columns, rows };
}

function cornerTable(rig: RigFacts, stage: FactsStage): Table {
  const { span } = paperUnits(rig.facts.job);
  const distances = cornerDistances(rig, stage);
  const heights = cornerHeights(rig, stage);
  const planned = [...distances, ...heights].some((d) => d.atStage !== null);
  const columns: Column[] = [
    { head: ["Near pins:", "between, height"], width: 44, bold: true },
    ...(planned ? [{ head: ["Planned", span.unit], width: 27, align: "end" as const, bold: true }] : []),
    { head: ["Finished", span.unit], width: 27, align: "end" },
    { head: ["Measured", span.unit], width: 27 },
  ];
  const lines = [
    ...distances.map((d) => ({ ...d, name: `${d.from} – ${d.to}` })),
    ...heights.map((h) => ({ ...h, name: `${h.id}, height` })),
  ];
  const rows = lines.map((d) => [
    d.name,
    ...(planned ? [d.atStage === null ? "–" : span.of(d.atStage)] : []),
    span.of(d.finished),
    "",
  ]);
  return { columns, rows };
}

/** How far a corner may stand off its place nobody but the engineer says: a row for it where the table stands whole. */
function withAllowed({ columns, rows }: Table): Table {
  if (rows.length === 0) return { columns, rows };
  return { columns, rows: [...rows, ["Allowed ±", ...new Array<string>(columns.length - 1).fill("")]] };
}

/** The hold point of stage k: tables side by side where a sheet holds them so, else each in two halves. */
export function flowHoldInPlace(flow: Flow, rig: RigFacts, stage: FactsStage, k: number): void {
  const last = k === rig.tensioning.stages.length - 1;
  const forces = forceTable(rig, stage);
  const bare = cornerTable(rig, stage);
  const whole = flow.sheet.top - flow.sheet.bottom;
  const allowed = withAllowed(bare);
  const heights = [forces, allowed].map((t) => tableHeight(t.columns, t.rows.length, LARGE));
  const halves = [forces, bare].map((t) => tableHeight(t.columns, Math.ceil(t.rows.length / 2), LARGE));
  const beside = HEAD + Math.max(...heights) + SIGN_HEIGHT <= whole;
  const wanted = HEAD + (beside ? Math.max(...heights) : halves[0] + halves[1] + 1.5) + SIGN_HEIGHT;
  if (wanted > flow.y - flow.sheet.bottom) needInPlace(flow, Infinity);
  const corners = beside ? allowed : bare;
  const pressed = holdReadings(rig, stage).some((r) => r.planned < 0);
  const at = paperUnits(rig.facts.job).temperature.whole(rig.tensioning.referenceTemperature);
  const words = `Half an hour later read all members (windows hold at ${at}${pressed ? ", minus is pressed" : ""}) and measure the corners at the near pins, on the cloth's side: distances by tape, heights by level, z of the mesh. ${last ? "Lock every turnbuckle, mark it with paint." : "Turn nothing on before this is signed."} A cable in its pocket cannot be read: leave it blank.`;
  flowHeadingInPlace(flow, `HOLD POINT ${k + 1}`);
  flowTextInPlace(flow, words, { size: BODY });
  flowGapInPlace(flow, 1.5);
  if (beside) {
    const width = flow.sheet.right - flow.sheet.left;
    // Feet and inches are longer than metres, kip shorter than kN.
    const share = rig.facts.job.units === "imperial" ? 0.45 : 0.54;
    const area = { left: flow.sheet.left, width: share * width, y: flow.y, size: LARGE };
    drawTable(flow.book, flow.sheet, forces.columns, forces.rows, area);
    const right = { ...area, left: flow.sheet.left + (share + 0.02) * width, width: (0.98 - share) * width };
    if (corners.rows.length > 0) drawTable(flow.book, flow.sheet, corners.columns, corners.rows, right);
    flow.y -= Math.max(...heights);
  } else {
    flowHalvesInPlace(flow, forces.columns, forces.rows, { size: LARGE });
    flowGapInPlace(flow, 1.5);
    flowHalvesInPlace(flow, corners.columns, corners.rows, { size: LARGE });
  }
  signInPlace(flow, last ? "Finished state accepted" : "Released for the next stage");
}

/** A framed row to sign. */
function signInPlace(flow: Flow, what: string): void {
  needInPlace(flow, SIGN_HEIGHT);
  const { page, left, right } = flow.sheet;
  const { regular, bold } = flow.book;
  const top = flow.y - 1.5;
  drawBox(page, { x: left, y: top - 14, width: right - left, height: 14 }, { width: 0.6 });
  drawText(page, what, { x: left + 2, y: top - 5, size: LARGE, font: bold });
  const fields = ["Wind", "Cloth temp.", "Time", "Name", "Signature"];
  const width = (right - left - 4) / fields.length;
  fields.forEach((field, i) => {
    const x = left + 2 + i * width;
    drawText(page, field, { x, y: top - 11.5, size: BODY, font: regular });
    const line = (dx: number): [number, number] => [x + dx, top - 12.1];
    drawRun(page, [line(24), line(width - 3)], { width: 0.2 });
  });
  flowGapInPlace(flow, SIGN_HEIGHT);
}
