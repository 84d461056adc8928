import { expect, test } from "vitest";
import { buildRig } from "../../src/core/rig/build/buildRig.ts";
import { buildCableLine, permanentStretch } from "../../src/core/rig/cables/cableSchedule.ts";
import { runRig } from "../../src/core/rig/runRig.ts";
import { cable, giveAdjusters, giveForces, makeSmallSail, planInput, turnbuckle } from "./madeRig.ts";

const made = makeSmallSail([6, 4]);
const adjusters = giveAdjusters(made);
const anchors = made.corners.map((c) => ({ name: c.name, cutBack: 200 }));
const south = made.lines[0].name;

/** The south cable's line, made as told. */
function lineOf(edge: object) {
  const edges = giveForces(made);
  edges[south] = { ...edges[south], ...edge };
  const { input } = planInput(made, { edges, anchors }, { adjusters });
  const rig = buildRig(input);
  const prestretched = input.cables[south].prestretched;
  return buildCableLine(input, rig.cables.find((c) => c.id === south)!, {
    type: input.cables[south].type,
    prestretched,
  });
}

test("slack length by EA, cut length less terminals and growth for good, each told in the line", () => {
  const plain = lineOf({});
  expect(plain.slackLength).toBeCloseTo(plain.erectedLength / (1 + plain.force / cable.EA!), 12);
  expect([plain.cutLength, plain.stretch, plain.terminals]).toEqual([plain.slackLength, 0, undefined]);
  const made = lineOf({ prestretched: false, making: { terminals: [120, 180] } });
  expect(made.cutLength).toBeCloseTo(plain.slackLength / (1 + permanentStretch) - 0.3, 12);
  expect([made.stretch, made.terminals]).toEqual([permanentStretch, [0.12, 0.18]]);
  // a growth measured by the maker counts before the usual allowance
  expect(lineOf({ prestretched: false, making: { stretch: 0.001 } }).cutLength).toBeCloseTo(
    plain.slackLength / 1.001,
    12,
  );
});

test("stations: plates where the cloth is cut back, clamps evenly between them, seams, in order along the cable", () => {
  const { stations, erectedLength } = lineOf({ making: { clamps: 900 } });
  const at = (what: RegExp) => stations.filter((s) => what.test(s.for)).map((s) => s.at);
  expect(at(/^plate/)).toEqual([0.2, expect.closeTo(erectedLength - 0.2, 12)]);
  expect(stations.filter((s) => s.for.startsWith("plate")).map((s) => s.for)).toEqual([
    "plate corner-sw",
    "plate corner-se",
  ]);
  const clamps = at(/^clamp/);
  expect([clamps[0], clamps[clamps.length - 1]]).toEqual([0.2, expect.closeTo(erectedLength - 0.2, 12)]);
  const gaps = clamps.slice(1).map((q, i) => q - clamps[i]);
  for (const g of gaps) expect(g).toBeCloseTo(gaps[0], 12);
  expect(gaps[0]).toBeLessThanOrEqual(0.9);
  expect(gaps[0]).toBeGreaterThan(0.8);
  expect(stations.map((s) => s.at)).toEqual(stations.map((s) => s.at).sort((a, b) => a - b));
});

test("the weakest of turnbuckle, fitting and anchor is what every step is checked against, and it is named", () => {
  const own = adjusters.map((a, i) => (i === 1 ? { ...a, fitting: 90, anchorCapacity: 70 } : a));
  const { output, findings } = runRig(planInput(made, {}, { adjusters: own, limit: 0.55 }).input, {});
  const [t1, t2] = output.rig!.adjusters;
  expect([t1.capacity, t1.weakest, t2.capacity, t2.weakest]).toEqual([120, "turnbuckle", 70, "anchor"]);
  const passed = findings.find((f) => f.code === "limit-passed");
  expect([passed?.where, passed?.limit]).toEqual(["T2", expect.closeTo(0.55 * 70, 9)]);
  expect(passed?.text).toMatch(/anchor/);
});

test("a cable's end fitting may be weaker than its rope", () => {
  const edges = giveForces(made);
  edges[south] = { ...edges[south], making: { fitting: 30 } };
  const { output, findings } = runRig(planInput(made, { edges }, { adjusters }).input, {});
  expect(output.cables.find((c) => c.id === south)).toMatchObject({ minBreakingForce: 184, fitting: 30 });
  const passed = findings.find((f) => f.code === "limit-passed");
  expect([passed?.where, passed?.limit]).toEqual([south, expect.closeTo(0.55 * 30, 9)]);
  expect(passed?.text).toMatch(/end fitting/);
});

test("travel left and thread in the body at every stage; too little thread where the cloth is hung is a stop", () => {
  const threaded = { ...turnbuckle, thread: 24, ends: "both" as const, engagement: 24 };
  const { output, findings } = runRig(
    planInput(made, {}, { adjusters: adjusters.map((a) => ({ ...a, turnbuckle: threaded })) }).input,
    {},
  );
  for (const stage of output.tensioning!.stages)
    for (const a of output.rig!.adjusters) {
      const { toShorten, toLengthen, engaged } = stage.travel![a.id];
      expect(toShorten + toLengthen).toBeCloseTo(280, 6);
      // both ends screw in together: half of what it is shorter than its longest at each
      expect(engaged).toBeCloseTo(24 + toLengthen / 2, 6);
    }
  const last = output.tensioning!.stages[output.tensioning!.stages.length - 1];
  for (const a of output.rig!.adjusters)
    expect(last.travel![a.id].toShorten).toBeCloseTo(1000 * (a.pinLength - a.range.shortest), 6);
  expect(findings.some((f) => f.code === "thread-short")).toBe(false);
  const short = { ...threaded, engagement: 0 };
  const { findings: told } = runRig(
    planInput(
      made,
      {},
      { adjusters: adjusters.map((a, i) => (i === 0 ? { ...a, turnbuckle: { ...short, longest: 1050 } } : a)) },
    ).input,
    {},
  );
  expect(told.filter((f) => f.code === "thread-short").map((f) => [f.level, f.where])).toEqual([["stop", "T1"]]);
});
