// Pieces moved from one roll into the free cloth of another: each still lies once (bug: the second piece taken off a roll stayed).
import { expect, test } from "vitest";
import { buildRandom } from "../../src/core/numeric/random.ts";
import { runRolls } from "../../src/core/rolls/runRolls.ts";
import { makeJob } from "../madeJob.ts";

test("every piece lies on one roll only, whatever was moved between rolls (12 seeded stocks)", () => {
  for (let seed = 1; seed <= 12; seed++) {
    const draw = buildRandom(seed);
    const pieces = Array.from({ length: 26 }, (_, i) => {
      const [l, w] = i < 8 ? [1500 + 1500 * draw(), 500 + 400 * draw()] : [150 + 500 * draw(), 60 + 200 * draw()];
      return { id: `p${i}`, fabric: "f", batch: null, cut: new Float64Array([0, 0, l, 0, l, w, 0, w]) };
    });
    const roll = {
      fabric: "f",
      batch: null,
      width: 1100,
      selvedge: 20,
      length: 6000,
      start: 0,
      flaws: [],
      assumed: false,
    };
    const stock = ["A", "B", "C", "D"].map((id) => ({ ...roll, id }));
    const { output, checks } = runRolls(pieces, stock, { ...makeJob().nest, steps: 20, seed });
    const placed = output.flatMap((r) => r.placements.map((p) => p.panel)).sort();
    expect(placed, `seed ${seed}`).toEqual(pieces.map((p) => p.id).sort());
    expect(checks.filter((c) => !c.holds)).toEqual([]);
  }
});
