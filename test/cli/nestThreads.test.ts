// Threads of the nest: the same layout whatever their number, and whatever becomes of them.
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { openNestThreads } from "../../src/cli/nestThreads.ts";
import type { NestPiece } from "../../src/core/records/roll.ts";
import { runRolls } from "../../src/core/rolls/runRolls.ts";

const folder = mkdtempSync(join(tmpdir(), "nest-threads-"));
afterAll(() => rmSync(folder, { recursive: true }));

/** A thread that dies as soon as it is given work, or a little into it. */
function deadlyFile(ms: number): string {
  const path = join(folder, `dies-${ms}.mjs`);
  const end = ms === 0 ? "process.exit(1)" : `setTimeout(() => process.exit(1), ${ms})`;
  writeFileSync(path, `import { parentPort } from "node:worker_threads";\nparentPort.on("message", () => ${end});\n`);
  return path;
}

const pieces = Array.from({ length: 9 }, (_, k): NestPiece => {
  const [length, high, low] = [900 + 40 * k, 400 + 30 * (k % 3), 60];
  return { id: `p${k}`, fabric: "f", batch: null, cut: Float64Array.from([0, 0, length, 0, length, low, 0, high]) };
});
const roll = { id: "A", fabric: "f", batch: null, width: 1500, selvedge: 0, length: 3000, start: 0, flaws: [] };
const stock = ["A", "B"].map((id) => ({ ...roll, id, assumed: false }));

/** The layout with so many threads, and how many orders were given to them. */
function nest(count: number, file?: string, cancelled?: () => boolean): { text: string; orders: number; laid: number } {
  const threads = openNestThreads(count, file, file ? 300 : undefined);
  let orders = 0;
  const workShares = (list: unknown[], stop: () => boolean) => {
    orders += list.length;
    return threads.workShares(list, stop);
  };
  const options = { steps: 160, seconds: null, seed: 3, gap: 5, turn: true, bite: null, pins: [] };
  const result = runRolls(pieces, stock, options, { workShares, ...(cancelled ? { cancelled } : {}) });
  threads.close();
  expect(result.checks.filter((c) => !c.holds)).toEqual([]);
  const laid = result.output.reduce((sum, r) => sum + r.placements.length, 0);
  return { text: JSON.stringify(result.output), orders, laid };
}

describe("threads of the nest", () => {
  const alone = nest(0);

  it("give the layout that one alone gives, for the same steps and seed", () => {
    expect(alone.orders).toBeGreaterThan(1);
    for (const count of [1, 3]) expect(nest(count).text).toBe(alone.text);
  });

  it("cost their share and not the plan when they die", () => {
    for (const ms of [0, 20]) expect(nest(1, deadlyFile(ms)).text).toBe(alone.text);
  });

  it("are not waited for once the nest is told to stop", () => {
    let asked = 0;
    expect(nest(2, deadlyFile(0), () => asked++ > 60).laid).toBe(9);
  });
});
