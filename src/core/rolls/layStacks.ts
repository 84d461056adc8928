// Lays long strips in stacks: one above the other across the roll as close as their outlines allow, spoons or half-turn pairs,
// then stack behind stack along it, tips interleaved. What is no long strip is laid afterwards into what is left.
// Does not: choose the order (searchOrders.ts). Source: packing of monotone strips by dropping one profile onto another, own.
import { type Bed, type LaidShape, layInPlace, settle } from "./bed.ts";
import { type Stack, shiftBehind } from "./layBehind.ts";
import { type Layout, type LayoutCost, layPieces, type NestTask, openBeds } from "./layPieces.ts";
import type { NestShape } from "./nestShape.ts";
import { slideRoom } from "./slideRoom.ts";

/** How stacks are built. */
export interface StackRule {
  /** Shifts along the roll a strip may have against the first of its stack, shares of that one's length. */
  shifts: readonly number[];
}

/** A long strip is so many times longer than high, and at least that share of the roll's width long. */
const SLIM = 2;
const LONG = 0.5;
/** Strips of a stack are at least this share of the first one's length. */
const ALIKE = 0.6;
/** Kinds of strips looked at for the next place of a stack. */
const LOOK = 6;

const isLong = (shape: NestShape, bed: Bed) =>
  shape.length >= SLIM * shape.height && shape.length >= LONG * bed.width && shape.height <= bed.width;

/** Where a shape comes to lie that is dropped onto a stack at x. */
function dropOn(stack: Stack, shape: NestShape, x: number, bed: Bed): number {
  const at = { shape, x, y: 2 * bed.width + shape.height };
  let room = at.y;
  for (const other of stack.laid) room = slideRoom(at, other, 1, bed.gap, room);
  return at.y - room;
}

/** The lowest place of a piece on top of a stack, or null where the roll is too narrow for it. */
function topPlace(stack: Stack, piece: number, task: NestTask, bed: Bed, rule: StackRule): LaidShape | null {
  const first = stack.laid[0];
  let best: LaidShape | null = null;
  let least = bed.width + 1e-9 * bed.width;
  for (const shape of task.shapes[piece])
    for (const shift of rule.shifts) {
      // A shift of none lets ends lie flush at either end.
      const ends = shift === 0 ? [0, first.shape.length - shape.length] : [shift * first.shape.length];
      for (const dx of shift === 0 && ends[1] === 0 ? [0] : ends) {
        const y = dropOn(stack, shape, first.x + dx, bed);
        const top = y + shape.height;
        if (top >= least * (1 - 1e-12)) continue;
        least = top;
        best = { piece, shape, x: first.x + dx, y, pinned: false };
      }
    }
  return best;
}

/** A stack that begins with the first of these pieces; those it takes, by number. */
function buildStack(pieces: readonly number[], task: NestTask, bed: Bed, rule: StackRule): Stack {
  const [first, ...others] = pieces;
  const shape = task.shapes[first][0];
  const stack: Stack = { laid: [{ piece: first, shape, x: 0, y: 0, pinned: false }], x0: 0, x1: shape.length };
  let left = others.filter((p) => task.shapes[p][0].length >= ALIKE * shape.length);
  for (;;) {
    const kinds = new Set<string>();
    let next: LaidShape | null = null;
    for (const p of left) {
      if (kinds.size >= LOOK) break;
      const { key } = task.shapes[p][0];
      if (kinds.has(key)) continue;
      kinds.add(key);
      next = topPlace(stack, p, task, bed, rule);
      if (next) break;
    }
    if (!next) return stack;
    const { piece } = next;
    left = left.filter((p) => p !== piece);
    stack.laid.push(next);
    stack.x0 = Math.min(stack.x0, next.x);
    stack.x1 = Math.max(stack.x1, next.x + next.shape.length);
  }
}

/** The stack turned by 180 degrees as a whole, or null where a strip may not be turned. */
function turnStack(stack: Stack, task: NestTask, bed: Bed): Stack | null {
  const laid: LaidShape[] = [];
  for (const p of stack.laid) {
    const shape = task.shapes[p.piece].find((s) => s.rotation === (p.shape.rotation + 180) % 360);
    if (!shape) return null;
    laid.push({ ...p, shape, x: -p.x - shape.length, y: bed.width - p.y - shape.height });
  }
  return { laid, x0: -stack.x1, x1: -stack.x0 };
}

/** Lays a stack at the end of a roll, turned as lets it come nearer. False where it has no room. */
function chainInPlace(bed: Bed, stack: Stack, task: NestTask): boolean {
  const turned = turnStack(stack, task, bed);
  let best: { stack: Stack; shift: number } | null = null;
  for (const s of turned ? [stack, turned] : [stack]) {
    const shift = shiftBehind(s, bed);
    if (shift === null || s.x1 + shift > bed.length) continue;
    if (!best || s.x1 + shift < best.stack.x1 + best.shift - 1e-9 * bed.width) best = { stack: s, shift };
  }
  if (!best) return false;
  const { shift } = best;
  const fresh = best.stack.laid.map((p): LaidShape => ({ ...p, x: p.x + shift }));
  bed.laid.push(...fresh);
  for (const p of [...fresh].sort((a, b) => a.x - b.x || a.y - b.y)) Object.assign(p, settle(bed, p, 2));
  bed.laid.length -= fresh.length;
  for (const p of fresh) layInPlace(bed, p);
  return true;
}

/**
 * Lays long strips stack by stack in order, each stack on the first roll that has room, and the others after them one by one.
 * @returns null where the layout grew past the cost to beat, or was told to stop
 */
export function layStacks(
  task: NestTask,
  order: readonly number[],
  rule: StackRule,
  beat: LayoutCost | null,
): Layout | null {
  const beds = openBeds(task);
  let left = [...order];
  const laid = new Set<number>();
  beds.forEach((bed, b) => {
    const refused = new Set<number>();
    for (;;) {
      const open = left.filter(
        (p) => !refused.has(p) && task.offers[b].takes(p) && task.shapes[p].some((s) => isLong(s, bed)),
      );
      if (open.length === 0 || task.stop()) return;
      const stack = buildStack(open, task, bed, rule);
      if (!chainInPlace(bed, stack, task)) {
        refused.add(open[0]);
        continue;
      }
      for (const p of stack.laid) laid.add(p.piece);
      left = left.filter((p) => !laid.has(p));
    }
  });
  if (task.stop()) return null;
  return layPieces(task, { order: left, rule: "least x", begun: beds }, beat);
}
