import { expect, test } from "vitest";
import { buildRandom } from "../../src/core/numeric/random.ts";
import type { Reading } from "../../src/core/records/rig.ts";
import { buildRig, type Rig } from "../../src/core/rig/build/buildRig.ts";
import { correctSolved } from "../../src/core/rig/correct/correctRig.ts";
import { turnUntil } from "../../src/core/rig/moves/playByForce.ts";
import type { RigInput } from "../../src/core/rig/rigInput.ts";
import { readAdjusters } from "../../src/core/rig/stages/readState.ts";
import { countModes, type RigState, turnTo } from "../../src/core/rig/stages/solveLengths.ts";
import { type SolvedRig, solveRig } from "../../src/core/rig/stages/solveRig.ts";
import { giveAdjusters, makeSmallSail, planInput } from "./madeRig.ts";
import { makeRandomRig } from "./randomRigs.ts";

interface Site {
  input: RigInput;
  rig: Rig;
  solved: SolvedRig;
}

/** A rig with M16 turnbuckles (4 mm a turn), read with a gauge good to 3 %. */
function openSite(plain: RigInput): Site {
  const adjusters = plain.rig.adjusters.map((a) => ({ ...a, turnbuckle: { ...a.turnbuckle, perTurn: 4 } }));
  const input = { ...plain, rig: { ...plain.rig, readingError: 0.03, adjusters } };
  const rig = buildRig(input);
  return { input, rig, solved: solveRig(input, rig, {}) };
}

const blank = { time: "", by: "", temperature: null, force: null, vibration: null, at: null };

/** What a crew reads of a state: forces with normal noise of a share, corners within a survey's error each way (m). */
function read(
  rig: Rig,
  truth: RigState,
  noise: { random: () => number; force: number; place: number | null },
): Reading[] {
  const { random } = noise;
  const normal = () => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());
  const forces = readAdjusters(rig, truth);
  return rig.adjusters.flatMap((a, i): Reading[] => {
    const force = Math.max(0, forces[i] * (1 + noise.force * normal()));
    const place = noise.place;
    const out: Reading[] = [{ ...blank, row: 2 + 2 * i, id: a.id, force }];
    if (place === null) return out;
    const at = [0, 1, 2].map((k) => truth.x[3 * a.nodes[0] + k] + place * (2 * random() - 1));
    return [...out, { ...blank, row: 3 + 2 * i, id: a.id, at: at as [number, number, number] }];
  });
}

/** Adjusters let out or taken in at random, m. */
function disturb({ rig, solved }: Site, spread: number, random: () => number): RigState {
  const lengths = rig.adjusters.map((a) => solved.finished.L0[a.link] + spread * (2 * random() - 1));
  return turnTo(rig, solved.solver, solved.finished, lengths);
}

function judge({ rig, solved }: Site, state: RigState): boolean {
  const forces = readAdjusters(rig, state);
  return rig.adjusters.every((a, i) => {
    const v = 3 * a.nodes[0];
    const way = Math.hypot(...[0, 1, 2].map((k) => state.x[v + k] - solved.exact.x[v + k]));
    return Math.abs(forces[i] / a.target - 1) <= 0.1 && way <= 0.005;
  });
}

const roundWith = (site: Site, truth: RigState, readings: Reading[]) => {
  const { correction, findings } = correctSolved(site.input, site.rig, site.solved, readings);
  const change = site.rig.adjusters.map((a) =>
    correction.moves.filter((m) => m.adjuster === a.id).reduce((sum, m) => sum - m.travel / 1000, 0),
  );
  const lengths = site.rig.adjusters.map((a, i) => truth.L0[a.link] + change[i]);
  return { correction, findings, change, next: turnTo(site.rig, site.solved.solver, truth, lengths) };
};

const ends = openSite(makeRandomRig(3, "cable-ends").input);
const made = makeSmallSail([6, 4]);
const sail = openSite(planInput(made, {}, { adjusters: giveAdjusters(made) }).input);

test("six cable ends off by up to 8 mm, gauge 3 %, survey 3 mm: one round holds all windows in 95 of 100 states, two in all; each set to its target once does not", () => {
  expect(countModes(ends.solved.singular)).toBeGreaterThanOrEqual(3);
  const random = buildRandom(99);
  let one = 0;
  let two = 0;
  let once = 0;
  for (let c = 0; c < 100; c++) {
    const truth = disturb(ends, 0.008, random);
    const noise = { random, force: 0.03, place: 0.003 };
    const first = roundWith(ends, truth, read(ends.rig, truth, noise)).next;
    if (judge(ends, first)) one++;
    const second = roundWith(ends, first, read(ends.rig, first, noise)).next;
    if (judge(ends, second)) two++;
    if (c % 5 > 0) continue;
    let state = truth;
    ends.rig.adjusters.forEach((a, i) => {
      state = turnUntil(ends.rig, ends.solved.solver, state, { i, wanted: a.target }, {});
    });
    if (judge(ends, state)) once++;
  }
  expect(one).toBeGreaterThanOrEqual(95);
  expect(two).toBe(100);
  // 20 of the states were tried that way
  expect(once).toBeLessThan(0.95 * 20);
}, 300_000);

test("four-point sail that stands as planned: noise alone turns no adjuster by more than 10 mm, survey or none", () => {
  expect(countModes(sail.solved.singular)).toBe(1);
  const random = buildRandom(7);
  for (let c = 0; c < 60; c++) {
    const noise = { random, force: 0.03, place: c % 2 === 0 ? 0.003 : null };
    const { change } = roundWith(sail, sail.solved.finished, read(sail.rig, sail.solved.finished, noise));
    for (const m of change) expect(Math.abs(m)).toBeLessThanOrEqual(0.01);
  }
});

test("one adjuster 6 mm out, read without error: found to the tenth of a millimetre, one move puts it back, the forecast comes true", () => {
  const { rig, solved } = ends;
  const lengths = rig.adjusters.map((a, i) => solved.finished.L0[a.link] + (i === 2 ? 0.006 : 0));
  const truth = turnTo(rig, solved.solver, solved.finished, lengths);
  const exact = { random: () => 0.5, force: 0, place: 0 };
  const { correction, next } = roundWith(ends, truth, read(rig, truth, exact));
  const fitted = correction.fitted.map((f) => f.off);
  fitted.forEach((off, i) => {
    expect(Math.abs(off - (i === 2 ? 6 : 0))).toBeLessThan(0.3);
  });
  expect(correction.moves[0].adjuster).toBe("T3");
  expect(correction.moves.length).toBeLessThanOrEqual(2);
  expect(judge(ends, next)).toBe(true);
  const forces = readAdjusters(rig, next);
  rig.adjusters.forEach((a, i) => {
    expect(Math.abs(correction.forecast.forces[a.id] - forces[i])).toBeLessThan(0.02 * a.target);
  });
  for (const m of correction.moves) expect(Math.abs(6 * m.turns - Math.round(6 * m.turns))).toBeLessThan(1e-6);
});

test("forces alone do not tell where the corners of a four-point sail are: said, with the corners to survey", () => {
  const exact = { random: () => 0.5, force: 0, place: null };
  const { findings } = roundWith(sail, sail.solved.finished, read(sail.rig, sail.solved.finished, exact));
  const untold = findings.find((f) => f.code === "reading-untold");
  expect(untold?.where).toEqual(["T1", "T2", "T3", "T4"]);
  expect(untold?.remedy).toMatch(/survey/);
});

test("a reading that cannot be true with the others is named by row and id, and left out", () => {
  const exact = { random: () => 0.5, force: 0, place: 0 };
  const readings = read(ends.rig, ends.solved.finished, exact);
  const wrong = readings.map((r) => (r.id === "T4" && r.force !== null ? { ...r, force: 2.5 * r.force } : r));
  const { findings, change } = roundWith(ends, ends.solved.finished, wrong);
  const doubt = findings.filter((f) => f.code === "reading-contradiction");
  expect(doubt.map((f) => f.where)).toEqual([["row 8", "T4"]]);
  for (const m of change) expect(Math.abs(m)).toBeLessThan(0.002);
});

test("readings the rig cannot use are refused by name: an unknown id, a frequency in a pocket, a place far off", () => {
  const { input, rig, solved } = ends;
  const correct = (r: Partial<Reading>) => correctSolved(input, rig, solved, [{ ...blank, row: 2, id: "T1", ...r }]);
  expect(() => correct({ id: "T9", force: 3 })).toThrow(/row 2.*"T9".*T1/);
  const vibration = { frequency: 3, length: 5, mass: 1.3 };
  expect(correct({ id: "rim-2", vibration }).findings.map((f) => [f.code, f.where])).toContainEqual([
    "reading-pocket",
    ["row 2", "rim-2"],
  ]);
  expect(correct({ at: [900, 0, 0] }).findings.map((f) => f.code)).toContain("reading-place");
});

test("readings taken warm are held against the plan at that temperature", () => {
  const { input, rig, solved } = ends;
  const warm = { ...input.rig, temperature: input.rig.temperature - 20 };
  // a plan whose reference is 20 K colder sees the same forces as those of a warmer, tauter roof
  const exact = read(rig, solved.finished, { random: () => 0.5, force: 0, place: null });
  const now = exact.map((r) => ({ ...r, temperature: input.rig.temperature }));
  const { correction } = correctSolved({ ...input, rig: warm }, rig, solved, now);
  for (const f of correction.fitted) expect(f.off).toBeLessThan(0);
  const same = correctSolved(input, rig, solved, now).correction;
  for (const f of same.fitted) expect(Math.abs(f.off)).toBeLessThan(0.2);
});

test("a stage the plan has not is refused, one it has is held against", () => {
  const { input, rig, solved } = ends;
  const readings = read(rig, solved.stages[2].end, { random: () => 0.5, force: 0, place: null });
  expect(() => correctSolved(input, rig, solved, readings, 55)).toThrow(/55 %.*10 %/);
  const { correction } = correctSolved(input, rig, solved, readings, 60);
  expect(correction.stage).toBe("60 %");
  expect(correction.moves).toEqual([]);
});
