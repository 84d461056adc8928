import { expect, test } from "vitest";
import { runRig } from "../../src/core/rig/runRig.ts";
import type { Vec3 } from "../../src/core/surface/surface.ts";
import { giveAdjusters, makeSmallSail, offset, planInput } from "../rig/madeRig.ts";

const made = makeSmallSail([6, 4]);
const adjusters = giveAdjusters(made);
const drawn = planInput(made, {}, { adjusters });
const corner = (name: string): Vec3 => {
  const v = made.corners.find((c) => c.name === name)!.vertex;
  return [0, 1, 2].map((k) => made.xyz[3 * v + k]) as Vec3;
};
/** The far pin of an adjuster as drawn, 1.0 m out, and as surveyed so much further out. */
const pin = (name: string, further: number): Vec3 => {
  const pull = drawn.form.reactions.find((r) => r.anchor === name)!.force;
  return offset(corner(name), pull, -(1 + further));
};

test("a pin 12 mm further out: the same forces and stage travel, the adjuster 12 mm longer, told in a note", () => {
  const survey = [{ anchor: "corner-se", at: pin("corner-se", 0.012) }];
  const { input, findings } = planInput(made, { survey }, { adjusters });
  expect(findings.filter((f) => f.code === "survey-pin").map((f) => [f.level, f.where])).toEqual([
    ["note", "corner-se"],
  ]);
  expect(findings.find((f) => f.code === "survey-pin")?.text).toMatch(/12 mm.*12 mm further out.*T2/);
  const [a, b] = [runRig(drawn.input, {}).output, runRig(input, {}).output];
  const length = (r: typeof a, id: string) => r.rig?.adjusters.find((q) => q.id === id)?.pinLength ?? 0;
  expect(length(b, "T2") - length(a, "T2")).toBeCloseTo(0.012, 3);
  expect(length(b, "T1") - length(a, "T1")).toBeCloseTo(0, 3);
  for (const t of b.rig?.adjusters ?? [])
    expect(Math.abs((b.asBuilt?.forces[t.id] ?? 0) / t.target - 1)).toBeLessThan(0.03);
});

test("a pin too far out for its turnbuckle is a stop with the adjuster's name", () => {
  const survey = [{ anchor: "corner-ne", at: pin("corner-ne", 0.2) }];
  const { findings } = runRig(planInput(made, { survey }, { adjusters }).input, {});
  expect(findings.filter((f) => f.level === "stop").map((f) => [f.code, f.where])).toEqual([["adjuster-reach", "T3"]]);
});

test("an anchor without an adjuster stands where it was surveyed, and the adjusters still reach their targets", () => {
  const at = offset(corner("corner-nw"), [-1, 1, 0], 0.01);
  const three = adjusters.filter((a) => a.anchor !== "corner-nw");
  const { input, findings } = planInput(made, { survey: [{ anchor: "corner-nw", at }] }, { adjusters: three });
  expect(findings.some((f) => f.code === "survey-anchor" && f.level === "note")).toBe(true);
  const { output, checks } = runRig(input, {});
  const node = input.form.anchors.find((a) => a.id === "corner-nw")!.vertex;
  output.rig?.nodes[node].forEach((q, k) => {
    expect(q).toBeCloseTo(at[k], 12);
  });
  // The proof of the roof as built tells what the corner out of place does to it; the sequence itself holds.
  const off = checks.filter((c) => !c.holds).map((c) => c.text);
  expect(off.filter((text) => !text.startsWith("assembled roof"))).toEqual([]);
  expect(off.join()).toMatch(/greatest way of a point/);
});

test("an unknown anchor, and a place of another unit, are errors with the name", () => {
  expect(() => planInput(made, { survey: [{ anchor: "A9", at: [0, 0, 0] }] }, { adjusters })).toThrow(
    /"A9".*corner-sw/,
  );
  const at = corner("corner-sw").map((q) => 1000 * q) as Vec3;
  expect(() => planInput(made, { survey: [{ anchor: "corner-sw", at }] }, { adjusters })).toThrow(/corner-sw.*unit/);
});
