// What must be said about flattened panels: what holds by construction is measured again, what is poor is named with a remedy.
import type { Check, Finding } from "../../problem.ts";
import type { FlatPanel } from "../../records/flatPanel.ts";
import type { StripLayout } from "../../records/stripLayout.ts";

/** Limits on flat panels: what a welding floor joins without a pucker (own), and the shares above which facts.md asks for a finding. */
export const FLAT_LIMITS = {
  /** mm */
  seam: 0.5,
  piece: 0.25,
  /** degrees */
  axis: 0.1,
  /** Share of the target stress. */
  rms: 0.25,
  /** Share of the area. */
  compressed: 0.02,
};

/** Greatest difference of the two sides of any seam, whole and piece by piece, mm. */
export function measureSeamMismatch(
  panels: readonly FlatPanel[],
  layout: StripLayout,
): { seam: number; piece: number } {
  const byId = new Map(panels.map((p) => [p.id, { p, local: new Map([...p.surfaceVertex].map((v, i) => [v, i])) }]));
  let seam = 0;
  let piece = 0;
  for (const s of layout.seams) {
    const [a, b] = s.strips.map((id) => byId.get(id));
    if (a === undefined || b === undefined) continue;
    let sum = 0;
    for (let k = 1; k < s.vertices.length; k++) {
      const [u, v] = [s.vertices[k - 1], s.vertices[k]];
      const off = measureFlatPiece(a.p, a.local, u, v) - measureFlatPiece(b.p, b.local, u, v);
      piece = Math.max(piece, Math.abs(off));
      sum += off;
    }
    seam = Math.max(seam, Math.abs(sum));
  }
  return { seam, piece };
}

function measureFlatPiece(panel: FlatPanel, local: Map<number, number>, u: number, v: number): number {
  const a = 2 * (local.get(u) ?? 0);
  const b = 2 * (local.get(v) ?? 0);
  const { flat } = panel;
  return Math.sqrt((flat[b] - flat[a]) ** 2 + (flat[b + 1] - flat[a + 1]) ** 2);
}

/** Angle between the panel's axis and where it should lie, degrees. */
export function measureAxisError(panel: FlatPanel): number {
  const mean = (group: number[], c: number) => group.reduce((s, v) => s + panel.flat[2 * v + c], 0) / group.length;
  const dx = mean(panel.axis.to, 0) - mean(panel.axis.from, 0);
  const dy = mean(panel.axis.to, 1) - mean(panel.axis.from, 1);
  const off = (Math.atan2(dy, dx) * 180) / Math.PI - panel.axis.turn;
  return Math.abs(((((off + 180) % 360) + 360) % 360) - 180);
}

/** The checks every flattening must pass. */
export function checkFlatPanels(panels: readonly FlatPanel[], layout: StripLayout): Check[] {
  const { seam, piece } = measureSeamMismatch(panels, layout);
  let turned = 0;
  let axis = 0;
  for (const p of panels) {
    axis = Math.max(axis, measureAxisError(p));
    const { flat, tri } = p;
    for (let t = 0; t < tri.length; t += 3) {
      const [a, b, c] = [2 * tri[t], 2 * tri[t + 1], 2 * tri[t + 2]];
      const det = (flat[b] - flat[a]) * (flat[c + 1] - flat[a + 1]) - (flat[b + 1] - flat[a + 1]) * (flat[c] - flat[a]);
      if (!(det > 0)) turned++;
    }
  }
  const row = (text: string, value: number, limit: number): Check => ({
    station: "panels",
    text,
    value,
    limit,
    holds: value <= limit,
  });
  return [
    row("flat triangles turned over", turned, 0),
    row("difference in length of the two sides of a seam, mm", seam, FLAT_LIMITS.seam),
    row("difference in length of the two sides of a seam piece, mm", piece, FLAT_LIMITS.piece),
    row("angle between a panel's axis and its place on the cloth, degrees", axis, FLAT_LIMITS.axis),
  ];
}

/** A check that does not hold stops the papers. */
export function listBrokenChecks(checks: readonly Check[], panels: readonly FlatPanel[]): Finding[] {
  return checks
    .filter((c) => !c.holds)
    .map((c) => ({
      code: "flatten-check",
      level: "stop",
      station: "panels",
      where: panels.map((p) => p.id),
      value: c.value,
      limit: c.limit,
      text: `${c.text}: ${c.value}, allowed ${c.limit}`,
      remedy:
        "the panels do not fit each other: look for needle triangles and very curved strips, lay the seams closer",
      basis: "own argument",
    }));
}

/** Cautions about stress as patterned and about compensations that do not fit the cloth's stiffness. */
export function listPanelFindings(panels: readonly FlatPanel[]): Finding[] {
  const out: Finding[] = [];
  for (const p of panels) {
    for (const way of ["warp", "weft"] as const) {
      const limit = FLAT_LIMITS.rms * Math.max(Math.abs(p.target[way]), 1e-9);
      const { rmsError } = p.stress[way];
      if (rmsError > limit) {
        const taken = p.decompensated.length > 0 ? "; part of it is the compensation taken back along its sides" : "";
        out.push(
          caution(
            "panel-stress",
            p.id,
            [rmsError, limit],
            `panel ${p.id}: ${way} stress as patterned is off by ${rmsError.toFixed(2)} kN/m rms from the intended ${p.target[way].toFixed(2)} kN/m; ${limit.toFixed(2)} kN/m (25 %) is allowed${taken}`,
          ),
        );
      }
      if (p.permanent[way] < -1e-6) {
        out.push({
          ...caution(
            "panel-compensation",
            p.id,
            [p.compensation[way], p.compensation[way] - p.permanent[way]],
            `panel ${p.id}: the ${way} compensation given, ${(100 * p.compensation[way]).toFixed(3)} %, is smaller than what the stiffness alone gives at the prestress: test and stiffness do not fit`,
          ),
          remedy: "check the batch's biaxial test and the cloth's constants against each other",
          basis: "own argument",
        });
      }
    }
    if (p.stress.compressedShare > FLAT_LIMITS.compressed) {
      out.push(
        caution(
          "panel-compressed",
          p.id,
          [p.stress.compressedShare, FLAT_LIMITS.compressed],
          `panel ${p.id}: ${(100 * p.stress.compressedShare).toFixed(1)} % of its area would be compressed or slack as patterned; 2 % is allowed`,
        ),
      );
    }
  }
  return out;
}

function caution(code: string, where: string, [value, limit]: [number, number], text: string): Finding {
  return {
    code,
    level: "caution",
    station: "panels",
    where,
    value,
    limit,
    text,
    remedy: "narrower strips here, a seam through the place of strongest curvature, or more prestress",
    basis: "own argument",
  };
}
