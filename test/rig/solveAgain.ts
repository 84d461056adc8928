// A second, small static solver for the tests: dense Newton on forces alone, the stiffness taken from them by central
// differences, element by element. Reads the facts' rig and shares no code with src. Cloth is taut here: no wrinkling.
// Formulas: facts.md "Strain and stress" (F = x·X⁻¹, S = D·E, force of a corner = area · F·S·gradient), N = EA·(L − L0)/L0.
import { LuDecomposition, Matrix } from "ml-matrix";
import type { Fabric } from "../../src/core/records/fabric.ts";
import type { FactsRig } from "../../src/core/records/rig.ts";

interface Element {
  nodes: number[];
  force: (x: number[]) => number[];
}

function buildTriangle(flatMm: [number, number][], fabric: Fabric): (x: number[]) => number[] {
  const [p, q, r] = flatMm.map(([a, b]) => [a / 1000, b / 1000]);
  const [ux, uy, vx, vy] = [q[0] - p[0], q[1] - p[1], r[0] - p[0], r[1] - p[1]];
  const det = ux * vy - uy * vx;
  const [a, b, c, d] = [vy / det, -uy / det, -vx / det, ux / det];
  const nuFw = (fabric.nuWf * fabric.Ef) / fabric.Ew;
  const k = 1 / (1 - fabric.nuWf * nuFw);
  return (x) => {
    const e1 = [0, 1, 2].map((i) => x[3 + i] - x[i]);
    const e2 = [0, 1, 2].map((i) => x[6 + i] - x[i]);
    const F1 = e1.map((e, i) => e * a + e2[i] * b);
    const F2 = e1.map((e, i) => e * c + e2[i] * d);
    const dot = (m: number[], n: number[]) => m[0] * n[0] + m[1] * n[1] + m[2] * n[2];
    const [Ew, Ef, g] = [(dot(F1, F1) - 1) / 2, (dot(F2, F2) - 1) / 2, dot(F1, F2)];
    const Sw = k * fabric.Ew * (Ew + nuFw * Ef);
    const Sf = k * fabric.Ef * (Ef + fabric.nuWf * Ew);
    const t = fabric.G * g;
    const P1 = F1.map((f, i) => (det / 2) * (f * Sw + F2[i] * t));
    const P2 = F1.map((f, i) => (det / 2) * (f * t + F2[i] * Sf));
    const at1 = P1.map((f, i) => f * a + P2[i] * c);
    const at2 = P1.map((f, i) => f * b + P2[i] * d);
    return [...at1.map((f, i) => -f - at2[i]), ...at1, ...at2];
  };
}

function buildLink(EA: number, L0: () => number, strut: boolean): (x: number[]) => number[] {
  return (x) => {
    const e = [0, 1, 2].map((i) => x[3 + i] - x[i]);
    const L = Math.hypot(...e);
    const N = (EA * (L - L0())) / L0();
    const n = N > 0 || strut ? N / L : 0;
    return [...e.map((q) => -n * q), ...e.map((q) => n * q)];
  };
}

/** The facts' rig, with adjusters that can be turned; solve moves the nodes and gives each adjuster's force, kN. */
export function buildAgain(rig: FactsRig, fabric: Fabric) {
  const x = rig.nodes.flat();
  const length = new Map(rig.adjusters.map((a) => [a.id, a.slackLength]));
  const elements: Element[] = [
    ...rig.cloth.map((t) => ({ nodes: t.nodes as number[], force: buildTriangle(t.flat, fabric) })),
    ...rig.cables.flatMap((c) =>
      c.slackLengths.map((L0, i) => ({ nodes: c.nodes.slice(i, i + 2), force: buildLink(c.EA, () => L0, false) })),
    ),
    ...rig.struts.map((s) => ({ nodes: s.nodes as number[], force: buildLink(s.EA, () => s.slackLength, true) })),
    ...rig.adjusters.map((a) => ({
      nodes: a.nodes as number[],
      force: buildLink(a.EA, () => length.get(a.id) ?? 0, false),
    })),
  ];
  const held = new Set(rig.fixed);
  const unknown = new Map<number, number>();
  for (let v = 0; v < rig.nodes.length; v++)
    if (!held.has(v)) for (let i = 0; i < 3; i++) unknown.set(3 * v + i, unknown.size);
  const local = (e: Element) => e.nodes.flatMap((v) => [x[3 * v], x[3 * v + 1], x[3 * v + 2]]);
  const gather = () => {
    const out = new Array<number>(unknown.size).fill(0);
    let scale = 0;
    for (const e of elements) {
      const f = e.force(local(e));
      for (let p = 0; p < f.length; p++) {
        const u = unknown.get(3 * e.nodes[Math.floor(p / 3)] + (p % 3));
        if (u !== undefined) out[u] += f[p];
        scale = Math.max(scale, Math.abs(f[p]));
      }
    }
    return { out, scale };
  };
  const factor = () => {
    const K = Matrix.zeros(unknown.size, unknown.size);
    const h = 1e-6;
    for (const e of elements) {
      const at = local(e);
      const index = at.map((_, p) => unknown.get(3 * e.nodes[Math.floor(p / 3)] + (p % 3)));
      for (let q = 0; q < at.length; q++) {
        const column = index[q];
        if (column === undefined) continue;
        const [up, down] = [1, -1].map((s) => e.force(at.map((v, p) => (p === q ? v + s * h : v))));
        for (let p = 0; p < at.length; p++) {
          const row = index[p];
          if (row !== undefined) K.set(row, column, K.get(row, column) + (up[p] - down[p]) / (2 * h));
        }
      }
    }
    return new LuDecomposition(K);
  };
  return {
    /** Sets slack lengths of adjusters, m. */
    turn: (id: string, to: number) => length.set(id, to),
    lengthOf: (id: string) => length.get(id) ?? Number.NaN,
    /** Greatest out-of-balance force over the greatest element force. */
    measureResidual: () => {
      const { out, scale } = gather();
      return Math.max(...out.map(Math.abs)) / scale;
    },
    solve: (): Record<string, number> => {
      for (let step = 0; step < 60; step++) {
        const { out, scale } = gather();
        if (Math.max(...out.map(Math.abs)) < 1e-9 * scale) break;
        const move = factor().solve(Matrix.columnVector(out)).to1DArray();
        const share = Math.min(1, 0.02 / Math.max(...move.map(Math.abs)));
        for (const [c, u] of unknown) x[c] -= share * move[u];
      }
      const { out, scale } = gather();
      const left = Math.max(...out.map(Math.abs)) / scale;
      if (!(left < 1e-9)) throw new Error(`the second method did not come to rest: ${left}`);
      return Object.fromEntries(
        rig.adjusters.map((a) => {
          const L = Math.hypot(...[0, 1, 2].map((i) => x[3 * a.nodes[1] + i] - x[3 * a.nodes[0] + i]));
          const L0 = length.get(a.id) ?? 0;
          return [a.id, Math.max(0, (a.EA * (L - L0)) / L0)];
        }),
      );
    },
  };
}
