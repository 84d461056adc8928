// The drawing of one roll as it goes to the table: the bed with what must not be cut, every placed piece, and a bar that
// shows in which unit the file was read. Also the drawing of one panel alone.

import type { Facts, FactsPanel, Vec2 } from "../../records/facts.ts";
import type { NestedRoll, Placement } from "../../records/roll.ts";
import { decimal } from "../words/decimal.ts";
import { stampOf } from "../words/stamp.ts";
import { batchOf } from "./clothBatch.ts";
import { AT_HOME, addPanelInPlace, addPieceInPlace } from "./clothDrawing.ts";
import { CUT_START } from "./cutStart.ts";
import {
  addLabelInPlace,
  addStrokeInPlace,
  type Drawing,
  emptyDrawing,
  textLength,
  withoutRepeats,
} from "./drawing.ts";
import { boxOf } from "./flatGeometry.ts";
import { placedInOrder } from "./placedCloth.ts";
import { withSharedCuts } from "./sharedCuts.ts";
import { addSymbolInPlace, scaleBar } from "./symbols.ts";

const BAR = 1000;
const NOTE_HEIGHT = 40;
const NOTE_PITCH = 80;
const STAMP_HEIGHT = 140;
/** Least length of a feed mark, mm. */
const FEED_MARK = 30;

/** A roll's cloth as it lies, nothing else. */
function clothOf(facts: Facts, roll: NestedRoll): Drawing {
  const drawing = emptyDrawing(`Roll ${roll.id}`);
  for (const { p, panel, piece } of placedInOrder(facts, roll)) {
    if (panel) addPanelInPlace(drawing, panel, p);
    else if (piece) addPieceInPlace(drawing, facts, piece, p);
  }
  return withoutRepeats(drawing);
}

/**
 * The roll with all that lies on it, as it lies, from the start of the roll to the end of the used length. The lower left corner
 * of everything drawn is the outer corner of the cloth: x = 0, y = −selvedge. Where the nest leaves no gap, an edge that two pieces
 * share is cut once.
 * @param before what was cut from this roll before, where only a length of it is drawn
 * @throws PlanError "papers-unknown-piece" for a placement of cloth that the facts do not hold
 */
export function rollDrawing(
  facts: Facts,
  roll: NestedRoll,
  words: readonly string[] = [],
  before: readonly Placement[] = [],
): Drawing {
  const all = clothOf(facts, roll);
  const earlier = roll.gap > 0 ? [] : clothOf(facts, { ...roll, placements: [...before] }).strokes;
  const { drawing, shared } = roll.gap > 0 ? { drawing: all, shared: 0 } : withSharedCuts(all, earlier);
  const selvedge = (roll.width - roll.usableWidth) / 2;
  const end = Math.max(roll.used, 1);
  addBoxInPlace(drawing, [0, -selvedge], [end, roll.width - selvedge]);
  if (selvedge > 0) {
    for (const y of [0, roll.usableWidth]) addLineInPlace(drawing, [0, y], [end, y]);
  }
  for (const flaw of roll.flaws) {
    // What lies beyond the drawn length is nobody's business at this table.
    if (flaw.x >= end) continue;
    const far: Vec2 = [Math.min(flaw.x + flaw.length, end), flaw.y + flaw.width];
    addBoxInPlace(drawing, [flaw.x, flaw.y], far);
    addLineInPlace(drawing, [flaw.x, flaw.y], far);
    addLineInPlace(drawing, [flaw.x, far[1]], [far[0], flaw.y]);
    addNoteInPlace(drawing, "FLAW", [flaw.x, far[1] + 20], 20);
  }
  addFeedsInPlace(drawing, roll, selvedge);
  const notes = [
    `ROLL ${roll.id}  FABRIC ${roll.fabric}  BATCH ${roll.batch ?? "not given"}  OUTER FACE UP`,
    `WIDTH ${decimal(roll.width, 0)}  USABLE ${decimal(roll.usableWidth, 0)}  USED LENGTH ${decimal(roll.used, 0)}  PIECES ${roll.placements.length}`,
    ...(roll.outerFace === "down"
      ? ["INNER FACE UP AS IT COMES OFF THE ROLL: TURN THE CLOTH OVER LENGTHWISE FIRST"]
      : []),
    ...(shared > 0 ? [`SHARED EDGES, ${decimal(shared, 0)} MM, ARE CUT ONCE: OUTLINES BESIDE THEM ARE OPEN RUNS`] : []),
    ...words,
  ];
  addNotesInPlace(drawing, facts, notes, [0, roll.width - selvedge + 100]);
  return withoutRepeats(drawing);
}

/** One panel alone in its own axes, warp along x, outer face up. */
export function panelDrawing(facts: Facts, panel: FactsPanel): Drawing {
  const drawing = emptyDrawing(`Panel ${panel.id}`);
  addPanelInPlace(drawing, panel, AT_HOME);
  const box = boxOf(panel.cut);
  const notes = [
    `PANEL ${panel.id}  FABRIC ${panel.fabric}  BATCH ${batchOf(facts, panel) ?? "not given"}  OUTER FACE UP  WARP ALONG X`,
  ];
  addNotesInPlace(drawing, facts, notes, [box.min[0], box.max[1] + 100]);
  return withoutRepeats(drawing);
}

/** Where the cloth is fed on: a stroke on either selvedge, drawn past the edge where there is none. */
function addFeedsInPlace(drawing: Drawing, roll: NestedRoll, selvedge: number): void {
  const reach = Math.max(selvedge, FEED_MARK);
  (roll.feeds ?? []).forEach((x, k) => {
    if (x <= 0 || x >= roll.used) return;
    addLineInPlace(drawing, [x, -reach], [x, 0]);
    addLineInPlace(drawing, [x, roll.usableWidth], [x, roll.usableWidth + reach]);
    addNoteInPlace(drawing, `FEED ${k + 1}`, [x + 10, roll.usableWidth + reach + 5], 20);
  });
}

function addLineInPlace(drawing: Drawing, a: Vec2, b: Vec2): void {
  addStrokeInPlace(drawing, { layer: "bed", points: [a, b], closed: false });
}

function addBoxInPlace(drawing: Drawing, a: Vec2, b: Vec2): void {
  addStrokeInPlace(drawing, { layer: "bed", points: [a, [b[0], a[1]], b, [a[0], b[1]]], closed: true });
}

function addNoteInPlace(drawing: Drawing, text: string, at: Vec2, height: number): void {
  addLabelInPlace(drawing, {
    layer: "bed",
    at: [at[0], at[1] + height / 2],
    height,
    rotation: 0,
    anchor: "start",
    text,
  });
}

/** The bar, the unit, whose sheet this is, and the stamp, stacked upward from the given corner. */
function addNotesInPlace(drawing: Drawing, facts: Facts, notes: readonly string[], corner: Vec2): void {
  const { job } = facts;
  const [x, y] = corner;
  addSymbolInPlace(drawing, scaleBar(BAR), "bed", corner, 0);
  const unit = `UNITS MM: this bar is ${BAR} mm long. If it is not, do not cut.`;
  addNoteInPlace(drawing, unit, [x, y + 60], NOTE_HEIGHT);
  const before = job.supersedes ? `  SUPERSEDES ${job.supersedes}` : "";
  const given = (text: string) => text || "not given";
  const sheet = [
    CUT_START,
    `${job.title}  ISSUE ${job.issue}${before}  REVISION ${job.revision}  DATE ${given(job.date)}`,
    `DRAWN BY ${given(job.drawnBy)}  CHECKED BY ${given(job.checkedBy)}`,
  ];
  [...notes, ...sheet].forEach((text, i) => {
    addNoteInPlace(drawing, text, [x, y + 60 + NOTE_PITCH * (i + 1)], NOTE_HEIGHT);
  });
  const stamp = stampOf(facts);
  if (stamp === "") return;
  const at: Vec2 = [x, y + 60 + NOTE_PITCH * (notes.length + 1 + sheet.length) + 40];
  addNoteInPlace(drawing, stamp, at, STAMP_HEIGHT);
  const length = textLength(stamp, STAMP_HEIGHT);
  addBoxInPlace(drawing, [at[0] - 30, at[1] - 40], [at[0] + length + 30, at[1] + STAMP_HEIGHT + 40]);
}
