// Moves one piece of a strip to the cheapest place found: random places near, far and in touch with others, the best few of them
// refined by coordinate descent. Does not: choose the piece. Source: own settings of common practice (packing.md, 6).
import { drawInteger, type Random } from "../../numeric/random.ts";
import { fieldOf, pricePlace, putPiece, type Strip } from "./strip.ts";

interface Place {
  s: number;
  x: number;
  y: number;
  price: number;
}

/** Random places tried near the piece, anywhere, and in touch with another piece. */
export const SAMPLES = { near: 12, far: 12, touch: 24, keep: 3 };
/** Places nearer than this share of the piece are one. */
const SAME = 0.1;
/** Steps of the descent, shares of the piece's lesser extent: of each kept place from, to; then of the best down to. */
const STEPS = [0.25, 0.02, 0.0005];

/** Coordinate descent from a place: along, across and aslant, steps growing with success. */
function descendInPlace(strip: Strip, i: number, place: Place, span: [number, number], random: Random): void {
  const shape = strip.task.shapes[place.s];
  const xMin = strip.task.start;
  const xMax = strip.length - shape.length;
  const yMax = strip.task.width - shape.height;
  const [from, to] = span;
  let stepX = from;
  let stepY = from;
  while ((stepX > to || stepY > to) && place.price > 0) {
    const way = random();
    const dx = way < 0.4 || way >= 0.8 ? stepX : 0;
    const dy = way < 0.4 ? 0 : way < 0.9 ? stepY : -stepY;
    let found = false;
    for (let sign = 1; sign >= -1 && !found; sign -= 2) {
      const x = Math.max(xMin, Math.min(xMax, place.x + sign * dx));
      const y = Math.max(0, Math.min(yMax, place.y + sign * dy));
      if (x === place.x && y === place.y) continue;
      const price = pricePlace(strip, i, place.s, x, y, place.price);
      if (price >= place.price) continue;
      place.x = x;
      place.y = y;
      place.price = price;
      found = true;
    }
    const by = found ? 1.1 : 0.5;
    if (dx !== 0) stepX *= by;
    if (dy !== 0) stepY *= by;
  }
}

/** Keeps the cheapest places, dearest last, none near another. */
function keepPlace(strip: Strip, top: Place[], place: Place): void {
  const shape = strip.task.shapes[place.s];
  for (const p of top) {
    if (p.s !== place.s) continue;
    if (Math.abs(p.x - place.x) > SAME * shape.length || Math.abs(p.y - place.y) > SAME * shape.height) continue;
    if (place.price >= p.price) return;
    top.splice(top.indexOf(p), 1);
    break;
  }
  if (top.length > SAMPLES.keep) top.pop();
  let k = top.length;
  top.push(place);
  for (; k > 0 && top[k - 1].price > place.price; k--) [top[k - 1], top[k]] = [top[k], top[k - 1]];
}

function tryPlace(strip: Strip, i: number, s: number, at: { x: number; y: number }, top: Place[]): void {
  const { shapes, start, width } = strip.task;
  const x = Math.max(start, Math.min(strip.length - shapes[s].length, at.x));
  const y = Math.max(0, Math.min(width - shapes[s].height, at.y));
  const bound = top.length <= SAMPLES.keep ? Infinity : top[top.length - 1].price;
  const price = pricePlace(strip, i, s, x, y, bound);
  if (price < bound) keepPlace(strip, top, { s, x, y, price });
}

/** A place at which shape s touches another piece, often at a corner; null where it does not lie on the strip. */
function touchingPlace(strip: Strip, i: number, s: number, random: Random): { x: number; y: number } | null {
  const j = drawInteger(random, strip.n - 1);
  const other = j < i ? j : j + 1;
  const t = strip.shape[other];
  const { sides } = s <= t ? fieldOf(strip, s, t) : fieldOf(strip, t, s);
  if (sides.length === 0) return null;
  const k = 4 * drawInteger(random, sides.length / 4);
  const share = Math.max(0, 2 * random() - 1);
  const sign = s <= t ? 1 : -1;
  const x = strip.x[other] + sign * (sides[k] + share * (sides[k + 2] - sides[k]));
  const y = strip.y[other] + sign * (sides[k + 1] + share * (sides[k + 3] - sides[k + 1]));
  const { shapes, start, width } = strip.task;
  const inside = x >= start && x + shapes[s].length <= strip.length && y >= 0 && y + shapes[s].height <= width;
  return inside ? { x, y } : null;
}

/** Whether shape s fits between the start and the end of the strip. */
function fits(strip: Strip, s: number): boolean {
  const { shapes, start, width } = strip.task;
  return shapes[s].length <= strip.length - start && shapes[s].height <= width;
}

/** Moves piece i where it costs least; false where no place is cheaper than its own. */
export function movePiece(strip: Strip, i: number, random: Random): boolean {
  const { choices, shapes, start, width } = strip.task;
  const here: Place = { s: strip.shape[i], x: strip.x[i], y: strip.y[i], price: 0 };
  here.price = pricePlace(strip, i, here.s, here.x, here.y, Infinity);
  if (here.price <= 0) return false;
  const before = here.price;
  const top: Place[] = [here];
  const own = choices[i].filter((s) => fits(strip, s));
  const old = shapes[here.s];
  for (let k = 0; k < SAMPLES.near && own.length > 0; k++) {
    const s = own[drawInteger(random, own.length)];
    const { length, height } = shapes[s];
    const x = here.x + (old.length - length) / 2 + (random() - 0.5) * length;
    const y = here.y + (old.height - height) / 2 + (random() - 0.5) * height;
    tryPlace(strip, i, s, { x, y }, top);
  }
  for (let k = 0; k < SAMPLES.far && own.length > 0; k++) {
    const s = own[drawInteger(random, own.length)];
    const x = start + random() * (strip.length - shapes[s].length - start);
    const y = random() * (width - shapes[s].height);
    tryPlace(strip, i, s, { x, y }, top);
  }
  for (let k = 0; k < SAMPLES.touch && own.length > 0; k++) {
    const s = own[drawInteger(random, own.length)];
    const at = touchingPlace(strip, i, s, random);
    if (at) tryPlace(strip, i, s, at, top);
  }
  const small = Math.min(old.length, old.height);
  let best = top[0];
  for (const p of top.slice(0, SAMPLES.keep)) {
    descendInPlace(strip, i, p, [STEPS[0] * small, STEPS[1] * small], random);
    if (p.price < best.price) best = p;
  }
  descendInPlace(strip, i, best, [STEPS[1] * small, STEPS[2] * small], random);
  if (best.price >= before) return false;
  putPiece(strip, i, best.s, best.x, best.y);
  return true;
}
