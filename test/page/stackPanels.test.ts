// Panels on the sheet that shows them all: none over another, in reading order, as large as columns of any number allow; no browser.
import fc from "fast-check";
import { expect, it } from "vitest";
import { stackPanels } from "../../src/page/flat/stackPanels.ts";

it("equal boxes on a sheet of their own proportions stand in a square", () => {
  const { at, width, height } = stackPanels(Array(9).fill({ w: 40, h: 20 }), 0, 2);
  expect([width, height]).toEqual([120, 60]);
  expect(new Set(at.map((p) => p.x))).toEqual(new Set([0, 40, 80]));
});

it("long panels stay under each other", () => {
  expect(stackPanels(Array(4).fill({ w: 12_000, h: 2300 }), 350, 1.2).at.every((p) => p.x === 350)).toBe(true);
});

it("boxes of any size keep their gap, lie on the sheet, and follow each other down and on", () => {
  const side = fc.integer({ min: 1, max: 9000 });
  const boxes = fc.array(fc.record({ w: side, h: side }), { minLength: 1, maxLength: 40 });
  fc.assert(
    fc.property(boxes, fc.double({ min: 0.3, max: 3, noNaN: true }), (all, shape) => {
      const gap = 10;
      const { at, width, height } = stackPanels(all, gap, shape);
      all.forEach((b, i) => {
        const p = at[i];
        expect(p.x >= gap && p.y >= gap && p.x + b.w + gap <= width && p.y + b.h + gap <= height).toBe(true);
        all.slice(0, i).forEach((c, k) => {
          const q = at[k];
          const apart = p.x >= q.x + c.w + gap || (p.x === q.x && p.y >= q.y + c.h + gap);
          expect(apart).toBe(true);
        });
      });
    }),
  );
});
