// Do two paths that share vertices of a mesh change sides there? Touching, ending and running together are allowed; crossing is not.
import { type Adjacency, nextHalfedge, previousHalfedge } from "./adjacency.ts";
import type { Surface } from "./surface.ts";

/** A vertex at which two paths cross, and the paths. */
export interface PathCrossing {
  first: number;
  second: number;
  vertex: number;
}

/** Neighbours of v counter-clockwise, from the boundary where it has one. */
function findSpokes(surface: Surface, adjacency: Adjacency, v: number): number[] {
  const { fan, fanStart, twin } = adjacency;
  let start = fan[fanStart[v]];
  for (let i = fanStart[v]; i < fanStart[v + 1]; i++) if (twin[fan[i]] < 0) start = fan[i];
  const spokes: number[] = [];
  let h = start;
  for (;;) {
    spokes.push(surface.tri[nextHalfedge(h)]);
    const side = previousHalfedge(h);
    h = twin[side];
    if (h < 0) spokes.push(surface.tri[side]);
    if (h < 0 || h === start) return spokes;
  }
}

/** 1 where spoke w lies to the left of the way from → v → to, -1 to the right. */
function findSide(spokes: readonly number[], from: number, to: number, w: number): number {
  const n = spokes.length;
  const turn = (x: number) => (spokes.indexOf(x) - spokes.indexOf(to) + n) % n;
  return turn(w) < turn(from) ? 1 : -1;
}

/** The crossing of path a at its vertex i with path b at its vertex j, looked at where their common run starts; else -1. */
function crossAt(
  surface: Surface,
  adjacency: Adjacency,
  a: readonly number[],
  i: number,
  b: readonly number[],
  j: number,
): boolean {
  if (i === 0 || i === a.length - 1 || j === 0 || j === b.length - 1) return false;
  const before = a[i - 1];
  // Common run already looked at from its start.
  if (b[j - 1] === before || b[j + 1] === before) return false;
  const step = b[j - 1] === a[i + 1] ? -1 : 1;
  const spokes = findSpokes(surface, adjacency, a[i]);
  const atStart = findSide(spokes, before, a[i + 1], b[j - step]);
  let k = 0;
  while (a[i + k + 1] === b[j + step * (k + 1)]) {
    k++;
    const m = j + step * k;
    if (i + k === a.length - 1 || m === 0 || m === b.length - 1) return false;
  }
  const around = k === 0 ? spokes : findSpokes(surface, adjacency, a[i + k]);
  return findSide(around, a[i + k - 1], a[i + k + 1], b[j + step * (k + 1)]) !== atStart;
}

/** First vertex, in the order of the paths, at which a path crosses another or itself; null where none does. */
export function findPathCrossing(
  surface: Surface,
  adjacency: Adjacency,
  paths: readonly (readonly number[])[],
): PathCrossing | null {
  const visits = new Map<number, [number, number][]>();
  for (let p = 0; p < paths.length; p++)
    for (let i = 0; i < paths[p].length; i++) {
      const v = paths[p][i];
      const earlier = visits.get(v);
      if (!earlier) {
        visits.set(v, [[p, i]]);
        continue;
      }
      for (const [q, j] of earlier)
        if (crossAt(surface, adjacency, paths[p], i, paths[q], j)) return { first: q, second: p, vertex: v };
      earlier.push([p, i]);
    }
  return null;
}
