// `bench rounds JOB.json MESH.obj ROUNDS`: a whole job walked over and over on the real page in Chromium, and what it holds after every tenth
// round: memory of the page and of its workers after a collection, the browser's store, and all that can be counted.
import { readFileSync } from "node:fs";
import { basename } from "node:path";
import type { CDPSession, Page } from "playwright-core";
import { setUp } from "./bench.ts";
import { type Counts, countHeld, saveFacts, startRounds, walkRound } from "./rounds.ts";

/** Rounds between two readings. */
const EVERY = 10;

interface Held extends Counts {
  round: number;
  /** Memory of the page's scripts, and of the page with all its workers, MB. */
  pageMB: number;
  allMB: number;
  /** Kept by the browser for the page, kB. */
  storeKB: number;
}

/** In the page: memory of it and of all its workers, after a collection in each. */
const MEASURE = `(async () => {
  const { bytes, breakdown } = await performance.measureUserAgentSpecificMemory();
  const { usage } = await navigator.storage.estimate();
  return { bytes, usage, parts: breakdown.filter((b) => b.bytes > 0).map((b) => [b.attribution.map((a) => a.url.split("/").at(-1) + " " + a.scope).join(), b.types.join(), b.bytes]) };
})()`;

async function readHeld(page: Page, cdp: CDPSession, round: number): Promise<Held> {
  const counts = await countHeld(page, cdp);
  const { usedSize } = await cdp.send("Runtime.getHeapUsage");
  const { bytes, usage, parts } = await page.evaluate<{ bytes: number; usage: number; parts: unknown }>(MEASURE);
  process.stderr.write(`${JSON.stringify(parts)}\n`);
  const megabytes = (n: number) => Number((n / 1024 / 1024).toFixed(2));
  return { round, pageMB: megabytes(usedSize), allMB: megabytes(bytes), storeKB: Math.round(usage / 1024), ...counts };
}

/** Median of the slopes between any two readings: what one round adds. */
function slopeOf(all: readonly Held[], key: keyof Held): number {
  const slopes = all.flatMap((a, i) => all.slice(i + 1).map((b) => (b[key] - a[key]) / (b.round - a.round)));
  return [...slopes].sort((a, b) => a - b)[slopes.length >> 1] ?? 0;
}

/** What is held after every tenth round, and what a round adds to it. The first two rounds load what is loaded once. */
export async function benchRounds(jobPath: string, meshPath: string, rounds: number) {
  const bench = await setUp(null, ["--enable-blink-features=ForceEagerMeasureMemory"]);
  try {
    const desk = await bench.open({ acceptDownloads: true });
    const { page } = desk;
    const job = JSON.parse(readFileSync(jobPath, "utf8"));
    job.mesh.file = basename(meshPath);
    const cdp = await startRounds(desk, [
      { name: "job.json", mimeType: "application/json", buffer: Buffer.from(JSON.stringify(job)) },
      { name: job.mesh.file, mimeType: "text/plain", buffer: readFileSync(meshPath) },
    ]);
    const held: Held[] = [];
    for (let round = 1; round <= rounds; round++) {
      await walkRound(page, await saveFacts(page));
      if (round === 2 || round % EVERY === 0) {
        held.push(await readHeld(page, cdp, round));
        process.stderr.write(`${JSON.stringify(held.at(-1))}\n`);
      }
    }
    const keys = Object.keys(held[0] ?? {}).filter((k) => k !== "round") as (keyof Held)[];
    return {
      rounds,
      held,
      perRound: Object.fromEntries(keys.map((k) => [k, Number(slopeOf(held, k).toFixed(4))])),
      faults: desk.faults,
    };
  } finally {
    await bench.close();
  }
}
