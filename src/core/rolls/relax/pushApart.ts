// Pushes all overlapping pairs of a strip apart at once: each by its depth, half either way, round after round.
// Source: projection onto the violated half-planes in turn (S. Agmon, The relaxation method for linear inequalities, 1954).
import { fieldDepth } from "./pairField.ts";
import { fieldOf, putPiece, type Strip } from "./strip.ts";

/** After so many rounds the overlap must have sunk by the share, or the pushing ends. */
const LOOK = 16;
const SUNK = 0.7;

function shiftPiece(strip: Strip, k: number, dx: number, dy: number): void {
  const { shapes, start, width } = strip.task;
  const s = strip.shape[k];
  const x = Math.max(start, Math.min(strip.length - shapes[s].length, strip.x[k] + dx));
  const y = Math.max(0, Math.min(width - shapes[s].height, strip.y[k] + dy));
  putPiece(strip, k, s, x, y);
}

/** Parts one pair; returns how deep it overlapped. */
function partPair(strip: Strip, i: number, j: number): number {
  const { x, y } = strip;
  const turned = strip.shape[i] > strip.shape[j];
  const [a, b] = turned ? [j, i] : [i, j];
  const field = fieldOf(strip, strip.shape[a], strip.shape[b]);
  const depth = fieldDepth(field, x[a] - x[b], y[a] - y[b]);
  // Too deep to know the way out.
  if (depth <= 0 || field.nearest < 0) return depth;
  const nx = field.planes[field.nearest];
  const ny = field.planes[field.nearest + 1];
  const { movable, none } = strip.task;
  const by = depth + none / 4;
  const shareA = a >= movable ? 0 : b >= movable ? by : by / 2;
  const shareB = by - shareA;
  if (shareA > 0) shiftPiece(strip, a, nx * shareA, ny * shareA);
  if (b < movable) shiftPiece(strip, b, -nx * shareB, -ny * shareB);
  return depth;
}

/** Whether all is apart within the rounds. */
export function pushApart(strip: Strip, rounds: number): boolean {
  const { n, x, y, x1, y1 } = strip;
  const { reach, movable, none } = strip.task;
  let before = Infinity;
  for (let round = 1; round <= rounds; round++) {
    let total = 0;
    for (let i = 0; i < movable; i++)
      for (let j = i + 1; j < n; j++) {
        if (x[j] >= x1[i] + reach || x1[j] + reach <= x[i] || y[j] >= y1[i] + reach || y1[j] + reach <= y[i]) continue;
        total += partPair(strip, i, j);
      }
    if (total <= none) return true;
    if (round % LOOK === 0) {
      if (total > SUNK * before) return false;
      before = total;
    }
  }
  return false;
}
