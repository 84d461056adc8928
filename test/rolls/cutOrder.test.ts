// Cutting order and feeds worked by hand, and the rules they must keep on random pieces.
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { cutOrder } from "../../src/core/rolls/cutOrder.ts";

const piece = (id: string, x0: number, x1: number, y0 = 0) => ({ id, x0, x1, y0 });

describe("cutOrder", () => {
  it("goes from the free end towards the roll", () => {
    const { order, feeds } = cutOrder([piece("c", 0, 900), piece("a", 100, 400), piece("b", 500, 800, 300)], null);
    expect(order).toEqual(["a", "b", "c"]);
    expect(feeds).toEqual([]);
  });

  it("feeds to the first piece not yet cut, and cuts what lies whole on the table", () => {
    const pieces = [piece("a", 0, 3000), piece("b", 2500, 5500, 900), piece("c", 3010, 6010)];
    expect(cutOrder(pieces, 4000)).toEqual({ order: ["a", "b", "c"], feeds: [0, 2500] });
    expect(cutOrder(pieces, 3000)).toEqual({ order: ["a", "b", "c"], feeds: [0, 2500, 3010] });
  });

  it("feeds a piece longer than the bite on along its length", () => {
    const pieces = [piece("long", 0, 9000), piece("a", 100, 2000, 900), piece("b", 8000, 9500, 900)];
    expect(cutOrder(pieces, 4000)).toEqual({ order: ["a", "long", "b"], feeds: [0, 4000, 8000] });
  });

  it("feeds two long pieces side by side once, and forward only, whatever lies beside them", () => {
    // bug: fed to the end of the first, then back to the beginning of the second
    const pieces = [
      piece("l1", 0, 9000),
      piece("l2", 0, 7000, 900),
      piece("c", 3500, 6000, 1800),
      piece("d", 7200, 8000),
    ];
    expect(cutOrder(pieces, 4000)).toEqual({ order: ["c", "l2", "d", "l1"], feeds: [0, 3500, 7200] });
    const one = fc.record({ x: fc.integer({ min: 0, max: 20_000 }), length: fc.integer({ min: 10, max: 15_000 }) });
    fc.assert(
      fc.property(fc.array(one, { minLength: 1, maxLength: 15 }), (list) => {
        const own = list.map(({ x, length }, k) => piece(`p${k}`, x, x + length, k));
        const { feeds } = cutOrder(own, 4000);
        for (let k = 1; k < feeds.length; k++) expect(feeds[k]).toBeGreaterThan(feeds[k - 1]);
        for (const p of own) {
          // whole on one table length, or on every one it runs over without a gap
          const whole = feeds.some((x) => x <= p.x0 && p.x1 <= x + 4000);
          if (p.x1 - p.x0 <= 4000) expect(whole, p.id).toBe(true);
          let cut = p.x0;
          for (const x of feeds) if (x <= cut) cut = Math.max(cut, Math.min(p.x1, x + 4000));
          expect(cut, p.id).toBe(p.x1);
        }
      }),
      { seed: 7, numRuns: 200 },
    );
  });

  it("cuts each piece once, whole on the table at its feed where it fits at all", () => {
    const one = fc.record({ x: fc.integer({ min: 0, max: 20_000 }), length: fc.integer({ min: 10, max: 4000 }) });
    fc.assert(
      fc.property(fc.array(one, { minLength: 1, maxLength: 20 }), (list) => {
        const pieces = list.map(({ x, length }, k) => piece(`p${k}`, x, x + length, k));
        const { order, feeds } = cutOrder(pieces, 4000);
        expect([...order].sort()).toEqual(pieces.map((p) => p.id).sort());
        expect([...feeds].sort((a, b) => a - b)).toEqual(feeds);
        let at = 0;
        for (const id of order) {
          const { x0, x1 } = pieces.find((p) => p.id === id)!;
          while (at < feeds.length && !(feeds[at] <= x0 && x1 <= feeds[at] + 4000)) at++;
          expect(at, id).toBeLessThan(feeds.length);
        }
      }),
      { seed: 6, numRuns: 200 },
    );
  });
});
