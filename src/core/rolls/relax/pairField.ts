// How deep two shapes overlap at a given shift: zero means apart by the gap, exactly; else the least push that parts the deepest
// pair of their convex parts, or nearly how far free cloth lies where that is more. Tabled by cells, so that a look-up costs a
// few half-planes whatever the shapes. Does not: search. Source: Minkowski sums of convex parts by support values (textbook);
// own table: a signed distance changes no faster than its place, so far half-planes cannot matter inside a cell, and a mean
// of the distances at a cell's corners is wrong by half its diagonal at most.
import type { PlaneRing } from "../../surface/ring.ts";

/** Between neighbouring half-planes of a sum grown by a gap, so that round corners cost little, radians. */
const FAN = Math.PI / 12;
/** Directions closer than this are one, radians. */
const ONE = 1e-9;
/** Rounding, as a share of a field's extent; far below the room a piece has in a slot that fits it exactly. */
const HAIR = 1e-13;

/** The shifts at which one shape overlaps another. */
export interface PairField {
  /** Cells along each axis. */
  cells: number;
  x0: number;
  x1: number;
  y0: number;
  y1: number;
  /** Cells in a unit of length. */
  perX: number;
  perY: number;
  /** First entry of each cell in `list`. */
  start: Int32Array<ArrayBuffer>;
  /** A cell's sums: how many half-planes each, then their places in `planes`. */
  list: Int32Array<ArrayBuffer>;
  /** Normal and offset of each half-plane. */
  planes: Float64Array<ArrayBuffer>;
  /** Distance to free cloth at the cells' corners less half a cell's diagonal; empty where one sum says it all. */
  deep: Float64Array<ArrayBuffer>;
  /** Shifts at which the shapes touch: both ends of each side on free cloth, x, y. */
  sides: Float64Array<ArrayBuffer>;
}

function support(ring: PlaneRing, nx: number, ny: number): number {
  let best = -Infinity;
  for (let i = 0; i < ring.length; i += 2) {
    const v = nx * ring[i] + ny * ring[i + 1];
    if (v > best) best = v;
  }
  return best;
}

/** Directions of the outward normals of two convex rings, the first turned about; filled up where a gap rounds the corners. */
function normalsOf(a: PlaneRing, b: PlaneRing, gap: number): number[] {
  const angles: number[] = [];
  const add = (ring: PlaneRing, sign: number) => {
    for (let i = 0, j = ring.length - 2; i < ring.length; j = i, i += 2)
      angles.push(Math.atan2(sign * (ring[j] - ring[i]), sign * (ring[i + 1] - ring[j + 1])));
  };
  add(a, -1);
  add(b, 1);
  angles.sort((p, q) => p - q);
  const kept = angles.filter((v, i) => i === 0 || v - angles[i - 1] > ONE);
  if (gap <= 0) return kept;
  const full: number[] = [];
  kept.forEach((v, i) => {
    const next = i + 1 < kept.length ? kept[i + 1] : kept[0] + 2 * Math.PI;
    const steps = Math.max(1, Math.ceil((next - v) / FAN));
    for (let k = 0; k < steps; k++) full.push(v + ((next - v) * k) / steps);
  });
  return full;
}

interface Sums {
  planes: number[];
  /** First half-plane of each sum. */
  first: number[];
  box: [number, number, number, number];
}

function buildSums(a: PlaneRing[], b: PlaneRing[], gap: number): Sums {
  const sums: Sums = { planes: [], first: [0], box: [Infinity, -Infinity, Infinity, -Infinity] };
  for (const p of a)
    for (const q of b) {
      const reach = (nx: number, ny: number) => support(p, -nx, -ny) + support(q, nx, ny) + gap;
      for (const angle of normalsOf(p, q, gap)) {
        const [nx, ny] = [Math.cos(angle), Math.sin(angle)];
        sums.planes.push(nx, ny, reach(nx, ny));
      }
      sums.first.push(sums.planes.length / 3);
      const { box } = sums;
      sums.box = [
        Math.min(box[0], -reach(-1, 0)),
        Math.max(box[1], reach(1, 0)),
        Math.min(box[2], -reach(0, -1)),
        Math.max(box[3], reach(0, 1)),
      ];
    }
  return sums;
}

/** Signed distances of a place to the half-planes and, the greatest of each, to the sums: negative inside. */
function measureAt(sums: Sums, x: number, y: number, each: Float64Array, most: Float64Array): void {
  const { planes, first } = sums;
  for (let s = 0; s + 1 < first.length; s++) {
    let worst = -Infinity;
    for (let e = first[s]; e < first[s + 1]; e++) {
      const v = planes[3 * e] * x + planes[3 * e + 1] * y - planes[3 * e + 2];
      each[e] = v;
      if (v > worst) worst = v;
    }
    most[s] = worst;
  }
}

/** Ends of the side that half-plane e of a sum contributes, null where it is cut off by its neighbours. */
function sideOf(sums: Sums, s: number, e: number): [number, number, number, number] | null {
  const { planes, first } = sums;
  const [nx, ny, c] = [planes[3 * e], planes[3 * e + 1], planes[3 * e + 2]];
  // Along the side from the foot of its normal.
  let [from, to] = [-Infinity, Infinity];
  for (let k = first[s]; k < first[s + 1]; k++) {
    if (k === e) continue;
    const [mx, my, d] = [planes[3 * k], planes[3 * k + 1], planes[3 * k + 2]];
    const rate = my * nx - mx * ny;
    const room = d - c * (mx * nx + my * ny);
    if (Math.abs(rate) < ONE) continue;
    if (rate > 0) to = Math.min(to, room / rate);
    else from = Math.max(from, room / rate);
  }
  if (!(from < to)) return null;
  return [c * nx - from * ny, c * ny + from * nx, c * nx - to * ny, c * ny + to * nx];
}

/** Shares of the side of half-plane e of a sum that lie outside all other sums. */
function openShares(sums: Sums, own: number, e: number, side: [number, number, number, number]): [number, number][] {
  const { planes, first, box } = sums;
  const [x, y, ux, uy] = [side[0], side[1], side[2] - side[0], side[3] - side[1]];
  const hair = HAIR * Math.max(box[1] - box[0], box[3] - box[2]);
  let open: [number, number][] = [[0, 1]];
  for (let s = 0; s + 1 < first.length && open.length > 0; s++) {
    if (s === own) continue;
    let [from, to] = [0, 1];
    for (let k = first[s]; k < first[s + 1] && from < to; k++) {
      const at = planes[3 * k] * x + planes[3 * k + 1] * y - planes[3 * k + 2];
      const rate = planes[3 * k] * ux + planes[3 * k + 1] * uy;
      if (rate > hair) to = Math.min(to, -at / rate);
      else if (rate < -hair) from = Math.max(from, -at / rate);
      // Of two sums that end in one line neither covers the other; two that meet there leave nothing between them.
      else if (at >= (planes[3 * k] * planes[3 * e] + planes[3 * k + 1] * planes[3 * e + 1] > 0 ? -hair : hair))
        to = -1;
    }
    if (from >= to) continue;
    const left: [number, number][] = [];
    for (const [p, q] of open) {
      if (p < Math.min(q, from)) left.push([p, Math.min(q, from)]);
      if (Math.max(p, to) < q) left.push([Math.max(p, to), q]);
    }
    open = left;
  }
  return open;
}

/** Sides of the sums that border on free cloth: x, y of both ends, one after the other. */
function openSides(sums: Sums): Float64Array<ArrayBuffer> {
  const out: number[] = [];
  for (let s = 0; s + 1 < sums.first.length; s++)
    for (let e = sums.first[s]; e < sums.first[s + 1]; e++) {
      const side = sideOf(sums, s, e);
      if (!side) continue;
      const [x, y, ux, uy] = [side[0], side[1], side[2] - side[0], side[3] - side[1]];
      for (const [p, q] of openShares(sums, s, e, side)) out.push(x + p * ux, y + p * uy, x + q * ux, y + q * uy);
    }
  return Float64Array.from(out);
}

/** Distance from a place to the nearest of some sides. */
function sideDistance(sides: Float64Array, x: number, y: number): number {
  let best = Infinity;
  for (let i = 0; i < sides.length; i += 4) {
    const [px, py] = [x - sides[i], y - sides[i + 1]];
    const [ux, uy] = [sides[i + 2] - sides[i], sides[i + 3] - sides[i + 1]];
    const t = Math.max(0, Math.min(1, (px * ux + py * uy) / (ux * ux + uy * uy || 1)));
    const d = (px - t * ux) ** 2 + (py - t * uy) ** 2;
    if (d < best) best = d;
  }
  return Math.sqrt(best);
}

/** At each corner of the cells the distance to free cloth less half a cell's diagonal. */
function deepCorners(
  sums: Sums,
  sides: Float64Array,
  n: number,
  stepX: number,
  stepY: number,
): Float64Array<ArrayBuffer> {
  const each = new Float64Array(sums.planes.length / 3);
  const most = new Float64Array(sums.first.length - 1);
  const half = (Math.hypot(stepX, stepY) / 2) * (1 + 1e-9);
  const deep = new Float64Array((n + 1) ** 2);
  for (let j = 0; j <= n; j++)
    for (let i = 0; i <= n; i++) {
      const x = sums.box[0] + i * stepX;
      const y = sums.box[2] + j * stepY;
      measureAt(sums, x, y, each, most);
      const covered = most.some((v) => v < 0);
      deep[j * (n + 1) + i] = (covered ? sideDistance(sides, x, y) : 0) - half;
    }
  return deep;
}

/** Whether free cloth lies away all round a cell: how far says enough. */
function isDeep(deep: Float64Array, n: number, cell: number): boolean {
  if (deep.length === 0) return false;
  const o = Math.floor(cell / n) * (n + 1) + (cell % n);
  return Math.min(deep[o], deep[o + 1], deep[o + n + 1], deep[o + n + 2]) > 0;
}

/** Lists what can matter within r of a place: the deepest sum first, the half-plane that parts it most first. */
function listCell(sums: Sums, each: Float64Array, most: Float64Array, r: number, list: number[]): void {
  let least = Infinity;
  for (const v of most) if (v < least) least = v;
  const near: number[] = [];
  for (let s = 0; s < most.length; s++) if (most[s] < r && most[s] <= least + 2 * r) near.push(s);
  for (const s of near.sort((p, q) => most[p] - most[q])) {
    const planes: number[] = [];
    for (let e = sums.first[s]; e < sums.first[s + 1]; e++) if (each[e] + r >= most[s] - r) planes.push(e);
    planes.sort((p, q) => each[q] - each[p]);
    list.push(planes.length);
    for (const e of planes) list.push(3 * e);
  }
}

/** The field of shape a against shape b, from their convex parts. @param mostCells cells along an axis at most */
export function buildPairField(a: PlaneRing[], b: PlaneRing[], gap: number, mostCells: number): PairField {
  const sums = buildSums(a, b, gap);
  const nE = sums.planes.length / 3;
  const n = Math.max(6, Math.min(mostCells, Math.ceil(2 * Math.sqrt(nE))));
  const [x0, x1, y0, y1] = sums.box;
  const stepX = (x1 - x0) / n;
  const stepY = (y1 - y0) / n;
  // Corners of a cell lie this far from its middle; a hair more for rounding.
  const r = (Math.hypot(stepX, stepY) / 2) * (1 + 1e-9);
  const each = new Float64Array(nE);
  const most = new Float64Array(sums.first.length - 1);
  const start = new Int32Array(n * n + 1);
  const list: number[] = [];
  const sides = openSides(sums);
  const deep = most.length > 1 ? deepCorners(sums, sides, n, stepX, stepY) : new Float64Array(0);
  for (let cell = 0; cell < n * n; cell++) {
    measureAt(sums, x0 + ((cell % n) + 0.5) * stepX, y0 + (Math.floor(cell / n) + 0.5) * stepY, each, most);
    if (!isDeep(deep, n, cell)) listCell(sums, each, most, r, list);
    start[cell + 1] = list.length;
  }
  return {
    cells: n,
    x0,
    x1,
    y0,
    y1,
    perX: n / (x1 - x0),
    perY: n / (y1 - y0),
    start,
    list: Int32Array.from(list),
    planes: Float64Array.from(sums.planes),
    deep,
    sides,
  };
}

/** Depth of overlap at a shift of the first shape against the second. */
export function fieldDepth(f: PairField, dx: number, dy: number): number {
  if (dx <= f.x0 || dx >= f.x1 || dy <= f.y0 || dy >= f.y1) return 0;
  const n = f.cells;
  const u = (dx - f.x0) * f.perX;
  const v = (dy - f.y0) * f.perY;
  let i = u | 0;
  let j = v | 0;
  if (i >= n) i = n - 1;
  if (j >= n) j = n - 1;
  const { list, planes, start, deep } = f;
  let deepest = 0;
  if (deep.length > 0) {
    const s = u - i;
    const t = v - j;
    const o = j * (n + 1) + i;
    const low = deep[o] + s * (deep[o + 1] - deep[o]);
    const high = deep[o + n + 1] + s * (deep[o + n + 2] - deep[o + n + 1]);
    const mean = low + t * (high - low);
    // Never more than the distance to free cloth, so nothing where a list says apart.
    if (mean > 0) deepest = mean;
  }
  const end = start[j * n + i + 1];
  for (let k = start[j * n + i]; k < end; ) {
    const last = k + list[k];
    // A sum less deep than what is known is left at its first half-plane that says so.
    const enough = -deepest;
    let most = -Infinity;
    for (k++; k <= last && most < enough; k++) {
      const e = list[k];
      const d = planes[e] * dx + planes[e + 1] * dy - planes[e + 2];
      if (d > most) most = d;
    }
    k = last + 1;
    if (most < enough) deepest = -most;
  }
  return deepest;
}
