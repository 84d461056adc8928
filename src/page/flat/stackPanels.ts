// Where panels stand on a sheet that shows them all: in reading order, down as many columns as show them largest.

export interface Box {
  w: number;
  h: number;
}

export interface Stack {
  /** Upper left corner of each box, y down. */
  at: { x: number; y: number }[];
  width: number;
  height: number;
}

/** Boxes in `columns` columns of about equal height, with `gap` round each. */
function stackIn(columns: number, boxes: readonly Box[], gap: number): Stack {
  const whole = boxes.reduce((sum, b) => sum + b.h + gap, 0);
  const at: Stack["at"] = [];
  let [x, y, wide, height, done] = [gap, gap, 0, 0, 0];
  let column = 1;
  for (const b of boxes) {
    // a box goes where more than half of it belongs
    if (y > gap && done + (b.h + gap) / 2 > (whole * column) / columns) {
      [x, y, wide, column] = [x + wide + gap, gap, 0, column + 1];
    }
    at.push({ x, y });
    y += b.h + gap;
    done += b.h + gap;
    wide = Math.max(wide, b.w);
    height = Math.max(height, y);
  }
  return { at, width: x + wide + gap, height };
}

/**
 * The stack that shows boxes largest on a sheet of that shape.
 * @param shape width of the sheet over its height
 */
export function stackPanels(boxes: readonly Box[], gap: number, shape: number): Stack {
  const sizeOf = (s: Stack) => Math.max(s.width / shape, s.height);
  let best = stackIn(1, boxes, gap);
  for (let columns = 2; columns <= boxes.length; columns++) {
    const next = stackIn(columns, boxes, gap);
    if (sizeOf(next) < sizeOf(best)) best = next;
  }
  return best;
}
