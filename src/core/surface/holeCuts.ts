// Which way round the holes a path runs: one cut of mesh edges from every hole to the outer boundary; a path that crosses
// a cut an odd number of times passes that hole on the other side. Separate pieces of the surface are told apart here too.
import { type Adjacency, findBoundaryLoops, nextHalfedge } from "./adjacency.ts";
import type { Surface } from "./surface.ts";
import type { Unfolding } from "./unfolding.ts";

/** More holes than this are not told apart: one bit a hole in a 32-bit mark. */
const MOST_HOLES = 30;

/**
 * @shape piece nV (piece of each vertex, -1 without triangle); crossing 3*nT (bit i: the side lies on the cut of hole i), null without holes
 */
export interface HoleCuts {
  piece: Int32Array<ArrayBuffer>;
  crossing: Uint32Array<ArrayBuffer> | null;
  /** For each hole the piece it is in. */
  holePiece: number[];
}

function labelPieces(surface: Surface, adjacency: Adjacency): Int32Array<ArrayBuffer> {
  const { nV, fan, fanStart, twin, nT } = adjacency;
  const { tri } = surface;
  const pieceOfTriangle = new Int32Array(nT).fill(-1);
  const piece = new Int32Array(nV).fill(-1);
  let count = 0;
  const stack: number[] = [];
  for (let v = 0; v < nV; v++) {
    for (let i = fanStart[v]; i < fanStart[v + 1]; i++) {
      const t = Math.floor(fan[i] / 3);
      if (pieceOfTriangle[t] >= 0) continue;
      pieceOfTriangle[t] = count;
      stack.push(t);
      for (let s = stack.pop(); s !== undefined; s = stack.pop()) {
        for (let h = 3 * s; h < 3 * s + 3; h++) {
          if (piece[tri[h]] < 0) piece[tri[h]] = count;
          const o = twin[h] < 0 ? -1 : Math.floor(twin[h] / 3);
          if (o < 0 || pieceOfTriangle[o] >= 0) continue;
          pieceOfTriangle[o] = count;
          stack.push(o);
        }
      }
      count++;
    }
  }
  return piece;
}

/** Boundary loops, each with its piece, the longest loop of a piece marked as the outer one. */
function sortLoops(surface: Surface, adjacency: Adjacency, piece: Int32Array, unfolding: Unfolding) {
  const loops = findBoundaryLoops(surface, adjacency).map((vertices) => ({
    vertices,
    piece: piece[vertices[0]],
    length: 0,
    outer: false,
  }));
  const { fan, fanStart, twin } = adjacency;
  const longest = new Map<number, (typeof loops)[number]>();
  for (const loop of loops) {
    for (const v of loop.vertices)
      for (let i = fanStart[v]; i < fanStart[v + 1]; i++) if (twin[fan[i]] < 0) loop.length += unfolding.length[fan[i]];
    const best = longest.get(loop.piece);
    if (!best || loop.length > best.length) longest.set(loop.piece, loop);
  }
  for (const loop of longest.values()) loop.outer = true;
  return loops;
}

/**
 * Pieces and hole cuts of a surface, O(nT) for each hole.
 * @throws PlanError surface-vertex: two boundary runs touch at a vertex
 */
export function buildHoleCuts(surface: Surface, adjacency: Adjacency, unfolding: Unfolding): HoleCuts {
  const { tri } = surface;
  const { nV, fan, fanStart, twin } = adjacency;
  const piece = labelPieces(surface, adjacency);
  const loops = sortLoops(surface, adjacency, piece, unfolding);
  const holes = loops.filter((l) => !l.outer).slice(0, MOST_HOLES);
  if (holes.length === 0) return { piece, crossing: null, holePiece: [] };
  // A breadth-first tree from all outer loops; the cut of a hole is the branch of its vertex nearest to them.
  const towards = new Int32Array(nV).fill(-1);
  const rank = new Int32Array(nV).fill(-1);
  const queue: number[] = [];
  for (const loop of loops) {
    if (!loop.outer) continue;
    for (const v of loop.vertices) {
      rank[v] = 0;
      queue.push(v);
    }
  }
  const reach = (v: number, w: number) => {
    if (rank[w] >= 0) return;
    rank[w] = rank[v] + 1;
    towards[w] = v;
    queue.push(w);
  };
  for (let q = 0; q < queue.length; q++) {
    const v = queue[q];
    for (let i = fanStart[v]; i < fanStart[v + 1]; i++) {
      reach(v, tri[nextHalfedge(fan[i])]);
      reach(v, tri[nextHalfedge(nextHalfedge(fan[i]))]);
    }
  }
  const crossing = new Uint32Array(tri.length);
  holes.forEach((hole, k) => {
    let v = hole.vertices[0];
    for (const w of hole.vertices) if (rank[w] < rank[v]) v = w;
    for (; towards[v] >= 0; v = towards[v]) {
      const w = towards[v];
      for (let i = fanStart[v]; i < fanStart[v + 1]; i++)
        if (tri[nextHalfedge(fan[i])] === w) crossing[fan[i]] |= 1 << k;
      for (let i = fanStart[w]; i < fanStart[w + 1]; i++)
        if (tri[nextHalfedge(fan[i])] === v) crossing[fan[i]] |= 1 << k;
    }
  });
  // A side that stands on the boundary is never crossed.
  for (let h = 0; h < tri.length; h++) if (twin[h] < 0) crossing[h] = 0;
  return { piece, crossing, holePiece: holes.map((h) => h.piece) };
}
