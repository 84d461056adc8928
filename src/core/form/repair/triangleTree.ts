// A tree of boxes over the triangles of a surface, for finding which of them come near each other. Judges nothing.
import type { Surface } from "../../surface/surface.ts";

/** Triangles in a leaf at most. */
const LEAF = 6;

/**
 * Nodes in depth-first order, the root first; node i holds triangles order[from[i] … to[i]), its halves are i+1 and right[i]
 * (-1 for a leaf).
 * @shape box 6*nNodes: low x y z, high x y z
 */
export interface TriangleTree {
  order: Uint32Array<ArrayBuffer>;
  from: number[];
  to: number[];
  right: number[];
  box: Float64Array<ArrayBuffer>;
}

/** Sums of the corners of each triangle, thrice its centre. @shape 3*nT */
function sumCorners({ xyz, tri }: Surface): Float64Array<ArrayBuffer> {
  const out = new Float64Array(tri.length);
  for (let t = 0; t < tri.length; t += 3)
    for (let k = 0; k < 3; k++) out[t + k] = xyz[3 * tri[t] + k] + xyz[3 * tri[t + 1] + k] + xyz[3 * tri[t + 2] + k];
  return out;
}

/** Puts the triangles with the lower centres into the lower half of a range (quickselect, middle of three). */
function partitionInPlace(
  order: Uint32Array<ArrayBuffer>,
  [from, to]: [number, number],
  middle: number,
  centre: Float64Array<ArrayBuffer>,
  axis: number,
): void {
  let low = from;
  let high = to - 1;
  const value = (i: number) => centre[3 * order[i] + axis];
  while (low < high) {
    const [p, q, r] = [value(low), value((low + high) >> 1), value(high)];
    const pivot = Math.max(Math.min(p, q), Math.min(Math.max(p, q), r));
    let i = low;
    let j = high;
    while (i <= j) {
      while (value(i) < pivot) i++;
      while (value(j) > pivot) j--;
      if (i > j) break;
      const swap = order[i];
      order[i++] = order[j];
      order[j--] = swap;
    }
    if (middle <= j) high = j;
    else if (middle >= i) low = i;
    else return;
  }
}

function fillBox(
  { xyz, tri }: Surface,
  order: Uint32Array<ArrayBuffer>,
  [from, to]: [number, number],
  margin: number,
  box: Float64Array<ArrayBuffer>,
  at: number,
): void {
  box.fill(Infinity, at, at + 3);
  box.fill(-Infinity, at + 3, at + 6);
  for (let i = from; i < to; i++)
    for (let c = 3 * order[i]; c < 3 * order[i] + 3; c++)
      for (let k = 0; k < 3; k++) {
        const x = xyz[3 * tri[c] + k];
        if (x < box[at + k]) box[at + k] = x;
        if (x > box[at + 3 + k]) box[at + 3 + k] = x;
      }
  for (let k = 0; k < 3; k++) {
    box[at + k] -= margin;
    box[at + 3 + k] += margin;
  }
}

/** Tree of a surface, each box wider than its triangles by the margin. @units margin as xyz */
export function buildTriangleTree(surface: Surface, margin: number): TriangleTree {
  const nT = surface.tri.length / 3;
  const centre = sumCorners(surface);
  const tree: TriangleTree = {
    order: Uint32Array.from({ length: nT }, (_, t) => t),
    from: [],
    to: [],
    right: [],
    box: new Float64Array(6 * Math.max(1, 2 * nT)),
  };
  const waiting: { from: number; to: number; parent: number }[] = [{ from: 0, to: nT, parent: -1 }];
  for (let job = waiting.pop(); job !== undefined; job = waiting.pop()) {
    const { from, to, parent } = job;
    const node = tree.from.length;
    if (parent >= 0) tree.right[parent] = node;
    tree.from.push(from);
    tree.to.push(to);
    tree.right.push(-1);
    fillBox(surface, tree.order, [from, to], margin, tree.box, 6 * node);
    if (to - from <= LEAF) continue;
    const span = [0, 1, 2].map((k) => tree.box[6 * node + 3 + k] - tree.box[6 * node + k]);
    const axis = span[0] >= span[1] && span[0] >= span[2] ? 0 : span[1] >= span[2] ? 1 : 2;
    const middle = (from + to) >> 1;
    partitionInPlace(tree.order, [from, to], middle, centre, axis);
    // the lower half comes next, so that it is node + 1
    waiting.push({ from: middle, to, parent: node }, { from, to: middle, parent: -1 });
  }
  return tree;
}

function overlap(box: Float64Array<ArrayBuffer>, i: number, j: number): boolean {
  const a = 6 * i;
  const b = 6 * j;
  return (
    box[a] <= box[b + 3] &&
    box[b] <= box[a + 3] &&
    box[a + 1] <= box[b + 4] &&
    box[b + 1] <= box[a + 4] &&
    box[a + 2] <= box[b + 5] &&
    box[b + 2] <= box[a + 5]
  );
}

/** Calls `visit` with every two triangles whose leaves' boxes meet, until it returns false. */
export function visitNearPairs(tree: TriangleTree, visit: (s: number, t: number) => boolean): void {
  const { order, from, to, right, box } = tree;
  const stack: number[] = [0, 0];
  while (stack.length > 0) {
    const j = stack.pop() as number;
    const i = stack.pop() as number;
    if (i !== j && !overlap(box, i, j)) continue;
    if (right[i] < 0 && right[j] < 0) {
      for (let p = from[i]; p < to[i]; p++)
        for (let q = i === j ? p + 1 : from[j]; q < to[j]; q++) if (!visit(order[p], order[q])) return;
    } else if (i === j) stack.push(i + 1, i + 1, right[i], right[i], i + 1, right[i]);
    else if (right[j] < 0 || (right[i] >= 0 && to[i] - from[i] >= to[j] - from[j])) stack.push(i + 1, j, right[i], j);
    else stack.push(i, j + 1, i, right[j]);
  }
}
