import { expect, test } from "vitest";
import { cautionsNamed, cautionsOf, cautionText, liftOffSpeed } from "../../../src/core/papers/words/cautions.ts";
import { CAUTIONS } from "../../../src/core/papers/words/cautionTexts.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

test("every paper has a caution, the gravest first, each with hazard, consequence and remedy in that order", () => {
  // Signal words in the order of ANSI Z535.6: death or serious injury first (second hand).
  const rank = ["DANGER", "WARNING", "CAUTION", "NOTICE"];
  for (const paper of ["schedule", "cables", "hardware", "rolls", "panels", "seams", "findings"] as const) {
    const ranks = cautionsOf(sampleFacts(), paper).map((c) => rank.indexOf(c.signal));
    expect(ranks.length, paper).toBeGreaterThan(0);
    expect(ranks, paper).toEqual([...ranks].sort((a, b) => a - b));
  }
  expect(new Set(CAUTIONS.map((c) => c.id)).size).toBe(CAUTIONS.length);
  for (const c of CAUTIONS) {
    for (const part of [c.hazard, c.consequence, c.avoid]) expect(part).toMatch(/^[A-Z].*\.$/);
    const text = cautionText(sampleFacts(), c);
    expect(text.indexOf(c.hazard)).toBe(0);
    expect(text.indexOf(c.consequence)).toBeGreaterThanOrEqual(c.hazard.length);
    expect(text.endsWith(c.avoid)).toBe(true);
  }
});

test("lift-off speed of 0.75, 1.0 and 1.3 kg/m²", () => {
  // 0.625 v² = m g: 3.4, 4.0, 4.5 m/s (recomputed).
  expect([0.75, 1, 1.3].map((m) => liftOffSpeed(m).toFixed(1))).toEqual(["3.4", "4.0", "4.5"]);
  const [wind] = cautionsNamed(sampleFacts(), "wind-lift");
  expect(cautionText(sampleFacts(), wind!)).toContain("pvc-2 at about 4.1\u00a0m/s");
});

test("the caution of glass cloth stands where glass is used or nobody said what the cloth is, and then says so", () => {
  const ids = (material?: "polyester" | "glass" | "other") => {
    const facts = sampleFacts();
    if (material) facts.fabrics["pvc-2"]!.material = material;
    const [glass] = cautionsNamed(facts, "glass-folds");
    expect(cautionsOf(facts, "findings").some((c) => c.id === "glass-folds")).toBe(glass !== undefined);
    return glass ? cautionText(facts, glass) : "";
  };
  expect(ids("polyester")).toBe("");
  expect(ids("other")).toBe("");
  expect(ids("glass")).not.toContain("does not say");
  expect(ids()).toContain("The job does not say what pvc-2 is made of: taken as glass.");
});
