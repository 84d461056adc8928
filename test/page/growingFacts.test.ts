// A plan that comes to the page in slices: what is put together there is what was given away, and what stood before stays the same record.
import fc from "fast-check";
import { expect, it } from "vitest";
import { loadCatalogues } from "../../src/cli/packageFiles.ts";
import { readInput } from "../../src/cli/readInput.ts";
import { runPlan } from "../../src/core/plan/runPlan.ts";
import type { Finding } from "../../src/core/problem.ts";
import type { Facts } from "../../src/core/records/facts.ts";
import { buildModel, shapeOf, valuesOf } from "../../src/page/solid/buildModel.ts";
import { createGiver, createTaker, type Grown } from "../../src/page/worker/growingFacts.ts";
import { carve, joinInPlace } from "../../src/page/worker/inParts.ts";

/** As the page reads it: a copy. */
const sent = <T>(value: T): T => structuredClone(value);

it("any plain value comes out of its slices as it was, whatever a slice may hold", () => {
  fc.assert(
    fc.property(fc.jsonValue({ maxDepth: 5 }), fc.integer({ min: 1, max: 40 }), (value, full) => {
      const before = sent(value);
      const carved = carve(value, full);
      expect(joinInPlace(sent(carved))).toEqual(before);
      expect(value).toEqual(before);
    }),
    { numRuns: 500, seed: 4 },
  );
});

it("a list of a hundred thousand numbers makes many slices, none above what a slice may hold", () => {
  const value = { list: Array.from({ length: 20_000 }, (_, i) => [i, 2 * i, 3 * i]) };
  const { bones, slices } = carve(value, 6000);
  expect(bones).toEqual({ list: [] });
  expect(slices.length).toBeGreaterThan(10);
  expect(Math.max(...slices.map((s) => s.items.length))).toBeLessThanOrEqual(1000);
});

it("findings from before the plan stand before its own", () => {
  const [before, own] = ["before", "own"].map((code) => ({ code }) as Finding);
  const { added } = createGiver(null, [before])({ findings: [own] } as unknown as Facts);
  expect(added.bones.findings).toEqual([before, own]);
});

it.each(["market-hall", "bandstand"])(
  "%s: at each station all facts so far, in their order; nothing is sent or drawn twice",
  (name) => {
    const { job, source } = readInput(`templates/${name}/job.json`, loadCatalogues());
    const give = createGiver(job.warp, []);
    const taker = createTaker();
    const stages: Grown[] = [];
    const pass = (facts: Facts) => {
      const { added, slices } = give(facts);
      for (const slice of slices) taker.take(sent(slice));
      const grown = taker.join(sent(added));
      stages.push(grown);
      expect(JSON.stringify(grown.facts)).toBe(JSON.stringify(facts));
    };
    pass(
      runPlan(
        { ...job, nest: { ...job.nest, steps: 0 } },
        source,
        { revision: "0", onFacts: (_, facts) => pass(facts) },
        {},
      ),
    );
    expect(stages.length).toBe(4);
    const [form, panels, , whole] = stages;
    expect(panels.facts.form).toBe(form.facts.form);
    expect(whole.facts.panels).toBe(panels.facts.panels);
    expect(whole.fields?.panelsShape).toBe(panels.fields?.panelsShape);
    for (const field of ["none", "residual", "warp", "builtWeft"] as const) {
      const shape = shapeOf(whole.fields, field);
      const values = valuesOf(whole.fields, field);
      if (shape === null) throw new Error("no shape");
      const apart = field === "warp" || field === "builtWeft";
      const model = buildModel(shape, values, apart, { lines: [], labels: [] });
      expect(model.owner.length).toBe(apart ? model.triangles.length : shape.owner.length);
      expect(model.value.length).toBe(field === "none" ? 0 : model.owner.length);
      // each corner lies where the facts put it, in the order of their triangles
      const patches =
        field === "residual"
          ? [whole.facts.form]
          : field === "builtWeft"
            ? [whole.facts.rig ?? whole.facts.assembled].map(
                (b) => b && { vertices: b.nodes, triangles: b.cloth.map((c) => c.nodes) },
              )
            : (whole.facts.panels ?? []).map((p) => ({ vertices: p.erected, triangles: p.triangles }));
      const corners = patches.flatMap((p) => p?.triangles.flatMap((t) => t.map((v) => p.vertices[v])) ?? []);
      expect(model.triangles.length).toBe(corners.length);
      const own = Float32Array.from(model.triangles, (p) => model.position[3 * p + 2]);
      expect(own).toEqual(Float32Array.from(corners, (c) => c[2]));
    }
  },
  300_000,
);
