// Exact slides, gaps and columns against brute force and shapes worked by hand.
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { buildColumns } from "../../src/core/rolls/columns.ts";
import { buildShape, hullRing, turnRing } from "../../src/core/rolls/nestShape.ts";
import { ringGap } from "../../src/core/rolls/ringGap.ts";
import { slideRoom } from "../../src/core/rolls/slideRoom.ts";
import { isSimpleRing, type PlaneRing, ringArea, ringHolds } from "../../src/core/surface/ring.ts";

const at = (points: number[], x: number, y: number) => ({ shape: buildShape(Float64Array.from(points), 0, "s"), x, y });
const SQUARE = [0, 0, 10, 0, 10, 10, 0, 10];

const stars = fc
  .array(fc.double({ min: 3, max: 20, noNaN: true }), { minLength: 4, maxLength: 9 })
  .map((radii) =>
    radii.flatMap((r, k) => [
      r * Math.cos((2 * Math.PI * k) / radii.length + 0.1),
      r * Math.sin((2 * Math.PI * k) / radii.length + 0.1),
    ]),
  )
  .filter((points) => isSimpleRing(Float64Array.from(points)));

describe("slideRoom", () => {
  it("stops a square at a square, at the gap, and lets it pass along a side it touches", () => {
    const still = at(SQUARE, 0, 0);
    expect(slideRoom(at(SQUARE, 30, 4), still, 0, 0, 100)).toBeCloseTo(20, 6);
    expect(slideRoom(at(SQUARE, 30, 4), still, 0, 3, 100)).toBeCloseTo(17, 6);
    expect(slideRoom(at(SQUARE, 30, 10), still, 0, 0, 100)).toBe(100);
    expect(slideRoom(at(SQUARE, 30, 9.99), still, 0, 0, 100)).toBeCloseTo(20, 4);
    expect(slideRoom(at(SQUARE, 4, 30), still, 1, 3, 100)).toBeCloseTo(17, 6);
    expect(slideRoom(at(SQUARE, -30, 4), still, 0, 0, 100)).toBe(100);
    expect(slideRoom(at(SQUARE, 10, 0), still, 0, 0, 100)).toBeCloseTo(0, 6);
  });

  it("goes round a corner at the true distance: 3, 4, 5", () => {
    // The mover's lower edge is 3 above the corner's height; with a gap of 5 the corners end 4 apart along x.
    expect(slideRoom(at(SQUARE, 40, 13), at(SQUARE, 0, 0), 0, 5, 100)).toBeCloseTo(40 - 14, 5);
  });

  it("slips a peg into a slot of its own width", () => {
    const slot = [0, 0, 20, 0, 20, 4, 8, 4, 8, 8, 20, 8, 20, 12, 0, 12];
    expect(slideRoom(at([0, 0, 12, 0, 12, 4, 0, 4], 50, 4), at(slot, 0, 0), 0, 0, 100)).toBeCloseTo(42, 6);
  });

  it("ends at the gap and not before, whatever the two shapes: brute force", () => {
    fc.assert(
      fc.property(
        stars,
        stars,
        fc.constantFrom(0, 0.7, 4),
        fc.constantFrom(0 as const, 1 as const),
        fc.double({ min: -30, max: 30, noNaN: true }),
        (a, b, gap, axis, off) => {
          const far = 90;
          const moving = axis === 0 ? at(a, far, off) : at(a, off, far);
          const still = at(b, 0, 0);
          const room = slideRoom(moving, still, axis, gap, 200);
          const gapAt = (t: number) => {
            const there = axis === 0 ? { x: far - t, y: off } : { x: off, y: far - t };
            return ringGap(
              { ring: moving.shape.ring, ...there },
              { ring: still.shape.ring, x: 0, y: 0 },
              gap + 1,
              1e-5,
            );
          };
          for (let t = 0; t <= room; t += 0.5) expect(gapAt(t)).toBeGreaterThan(gap - 1e-4);
          expect(gapAt(room)).toBeGreaterThan(gap - 1e-4);
          if (room < 200) expect(gapAt(room + 0.02)).toBeLessThan(gap + 1e-9 + (gap === 0 ? 1e-4 : 0));
        },
      ),
      { seed: 20261201, numRuns: 400 },
    );
  });
});

describe("ringGap", () => {
  const gap = (a: number[], b: number[], x: number, y: number) =>
    ringGap({ ring: Float64Array.from(a), x: 0, y: 0 }, { ring: Float64Array.from(b), x, y }, 50, 1e-3);

  it("by hand: apart, corner to corner, touching, crossing, inside, the same", () => {
    expect(gap(SQUARE, SQUARE, 15, 0)).toBe(5);
    expect(gap(SQUARE, SQUARE, 13, 14)).toBe(5);
    expect(gap(SQUARE, SQUARE, 10, 3)).toBe(0);
    expect(gap(SQUARE, SQUARE, 9, 3)).toBe(-1);
    expect(gap(SQUARE, [4, 4, 6, 4, 5, 6], 0, 0)).toBe(-1);
    expect(gap(SQUARE, SQUARE, 0, 0)).toBe(-1);
    expect(gap([-5, 4, 15, 4, 15, 6, -5, 6], [4, -5, 6, -5, 6, 15, 4, 15], 0, 0)).toBe(-1);
    expect(gap(SQUARE, SQUARE, 100, 0)).toBe(Infinity);
  });

  it("does not call a hair of overlap an overlap", () => {
    expect(gap(SQUARE, SQUARE, 10 - 1e-4, 0)).toBe(0);
    // Sides in line: no corner of one is inside the other, yet they overlap.
    expect(gap(SQUARE, SQUARE, 10 - 1e-2, 0)).toBe(-1);
    expect(gap(SQUARE, SQUARE, 0, 9.5)).toBe(-1);
    expect(gap(SQUARE, [2, -3, 8, -3, 8, 0.5, 2, 0.5], 0, 0)).toBe(-1);
  });
});

describe("columns", () => {
  it("hold every inner point of a shape, and no more than its own height", () => {
    fc.assert(
      fc.property(
        stars,
        fc.double({ min: 0.3, max: 6, noNaN: true }),
        fc.constantFrom(0, 1.5),
        fc.double({ min: -7, max: 7, noNaN: true }),
        (points, dx, grow, x) => {
          const ring: PlaneRing = Float64Array.from(points);
          const c = buildColumns(ring, x, dx, grow);
          const holds = (px: number, py: number) => {
            const k = Math.floor(px / dx) - c.first;
            if (k < 0 || k + 1 >= c.start.length) return false;
            for (let i = c.start[k]; i < c.start[k + 1]; i++)
              if (py >= c.lo[i] - 1e-9 && py <= c.hi[i] + 1e-9) return true;
            return false;
          };
          for (let px = -20; px < 20; px += 1.37)
            for (let py = -20; py < 20; py += 1.37) {
              if (!ringHolds(ring, px, py)) continue;
              for (let k = 0; k < 8; k++) {
                const [qx, qy] = [px + x + grow * Math.cos(k * 0.785), py + grow * Math.sin(k * 0.785)];
                expect(holds(qx, qy), `${qx}, ${qy}`).toBe(true);
              }
            }
          expect(Math.max(...c.hi)).toBeLessThanOrEqual(20 + grow + 1e-9);
        },
      ),
      { seed: 4, numRuns: 100 },
    );
  });

  it("of a slotted shape leave the slot free", () => {
    const c = buildColumns(Float64Array.from([0, 0, 20, 0, 20, 4, 8, 4, 8, 8, 20, 8, 20, 12, 0, 12]), 0, 4, 0);
    const column = (k: number) =>
      Array.from({ length: c.start[k + 1] - c.start[k] }, (_, i) => [c.lo[c.start[k] + i], c.hi[c.start[k] + i]]);
    expect(column(1)).toEqual([[0, 12]]);
    expect(column(3)).toEqual([
      [0, 4],
      [8, 12],
    ]);
    expect(Array.from(c.tall).slice(0, 5)).toEqual([12, 12, 4, 4, 4]);
  });
});

describe("shapes", () => {
  it("turn exactly by quarter turns and keep their area", () => {
    expect(Array.from(turnRing(Float64Array.from([3, 1, 5, 2, 4, 7]), 180))).toEqual([-3, -1, -5, -2, -4, -7]);
    expect(Array.from(turnRing(Float64Array.from([3, 1]), 90))).toEqual([-1, 3]);
    expect(ringArea(turnRing(Float64Array.from(SQUARE), 37))).toBeCloseTo(100, 9);
  });

  it("with very many points are thinned within their slack, ragged ones to their hull", () => {
    const ring = (ragged: number) =>
      Float64Array.from(
        Array.from({ length: 5000 }, (_, k) => {
          const r = 100 + ragged * (k % 2);
          return [r * Math.cos((k * Math.PI) / 2500), r * Math.sin((k * Math.PI) / 2500)];
        }).flat(),
      );
    const smooth = buildShape(ring(0), 0, "a");
    expect(smooth.ring.length / 2).toBeLessThan(330);
    expect(smooth.slack).toBeGreaterThan(0);
    expect(smooth.slack).toBeLessThan(0.5);
    const ragged = buildShape(ring(20), 0, "b");
    expect(ringArea(ragged.ring)).toBeGreaterThan(0.99 * Math.PI * 120 ** 2);
    expect(ringArea(hullRing(Float64Array.from([0, 0, 4, 0, 1, 1, 0, 4])))).toBe(8);
  });
});
