// Whether a surface covers a plane at most once, so that it cannot touch itself: most roofs do, seen along their mean normal.
// Source: the number of points over a place of the plane is the winding number of the projected rim round it (degree of a
// map), where every triangle shows the same face.
import { buildAdjacency, findBoundaryLoops } from "../../surface/adjacency.ts";
import { measureVectorAreas } from "../../surface/measures.ts";
import type { Surface } from "../../surface/surface.ts";

/** Rim sides beyond which the answer is not looked for. */
const MOST_SIDES = 20_000;

/** Two directions square to a given one. */
function buildPlane(d: readonly number[]): [number[], number[]] {
  const least = [0, 1, 2].reduce((m, k) => (Math.abs(d[k]) < Math.abs(d[m]) ? k : m), 0);
  const e = [0, 1, 2].map((k) => (k === least ? 1 : 0) - d[least] * d[k]);
  const l = Math.sqrt(e[0] ** 2 + e[1] ** 2 + e[2] ** 2);
  const u = e.map((c) => c / l);
  return [u, [d[1] * u[2] - d[2] * u[1], d[2] * u[0] - d[0] * u[2], d[0] * u[1] - d[1] * u[0]]];
}

/** Whether the surface hangs together by its sides. */
function isOnePiece(twin: Int32Array<ArrayBuffer>): boolean {
  const nT = twin.length / 3;
  const seen = new Uint8Array(nT);
  const queue = new Uint32Array(nT);
  let last = 1;
  seen[0] = 1;
  for (let first = 0; first < last; first++)
    for (let h = 3 * queue[first]; h < 3 * queue[first] + 3; h++) {
      const t = Math.floor(twin[h] / 3);
      if (twin[h] < 0 || seen[t]) continue;
      seen[t] = 1;
      queue[last++] = t;
    }
  return last === nT;
}

interface Side {
  low: number;
  high: number;
  a: readonly [number, number];
  b: readonly [number, number];
}

function turn(a: readonly number[], b: readonly number[], c: readonly number[]): number {
  return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]);
}

/** Whether two sides meet other than end to end. */
function cross(p: Side, q: Side): boolean {
  if (Math.max(p.a[1], p.b[1]) < Math.min(q.a[1], q.b[1]) || Math.max(q.a[1], q.b[1]) < Math.min(p.a[1], p.b[1]))
    return false;
  if (p.a === q.b || p.b === q.a) return false;
  return turn(p.a, p.b, q.a) * turn(p.a, p.b, q.b) <= 0 && turn(q.a, q.b, p.a) * turn(q.a, q.b, p.b) <= 0;
}

/** Whether the projected rims cross themselves or each other. */
function rimsCross(loops: readonly (readonly (readonly [number, number])[])[]): boolean {
  const sides = loops.flatMap((loop) =>
    loop.map((a, i): Side => {
      const b = loop[(i + 1) % loop.length];
      return { low: Math.min(a[0], b[0]), high: Math.max(a[0], b[0]), a, b };
    }),
  );
  sides.sort((p, q) => p.low - q.low);
  for (let i = 0; i < sides.length; i++)
    for (let j = i + 1; j < sides.length && sides[j].low <= sides[i].high; j++)
      if (cross(sides[i], sides[j])) return true;
  return false;
}

/** True where the surface is one piece and covers the plane square to its mean normal at most once. */
export function isGraph(surface: Surface): boolean {
  const { xyz: x } = surface;
  const n = measureVectorAreas(surface);
  const sum = [0, 0, 0];
  for (let i = 0; i < n.length; i++) sum[i % 3] += n[i];
  const l = Math.sqrt(sum[0] ** 2 + sum[1] ** 2 + sum[2] ** 2);
  if (!(l > 0)) return false;
  const d = sum.map((c) => c / l);
  for (let t = 0; t < n.length; t += 3) {
    const up = n[t] * d[0] + n[t + 1] * d[1] + n[t + 2] * d[2];
    if (!(up > 1e-3 * Math.sqrt(n[t] ** 2 + n[t + 1] ** 2 + n[t + 2] ** 2))) return false;
  }
  const adjacency = buildAdjacency(surface);
  if (!isOnePiece(adjacency.twin)) return false;
  const loops = findBoundaryLoops(surface, adjacency);
  if (loops.reduce((s, loop) => s + loop.length, 0) > MOST_SIDES) return false;
  const [u, w] = buildPlane(d);
  const along = (v: number, e: readonly number[]) => x[3 * v] * e[0] + x[3 * v + 1] * e[1] + x[3 * v + 2] * e[2];
  return !rimsCross(loops.map((loop) => loop.map((v): [number, number] => [along(v, u), along(v, w)])));
}
