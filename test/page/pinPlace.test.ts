import fc from "fast-check";
import { expect, it } from "vitest";
import type { Vec2 } from "../../src/core/records/facts.ts";
import { pinPlace } from "../../src/page/flat/pinPlace.ts";

it("keeps whatever is moved on the usable cloth, and moves nothing by more than it was moved and a tenth (seed 5)", () => {
  const roll = { id: "R1", length: 60_000, usableWidth: 1450 };
  const number = (min: number, max: number) => fc.double({ min, max, noNaN: true });
  fc.assert(
    fc.property(
      number(10, 1449),
      number(10, 9000),
      number(-9e4, 9e4),
      number(-3000, 3000),
      fc.boolean(),
      (w, l, dx, dy, turned) => {
        const cut: Vec2[] = [
          [0.013, -0.027],
          [l, 0],
          [l, w - 0.03],
          [0, w - 0.03],
        ];
        const rotation = turned ? 180 : 0;
        const at = turned ? { x: l, y: w } : { x: 0.05, y: 0.03 };
        const pin = pinPlace(roll, { panel: "P1", rotation, ...at }, cut, { dx, dy });
        const turn = turned ? -1 : 1;
        for (const [x, y] of cut) {
          expect(turn * x + pin.x).toBeGreaterThanOrEqual(-1e-9);
          expect(turn * x + pin.x).toBeLessThanOrEqual(roll.length + 1e-9);
          expect(turn * y + pin.y).toBeGreaterThanOrEqual(-1e-9);
          expect(turn * y + pin.y).toBeLessThanOrEqual(roll.usableWidth + 1e-9);
        }
        expect(Math.abs(pin.x - at.x)).toBeLessThanOrEqual(Math.abs(dx) + 0.11);
      },
    ),
    { seed: 5, numRuns: 300 },
  );
});
