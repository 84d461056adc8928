// Finds a free place for each label of a figure: off the lines it must not cross, off the labels already set, inside the figure.
// Greedy, in the order asked; what finds no place is told, never set over something else.
import type { Vec2 } from "../../../records/facts.ts";
import type { Book, Sheet } from "./book.ts";
import { type BoxArea, drawBox, drawText, fitText, SMALL, textWidth } from "./pen.ts";

export interface LabelField {
  within: BoxArea;
  /** Closed outlines no label may cross. */
  outlines: Vec2[][];
  taken: BoxArea[];
}

const CLEAR = 0.4;

function overlap(a: BoxArea, b: BoxArea): boolean {
  return a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height;
}

/** Whether the segment meets the box. @source Liang, Barsky: A new concept and method for line clipping, 1984 */
function meets(p: Vec2, q: Vec2, box: BoxArea): boolean {
  let t0 = 0;
  let t1 = 1;
  const d = [q[0] - p[0], q[1] - p[1]];
  const low = [box.x, box.y];
  const high = [box.x + box.width, box.y + box.height];
  for (const k of [0, 1] as const) {
    if (d[k] === 0) {
      if (p[k] < low[k] || p[k] > high[k]) return false;
      continue;
    }
    const a = (low[k] - p[k]) / d[k];
    const b = (high[k] - p[k]) / d[k];
    t0 = Math.max(t0, Math.min(a, b));
    t1 = Math.min(t1, Math.max(a, b));
  }
  return t0 <= t1;
}

/** Whether a box lies free in the field. */
export function isFree(field: LabelField, box: BoxArea): boolean {
  const { within } = field;
  if (box.x < within.x || box.y < within.y) return false;
  if (box.x + box.width > within.x + within.width || box.y + box.height > within.y + within.height) return false;
  if (field.taken.some((t) => overlap(t, box))) return false;
  return field.outlines.every((o) => o.every((p, i) => !meets(p, o[(i + 1) % o.length], box)));
}

/**
 * Takes the first of the given middles at which a label of this size is free, and keeps the place; null where none is.
 */
export function takePlaceInPlace(
  field: LabelField,
  size: { width: number; height: number },
  middles: Iterable<Vec2>,
): Vec2 | null {
  for (const m of middles) {
    const box = {
      x: m[0] - size.width / 2 - CLEAR,
      y: m[1] - size.height / 2 - CLEAR,
      width: size.width + 2 * CLEAR,
      height: size.height + 2 * CLEAR,
    };
    if (!isFree(field, box)) continue;
    field.taken.push(box);
    return m;
  }
  return null;
}

/** Where a line from a label to a point leaves the label's box. */
export function leaderStart(box: BoxArea, to: Vec2): Vec2 {
  const at: Vec2 = [box.x + box.width / 2, box.y + box.height / 2];
  const d: Vec2 = [to[0] - at[0], to[1] - at[1]];
  const t = Math.min(1, 1 / Math.max(Math.abs(d[0]) / (box.width / 2), Math.abs(d[1]) / (box.height / 2), 1e-9));
  return [at[0] + t * d[0], at[1] + t * d[1]];
}

/** Sets a name on white at the first free of the given middles; false where none is free. */
export function setNameInPlace(
  book: Book,
  sheet: Sheet,
  field: LabelField,
  text: string,
  middles: Iterable<Vec2>,
  style: { bold?: boolean; size?: number; longest?: number; height?: number } = {},
): boolean {
  const font = style.bold ? book.bold : book.regular;
  const size = style.size ?? SMALL;
  const shown = fitText(text, font, size, style.longest ?? 40);
  const width = textWidth(shown, font, size);
  const height = ((style.height ?? 1) * 3.6 * size) / SMALL;
  const at = takePlaceInPlace(field, { width, height }, middles);
  if (!at) return false;
  const box = { x: at[0] - width / 2 - 0.3, y: at[1] - height / 2, width: width + 0.6, height };
  drawBox(sheet.page, box, { width: 0, fill: 1, outline: false });
  drawText(sheet.page, shown, { x: at[0], y: at[1] - (0.32 * 3.6 * size) / SMALL, size, font, align: "middle" });
  return true;
}
