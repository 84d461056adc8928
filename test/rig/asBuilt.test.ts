// The proof of the assembled roof: closed forms on a flat sheet held all round, what misses its limit is named, limits are the job's.
import { expect, test } from "vitest";
import type { Finding } from "../../src/core/problem.ts";
import type { FactsAsBuilt, ProofLimits } from "../../src/core/records/rig.ts";
import { reviewBuilt } from "../../src/core/rig/review/reviewBuilt.ts";
import { runRig } from "../../src/core/rig/runRig.ts";
import { buildStiffness, measureTargetStrain } from "../../src/core/structure/cloth.ts";
import { makeSaddle } from "../templates/makeForms.ts";
import { giveAdjusters, makeSmallSail, planInput } from "./madeRig.ts";

/** The saddle clamped all round as a rig's input, its flat cloth then scaled: 1 is as patterned. */
function proveSaddle(scale: { warp: number; weft: number }, proof: Partial<ProofLimits> = {}) {
  const { input } = planInput(makeSaddle([6, 4], [2, 3, 2, 3], [8, 6]), { edges: { default: { kind: "clamped" } } });
  input.proof = { ...input.proof, ...proof };
  input.panels = input.panels.map((p) => ({
    ...p,
    flat: p.flat.map((c, i) => c * (i % 2 === 0 ? scale.warp : scale.weft)),
  }));
  const { output, findings, checks } = runRig(input, {});
  if (output.asBuilt === null) throw new Error("no proof");
  return { built: output.asBuilt, findings, checks, input };
}

const cautions = (findings: Finding[]) => findings.filter((f) => f.level === "caution").map((f) => f.code);

test("a roof held all round has its proof: in balance, mean stress within 3 % of the intended one, every check holds", () => {
  const { built, findings, checks } = proveSaddle({ warp: 1, weft: 1 });
  expect(checks.filter((c) => !c.holds)).toEqual([]);
  expect(cautions(findings)).toEqual([]);
  const told = checks.map((c) => c.text).join();
  for (const what of ["come to rest", "mean warp", "mean weft", "rms", "way of a point", "not taut"])
    expect(told).toContain(what);
  for (const way of ["warp", "weft"] as const) {
    expect(Math.abs(built.stress[way].mean / 2 - 1)).toBeLessThan(0.03);
    expect(built.stress[way].min).toBeLessThan(built.stress[way].mean);
    expect(built.stress[way].max).toBeGreaterThan(built.stress[way].mean);
    expect(built.intended.stress[way]).toBe(2);
  }
  expect(built.compressedShare).toBe(0);
});

test("cloth cut short in the weft by a strain d carries the stress that d adds, by the cloth's law", () => {
  const d = 0.001;
  const { built, input } = proveSaddle({ warp: 1, weft: 1 / (1 + d) });
  const plain = proveSaddle({ warp: 1, weft: 1 }).built;
  // Held all round the weft must stretch by d: S = D·(0, d) and the warp feels its share.
  const D = buildStiffness(input.fabric);
  expect(measureTargetStrain(D, { warp: D.wf * d, weft: D.ff * d }).weft).toBeCloseTo(d, 12);
  expect((built.stress.weft.mean - plain.stress.weft.mean) / (D.ff * d)).toBeGreaterThan(0.95);
  expect((built.stress.weft.mean - plain.stress.weft.mean) / (D.ff * d)).toBeLessThan(1.05);
  expect((built.stress.warp.mean - plain.stress.warp.mean) / (D.wf * d)).toBeGreaterThan(0.9);
  expect((built.stress.warp.mean - plain.stress.warp.mean) / (D.wf * d)).toBeLessThan(1.1);
});

test("cloth cut too long: mean, panels and slack cloth are named, with what was intended and the limit", () => {
  const { findings } = proveSaddle({ warp: 1.004, weft: 1.004 });
  expect(cautions(findings)).toEqual(expect.arrayContaining(["built-mean", "built-stress", "cloth-slack"]));
  const mean = findings.find((f) => f.code === "built-mean");
  expect(mean?.text).toMatch(/2\.00 was intended/);
  expect(mean?.limit).toBe(0.05);
  const stress = findings.find((f) => f.code === "built-stress");
  expect(stress?.where.length).toBeGreaterThan(0);
});

test("the limits are the job's: what the defaults let pass is named under narrower ones, and the reverse", () => {
  const narrow = proveSaddle({ warp: 1, weft: 1 }, { mean: 1e-5, rms: 1e-5, moved: 1e-4 });
  expect([...new Set(cautions(narrow.findings))]).toEqual(["built-mean", "built-stress", "built-moved"]);
  const wide = proveSaddle({ warp: 1.004, weft: 1.004 }, { mean: 1, rms: 2, moved: 1000, slack: 1 });
  expect(cautions(wide.findings)).toEqual([]);
});

test("a roof with adjusters is compared in its forces too", () => {
  const made = makeSmallSail([8, 6]);
  const { input } = planInput(made, {}, { adjusters: giveAdjusters(made) });
  const { output, checks, findings } = runRig({ ...input, proof: { ...input.proof, force: 1e-6 } }, {});
  const built = output.asBuilt as FactsAsBuilt;
  for (const a of output.rig?.adjusters ?? []) expect(built.intended.forces[a.id]).toBe(a.target);
  for (const c of output.cables) expect(built.intended.forces[c.id]).toBe(c.force);
  const row = checks.find((c) => c.text.includes("force of a cable or adjuster"));
  const off = Object.entries(built.intended.forces).map(([id, kN]) => Math.abs(built.forces[id] / kN - 1));
  expect(row?.value).toBe(Math.max(...off));
  expect(cautions(findings)).toContain("built-force");
  expect(cautions(reviewBuilt({ ...built, limits: { ...built.limits, force: 0.1 } }).findings)).not.toContain(
    "built-force",
  );
});
