import fc from "fast-check";
import { expect, test } from "vitest";
import { isFree, type LabelField, takePlaceInPlace } from "../../../src/core/papers/pdf/layout/labelField.ts";
import type { Vec2 } from "../../../src/core/records/facts.ts";

const square = (): LabelField => ({
  within: { x: 0, y: 0, width: 100, height: 100 },
  outlines: [
    [
      [20, 20],
      [80, 20],
      [80, 80],
      [20, 80],
    ],
  ],
  taken: [],
});

test("a label takes the first place that is inside, off the outline and off what is set", () => {
  const field = square();
  const size = { width: 10, height: 4 };
  const middles: Vec2[] = [
    [2, 50],
    [20, 50],
    [50, 50],
    [51, 51],
    [50, 60],
  ];
  expect(takePlaceInPlace(field, size, middles)).toEqual([50, 50]);
  expect(takePlaceInPlace(field, size, middles)).toEqual([50, 60]);
  expect(takePlaceInPlace(field, size, middles)).toBeNull();
});

test("labels never overlap and never cross the outline, whatever is asked", () => {
  const place = fc.tuple(fc.integer({ min: 0, max: 100 }), fc.integer({ min: 0, max: 100 }));
  fc.assert(
    fc.property(fc.array(place, { maxLength: 60 }), (middles) => {
      const field = square();
      for (const m of middles) takePlaceInPlace(field, { width: 9, height: 5 }, [m]);
      for (const [i, a] of field.taken.entries()) {
        const others = { ...field, taken: field.taken.filter((_, k) => k !== i) };
        expect(isFree(others, a)).toBe(true);
        // By sampling: no point of the outline lies inside a label.
        for (let t = 0; t <= 60; t++) {
          for (const [x, y] of [
            [20 + t, 20],
            [20 + t, 80],
            [20, 20 + t],
            [80, 20 + t],
          ] as Vec2[]) {
            expect(x > a.x && x < a.x + a.width && y > a.y && y < a.y + a.height).toBe(false);
          }
        }
      }
    }),
    { seed: 11 },
  );
});
