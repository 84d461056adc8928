// One piece of cloth on the drawing: its cut outline and what the pen writes on it, where it lies. The same for panels, patches
// and strips, on a roll or alone. Where a mark stands, how high and at which angle is the panels station's decision.
import type { Facts, FactsPanel, FactsPiece, Vec2 } from "../../records/facts.ts";
import { decimal } from "../words/decimal.ts";
import { fromCutStart } from "./cutStart.ts";
import { addLabelInPlace, addStrokeInPlace, type Drawing, textLength } from "./drawing.ts";
import { boxOf, insidePoint } from "./flatGeometry.ts";
import { penTexts, READ_AT_ARMS_LENGTH } from "./penTexts.ts";
import { type StripPlace, stripPlace } from "./stripPlace.ts";
import { addSymbolInPlace, cross } from "./symbols.ts";

/** Where the piece lies: R(rotation)·point + (x, y). */
export interface Lie {
  rotation: 0 | 180;
  x: number;
  y: number;
}

/** A piece in its own axes. */
export const AT_HOME: Lie = { rotation: 0, x: 0, y: 0 };

// A small patch takes what fits.
const NAME_HEIGHT = 40;
const LEAST_HEIGHT = 4;
const CROSS = 10;

/** A point of the piece, as it lies. */
export function placed(point: Vec2, lie: Lie): Vec2 {
  return lie.rotation === 180 ? [lie.x - point[0], lie.y - point[1]] : [lie.x + point[0], lie.y + point[1]];
}

/** Draws the cut outline of a panel with all its marks. */
export function addPanelInPlace(drawing: Drawing, panel: FactsPanel, lie: Lie): void {
  for (const mark of panel.marks) {
    if (mark.points && mark.points.length > 1) {
      // A slit is cut, before the outline that it opens into; everything else is the pen's.
      const layer = mark.kind === "slit" ? "cut" : "mark";
      addStrokeInPlace(drawing, { layer, points: mark.points.map((p) => placed(p, lie)), closed: false });
    }
    if (mark.at && mark.text === undefined) addSymbolInPlace(drawing, cross(CROSS), "mark", placed(mark.at, lie), 0);
  }
  for (const { at, height, angle, text } of penTexts(panel)) {
    addLabelInPlace(drawing, {
      layer: "text",
      at: placed(at, lie),
      height,
      rotation: angle + lie.rotation,
      anchor: "middle",
      text,
    });
  }
  if (!panel.marks.some((m) => m.kind === "name")) addNameInPlace(drawing, panel.id, panel.cut, lie);
  addStrokeInPlace(drawing, { layer: "cut", points: fromCutStart(panel.cut.map((p) => placed(p, lie))), closed: true });
}

/** Draws the cut outline of a patch, strip, cover or test piece with its name and what it belongs to. */
export function addPieceInPlace(drawing: Drawing, facts: Facts, piece: FactsPiece, lie: Lie): void {
  // What the name says already is not said again: the letters can be larger.
  const told = piece.id.includes(piece.for);
  const name = told ? piece.id : `${piece.id} for ${piece.for}`;
  const place = stripPlace(facts, piece);
  if (place) addStripInPlace(drawing, piece, name, place, lie);
  else addNameInPlace(drawing, name, piece.cut, lie);
  addStrokeInPlace(drawing, { layer: "cut", points: fromCutStart(piece.cut.map((p) => placed(p, lie))), closed: true });
}

/** A pocket strip: its fold, its name above it, below it where it lies along its edge and which end is which. */
function addStripInPlace(drawing: Drawing, piece: FactsPiece, name: string, place: StripPlace, lie: Lie): void {
  const { min, max } = boxOf(piece.cut);
  const [length, width] = [max[0] - min[0], max[1] - min[1]];
  const middle = (min[1] + max[1]) / 2;
  const fold: Vec2[] = [
    [min[0], middle],
    [max[0], middle],
  ];
  addStrokeInPlace(drawing, { layer: "mark", points: fold.map((p) => placed(p, lie)), closed: false });
  const mm = (value: number) => decimal(value, 0);
  const lies = `<- ${place.start} END: ${mm(place.from)} to ${mm(place.to)} mm, LENGTH ${mm(length)} mm, PART ${place.part} OF ${place.parts}`;
  const inset = Math.min(20, 0.05 * length);
  const write = (text: string, y: number, most: number) => {
    const fitting = (most * (length - 2 * inset)) / textLength(text, most);
    addLabelInPlace(drawing, {
      layer: "text",
      at: placed([min[0] + inset, y], lie),
      height: Math.max(LEAST_HEIGHT, Math.min(most, fitting, 0.3 * width)),
      rotation: lie.rotation,
      anchor: "start",
      text,
    });
  };
  write(name, middle + width / 4, NAME_HEIGHT);
  write(lies, middle - width / 4, READ_AT_ARMS_LENGTH);
}

/** Writes a name where the outline leaves most room: unnamed cloth is lost cloth. */
function addNameInPlace(drawing: Drawing, name: string, cut: Vec2[], lie: Lie): void {
  const { at, clear } = insidePoint(cut);
  const box = boxOf(cut);
  const lying = box.max[0] - box.min[0] >= box.max[1] - box.min[1];
  const room = 0.7 * Math.max(box.max[0] - box.min[0], box.max[1] - box.min[1]);
  const fitting = (NAME_HEIGHT * room) / textLength(name, NAME_HEIGHT);
  addLabelInPlace(drawing, {
    layer: "text",
    at: placed(at, lie),
    height: Math.max(LEAST_HEIGHT, Math.min(NAME_HEIGHT, fitting, clear)),
    rotation: (lying ? 0 : 90) + lie.rotation,
    anchor: "middle",
    text: name,
  });
}
