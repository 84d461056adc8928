// A dragged seam: its two panels anew, equal to the whole roof's where nothing moved, seams with the others as long as they were.
import { expect, test } from "vitest";
import { dragSeamInPlace, openDrag } from "../../src/core/plan/dragSeam.ts";
import { fitPanels } from "../../src/core/plan/fitPanels.ts";
import type { CutPanel } from "../../src/core/records/flatPanel.ts";
import type { Job } from "../../src/core/records/job.ts";
import type { StripLayout } from "../../src/core/records/stripLayout.ts";
import { expectSoundLayout } from "../seams/judgeLayout.ts";
import { makeForm, makeGrid, makeJob, makeTent } from "../seams/madeForms.ts";

const saddle = () => makeForm(makeGrid(24, 18, (u, v) => [12 * (u - 0.5), 9 * (v - 0.5), 7 * (u - 0.5) * (v - 0.5)]));
const open = (form = saddle(), job: Job = makeJob()) =>
  openDrag(form, job, fitPanels(form, job, { seams: {}, panels: {}, onStation: () => {} }));

/** Flat length of a seam on one of its panels, mm. */
function flatLength(layout: StripLayout, id: string, panel: CutPanel | undefined): number {
  const seam = layout.seams.find((s) => s.id === id);
  if (!seam || !panel) throw new RangeError(id);
  const local = new Map(Array.from(panel.surfaceVertex, (v, i) => [v, i]));
  return seam.vertices.slice(1).reduce((sum, v, i) => {
    const [a, b] = [local.get(seam.vertices[i]) ?? -1, local.get(v) ?? -1];
    return sum + Math.hypot(panel.flat[2 * b] - panel.flat[2 * a], panel.flat[2 * b + 1] - panel.flat[2 * a + 1]);
  }, 0);
}

test("a seam moved to where it is gives its two panels as they were", () => {
  const drag = open();
  const [[weld, ends]] = [...drag.work.ends].slice(1);
  const { layout, panels } = dragSeamInPlace(drag, weld, ends);
  expectSoundLayout(drag.form, layout);
  expect(panels.length).toBe(2);
  for (const p of panels) {
    const before = drag.fitted.panels.output.find((q) => q.id === p.id);
    expect(p.area.net).toBeCloseTo(before?.area.net ?? 0, 4);
    expect(p.size.length).toBeCloseTo(before?.size.length ?? 0, 0);
    expect(p.size.width).toBeCloseTo(before?.size.width ?? 0, 0);
  }
});

test("a seam moved step by step: one panel grows as the other shrinks, other panels' seams stay as long", () => {
  const drag = open();
  const [[weld, [from, to]]] = [...drag.work.ends].slice(1);
  const areas: number[] = [];
  for (const step of [0.01, 0.02, 0.03, -0.02]) {
    const { layout, panels } = dragSeamInPlace(drag, weld, [{ ...from, at: from.at + step }, to]);
    expectSoundLayout(drag.form, layout);
    const seam = layout.seams.find((s) => s.id === weld);
    expect(panels.map((p) => p.id).sort()).toEqual([...(seam?.strips ?? [])].sort());
    areas.push(panels[0].area.net);
    expect(Math.abs(flatLength(layout, weld, panels[0]) - flatLength(layout, weld, panels[1]))).toBeLessThan(0.5);
    for (const other of layout.seams) {
      const mine = panels.find((p) => other.strips.includes(p.id));
      if (other.id === weld || !mine) continue;
      const held = drag.held?.others.find((p) => other.strips.includes(p.id));
      expect(Math.abs(flatLength(layout, other.id, mine) - flatLength(layout, other.id, held))).toBeLessThan(0.5);
    }
  }
  const [a, b, c, d] = areas;
  expect(Math.sign(b - a)).toBe(Math.sign(c - b));
  expect(Math.sign(d - a)).toBe(-Math.sign(b - a));
});

test("gores on belts can be dragged too; what cannot move is not offered, and refused", () => {
  const drag = open(makeTent(48, 10, 6, 3, 3));
  const [[weld, [from, to]]] = [...drag.work.ends];
  const { layout, panels } = dragSeamInPlace(drag, weld, [from, { ...to, at: to.at + 0.005 }]);
  expectSoundLayout(drag.form, layout);
  expect(panels.length).toBe(2);
  expect(() => dragSeamInPlace(drag, "nowhere", [from, to])).toThrow(/cannot be moved/);
  expect(() => dragSeamInPlace(drag, weld, [{ edge: "nowhere", at: 0 }, to])).toThrow(/nowhere/);
  const across = open(saddle(), makeJob({ maxLength: 5000 }));
  const tees = across.fitted.seams.output.seams.filter((s) => s.id === s.weld && !across.work.ends.has(s.id));
  expect(tees.length).toBeGreaterThan(0);
});

test("a seam is not dragged over its neighbour or along an edge", () => {
  const drag = open();
  const [[weld, [from, to]], [, [next]]] = [...drag.work.ends];
  const over = { ...from, at: next.at + 0.5 * (next.at - from.at) };
  expect(() => dragSeamInPlace(drag, weld, [over, to])).toThrow(/cross|along/);
});
