// Lays wide pieces, of which no two lie side by side, one behind the other: their turns and their places across the roll are chosen
// together so that tips run past one another, and their order is sought by the same forecast. What is not wide is laid afterwards into
// what is left. Source: shortest path over turns and places, piece by piece (R. Bellman, Dynamic Programming, 1957); own forecast.
import { buildRandom, drawInteger, type Random } from "../numeric/random.ts";
import { type Bed, type LaidShape, layInPlace } from "./bed.ts";
import { type ChainOffsets, offsetBehind, openOffsets, topLevel } from "./chainOffsets.ts";
import { shiftBehind } from "./layBehind.ts";
import { type Layout, type LayoutCost, layPieces, type NestTask, openBeds } from "./layPieces.ts";
import type { NestShape } from "./nestShape.ts";

/** Places across for each turn, while orders are tried and when one is laid. */
const COARSE = 6;
const FINE = 24;
/** Orders tried a piece, and pieces up to which they are. */
const TRIES = 120;
const MOST = 100;

/** A way one piece may lie. */
interface Stand {
  shape: NestShape;
  level: number;
}

const isWide = (shapes: NestShape[], width: number) =>
  shapes.every((s) => s.height <= width * (1 + 1e-9) && s.height > width / 2);

/** The ways a piece may lie on a roll. */
function standsOf(shapes: NestShape[], places: number, offsets: ChainOffsets): Stand[] {
  return shapes.flatMap((shape) => {
    const top = topLevel(offsets, shape);
    const count = Math.min(places, top + 1);
    return Array.from({ length: count }, (_, k) => ({ shape, level: Math.round((k * top) / Math.max(1, count - 1)) }));
  });
}

/** A piece that may be in a chain. */
interface Link {
  piece: number;
  stands: Stand[];
  /** Offsets to the stands of another link behind it, worked out when they are first asked for. @shape stands × its stands */
  to: Map<Link, Float64Array>;
}

function openLink(piece: number, task: NestTask, places: number, offsets: ChainOffsets): Link {
  return { piece, stands: standsOf(task.shapes[piece], places, offsets), to: new Map() };
}

function offsetsTo(a: Link, b: Link, offsets: ChainOffsets): Float64Array {
  let to = a.to.get(b);
  if (!to) {
    to = Float64Array.from(
      a.stands.flatMap((p) => b.stands.map((q) => offsetBehind(offsets, p.shape, q.shape, q.level - p.level))),
    );
    a.to.set(b, to);
  }
  return to;
}

/** Least lengths to where each stand of the last link begins, and from which stand of the link before each came. */
function runChain(links: Link[], offsets: ChainOffsets): { least: Float64Array; came: Int32Array[] } {
  let least = new Float64Array(links[0].stands.length);
  const came: Int32Array[] = [];
  for (let k = 1; k < links.length; k++) {
    const to = offsetsTo(links[k - 1], links[k], offsets);
    const count = links[k].stands.length;
    const next = new Float64Array(count).fill(Infinity);
    const from = new Int32Array(count);
    for (let i = 0, at = 0; i < least.length; i++)
      for (let j = 0; j < count; j++, at++) {
        const own = least[i] + to[at];
        if (own >= next[j]) continue;
        next[j] = own;
        from[j] = i;
      }
    least = next;
    came.push(from);
  }
  return { least, came };
}

/** Length of the shortest chain of pieces in this order, and how each lies in it. */
function shortestChain(links: Link[], offsets: ChainOffsets): { length: number; chosen: () => Stand[] } {
  const { least, came } = runChain(links, offsets);
  const ends = links[links.length - 1].stands.map((s, i) => least[i] + s.shape.length);
  const length = Math.min(...ends);
  const chosen = () => {
    let at = ends.indexOf(length);
    const list = [links[links.length - 1].stands[at]];
    for (let k = links.length - 1; k > 0; k--) {
      at = came[k - 1][at];
      list.unshift(links[k - 1].stands[at]);
    }
    return list;
  };
  return { length, chosen };
}

const wideOn = (task: NestTask, roll: number, pieces: readonly number[]) => {
  const { size, takes } = task.offers[roll];
  return pieces.filter((p) => takes(p) && isWide(task.shapes[p], size.width));
};

/** The first of these rolls that two pieces or more are wide on; null where there is none. */
export function chainRoll(task: NestTask, rolls: readonly number[]): number | null {
  return rolls.find((roll) => wideOn(task, roll, task.loose).length > 1) ?? null;
}

/** A link moved, two swapped, or a run of them turned round. */
function changeOrder(links: Link[], random: Random): Link[] {
  const trial = [...links];
  const i = drawInteger(random, links.length);
  const j = drawInteger(random, links.length);
  const [from, to] = [Math.min(i, j), Math.max(i, j) + 1];
  const draw = random();
  if (draw < 0.4) trial.splice(j, 0, ...trial.splice(i, 1));
  else if (draw < 0.7) [trial[i], trial[j]] = [trial[j], trial[i]];
  else trial.splice(from, to - from, ...trial.slice(from, to).reverse());
  return trial;
}

/** An order of the pieces that are wide on a roll whose forecast chain is short; the others follow as they come. */
export function orderChain(task: NestTask, order: readonly number[], roll: number, seed: number): number[] {
  const { size } = task.offers[roll];
  const offsets = openOffsets(size.width, size.gap);
  let best = wideOn(task, roll, order).map((p) => openLink(p, task, COARSE, offsets));
  let least = shortestChain(best, offsets).length;
  const random = buildRandom(seed);
  const tries = best.length > MOST ? 0 : TRIES * best.length;
  for (let k = 0; k < tries && !task.stop(); k++) {
    const trial = changeOrder(best, random);
    const { length } = shortestChain(trial, offsets);
    if (length > least) continue;
    best = trial;
    least = length;
  }
  const chained = best.map((l) => l.piece);
  return [...chained, ...order.filter((p) => !chained.includes(p))];
}

/** Lays the wide pieces of an order on one roll; those laid. */
function chainInPlace(bed: Bed, wide: number[], task: NestTask): number[] {
  if (wide.length === 0) return [];
  const offsets = openOffsets(bed.width, bed.gap);
  const links = wide.map((p) => openLink(p, task, FINE, offsets));
  const chosen = shortestChain(links, offsets).chosen();
  return wide.filter((piece, k) => {
    const { shape, level } = chosen[k];
    const laid: LaidShape = { piece, shape, x: 0, y: level * offsets.level, pinned: false };
    const shift = shiftBehind({ laid: [laid], x0: 0, x1: shape.length }, bed);
    if (shift === null || shift + shape.length > bed.length) return false;
    layInPlace(bed, { ...laid, x: shift });
    return true;
  });
}

/**
 * Lays wide pieces as a chain in order, on the first roll that has room, and the others after them one by one.
 * @returns null where the layout grew past the cost to beat, or was told to stop
 */
export function layChain(task: NestTask, order: readonly number[], beat: LayoutCost | null): Layout | null {
  const beds = openBeds(task);
  let left = [...order];
  beds.forEach((bed, b) => {
    if (task.stop()) return;
    const wide = left.filter((p) => task.offers[b].takes(p) && isWide(task.shapes[p], bed.width));
    const laid = new Set(chainInPlace(bed, wide, task));
    left = left.filter((p) => !laid.has(p));
  });
  if (task.stop()) return null;
  return layPieces(task, { order: left, rule: "least x", begun: beds }, beat);
}
