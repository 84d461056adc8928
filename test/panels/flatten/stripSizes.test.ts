// Strips of a few triangles and of 20 000: they flatten, nothing folds over, seam sides are equal, and the cut area is that of the form
// taken back by the compensation (exactly so where the strip is developable).
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { flattenPanels } from "../../../src/core/panels/flatten/flattenPanels.ts";
import type { FlatPanel } from "../../../src/core/records/flatPanel.ts";
import { measureArea } from "../../../src/core/surface/measures.ts";
import { cutGrid, gridSurface, PLAIN } from "../stripFixtures.ts";

/** Area of each flat triangle, m2; negative where it is folded over. */
function flatAreas({ flat, tri }: FlatPanel): number[] {
  return Array.from({ length: tri.length / 3 }, (_, t) => {
    const [a, b, c] = [2 * tri[3 * t], 2 * tri[3 * t + 1], 2 * tri[3 * t + 2]];
    const doubled =
      (flat[b] - flat[a]) * (flat[c + 1] - flat[a + 1]) - (flat[b + 1] - flat[a + 1]) * (flat[c] - flat[a]);
    return doubled / 2e6;
  });
}

/** Flat over erected area, both compensations put back: 1 where the strip is developable. */
function expectWhole(panels: readonly FlatPanel[], within: number) {
  for (const panel of panels) {
    const areas = flatAreas(panel);
    expect(Math.min(...areas)).toBeGreaterThan(0);
    const back = (1 + panel.compensation.warp) * (1 + panel.compensation.weft);
    const erected = measureArea({ xyz: panel.erected, tri: panel.tri });
    expect(Math.abs((areas.reduce((sum, a) => sum + a, 0) * back) / erected - 1)).toBeLessThan(within);
  }
}

describe("a few triangles", () => {
  test.each([
    [1, 1],
    [1, 2],
    [2, 1],
    [1, 3],
    [2, 2],
  ])("a bent strip of %i by %i cells, and one saddled", (ni, nj) => {
    const cuts = [...new Set([0, Math.ceil(ni / 2), ni])];
    const bent = gridSurface(ni, nj, (i, j) =>
      [i, 3 * Math.sin(0.3 * j), 3 * Math.cos(0.3 * j)].map((c, k) => (k === 0 ? -c : c)),
    );
    expectWhole(flattenPanels(cutGrid(bent, ni, nj, cuts), PLAIN, {}).output, 1e-8);
    const saddle = gridSurface(ni, nj, (i, j) => [i, j, 0.1 * (i - 0.5) * (j - 0.5)]);
    const { output, checks, findings } = flattenPanels(cutGrid(saddle, ni, nj, cuts), PLAIN, {});
    expectWhole(output, 0.01);
    expect(checks.filter((c) => !c.holds)).toEqual([]);
    expect(findings.filter((f) => f.level === "stop")).toEqual([]);
  });

  test("any few triangles that hang together in a row, however slender and bent", () => {
    const place = fc.double({ min: -0.2, max: 0.2, noNaN: true });
    fc.assert(
      fc.property(
        fc.array(fc.tuple(place, place, place), { minLength: 6, maxLength: 16 }),
        fc.double({ min: 0.15, max: 3, noNaN: true }),
        (moves, width) => {
          const nj = Math.floor(moves.length / 2) - 1;
          const strip = gridSurface(1, nj, (i, j) => {
            const [x, y, z] = moves[2 * j + i];
            return [width * (i + x), j + y, z];
          });
          const { output, checks } = flattenPanels(cutGrid(strip, 1, nj, [0, 1]), PLAIN, {});
          // a row of triangles is developable whatever its bends
          expectWhole(output, 1e-6);
          expect(checks.filter((c) => !c.holds)).toEqual([]);
        },
      ),
      { numRuns: 150, seed: 20261201 },
    );
  });
});

test("20 000 triangles in one strip, and in two that share a seam of 401 points", () => {
  const saddle = (ni: number, nj: number) =>
    gridSurface(ni, nj, (i, j) => {
      const [x, y] = [3 * (i / ni - 0.5), 24 * (j / nj - 0.5)];
      return [x, y, 0.02 * x * y];
    });
  const one = flattenPanels(cutGrid(saddle(50, 200), 50, 200, [0, 50]), PLAIN, {});
  const two = flattenPanels(cutGrid(saddle(25, 400), 25, 400, [0, 12, 25]), PLAIN, {});
  for (const { output, checks } of [one, two]) {
    expect(output.reduce((sum, p) => sum + p.tri.length / 3, 0)).toBe(20000);
    expectWhole(output, 1e-3);
    expect(checks.filter((c) => !c.holds)).toEqual([]);
  }
});
