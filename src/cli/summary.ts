// A plan in figures and in words for a terminal. Every number comes from the facts; rounding happens here.
import type { Finding } from "../core/problem.ts";
import type { Facts } from "../core/records/facts.ts";

/** What a person asks first about a plan. null: the station was not run. */
export interface PlanFigures {
  triangles: number | null;
  formArea: number | null;
  residualMax: number | null;
  seams: number | null;
  /** m */
  seamLength: number | null;
  panels: number | null;
  pieces: number | null;
  /** m2, with allowances */
  cutArea: number | null;
  /** Greatest rms error of a panel's stress, kN/m. */
  stressError: number | null;
  rolls: number | null;
  /** m of roll, all rolls */
  rollLength: number | null;
  /** cut area over cloth taken off the rolls */
  utilisation: number | null;
  cables: number | null;
  adjusters: number | null;
  /** Steps of the tensioning, all stages. */
  steps: number | null;
  /** Greatest share of its limit any part reaches on the way. */
  greatestShare: number | null;
  stops: number;
  cautions: number;
  notes: number;
  checks: number;
  checksFailed: number;
}

const sum = (values: number[]) => values.reduce((a, b) => a + b, 0);

/** Figures of a plan. @units m, m2, kN/m */
export function measurePlan(facts: Facts): PlanFigures {
  const { form, seams, panels, rolls, findings, checks } = facts;
  const count = (level: Finding["level"]) => findings.filter((f) => f.level === level).length;
  const rollArea = rolls === undefined ? 0 : sum(rolls.map((r) => r.used * r.width));
  const moves = facts.tensioning?.stages.flatMap((s) => s.moves);
  const stressErrors = panels?.flatMap((p) => [p.stress.warp.rmsError, p.stress.weft.rmsError]);
  return {
    triangles: form?.triangles.length ?? null,
    formArea: form?.area ?? null,
    residualMax: form?.residual.max ?? null,
    seams: seams?.length ?? null,
    seamLength: seams === undefined ? null : sum(seams.map((s) => s.length)),
    panels: panels?.length ?? null,
    pieces: facts.pieces?.length ?? null,
    cutArea: panels === undefined ? null : sum(panels.map((p) => p.area.cut)),
    stressError: stressErrors === undefined ? null : Math.max(0, ...stressErrors),
    rolls: rolls?.length ?? null,
    rollLength: rolls === undefined ? null : sum(rolls.map((r) => r.used)) / 1000,
    utilisation:
      rolls === undefined || rollArea === 0 ? null : sum(rolls.map((r) => r.utilisation * r.used * r.width)) / rollArea,
    cables: facts.cables?.length ?? null,
    adjusters: facts.rig?.adjusters.length ?? null,
    steps: moves === undefined ? null : new Set(moves.map((m) => m.step)).size,
    greatestShare: moves === undefined || moves.length === 0 ? null : Math.max(...moves.map((m) => m.greatest.share)),
    stops: count("stop"),
    cautions: count("caution"),
    notes: count("note"),
    checks: checks.length,
    checksFailed: checks.filter((c) => !c.holds).length,
  };
}

/** A number and its noun. */
export const plural = (n: number, word: string) => `${n} ${word}${n === 1 ? "" : "s"}`;

/** A few lines on what was planned. */
export function writeSummary(facts: Facts, figures: PlanFigures): string {
  const { job } = facts;
  const f = figures;
  const lines = [`${job.title}, issue ${job.issue}, revision ${job.revision}`];
  if (f.triangles !== null) {
    lines.push(
      `  form    ${f.formArea?.toFixed(1)} m2, ${plural(f.triangles, "triangle")}, out of balance ${f.residualMax?.toExponential(1)}`,
    );
  }
  if (f.seams !== null) lines.push(`  seams   ${plural(f.seams, "seam")}, ${f.seamLength?.toFixed(1)} m`);
  if (f.panels !== null) {
    const pieces = f.pieces ? ` and ${plural(f.pieces, "other piece")}` : "";
    lines.push(
      `  panels  ${plural(f.panels, "panel")}${pieces}, ${f.cutArea?.toFixed(1)} m2 to cut, stress within ${f.stressError?.toFixed(2)} kN/m (rms)`,
    );
  }
  if (f.rolls !== null) {
    const share = f.utilisation === null ? "" : `, ${(100 * f.utilisation).toFixed(0)} % of it used`;
    lines.push(`  rolls   ${plural(f.rolls, "roll")}, ${f.rollLength?.toFixed(2)} m of cloth${share}`);
  }
  if (f.adjusters && f.steps !== null) {
    const issue = facts.tensioning?.issuable === false ? "; on defaults, not for issue" : "";
    const share =
      f.greatestShare === null ? "" : `, greatest force ${(100 * f.greatestShare).toFixed(0)} % of its limit`;
    lines.push(
      `  rig     ${plural(f.cables ?? 0, "cable")}, ${plural(f.adjusters, "adjuster")}, ${plural(f.steps, "step")} in ${plural(facts.tensioning?.stages.length ?? 0, "stage")}${share}${issue}`,
    );
  }
  lines.push(
    `  checks  ${f.checks - f.checksFailed} of ${f.checks} hold; ${plural(f.stops, "stop")}, ${plural(f.cautions, "caution")}, ${plural(f.notes, "note")}`,
  );
  return lines.join("\n");
}

/** Places a finding speaks of, shortened. */
function writeWhere(where: string | string[]): string {
  if (typeof where === "string") return where;
  return where.length > 8 ? `${where.slice(0, 7).join(", ")} and ${where.length - 7} more` : where.join(", ");
}

function writeFinding(f: Finding): string {
  const where = writeWhere(f.where);
  const place = where === "" || f.text.startsWith(where) ? "" : `${where}: `;
  // What a note advises is said on the findings sheet; here it would bury the rest.
  const remedy = f.level === "note" ? "" : `\n          ${f.remedy}`;
  return `  ${f.level.toUpperCase().padEnd(8)}${place}${f.text}${remedy} (${f.code})`;
}

/** Every finding of some levels, the gravest first, each with place, remedy and code. */
export function writeFindings(findings: Finding[], levels: Finding["level"][]): string {
  return levels.flatMap((level) => findings.filter((f) => f.level === level).map(writeFinding)).join("\n");
}

/** Stops and cautions; where many are of one kind, the first in full and the places of the others. */
export function writeUrgent(findings: Finding[]): string {
  const kinds = new Map<string, Finding[]>();
  for (const level of ["stop", "caution"]) {
    for (const f of findings.filter((g) => g.level === level)) {
      const kind = `${level} ${f.code}`;
      kinds.set(kind, [...(kinds.get(kind) ?? []), f]);
    }
  }
  return [...kinds.values()]
    .flatMap(([first, ...others]) => {
      if (others.length < 2) return [first, ...others].map(writeFinding);
      const places = writeWhere([...new Set(others.map((f) => [f.where].flat().slice(0, 3).join("/")))]);
      return [writeFinding(first), `          and ${others.length} more of this kind: ${places}`];
    })
    .join("\n");
}

/** All checks made, those that fail first. */
export function writeChecks(facts: Facts): string {
  const show = (v: number | string) => (typeof v === "number" ? String(Number(v.toPrecision(4))) : v);
  return [...facts.checks]
    .sort((a, b) => Number(a.holds) - Number(b.holds))
    .map(
      (c) => `  ${c.holds ? "holds  " : "FAILS  "}${c.station}: ${c.text}: ${show(c.value)} (limit ${show(c.limit)})`,
    )
    .join("\n");
}
