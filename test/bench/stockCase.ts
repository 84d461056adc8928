// Many bent panels on many rolls of several batches with flaws: how long the nest takes, and what it comes to.
import { openNestThreads } from "../../src/cli/nestThreads.ts";
import { buildRandom } from "../../src/core/numeric/random.ts";
import type { NestPiece, StockRoll } from "../../src/core/records/roll.ts";
import { totalCloth } from "../../src/core/rolls/rollFigures.ts";
import { runRolls } from "../../src/core/rolls/runRolls.ts";

const ROLLS = 12;
const BATCHES = 3;
const FLAWS = 6;

/** Panels of 1.5 to 4 m, bowed, drawn by a seed. */
export function drawStock(panels: number, seed: number): { pieces: NestPiece[]; stock: StockRoll[] } {
  const draw = buildRandom(seed);
  const pieces = Array.from({ length: panels }, (_, k): NestPiece => {
    const [length, width, bow] = [1500 + 2500 * draw(), 250 + 500 * draw(), 40 + 120 * draw()];
    const side = (y: number) => [0, 0.25, 0.5, 0.75, 1].map((t) => [t * length, y + 4 * bow * t * (1 - t)]);
    const cut = Float64Array.from([...side(0), ...side(width).reverse()].flat());
    return { id: `p${k}`, fabric: "f", batch: `b${k % BATCHES}`, cut };
  });
  const stock = Array.from(
    { length: ROLLS },
    (_, k): StockRoll => ({
      id: `R${k}`,
      fabric: "f",
      batch: `b${k % BATCHES}`,
      width: k % 2 === 0 ? 2500 : 3000,
      selvedge: 0,
      length: 30_000,
      start: 0,
      flaws: k < FLAWS ? [{ x: 4000 + 700 * k, y: 300 * k, length: 400, width: 500 }] : [],
      assumed: false,
    }),
  );
  return { pieces, stock };
}

/** One nest with the job's default steps, in threads. */
export function benchStock(panels: number, seed: number): Record<string, number | boolean> {
  const { pieces, stock } = drawStock(panels, seed);
  const options = { steps: 200, seconds: null, seed: 1, gap: 10, turn: true, bite: null, pins: [] };
  const threads = openNestThreads();
  const began = performance.now();
  const { output, findings, checks } = runRolls(pieces, stock, options, { workShares: threads.workShares });
  const ms = performance.now() - began;
  threads.close();
  const { user, system } = process.cpuUsage();
  const { used, taken, utilisation, bound } = totalCloth(output, pieces, stock, options.gap);
  const valid = checks.every((c) => c.holds) && findings.every((f) => f.level !== "stop");
  return {
    panels,
    rolls: output.length,
    valid,
    ms,
    processorMs: (user + system) / 1000,
    used,
    bound,
    taken,
    utilisation,
  };
}
