// Polygons into triangles, the way that bends least: quads along the flatter diagonal, larger ones by trying every way, very
// large ones by cutting the best ear each time.
// Source: every way by G. T. Klincsek, Ann. Discrete Math. 9 (1980) (from memory); differs: folds count, so the last triangle is
// kept too. Ears: G. H. Meisters, Amer. Math. Monthly 82 (1975); the choice of ear is our own.
import type { MeshSource } from "../../records/job.ts";

type Three = [number, number, number];

function cross(x: Float64Array<ArrayBuffer>, a: number, b: number, c: number): Three {
  const u = [0, 1, 2].map((k) => x[3 * b + k] - x[3 * a + k]);
  const v = [0, 1, 2].map((k) => x[3 * c + k] - x[3 * a + k]);
  return [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
}

function dot(a: Three, b: Three): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

function distance(x: Float64Array<ArrayBuffer>, a: number, b: number): number {
  return Math.sqrt(
    (x[3 * a] - x[3 * b]) ** 2 + (x[3 * a + 1] - x[3 * b + 1]) ** 2 + (x[3 * a + 2] - x[3 * b + 2]) ** 2,
  );
}

/** Cosine of the fold between two triangles; -1 where one of them has no area. */
function measureFold(n: Three, m: Three): number {
  const l = Math.sqrt(dot(n, n) * dot(m, m));
  return l > 0 ? dot(n, m) / l : -1;
}

/** Two triangles of a quad; of two equally flat diagonals the shorter one. */
function splitQuad(x: Float64Array<ArrayBuffer>, q: number[]): number[] {
  const [a, b, c, d] = q;
  const ac = measureFold(cross(x, a, b, c), cross(x, a, c, d));
  const bd = measureFold(cross(x, b, c, d), cross(x, b, d, a));
  const tie = Math.abs(ac - bd) < 1e-9;
  const first = tie ? distance(x, a, c) <= distance(x, b, d) * (1 + 1e-9) : ac > bd;
  return first ? [a, b, c, a, c, d] : [b, c, d, b, d, a];
}

/** Roundness of a triangle: area over the sum of squared sides, negative where it is wound against n. */
function measureEar(x: Float64Array<ArrayBuffer>, n: Three, [a, b, c]: Three): number {
  const l = distance(x, a, b) ** 2 + distance(x, b, c) ** 2 + distance(x, c, a) ** 2;
  return l > 0 ? dot(cross(x, a, b, c), n) / l : 0;
}

/** Corners up to which every way is tried; the work grows with the fourth power. */
const MOST_TRIED = 16;

/** Weight of roundness beside bending: it decides where a polygon is flat. */
const ROUNDNESS = 1e-3;

/** Mean normal of a ring, unit length unless the ring has no area. */
function measureRingNormal(x: Float64Array<ArrayBuffer>, ring: readonly number[]): Three {
  const n: Three = [0, 0, 0];
  for (let i = 1; i + 1 < ring.length; i++)
    cross(x, ring[0], ring[i], ring[i + 1]).forEach((w, k) => {
      n[k] += w;
    });
  const length = Math.sqrt(dot(n, n));
  return length > 0 ? [n[0] / length, n[1] / length, n[2] / length] : n;
}

/**
 * The triangles with the least sum of folds (1 - cos), those against the ring's normal counted as folded over: the best way
 * of the corners i … k whose triangle at the side i–k has its third corner at j, for every i < j < k.
 */
function splitFlattest(x: Float64Array<ArrayBuffer>, ring: readonly number[]): number[] {
  const count = ring.length;
  const n = measureRingNormal(x, ring);
  const at = (i: number, j: number, k: number) => (i * count + k) * count + j;
  const weight = new Float64Array(count ** 3);
  const normal = new Array<Three>(count ** 3);
  // third corner of the neighbour across i–j and across j–k, -1 where that is a side of the ring
  const before = new Int32Array(count ** 3).fill(-1);
  const after = new Int32Array(count ** 3).fill(-1);
  const findBest = (i: number, k: number, m: Three | null): { j: number; w: number } => {
    let best = { j: -1, w: k - i < 2 ? 0 : Infinity };
    for (let j = i + 1; j < k; j++) {
      const w = weight[at(i, j, k)] + (m === null ? 0 : 1 - measureFold(normal[at(i, j, k)], m));
      if (w < best.w - 1e-12) best = { j, w };
    }
    return best;
  };
  for (let span = 2; span < count; span++)
    for (let i = 0; i + span < count; i++)
      for (let j = i + 1, k = i + span; j < k; j++) {
        const m = cross(x, ring[i], ring[j], ring[k]);
        const [left, right] = [findBest(i, j, m), findBest(j, k, m)];
        const here = at(i, j, k);
        normal[here] = m;
        before[here] = left.j;
        after[here] = right.j;
        const round = ROUNDNESS * measureEar(x, n, [ring[i], ring[j], ring[k]]);
        weight[here] = left.w + right.w + (dot(m, n) > 0 ? 0 : 2) - round;
      }
  const out: number[] = [];
  const open = [[0, findBest(0, count - 1, null).j, count - 1]];
  for (let part = open.pop(); part !== undefined; part = open.pop()) {
    const [i, j, k] = part;
    if (j < 0) continue;
    out.push(ring[i], ring[j], ring[k]);
    open.push([j, after[at(i, j, k)], k], [i, before[at(i, j, k)], j]);
  }
  return out;
}

/** Two directions square to n, right-handed with it; the least part of n decides which. */
function spanPlane(n: Three): [Three, Three] {
  const least = [0, 1, 2].reduce((m, k) => (Math.abs(n[k]) < Math.abs(n[m]) ? k : m), 0);
  const e = [0, 1, 2].map((k) => (k === least ? 1 : 0) - n[least] * n[k]);
  const l = Math.hypot(...e) || 1;
  const u: Three = [e[0] / l, e[1] / l, e[2] / l];
  return [u, [n[1] * u[2] - n[2] * u[1], n[2] * u[0] - n[0] * u[2], n[0] * u[1] - n[1] * u[0]]];
}

/**
 * Cuts the roundest ear again and again. What a corner is worth is kept until a side of its triangle changes; a corner whose
 * triangle holds another waits until that one is cut off.
 */
function cutEars(x: Float64Array<ArrayBuffer>, ring: readonly number[]): number[] {
  const count = ring.length;
  const n = measureRingNormal(x, ring);
  const [px, py] = spanPlane(n).map((e) =>
    Float64Array.from(ring, (v) => dot([x[3 * v], x[3 * v + 1], x[3 * v + 2]], e)),
  );
  const left = (a: number, b: number, c: number) =>
    (px[b] - px[a]) * (py[c] - py[a]) - (py[b] - py[a]) * (px[c] - px[a]) >= 0;
  const before = Int32Array.from(ring, (_, i) => (i + count - 1) % count);
  const after = Int32Array.from(ring, (_, i) => (i + 1) % count);
  const measure = (i: number) => {
    // in single precision, so that alike ears stay alike when the mesh is turned
    const ear = Math.fround(measureEar(x, n, [ring[before[i]], ring[i], ring[after[i]]]));
    return Math.max(ear, 0);
  };
  const worth = Float32Array.from(ring, (_, i) => measure(i));
  const waits = new Map<number, number[]>();
  const out: number[] = [];
  let start = 0;
  /** A corner in the triangle at i or on its rim, -1 for none. */
  const findInside = (i: number): number => {
    const [a, c] = [before[i], after[i]];
    for (let p = after[c]; p !== a; p = after[p])
      if (left(a, i, p) && left(i, c, p) && left(c, a, p) && ![a, i, c].some((q) => ring[q] === ring[p])) return p;
    return -1;
  };
  const findBest = (): number => {
    for (;;) {
      let best = start;
      for (let i = after[start]; i !== start; i = after[i]) if (worth[i] > worth[best]) best = i;
      if (worth[best] === 0) return start;
      const inside = findInside(best);
      if (inside < 0) return best;
      worth[best] = 0;
      waits.set(inside, [...(waits.get(inside) ?? []), best]);
    }
  };
  for (let left = count; left > 3; left--) {
    const i = findBest();
    const [a, c] = [before[i], after[i]];
    out.push(ring[a], ring[i], ring[c]);
    after[a] = c;
    before[c] = a;
    if (i === start) start = c;
    before[i] = -1;
    for (const w of [a, c, ...(waits.get(i) ?? [])]) if (before[w] >= 0) worth[w] = measure(w);
  }
  out.push(ring[before[start]], ring[start], ring[after[start]]);
  return out;
}

/** Triangles of one ring of corners. */
function splitRing(x: Float64Array<ArrayBuffer>, ring: number[]): number[] {
  if (ring.length === 3) return ring;
  if (ring.length === 4) return splitQuad(x, ring);
  return ring.length <= MOST_TRIED ? splitFlattest(x, ring) : cutEars(x, ring);
}

/** Remembers rings by their least corner; true where a ring of the same corners, from wherever counted, came before. */
function createRingMemory(): (ring: number[]) => boolean {
  const known = new Map<number, number[][]>();
  return (ring) => {
    const least = ring.reduce((m, v) => Math.min(m, v));
    const near = known.get(least);
    const alike = near?.filter((r) => r.length === ring.length) ?? [];
    const corners = new Set(alike.length > 0 ? ring : []);
    if (alike.some((r) => r.every((v) => corners.has(v)))) return true;
    if (near) near.push(ring);
    else known.set(least, [ring]);
    return false;
  };
}

/**
 * Triangles of a mesh whose vertices are welded; corners that fell together are taken once, faces left with fewer than
 * three corners vanish. A larger polygon given twice is split once: the copy might be split another way and close the cloth.
 * @shape target nV (vertex each is welded to) -> tri 3*nT, face nT (polygon it comes from), doubled (a corner for each
 * triangle not made again)
 */
export function splitPolygons(
  x: Float64Array<ArrayBuffer>,
  source: Pick<MeshSource, "faceStart" | "faceVertex">,
  target: Uint32Array<ArrayBuffer>,
): { tri: Uint32Array<ArrayBuffer>; face: Uint32Array<ArrayBuffer>; vanished: number[]; doubled: number[] } {
  const { faceStart, faceVertex } = source;
  const nF = faceStart.length - 1;
  const room = Math.max(0, faceVertex.length - 2 * nF);
  const tri = new Uint32Array(3 * room);
  const face = new Uint32Array(room);
  const vanished: number[] = [];
  const doubled: number[] = [];
  const isKnown = createRingMemory();
  let n = 0;
  for (let f = 0; f < nF; f++) {
    const first = faceStart[f];
    if (faceStart[f + 1] - first === 3) {
      const a = target[faceVertex[first]];
      const b = target[faceVertex[first + 1]];
      const c = target[faceVertex[first + 2]];
      if (a !== b && b !== c && c !== a) {
        tri[3 * n] = a;
        tri[3 * n + 1] = b;
        tri[3 * n + 2] = c;
        face[n++] = f;
        continue;
      }
    }
    const ring: number[] = [];
    for (let i = first; i < faceStart[f + 1]; i++) {
      const v = target[faceVertex[i]];
      if (v !== ring[ring.length - 1]) ring.push(v);
    }
    while (ring.length > 1 && ring[0] === ring[ring.length - 1]) ring.pop();
    if (ring.length < 3) {
      vanished.push(f);
      continue;
    }
    if (ring.length > 3 && isKnown(ring)) {
      for (let i = 2; i < ring.length; i++) doubled.push(ring[i]);
      continue;
    }
    const parts = splitRing(x, ring);
    for (let i = 0; i < parts.length; i += 3) {
      tri.set(parts.slice(i, i + 3), 3 * n);
      face[n++] = f;
    }
  }
  return { tri: tri.slice(0, 3 * n), face: face.slice(0, n), vanished, doubled };
}
