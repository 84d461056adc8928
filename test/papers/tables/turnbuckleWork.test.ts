import { describe, expect, test } from "vitest";
import { bodyTorque, threadOf, turnsText } from "../../../src/core/papers/tables/turnbuckleWork.ts";
import { sampleFacts } from "../made/sampleFacts.ts";
import { withRig } from "../made/sampleRig.ts";

const adjuster = withRig(sampleFacts()).rig!.adjusters[1]!;

test.each([
  [0, "0 turns"],
  [1 / 6, "1/6 turn"],
  [1, "1 turn"],
  [8 / 6, "1 turn +\u00a02/6"],
  [6.8333333, "6 turns +\u00a05/6"],
  [-1.999999, "2 turns"],
])("%f turns read %s", (turns, text) => {
  expect(turnsText(turns)).toBe(text);
});

describe("torque at the body", () => {
  test("is twice the power screw torque written with lead and friction instead of angles", () => {
    // T = F·dm/2 · (l + π f dm sec α)/(π dm − f l sec α), machine design textbooks (power screws), from memory.
    const [F, f] = [62, 0.15];
    const thread = { diameter: 24, pitch: 3 };
    const dm = 24 - 0.6495 * 3;
    const sec = 1 / Math.cos(Math.PI / 6);
    const raise = ((F * dm) / 2) * ((3 + Math.PI * f * dm * sec) / (Math.PI * dm - f * 3 * sec));
    expect(bodyTorque(F, thread, f)).toBeCloseTo((2 * raise) / 1000, 12);
  });

  test("without friction the work of a turn is force times travel", () => {
    const thread = { diameter: 20, pitch: 2.5 };
    expect(bodyTorque(30, thread, 0) * 2 * Math.PI).toBeCloseTo((30 * 5) / 1000, 12);
    expect(bodyTorque(30, { ...thread, ends: 1 }, 0) * 2 * Math.PI).toBeCloseTo((30 * 2.5) / 1000, 12);
  });
});

test("a thread is the one given, else the one named, else the thickest of its pitch, else unknown", () => {
  expect(threadOf({ ...adjuster, thread: 27 })).toEqual({ diameter: 27, pitch: 3, ends: 2, assumed: false });
  expect(threadOf(adjuster)).toEqual({ diameter: 24, pitch: 3, ends: 2, assumed: true });
  expect(threadOf({ ...adjuster, turnbuckle: "job" })).toEqual({ diameter: 27, pitch: 3, ends: 2, assumed: true });
  expect(threadOf({ ...adjuster, turnbuckle: "open-body-m30" })).toEqual({
    diameter: 27,
    pitch: 3,
    ends: 2,
    assumed: true,
  });
  expect(threadOf({ ...adjuster, perTurn: 7.3 })).toBeNull();
  // one thread and a swivel: a turn is one pitch
  expect(threadOf({ ...adjuster, ends: "single" })).toEqual({ diameter: 64, pitch: 6, ends: 1, assumed: true });
});
