// What a long day at the page may not add up to: walked through a job again and again it holds no more than before.
import { expect, it } from "vitest";
import { benchOfFile, clear, LONG, SOON } from "./bench.ts";
import { type Counts, countHeld, saveFacts, startRounds, walkRound } from "./rounds.ts";
import { sailFiles } from "./smallForm.ts";

const bench = benchOfFile();

/** What a page that loses nothing holds as much of after any round. Nodes are left to the collector's own time. */
const HELD = [
  "buffers",
  "textures",
  "programs",
  "shaders",
  "arrays",
  "canvases",
  "workers",
  "urls",
  "listeners",
] as const;

/** Kinds of which more are held than at most before. */
const grown = (now: Counts, most: Counts) =>
  HELD.filter((k) => now[k] > most[k]).map((k) => `${k}: ${now[k]}, before ${most[k]}`);

it(
  "after five rounds it holds as many buffers, programs, workers, files in memory and listeners as after two or three",
  async () => {
    const desk = await bench.open({ acceptDownloads: true });
    const { page } = desk;
    const cdp = await startRounds(desk, sailFiles());
    const facts = await saveFacts(page);
    let most: Counts | null = null;
    for (let round = 1; round <= 5; round++) {
      await walkRound(page, facts);
      if (round !== 2 && round !== 3) continue;
      const now = await countHeld(page, cdp);
      const before: Counts = most ?? now;
      most = { ...now, ...Object.fromEntries(HELD.map((k) => [k, Math.max(now[k], before[k])])) };
    }
    const bound = most;
    if (bound === null) throw new Error("no round was counted");
    // a surface is drawn, so the counters count
    expect(bound.buffers).toBeGreaterThan(10);
    expect(bound.workers).toBeGreaterThan(0);
    expect(bound.listeners).toBeGreaterThan(50);
    await expect.poll(async () => grown(await countHeld(page, cdp), bound), SOON).toEqual([]);
    await clear(desk);
  },
  2 * LONG,
);
