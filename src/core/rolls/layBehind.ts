// Lays things that belong together behind all that lies on a roll, as near as they come: slid exactly, past flaws where they must.
// Does not: choose what, or turn it. Source: own.
import { type Bed, bedReach, type LaidShape } from "./bed.ts";
import { slideRoom } from "./slideRoom.ts";

/** Shapes that keep their places to one another. */
export interface Stack {
  laid: LaidShape[];
  /** Extent along the roll. */
  x0: number;
  x1: number;
}

/** Shift that brings a stack from a place behind all pieces as near to them as it comes, or null where it would lie on a flaw. */
function shiftFrom(stack: Stack, bed: Bed, from: number): number | null {
  let room = Infinity;
  for (const p of stack.laid) {
    const at = { shape: p.shape, x: p.x + from, y: p.y };
    room = Math.min(room, at.x - bed.start);
    for (const list of [bed.laid, bed.flawShapes])
      for (const other of list) room = slideRoom(at, other, 0, bed.gap, room);
  }
  const shift = from - room;
  const clear = bed.flawShapes.every((f) =>
    stack.laid.every(
      (p) =>
        p.x + shift >= f.x + f.shape.length + bed.gap ||
        p.x + shift + p.shape.length + bed.gap <= f.x ||
        p.y >= f.y + f.shape.height + bed.gap ||
        p.y + p.shape.height + bed.gap <= f.y,
    ),
  );
  return clear ? shift : null;
}

/** Shift along the roll that brings a stack behind all pieces there; behind flaws too where it has no room before them. */
export function shiftBehind(stack: Stack, bed: Bed): number | null {
  const behind = Math.max(bedReach(bed), bed.start) + bed.gap + 2 * bed.slack;
  const pastFlaws = bed.flawShapes.map((f) => f.x + f.shape.length + bed.gap + 2 * bed.slack);
  for (const at of [behind, ...pastFlaws.filter((x) => x > behind).sort((a, b) => a - b)]) {
    const shift = shiftFrom(stack, bed, at - stack.x0);
    if (shift !== null) return shift;
  }
  return null;
}
