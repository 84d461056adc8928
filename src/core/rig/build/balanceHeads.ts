// Forces of masts and stays that balance the pulls at mast heads: what the job leaves open is found by non-negative least squares.
import { solveNonNegative } from "../../numeric/leastSquares.ts";
import type { Finding } from "../../problem.ts";

/** Pull of the sail on a head, kN. */
export interface HeadPull {
  head: number;
  force: ArrayLike<number>;
}

interface HeadStrut {
  id: string;
  nodes: readonly [number, number];
}

interface HeadStay {
  name: string;
  nodes: readonly number[];
  force: number | null;
}

/** Share of the greatest pull that may stay unbalanced at a head before the rig is stopped. */
export const unbalancedLimit = 0.01;

/**
 * Compression of struts and tension of stays, kN, both positive.
 * @shape xyz 3*nN; heads: nodes that are free and must balance; results in the order of struts and stays
 * @returns unbalanced: a stop where the stays cannot hold a head, with the force that is left
 */
export function balanceHeads(
  xyz: ArrayLike<number>,
  heads: readonly number[],
  pulls: readonly HeadPull[],
  members: { struts: readonly HeadStrut[]; stays: readonly HeadStay[] },
): { strut: number[]; stay: number[]; unbalanced: Finding | null } {
  const { struts, stays } = members;
  if (heads.length === 0) return { strut: struts.map(() => 0), stay: stays.map((s) => s.force ?? 0), unbalanced: null };
  const open = stays.map((s, i) => (s.force === null ? i : -1)).filter((i) => i >= 0);
  const nX = struts.length + open.length;
  const A = Array.from({ length: 3 * heads.length }, () => new Array<number>(nX).fill(0));
  const b = new Array<number>(3 * heads.length).fill(0);
  const row = new Map(heads.map((h, i) => [h, 3 * i]));
  /** Calls with the row of each end that is a head and the unit vector from it to the member's other end. */
  const atHeads = (nodes: readonly number[], put: (row: number, u: number[]) => void) => {
    const d = [0, 1, 2].map((k) => xyz[3 * nodes[1] + k] - xyz[3 * nodes[0] + k]);
    const l = Math.sqrt(d[0] ** 2 + d[1] ** 2 + d[2] ** 2);
    [1, -1].forEach((sign, end) => {
      const r = row.get(nodes[end]);
      if (r !== undefined)
        put(
          r,
          d.map((q) => (sign * q) / l),
        );
    });
  };
  const column = (c: number, sign: number) => (r: number, u: number[]) => {
    for (let k = 0; k < 3; k++) A[r + k][c] += sign * u[k];
  };
  struts.forEach((s, c) => {
    atHeads(s.nodes, column(c, -1));
  });
  open.forEach((i, c) => {
    atHeads(stays[i].nodes, column(struts.length + c, 1));
  });
  let most = 0;
  for (const p of pulls) {
    const r = row.get(p.head);
    if (r === undefined) continue;
    for (let k = 0; k < 3; k++) b[r + k] -= p.force[k];
    most = Math.max(most, Math.sqrt(p.force[0] ** 2 + p.force[1] ** 2 + p.force[2] ** 2));
  }
  for (const s of stays) {
    const force = s.force;
    if (force === null) continue;
    atHeads(s.nodes, (r, u) => {
      for (let k = 0; k < 3; k++) b[r + k] -= force * u[k];
      most = Math.max(most, force);
    });
  }
  const x = solveNonNegative(A, b).x;
  const stay = stays.map((s) => s.force ?? 0);
  open.forEach((i, c) => {
    stay[i] = x[struts.length + c];
  });
  return { strut: struts.map((_, c) => x[c]), stay, unbalanced: findUnbalanced(A, b, x, { most, struts }) };
}

function findUnbalanced(
  A: number[][],
  b: number[],
  x: ArrayLike<number>,
  about: { most: number; struts: readonly HeadStrut[] },
): Finding | null {
  let left = 0;
  for (let r = 0; r < b.length; r++) {
    let sum = -b[r];
    for (let c = 0; c < x.length; c++) sum += A[r][c] * x[c];
    left = Math.max(left, Math.abs(sum));
  }
  const limit = unbalancedLimit * about.most;
  if (left <= limit) return null;
  const names = about.struts.map((s) => s.id);
  return {
    code: "mast-balance",
    level: "stop",
    station: "rig",
    where: names,
    value: left,
    limit,
    text: `mast ${names.join(", ")}: its stays cannot hold the head; ${left.toFixed(2)} kN stay unbalanced, the limit is ${limit.toFixed(2)} kN (1 % of the greatest pull). The rig is not worked out; the cloth can be cut`,
    remedy: "move the stays' feet so that they lie against the pull, or give the mast another head",
    basis: "balance of forces at the head; 1 % is our own default",
  };
}
