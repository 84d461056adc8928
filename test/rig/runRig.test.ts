import { beforeAll, expect, test } from "vitest";
import type { Finding, StationResult } from "../../src/core/problem.ts";
import type { FactsRig, FactsTensioning } from "../../src/core/records/rig.ts";
import type { RigInput } from "../../src/core/rig/rigInput.ts";
import { type RigResult, runRig } from "../../src/core/rig/runRig.ts";
import type { MadeForm } from "../templates/madeForm.ts";
import { makeSaddle } from "../templates/makeForms.ts";
import { giveAdjusters, makeSmallSail, planInput, turnbuckle } from "./madeRig.ts";
import { buildAgain } from "./solveAgain.ts";

const made = makeSmallSail([8, 6]);
let input: RigInput;
let result: StationResult<RigResult>;
let rig: FactsRig;
let plan: FactsTensioning;

beforeAll(() => {
  input = planInput(made, {}, { adjusters: giveAdjusters(made) }).input;
  result = runRig(input, {});
  if (!result.output.rig || !result.output.tensioning) throw new Error("no rig");
  rig = result.output.rig;
  plan = result.output.tensioning;
});

const codes = (findings: Finding[], level: Finding["level"]) =>
  findings.filter((f) => f.level === level).map((f) => f.code);

test("every check holds and nothing stops the plan", () => {
  expect(result.checks.filter((c) => !c.holds)).toEqual([]);
  expect(codes(result.findings, "stop")).toEqual([]);
});

test("targets: within 0.5 % before moves are rounded, within 3 % after; forces of a stage near its fraction", () => {
  const exact = result.checks.filter((c) => c.text.includes("before moves are rounded"));
  expect(exact.length).toBe(plan.stages.length);
  for (const c of exact) expect(c.value).toBeLessThan(0.005);
  for (const stage of plan.stages)
    for (const a of rig.adjusters) expect(Math.abs(stage.forces[a.id] / a.target - stage.fraction)).toBeLessThan(0.1);
  for (const a of rig.adjusters) expect(Math.abs(plan.stages[4].forces[a.id] / a.target - 1)).toBeLessThan(0.03);
});

test("the finished state is in balance by a second method: residual below 1e-8 of the largest force", () => {
  expect(buildAgain(rig, input.fabric).measureResidual()).toBeLessThan(1e-8);
});

test("moves follow on each other, travel is turns times the turnbuckle's travel a turn, turns are whole sixths", () => {
  const at = new Map<string, number>();
  let step = 0;
  for (const stage of plan.stages) {
    for (const m of stage.moves) {
      expect(m.step === step || m.step === step + 1).toBe(true);
      step = m.step;
      expect(m.from).toBe(at.get(m.adjuster) ?? m.from);
      at.set(m.adjuster, m.to);
      expect(m.travel).toBeCloseTo(1000 * (m.from - m.to), 9);
      const a = rig.adjusters.find((q) => q.id === m.adjuster);
      expect(m.turns * (a?.perTurn ?? 0)).toBeCloseTo(m.travel, 9);
      expect(Math.abs(6 * m.turns - Math.round(6 * m.turns))).toBeLessThan(1e-6);
      expect(m.low).toBeLessThanOrEqual(m.expect);
      expect(m.high).toBeGreaterThan(m.expect);
    }
  }
  for (const a of rig.adjusters) expect(at.get(a.id)).toBe(a.slackLength);
});

test("moves of the later stages, solved again by a second method, read as printed", () => {
  // the second method knows no wrinkles, so it begins where hardly any cloth is loose
  const from = 1;
  const again = buildAgain(rig, input.fabric);
  const begin = new Map(plan.stages.slice(0, from + 1).flatMap((s) => s.moves.map((m) => [m.adjuster, m.to])));
  const finished = new Map(rig.adjusters.map((a) => [a.id, a.slackLength]));
  for (const share of [0.5, 0.8, 1]) {
    for (const [id, to] of finished) again.turn(id, to + ((begin.get(id) ?? to) - to) * share);
    again.solve();
  }
  let judged = 0;
  for (const stage of plan.stages.slice(from + 1)) {
    for (const step of new Set(stage.moves.map((m) => m.step))) {
      const moves = stage.moves.filter((m) => m.step === step);
      for (const m of moves) again.turn(m.adjuster, m.to);
      const forces = again.solve();
      for (const m of moves) {
        const target = rig.adjusters.find((a) => a.id === m.adjuster)?.target ?? 0;
        expect(Math.abs(forces[m.adjuster] - m.expect), `step ${step} ${m.adjuster}`).toBeLessThan(1e-4 * target);
        judged++;
      }
    }
  }
  expect(judged).toBeGreaterThan(6);
});

test("no step passes the limit, and the member nearest its limit is named with its share", () => {
  for (const m of plan.stages.flatMap((s) => s.moves)) {
    const capacity = rig.adjusters.some((a) => a.id === m.greatest.id) ? 120 : 184;
    expect(m.greatest.share).toBeCloseTo(m.greatest.kN / (input.rig.limit * capacity), 9);
    expect(m.greatest.share).toBeLessThan(1);
    expect(m.greatest.kN).toBeGreaterThanOrEqual(m.expect - 1e-9);
  }
});

/** The same sail with its vertices in another order and the corners named the same. */
function renumber(form: MadeForm, moveBy: [number, number, number]): MadeForm {
  const n = form.xyz.length / 3;
  const to = Uint32Array.from({ length: n }, (_, v) => (v * 37 + 11) % n);
  expect(new Set(to).size).toBe(n);
  const xyz = new Float64Array(3 * n);
  for (let v = 0; v < n; v++) for (let k = 0; k < 3; k++) xyz[3 * to[v] + k] = form.xyz[3 * v + k] + moveBy[k];
  return {
    xyz,
    tri: form.tri.map((v) => to[v]),
    lines: form.lines.map((l) => ({ name: l.name, vertices: l.vertices.map((v) => to[v]) })),
    pull: form.pull,
    fixed: form.fixed.map((v) => to[v]),
    corners: form.corners.map((c) => ({ name: c.name, vertex: to[c.vertex] })),
  };
}

test("a renumbered and moved copy gives the same readings", () => {
  const copy = renumber(made, [128, -64, 16]);
  const other = runRig(planInput(copy, {}, { adjusters: giveAdjusters(copy) }).input, {}).output.tensioning;
  if (!other) throw new Error("no rig");
  plan.stages.slice(1).forEach((stage, k) => {
    const twin = other.stages[k + 1];
    expect(twin.moves.map((m) => [m.step, m.adjuster, Math.round(6 * m.turns)])).toEqual(
      stage.moves.map((m) => [m.step, m.adjuster, Math.round(6 * m.turns)]),
    );
    for (const [i, m] of stage.moves.entries())
      expect(Math.abs(twin.moves[i].expect - m.expect)).toBeLessThan(0.01 * 42);
  });
});

test("the same input gives the same bytes", () => {
  expect(JSON.stringify(runRig(input, {}).output)).toBe(JSON.stringify(result.output));
});

test("warm steel slackens, cold steel tightens; the row of the reference temperature is the finished state", () => {
  const at = (t: number) => plan.temperatureTable.find((r) => r.temperature === t)?.forces ?? {};
  for (const a of rig.adjusters) {
    expect(at(15)[a.id]).toBeCloseTo(plan.stages[4].forces[a.id], 9);
    expect(at(35)[a.id]).toBeLessThan(at(15)[a.id]);
    expect(at(-5)[a.id]).toBeGreaterThan(at(15)[a.id]);
  }
});

test("a form clamped all round plans without a rig and says so", () => {
  const saddle = makeSaddle([6, 4], [2, 3, 2, 3], [6, 4]);
  const clamped = planInput(saddle, { edges: { default: { kind: "clamped" } } });
  const { output, findings } = runRig(clamped.input, {});
  expect(output.rig).toBeNull();
  expect(output.tensioning).toBeNull();
  expect(findings.map((f) => f.code)).toEqual(["rig-none"]);
});

test("an adjuster that cannot reach is a stop with its name, the length it needs and what it reaches", () => {
  const adjusters = giveAdjusters(made);
  adjusters[1].turnbuckle = { ...turnbuckle, shortest: 400, longest: 700 };
  const { findings } = runRig(planInput(made, {}, { adjusters }).input, {});
  const reach = findings.filter((f) => f.code === "adjuster-reach");
  expect(reach.map((f) => [f.level, f.where, f.limit])).toEqual([["stop", "T2", 700]]);
  expect(reach[0].text).toMatch(/T2.*400 to 700 mm/);
});

test("a target past the limit is a stop that names the member, its force and its limit", () => {
  const adjusters = giveAdjusters(made);
  adjusters[2].turnbuckle = { ...turnbuckle, capacity: 60 };
  const { findings } = runRig(planInput(made, {}, { adjusters }).input, {});
  const passed = findings.filter((f) => f.code === "limit-passed");
  expect(passed.map((f) => [f.level, f.where])).toEqual([["stop", "T3"]]);
  expect(passed[0].limit).toBeCloseTo(0.55 * 60, 9);
});

test("a capacity that is not given is a caution with the member's name", () => {
  const adjusters = giveAdjusters(made, { capacity: null });
  const { findings } = runRig(planInput(made, {}, { adjusters }).input, {});
  expect(findings.filter((f) => f.code === "capacity-missing").map((f) => f.where)).toEqual(["T1", "T2", "T3", "T4"]);
});

test("an adjuster at an anchor the form has not is an error that lists those it has", () => {
  const adjusters = giveAdjusters(made);
  adjusters[0].anchor = "nowhere";
  expect(() => runRig(planInput(made, {}, { adjusters }).input, {})).toThrow(/T1.*nowhere.*corner-sw/);
});

test("stopped on request", () => {
  expect(() => runRig(input, { cancelled: () => true })).toThrow(/stopped/);
});
