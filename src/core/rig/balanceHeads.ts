// Forces of masts and stays that balance the pulls at mast heads: what the job leaves open is found by non-negative least squares.
import { solveNonNegative } from "../numeric/leastSquares.ts";
import { PlanError } from "../problem.ts";

interface HeadPull {
  nodes: [number, number];
  target: number;
}

interface HeadStrut {
  id: string;
  nodes: [number, number];
}

interface HeadStay {
  name: string;
  nodes: number[];
  force: number | null;
}

/** Share of the greatest pull that may stay unbalanced at a head before it is an error. */
const unbalancedLimit = 0.01;

/**
 * Compression of struts and tension of stays, kN, both positive.
 * @shape xyz 3*nN; results in the order of struts and stays
 * @throws PlanError mast-balance: the stays cannot hold a head, with the force that is left
 */
export function balanceHeads(
  xyz: readonly number[],
  pulls: HeadPull[],
  struts: HeadStrut[],
  stays: HeadStay[],
): { strut: number[]; stay: number[] } {
  const strut = new Array<number>(struts.length).fill(0);
  const stay = stays.map((s) => s.force ?? 0);
  if (struts.length === 0) return { strut, stay };
  const heads = [...new Set(struts.map((s) => s.nodes[1]))];
  const unknownStay = stays.map((s, i) => (s.force === null ? i : -1)).filter((i) => i >= 0);
  const nX = struts.length + unknownStay.length;
  const A = Array.from({ length: 3 * heads.length }, () => new Array<number>(nX).fill(0));
  const b = new Array<number>(3 * heads.length).fill(0);
  const unit = (from: number, to: number) => {
    const d = [0, 1, 2].map((i) => xyz[3 * to + i] - xyz[3 * from + i]);
    const l = Math.hypot(...d);
    return d.map((q) => q / l);
  };
  let most = 0;
  heads.forEach((head, h) => {
    const put = (column: number, way: number[]) => {
      for (let i = 0; i < 3; i++) A[3 * h + i][column] += way[i];
    };
    struts.forEach((s, k) => {
      if (s.nodes[1] === head) put(k, unit(s.nodes[0], head));
    });
    unknownStay.forEach((k, c) => {
      const [from, to] = stays[k].nodes;
      if (from === head) put(struts.length + c, unit(head, to));
      else if (to === head) put(struts.length + c, unit(head, from));
    });
    const known = (force: number, from: number, to: number) => {
      const u = unit(from, to);
      for (let i = 0; i < 3; i++) b[3 * h + i] -= force * u[i];
      most = Math.max(most, force);
    };
    for (const p of pulls) if (p.nodes[1] === head) known(p.target, head, p.nodes[0]);
    for (const s of stays) {
      if (s.force === null) continue;
      if (s.nodes[0] === head) known(s.force, head, s.nodes[1]);
      else if (s.nodes[1] === head) known(s.force, head, s.nodes[0]);
    }
  });
  const x = solveNonNegative(A, b).x;
  let left = 0;
  for (let r = 0; r < b.length; r++) {
    let sum = -b[r];
    for (let c = 0; c < nX; c++) sum += A[r][c] * x[c];
    left = Math.max(left, Math.abs(sum));
  }
  if (left > unbalancedLimit * most) {
    const names = struts.map((s) => s.id);
    throw new PlanError(
      "mast-balance",
      `mast ${names.join(", ")}: its stays cannot hold the head; ${left.toFixed(2)} kN stay unbalanced, the limit is ${(unbalancedLimit * most).toFixed(2)} kN (1 % of the greatest pull). Move the stays' feet so that they lie against the pull, or give the mast another head`,
      names,
      { left },
    );
  }
  for (let k = 0; k < struts.length; k++) strut[k] = x[k];
  unknownStay.forEach((k, c) => {
    stay[k] = x[struts.length + c];
  });
  return { strut, stay };
}
