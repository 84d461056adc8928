// First flat points of a strip: unfolded, turned so that its axis lies along the warp, taken back by the intended strain.

import { analyseSymmetric, factorSymmetric, solveInPlace } from "../numeric/factor.ts";
import { addElementInPlace, buildPattern } from "../numeric/pattern.ts";
import { PlanError } from "../problem.ts";
import { buildAdjacency, nextHalfedge, previousHalfedge } from "../surface/adjacency.ts";
import type { LocalStrip } from "./localStrip.ts";

/**
 * Flat points of the relaxed cloth to start the flattening from: axis at `turn` degrees from x, sizes divided by 1 + elastic strain.
 * @shape 2*n @units m
 * @throws PlanError strip-axis: the unfolded strip's two ends have one mean point
 */
export function buildFlattenStart(
  strip: LocalStrip,
  turn: number,
  elastic: { warp: number; weft: number },
): Float64Array<ArrayBuffer> {
  const xy = settle(strip, unfold(strip));
  const a = meanOf(xy, strip.from);
  const b = meanOf(xy, strip.to);
  const length = Math.sqrt((b[0] - a[0]) ** 2 + (b[1] - a[1]) ** 2);
  let reach = 0;
  for (let i = 0; i < xy.length; i++) reach = Math.max(reach, Math.abs(xy[i] - a[i % 2]));
  if (!(length > 1e-9 * reach)) {
    throw new PlanError(
      "strip-axis",
      `the two ends of strip ${strip.id} have one mean point (${length} m apart): it has no axis to lay along the warp; give it other ends`,
      strip.id,
    );
  }
  const c = (b[0] - a[0]) / length;
  const s = (b[1] - a[1]) / length;
  const cosTurn = Math.cos((turn * Math.PI) / 180);
  const sinTurn = Math.sin((turn * Math.PI) / 180);
  const out = new Float64Array(xy.length);
  for (let i = 0; i < xy.length; i += 2) {
    const along = c * (xy[i] - a[0]) + s * (xy[i + 1] - a[1]);
    const across = c * (xy[i + 1] - a[1]) - s * (xy[i] - a[0]);
    out[i] = (cosTurn * along - sinTurn * across) / (1 + elastic.warp);
    out[i + 1] = (sinTurn * along + cosTurn * across) / (1 + elastic.weft);
  }
  return out;
}

function meanOf(xy: Float64Array<ArrayBuffer>, group: number[]): [number, number] {
  let x = 0;
  let y = 0;
  for (const v of group) {
    x += xy[2 * v] / group.length;
    y += xy[2 * v + 1] / group.length;
  }
  return [x, y];
}

function unfold(strip: LocalStrip): Float64Array<ArrayBuffer> {
  const { erected: x, tri } = strip;
  const { twin } = buildAdjacency({ xyz: x, tri });
  const n = x.length / 3;
  const sum = new Float64Array(2 * n);
  const count = new Float64Array(n);
  const seen = new Uint8Array(tri.length / 3);
  const at = (v: number) => [sum[2 * v] / count[v], sum[2 * v + 1] / count[v]];
  const dot = (a: number, b: number, c: number) => {
    let d = 0;
    for (let k = 0; k < 3; k++) d += (x[3 * b + k] - x[3 * a + k]) * (x[3 * c + k] - x[3 * a + k]);
    return d;
  };
  const place = (h: number) => {
    const [a, b, c] = [tri[h], tri[nextHalfedge(h)], tri[previousHalfedge(h)]];
    const [p, q] = [at(a), at(b)];
    const l2 = dot(a, b, b);
    const u = dot(a, b, c) / l2;
    const v = Math.sqrt(Math.max(0, dot(a, c, c) / l2 - u * u));
    const far = Math.sqrt(((q[0] - p[0]) ** 2 + (q[1] - p[1]) ** 2) / l2);
    const d = [(q[0] - p[0]) / far, (q[1] - p[1]) / far];
    sum[2 * c] += p[0] + u * d[0] - v * d[1];
    sum[2 * c + 1] += p[1] + u * d[1] + v * d[0];
    count[c]++;
  };
  count[tri[0]] = 1;
  count[tri[1]] = 1;
  sum[2 * tri[1]] = Math.sqrt(dot(tri[0], tri[1], tri[1]));
  place(0);
  seen[0] = 1;
  const queue = [0];
  for (let i = 0; i < queue.length; i++)
    for (let k = 0; k < 3; k++) {
      const h = twin[3 * queue[i] + k];
      if (h < 0 || seen[Math.floor(h / 3)]) continue;
      place(h);
      seen[Math.floor(h / 3)] = 1;
      queue.push(Math.floor(h / 3));
    }
  return sum.map((v, i) => v / count[i >> 1]);
}

/** Temporary: as rigid as possible, local and global steps by turns. */
function settle(strip: LocalStrip, start: Float64Array<ArrayBuffer>): Float64Array<ArrayBuffer> {
  const { erected: x, tri } = strip;
  const n = x.length / 3;
  const nT = tri.length / 3;
  const ref = new Float64Array(2 * tri.length);
  const wt = new Float64Array(tri.length);
  const dof: number[] = [];
  const st = new Uint32Array(3 * nT + 1);
  const pinned = tri[0];
  for (let t = 0; t < nT; t++) {
    const p = [0, 1, 2].map((k) => x[3 * tri[3 * t + 1] + k] - x[3 * tri[3 * t] + k]);
    const q = [0, 1, 2].map((k) => x[3 * tri[3 * t + 2] + k] - x[3 * tri[3 * t] + k]);
    const l = Math.sqrt(p[0] ** 2 + p[1] ** 2 + p[2] ** 2);
    const u = (p[0] * q[0] + p[1] * q[1] + p[2] * q[2]) / l;
    const v = Math.sqrt(q[0] ** 2 + q[1] ** 2 + q[2] ** 2 - u * u);
    ref.set([0, 0, l, 0, u, v], 6 * t);
    const pts = [
      [0, 0],
      [l, 0],
      [u, v],
    ];
    for (let k = 0; k < 3; k++) {
      const [a, b, c] = [pts[k], pts[(k + 1) % 3], pts[(k + 2) % 3]];
      const e1 = [a[0] - c[0], a[1] - c[1]];
      const e2 = [b[0] - c[0], b[1] - c[1]];
      wt[3 * t + k] = Math.max(0.01, (e1[0] * e2[0] + e1[1] * e2[1]) / Math.abs(e1[0] * e2[1] - e1[1] * e2[0]) / 2);
      dof.push(...[tri[3 * t + k], tri[3 * t + ((k + 1) % 3)]].map((w) => (w === pinned ? -1 : w)));
      st[3 * t + k + 1] = dof.length;
    }
  }
  const where = buildPattern(n, st, Int32Array.from(dof));
  const values = new Float64Array(where.pattern.rowIndex.length);
  for (let e = 0; e < 3 * nT; e++) addElementInPlace(values, where, e, Float64Array.from([wt[e], -wt[e], wt[e]]));
  values[where.pattern.colStart[pinned]] = 1;
  const factor = factorSymmetric(analyseSymmetric(where.pattern), values);
  const xy = start.slice();
  for (let round = 0; round < 30; round++) {
    const rhs = new Float64Array(2 * n);
    for (let t = 0; t < nT; t++) {
      let c = 0;
      let s = 0;
      for (let k = 0; k < 3; k++) {
        const [a, b] = [k, (k + 1) % 3];
        const rx = ref[6 * t + 2 * b] - ref[6 * t + 2 * a];
        const ry = ref[6 * t + 2 * b + 1] - ref[6 * t + 2 * a + 1];
        const dx = xy[2 * tri[3 * t + b]] - xy[2 * tri[3 * t + a]];
        const dy = xy[2 * tri[3 * t + b] + 1] - xy[2 * tri[3 * t + a] + 1];
        c += wt[3 * t + k] * (rx * dx + ry * dy);
        s += wt[3 * t + k] * (rx * dy - ry * dx);
      }
      const l = Math.sqrt(c * c + s * s);
      c /= l;
      s /= l;
      for (let k = 0; k < 3; k++) {
        const [a, b] = [k, (k + 1) % 3];
        const rx = ref[6 * t + 2 * b] - ref[6 * t + 2 * a];
        const ry = ref[6 * t + 2 * b + 1] - ref[6 * t + 2 * a + 1];
        const gx = wt[3 * t + k] * (c * rx - s * ry);
        const gy = wt[3 * t + k] * (s * rx + c * ry);
        rhs[tri[3 * t + b]] += gx;
        rhs[tri[3 * t + a]] -= gx;
        rhs[n + tri[3 * t + b]] += gy;
        rhs[n + tri[3 * t + a]] -= gy;
      }
    }
    rhs[pinned] = 0;
    rhs[n + pinned] = 0;
    solveInPlace(factor, rhs, 2);
    for (let v = 0; v < n; v++) {
      xy[2 * v] = rhs[v];
      xy[2 * v + 1] = rhs[n + v];
    }
  }
  return xy;
}
