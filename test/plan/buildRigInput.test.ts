import { expect, test } from "vitest";
import { giveAdjusters, giveForces, makeSmallSail, planInput, turnbuckle } from "../rig/madeRig.ts";

const made = makeSmallSail([6, 4]);
const stay = { name: "stay-1", from: "corner-sw", to: [9, 9, 0] as [number, number, number], force: null };

test("with every number the job's own, nothing is noted and the schedule may be issued", () => {
  const anchors = made.corners.map((c) => {
    const at = [0, 1, 2].map((k) => made.xyz[3 * c.vertex + k]) as [number, number, number];
    return { name: c.name, at, support: [at[0] * 1.15, at[1] * 1.15, at[2]] as [number, number, number] };
  });
  const { input, findings } = planInput(made, { anchors }, { adjusters: giveAdjusters(made), defaults: [] });
  expect(findings).toEqual([]);
  expect(input.rig.defaults).toEqual([]);
  expect(Object.keys(input.supports).sort()).toEqual(made.corners.map((c) => c.name).sort());
});

test("without adjusters one stands at each isolated anchor, noted with the way to change it", () => {
  const { input, findings } = planInput(made);
  expect(input.rig.adjusters.map((a) => a.anchor).sort()).toEqual(made.corners.map((c) => c.name).sort());
  expect(new Set(input.rig.adjusters.map((a) => a.name)).size).toBe(4);
  expect(findings.some((f) => f.code === "rig-default" && f.where === "rig.adjusters")).toBe(true);
  expect(input.rig.defaults).toContain("rig.adjusters");
});

test("a cable without EA is a stop with the edge's name, and keeps the schedule from being issued", () => {
  const edges = giveForces(made);
  edges.east = { ...edges.east, cable: { ...edges.east.cable!, EA: null } };
  const { input, findings } = planInput(made, { edges }, { adjusters: giveAdjusters(made) });
  const missing = findings.filter((f) => f.code === "cable-stiffness");
  expect(missing.map((f) => [f.level, f.where])).toEqual([["stop", "east"]]);
  expect(missing[0].remedy).toContain("edges.east.cable.EA");
  expect(input.rig.defaults).toContain("edges.east.cable.EA");
  expect(input.cables.east.type.EA).toBeGreaterThan(0);
});

test("an edge without a cable computes with the catalogue's, noted as a default", () => {
  const edges = giveForces(made);
  edges.north = { kind: "cable", force: 24 };
  const { input, findings } = planInput(made, { edges }, { adjusters: giveAdjusters(made) });
  expect(findings.some((f) => f.code === "rig-default" && f.where === "edges.north.cable")).toBe(true);
  expect(input.cables.north.type.id).not.toBe("job");
});

test("a turnbuckle without capacity and one from the catalogue keep the schedule from being issued", () => {
  const adjusters = giveAdjusters(made);
  adjusters[0].turnbuckle = { ...turnbuckle, capacity: null };
  adjusters[1].turnbuckle = { ...turnbuckle, id: "open-body-m20" };
  const { input } = planInput(made, {}, { adjusters });
  expect(input.rig.defaults).toContain("rig.adjusters.T1.turnbuckle.capacity");
  expect(input.rig.defaults).toContain("rig.adjusters.T2.turnbuckle");
});

test("a name that is taken is an error", () => {
  const adjusters = giveAdjusters(made);
  adjusters[2].name = "east";
  expect(() => planInput(made, {}, { adjusters })).toThrow(/"east" is taken/);
  const stays = [{ ...stay, name: "T1", EA: 1e4, minBreakingForce: 90 }];
  expect(() => planInput(made, {}, { adjusters: giveAdjusters(made), stays })).toThrow(/"T1" is taken/);
});

test("a stay without EA or breaking force is computed with the catalogue's and noted", () => {
  const stays = [{ ...stay, EA: null, minBreakingForce: null }];
  const { input, findings } = planInput(made, {}, { adjusters: giveAdjusters(made), stays });
  expect(findings.some((f) => f.where === "rig.stays.stay-1")).toBe(true);
  expect(input.rig.stays[0].EA).toBeGreaterThan(0);
});

test("an end that the edge has not is an error with the adjuster's name", () => {
  const end = { ...giveAdjusters(made)[0], anchor: null, edge: "south", end: "corner-nw" };
  expect(() => planInput(made, {}, { adjusters: [end] })).toThrow(/T1.*corner-nw.*south/);
});

test("an adjuster on a cable's end is found by number or by the anchor there", () => {
  const base = giveAdjusters(made);
  const ends = ["first", "last", "corner-se"].map((end) => {
    const [a] = planInput(made, {}, { adjusters: [{ ...base[0], anchor: null, edge: "south", end }] }).input.rig
      .adjusters;
    return a.end;
  });
  expect(ends).toEqual(["first", "last", "last"]);
});

test("stages that do not end at the full target are completed", () => {
  const { input } = planInput(made, {}, { adjusters: giveAdjusters(made), stages: [0.2, 0.6] });
  expect(input.rig.stages).toEqual([0.2, 0.6, 1]);
});
