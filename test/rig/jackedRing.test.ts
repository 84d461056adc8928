// A cone whose ring is hauled by a jack on its axis, with adjusters at its corners.
import { beforeAll, expect, test } from "vitest";
import type { Finding, StationResult } from "../../src/core/problem.ts";
import type { Job, RigJob } from "../../src/core/records/job.ts";
import type { FactsRig } from "../../src/core/records/rig.ts";
import type { RigInput } from "../../src/core/rig/rigInput.ts";
import { type RigResult, runRig } from "../../src/core/rig/runRig.ts";
import { makeJob } from "../madeJob.ts";
import { makeCone } from "../templates/makeForms.ts";
import { giveAdjusters, giveForces, planInput, turnbuckle } from "./madeRig.ts";

const corners = [-1, 1].flatMap((x) => [-1, 1].map((y) => [x, x * y]));
const made = makeCone(
  { centre: [0, 0, 4.4], radius: 1.8 },
  corners.map(([x, y], i) => ({ name: `pier-${i + 1}`, at: [5 * x, 5 * y, 3] })),
  corners.map((_, i) => ({ name: `rim-${i + 1}`, pull: 12.5 })),
  [6, 7],
  Math.atan2(corners[0][1], corners[0][0]),
);

// soft cloth: with as few strips as this mesh has, hardly any of it is slack
const fabric = { ...makeJob().fabric, Ew: 120, Ef: 120, G: 15 };

type Jack = NonNullable<RigJob["adjusters"]>[number];
const jack = (own: Partial<Jack> = {}): Jack => ({
  ...{ name: "J1", anchor: null, edge: null, end: null, ring: "ring", EA: 90000 },
  turnbuckle: { ...turnbuckle, shortest: 700, longest: 1400, capacity: 200 },
  ...own,
});
const plan = (own: Partial<Jack> = {}, rig: Partial<RigJob> = {}) => {
  const edges: Job["edges"] = { ...giveForces(made), ring: { kind: "clamped" } };
  return planInput(made, { edges, fabric }, { adjusters: [...giveAdjusters(made), jack(own)], ...rig });
};

let input: RigInput;
let result: StationResult<RigResult>;
let rig: FactsRig;

beforeAll(() => {
  ({ input } = plan());
  result = runRig(input, {});
  if (!result.output.rig) throw new Error(result.findings.map((f) => f.text).join("\n"));
  rig = result.output.rig;
});

const ringPull = () => input.form.edges.find((e) => e.id === "ring")?.reaction?.resultant ?? [0, 0, 0];

test("the ring is free, its jack carries what the form pulls there, and the finished state is in balance", () => {
  // the mesh is coarse: how far the cloth is from its stress is not asked here
  expect(result.checks.filter((c) => !c.holds && !c.text.startsWith("assembled roof"))).toEqual([]);
  expect(result.findings.filter((f: Finding) => f.level === "stop")).toEqual([]);
  const j = rig.adjusters.find((a) => a.id === "J1");
  expect(j?.target).toBeCloseTo(Math.hypot(...ringPull()), 9);
  // the pull of a cone on its ring goes down, the jack hauls up to a pin above it
  expect(ringPull()[2]).toBeLessThan(-5);
  const [near, far] = (j?.nodes ?? []).map((v) => rig.nodes[v]);
  expect(far[2] - near[2]).toBeCloseTo(1, 1);
  const ring = new Set(
    input.layout.strips.flatMap((s) => s.sides.filter((q) => q.id === "ring").flatMap((q) => q.vertices)),
  );
  for (const v of ring) expect(rig.fixed).not.toContain(v);
  const rest = result.checks.find((c) => c.text.includes("out-of-balance"));
  expect(rest?.value).toBeLessThan(1e-8);
});

test("what is held carries the whole: pulls at the far pins add up to nothing", () => {
  const sum = [0, 0, 0];
  for (const a of rig.adjusters) {
    const [p, q] = a.nodes.map((v) => rig.nodes[v]);
    const force = (a.EA * (Math.hypot(...p.map((c, k) => q[k] - c)) - a.slackLength)) / a.slackLength;
    p.forEach((c, k) => {
      sum[k] += (force * (c - q[k])) / Math.hypot(...p.map((r, i) => q[i] - r));
    });
  }
  for (const kN of sum) expect(Math.abs(kN)).toBeLessThan(1e-5);
});

test("the ring is rigid: it keeps its shape to a tenth of a millimetre at every stage it was read at", () => {
  for (const s of rig.struts) {
    const [p, q] = s.nodes.map((v) => rig.nodes[v]);
    expect(Math.abs(Math.hypot(...p.map((c, k) => q[k] - c)) - s.slackLength)).toBeLessThan(1e-4);
    expect(s.brace).toBe(true);
  }
  // its struts are no members: nobody reads them
  expect(Object.keys(result.output.asBuilt?.forces ?? {}).some((id) => id.includes(":"))).toBe(false);
});

test("the jack is an adjuster like the others: moves, windows, travel, and a say in the corners' forces", () => {
  const { tensioning } = result.output;
  const moves = tensioning?.stages.flatMap((s) => s.moves.filter((m) => m.adjuster === "J1")) ?? [];
  expect(moves.length).toBeGreaterThan(2);
  for (const stage of tensioning?.stages ?? [])
    expect(Math.abs(stage.forces.J1 / (rig.adjusters.at(-1)?.target ?? 0) - stage.fraction)).toBeLessThan(0.1);
  // its pin let down by 10 mm slackens every corner, and the jack itself
  const let10 = result.output.sensitivity?.find((line) => line.what === "anchor" && line.id === "J1");
  for (const id of ["T1", "T2", "T3", "T4", "J1"]) expect(let10?.forces[id]).toBeLessThan(0);
});

test("a ring that is none, or a pin the cloth pulls away from, is said with the names", () => {
  expect(() => plan({ ring: "rim-1" })).toThrow(/J1.*"rim-1".*no closed clamped edge; there are ring/);
  const below = runRig(plan({ support: [0, 0, 1] }).input, {});
  expect(below.findings.map((f) => [f.code, f.level, f.where])).toEqual([["ring-axis", "stop", "J1"]]);
  expect(below.output.rig).toBeNull();
  const aside = runRig(plan({ support: [0.3, 0, 7] }).input, {}).findings.filter((f) => f.code === "ring-axis");
  expect(aside.map((f) => f.level)).toEqual(["caution"]);
  expect(aside[0].text).toMatch(/J1: its far pin stands 3\d\d mm off the line/);
});

test("a far pin that nobody gave is a default: the schedule is not for issue", () => {
  const { findings, input: own } = plan();
  expect(findings.some((f) => f.where === "rig.adjusters.J1.support")).toBe(true);
  expect(own.rig.defaults).toContain("rig.adjusters.J1.support");
});

test("self-weight hangs on the anchors: their pulls add up to the mass of cloth and cables times g", () => {
  const heavy = plan({}, { selfWeight: true });
  const output = runRig(heavy.input, {}).output;
  const own = output.rig;
  if (!own) throw new Error("no rig");
  const cloth = heavy.input.panels.reduce((sum, p) => {
    let area = 0;
    for (let t = 0; t < p.tri.length; t += 3) {
      const [a, b, c] = [0, 1, 2].map((k) => [p.flat[2 * p.tri[t + k]], p.flat[2 * p.tri[t + k] + 1]]);
      area += ((b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])) / 2e6;
    }
    return sum + area * (1 + p.permanent.warp) * (1 + p.permanent.weft);
  }, 0);
  const rope = output.cables.reduce((sum, c) => sum + 1.29 * c.slackLength, 0);
  const weight = ((heavy.input.fabric.mass * cloth + rope) * 9.80665) / 1000;
  expect(own.selfWeight).toBeCloseTo(weight, 6);
  let up = 0;
  for (const a of own.adjusters) {
    const [p, q] = a.nodes.map((v) => own.nodes[v]);
    const length = Math.hypot(...p.map((c, k) => q[k] - c));
    up += (((a.EA * (length - a.slackLength)) / a.slackLength) * (q[2] - p[2])) / length;
  }
  expect(Math.abs(up / weight - 1)).toBeLessThan(1e-4);
  expect(result.output.rig?.selfWeight).toBeUndefined();
});
