// Fields against the figures the stations themselves wrote down: the same stress and balance by another road.
import { beforeAll, describe, expect, it } from "vitest";
import { loadCatalogues } from "../../src/cli/packageFiles.ts";
import { readInput } from "../../src/cli/readInput.ts";
import { measureBuilt, measureFormFields, measurePatterned } from "../../src/core/plan/measureFields.ts";
import { runPlan } from "../../src/core/plan/runPlan.ts";
import type { Facts, FactsForm } from "../../src/core/records/facts.ts";
import type { Vec3 } from "../../src/core/surface/surface.ts";

let facts: Facts;
beforeAll(() => {
  const { job, source } = readInput("templates/market-hall/job.json", loadCatalogues());
  facts = runPlan({ ...job, nest: { ...job.nest, steps: 0 } }, source, { revision: "0" }, {});
});

describe("fields of the market hall", () => {
  it("gives each panel's least and greatest stress again", () => {
    const patterned = measurePatterned(facts, facts.panels ?? []);
    let at = 0;
    for (const p of facts.panels ?? []) {
      const own = patterned.warp.slice(at, at + p.triangles.length);
      at += p.triangles.length;
      expect(Math.min(...own)).toBeCloseTo(p.stress.warp.min, 5);
      expect(Math.max(...own)).toBeCloseTo(p.stress.warp.max, 5);
    }
    expect(at).toBe(patterned.warp.length);
  });

  it("gives the least and greatest stress as built again, of a roof that has no rig", () => {
    const built = facts.assembled && measureBuilt(facts, facts.assembled);
    expect(facts.rig).toBeUndefined();
    expect(built?.warp.length).toBe(facts.panels?.reduce((n, p) => n + p.triangles.length, 0));
    for (const way of ["warp", "weft"] as const) {
      const own = [...(built?.[way] ?? [])];
      expect(Math.min(...own)).toBeCloseTo(facts.asBuilt?.stress[way].min ?? -1, 4);
      expect(Math.max(...own)).toBeCloseTo(facts.asBuilt?.stress[way].max ?? -1, 4);
    }
  });

  it("gives the form's greatest residual again", () => {
    const { residual } = measureFormFields(facts.form as FactsForm, null);
    expect(Math.max(...[...residual].filter((v) => !Number.isNaN(v)))).toBeCloseTo(facts.form?.residual.max ?? -1, 7);
  });

  it("finds a saddle everywhere", () => {
    const { curvature } = measureFormFields(facts.form as FactsForm, null);
    const inner = [...curvature].filter((v) => !Number.isNaN(v));
    expect(inner.length).toBeGreaterThan(100);
    expect(Math.max(...inner)).toBeLessThan(0);
  });

  it("gives the least and greatest curvature the form station tells", () => {
    const { curvature } = measureFormFields(facts.form as FactsForm, null);
    const inner = [...curvature].filter((v) => !Number.isNaN(v));
    expect(Math.min(...inner)).toBeCloseTo(facts.form?.relief?.curvature?.least ?? 0, 6);
    expect(Math.max(...inner)).toBeCloseTo(facts.form?.relief?.curvature?.greatest ?? 0, 6);
  });

  it("finds 1/4 per m2 on a cap of radius 2 m (Gauss)", () => {
    const n = 20;
    const vertices: Vec3[] = [];
    const triangles: Vec3[] = [];
    for (let j = 0; j <= n; j++) {
      for (let i = 0; i <= n; i++) {
        const [x, y] = [i / n - 0.5, j / n - 0.5];
        vertices.push([x, y, Math.sqrt(4 - x * x - y * y)]);
        const a = j * (n + 1) + i;
        if (i < n && j < n) triangles.push([a, a + 1, a + n + 2], [a, a + n + 2, a + n + 1]);
      }
    }
    const rim = Array.from({ length: n + 1 }, (_, i) => [i, n * (n + 1) + i, i * (n + 1), i * (n + 1) + n]).flat();
    const edge = { id: "rim", kind: "clamped" as const, vertices: rim, force: null, reaction: null, forceFrom: "none" };
    const form = { ...(facts.form as FactsForm), vertices, triangles, anchors: [], edges: [{ ...edge, length: 4 }] };
    const cap = measureFormFields(form, null).curvature;
    const inner = [...cap].filter((v) => !Number.isNaN(v));
    expect(inner.length).toBe((n - 1) ** 2);
    const mean = inner.reduce((a, b) => a + b, 0) / inner.length;
    expect(Math.abs(mean / 0.25 - 1)).toBeLessThan(0.01);
  });
});
