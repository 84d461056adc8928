// Fewer triangles over the same points, for a surface that is turned where frames come slowly. Knows no three.
import type { Model } from "./buildModel.ts";

/** Cells across the longest side of the box round the surface. */
const ACROSS = 44;

type Surface = Pick<Model, "position" | "triangles" | "owner">;

/** Cell of each point, and all points in the order of their cells. */
function sortPoints({ position, owner }: Surface): { cell: Uint32Array; order: Uint32Array } {
  const least = [0, 1, 2].map(() => Number.POSITIVE_INFINITY);
  const most = [0, 1, 2].map(() => Number.NEGATIVE_INFINITY);
  for (let i = 0; i < position.length; i++) {
    const k = i % 3;
    if (position[i] < least[k]) least[k] = position[i];
    if (position[i] > most[k]) most[k] = position[i];
  }
  const size = Math.max(...most.map((m, k) => m - least[k])) / ACROSS || 1;
  const side = ACROSS + 1;
  const cell = new Uint32Array(owner.length);
  const begins = new Uint32Array(side ** 3 + 1);
  for (let p = 0; p < owner.length; p++) {
    let at = 0;
    for (let k = 2; k >= 0; k--) at = side * at + Math.floor((position[3 * p + k] - least[k]) / size);
    cell[p] = at;
    begins[at + 1]++;
  }
  for (let i = 0; i < side ** 3; i++) begins[i + 1] += begins[i];
  const order = new Uint32Array(owner.length);
  for (let p = 0; p < owner.length; p++) order[begins[cell[p]]++] = p;
  return { cell, order };
}

/**
 * The points of each cell drawn together, patch by patch: every point's stand-in. Where patches meet in a cell, a point they share
 * stands in for both, so that the surface stays closed between them.
 */
function findStandIns(surface: Surface): Uint32Array {
  const { position, owner } = surface;
  const { cell, order } = sortPoints(surface);
  const out = new Uint32Array(owner.length);
  const compare = (p: number, q: number) =>
    position[3 * p] - position[3 * q] ||
    position[3 * p + 1] - position[3 * q + 1] ||
    position[3 * p + 2] - position[3 * q + 2];
  for (let i = 0; i < order.length; ) {
    let end = i + 1;
    while (end < order.length && cell[order[end]] === cell[order[i]]) end++;
    const here = [...order.subarray(i, end)];
    const first = new Map<number, number>();
    if (here.some((p) => owner[p] !== owner[here[0]])) {
      const sorted = [...here].sort(compare);
      const shared = sorted.filter((p, k) =>
        [sorted[k - 1], sorted[k + 1]].some((q) => q !== undefined && owner[q] !== owner[p] && compare(p, q) === 0),
      );
      for (const p of shared) if (!first.has(owner[p])) first.set(owner[p], p);
    }
    for (const p of here) if (!first.has(owner[p])) first.set(owner[p], p);
    for (const p of here) out[p] = first.get(owner[p]) ?? p;
    i = end;
  }
  return out;
}

/** Triangles between the stand-ins. @shape 3 times their number, into the points of the model */
export function coarsen(surface: Surface): Uint32Array<ArrayBuffer> {
  const { triangles } = surface;
  const standIn = findStandIns(surface);
  const out = new Uint32Array(triangles.length);
  let n = 0;
  for (let t = 0; t < triangles.length; t += 3) {
    const [a, b, c] = [standIn[triangles[t]], standIn[triangles[t + 1]], standIn[triangles[t + 2]]];
    if (a === b || b === c || c === a) continue;
    out[n] = a;
    out[n + 1] = b;
    out[n + 2] = c;
    n += 3;
  }
  return out.slice(0, n);
}
