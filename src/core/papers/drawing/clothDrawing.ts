// One piece of cloth on the drawing: its cut outline and what the pen writes on it, where it lies. The same for panels, patches
// and strips, on a roll or alone. Where a mark stands, how high and at which angle is the panels station's decision.
import type { FactsPanel, FactsPiece, Vec2 } from "../../records/facts.ts";
import { addLabelInPlace, addStrokeInPlace, type Drawing, textLength } from "./drawing.ts";
import { boxOf, insidePoint } from "./flatGeometry.ts";
import { addSymbolInPlace, cross } from "./symbols.ts";

/** Where the piece lies: R(rotation)·point + (x, y). */
export interface Lie {
  rotation: 0 | 180;
  x: number;
  y: number;
}

/** A piece in its own axes. */
export const AT_HOME: Lie = { rotation: 0, x: 0, y: 0 };

// Lettering on cut pieces at least 10 mm high (common practice); a small patch takes what fits.
const NAME_HEIGHT = 40;
const MARK_HEIGHT = 10;
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
    if (!mark.at) continue;
    if (mark.text === undefined) {
      addSymbolInPlace(drawing, cross(CROSS), "mark", placed(mark.at, lie), 0);
      continue;
    }
    addLabelInPlace(drawing, {
      layer: "text",
      at: placed(mark.at, lie),
      height: mark.height ?? MARK_HEIGHT,
      rotation: (mark.angle ?? 0) + lie.rotation,
      anchor: "middle",
      text: mark.text,
    });
  }
  if (!panel.marks.some((m) => m.kind === "name")) addNameInPlace(drawing, panel.id, panel.cut, lie);
  addStrokeInPlace(drawing, { layer: "cut", points: panel.cut.map((p) => placed(p, lie)), closed: true });
}

/** Draws the cut outline of a patch, strip, cover or test piece with its name and what it belongs to. */
export function addPieceInPlace(drawing: Drawing, piece: FactsPiece, lie: Lie): void {
  // What the name says already is not said again: the letters can be larger.
  const told = piece.id.includes(piece.for);
  addNameInPlace(drawing, told ? piece.id : `${piece.id} for ${piece.for}`, piece.cut, lie);
  addStrokeInPlace(drawing, { layer: "cut", points: piece.cut.map((p) => placed(p, lie)), closed: true });
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
