// One strip fewer: the width told is the one a plan comes to, and the roll told is where the plan takes one strip less.
import { expect, it } from "vitest";
import { measureExtent } from "../../src/core/plan/clothRoom.ts";
import { tellFewerStrips } from "../../src/core/plan/fewerStrips.ts";
import { fitPanels } from "../../src/core/plan/fitPanels.ts";
import type { Job } from "../../src/core/records/job.ts";
import { makeForm, makeGrid, makeJob } from "../seams/madeForms.ts";

const saddle = () => makeForm(makeGrid(24, 18, (u, v) => [12 * (u - 0.5), 9 * (v - 0.5), 3 * (u - 0.5) * (v - 0.5)]));

function plan(job: Job) {
  const { seams, panels } = fitPanels(saddle(), job, { seams: {}, panels: {}, onStation: () => {} });
  const widths = panels.output.map((p) => ({ id: p.id, width: 1000 * measureExtent(p.cut).width, turned: false }));
  return { choices: seams.output.choices, widths, widest: Math.max(...widths.map((w) => w.width)) };
}

/** A job with no allowance but its laps, on rolls of a width, mm. */
const onRolls = (width: number, seams: Partial<Job["seams"]> = {}): Job => {
  const job = makeJob(seams);
  return { ...job, rolls: null, fabric: { ...job.fabric, rollWidth: width, selvedge: 25 } };
};

it("the widest of one strip fewer is as told within 2.5 %; on rolls so wide the plan takes it, on narrower ones not", () => {
  const job = onRolls(2500);
  const now = plan(job);
  const [told] = tellFewerStrips(job, now.choices, now.widths);
  const [{ count, layout, from, to }] = now.choices;
  expect(told).toMatchObject({ region: "region 1", strips: count, limit: "cloth" });
  expect(told.roll - told.widest).toBeCloseTo(50, 9);
  const fewer = plan(onRolls(2500, { count: count - 1, layout: layout as "bands", from, to }));
  expect(Math.abs(told.widest / fewer.widest - 1)).toBeLessThan(0.025);
  expect(plan(onRolls(1.025 * told.roll)).choices[0].count).toBe(count - 1);
  expect(plan(onRolls(0.975 * told.roll)).choices[0].count).toBe(count);
});

it("says what holds the strips narrow: the job's own limit, a number asked for, or neither cloth nor limit", () => {
  const wide = onRolls(5000, { maxWidth: 2000 });
  const held = plan(wide);
  expect(tellFewerStrips(wide, held.choices, held.widths)).toMatchObject([{ limit: "asked" }]);
  const many = onRolls(5000, { count: 8 });
  const asked = plan(many);
  expect(tellFewerStrips(many, asked.choices, asked.widths)).toMatchObject([{ strips: 8, limit: null }]);
});

it("nothing is told of seams given one by one, of a single strip, of panels whose warp is turned", () => {
  const job = onRolls(2500);
  const { choices, widths } = plan(job);
  expect(tellFewerStrips(job, [{ ...choices[0], layout: "pairs" }], widths)).toEqual([]);
  expect(tellFewerStrips(job, [{ ...choices[0], count: 1 }], widths)).toEqual([]);
  expect(
    tellFewerStrips(
      job,
      choices,
      widths.map((w) => ({ ...w, turned: true })),
    ),
  ).toEqual([]);
});
