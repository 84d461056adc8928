// `bench slide JOB.json MESH.obj`: a seam's end slid on the real page in Chromium, move by move: from the pointer's move to the panels
// redrawn on the screen, from letting go to the whole roof tied again, and the longest time the page was blocked while the end is slid,
// until the roof is tied, and until its plan stands.
import { readFileSync } from "node:fs";
import { basename } from "node:path";
import { PATIENCE, setUp, turnTo } from "./bench.ts";

const MOVES = 25;
/** Way of one move, as a share of the way to the next seam. */
const STEP = 0.02;

/** In the page: what is drawn and when, and what blocks. Kept as text since this file is also read without a browser's types. */
const WATCH = `(() => {
  const seen = { shown: 0, moved: 0, long: [], gaps: [], last: performance.now() };
  window.seen = seen;
  new PerformanceObserver((list) => { for (const e of list.getEntries()) seen.long.push(e.duration); }).observe({ entryTypes: ["longtask"] });
  addEventListener("pointermove", () => { seen.moved = performance.now(); }, true);
  let waiting = null;
  const tell = () => {
    if (waiting === null || seen.moved <= waiting.moved || seen.shown <= seen.moved) return;
    waiting.resolve({ ...seen });
    waiting = null;
  };
  // resolved by what comes: asked for again and again, the page would be blocked by the asking
  window.drawnAfter = (moved) => new Promise((resolve) => { waiting = { moved, resolve }; tell(); });
  new MutationObserver((all) => {
    if (!all.some((m) => m.target.nodeName === "path" || m.addedNodes.length > 0)) return;
    seen.shown = performance.now();
    tell();
  }).observe(document.querySelector(".beside"), { subtree: true, childList: true, attributes: true, attributeFilter: ["d"] });
  const tick = () => { const now = performance.now(); seen.gaps.push(now - seen.last); seen.last = now; requestAnimationFrame(tick); };
  requestAnimationFrame(tick);
})()`;

/** Before the page starts: what the worker that redraws says it took, and when it was asked and heard. */
const HEAR = `(() => {
  window.heard = [];
  const Own = Worker;
  window.Worker = class extends Own {
    constructor(...given) {
      super(...given);
      this.addEventListener("message", ({ data }) => {
        if (data.kind === "dragged") window.heard.push({ ms: data.ms, asked: this.asked, heard: performance.now() });
      });
    }
    postMessage(data, ...more) {
      if (data.kind === "drag") this.asked = performance.now();
      super.postMessage(data, ...more);
    }
  };
})()`;

const medianOf = (all: readonly number[]) => [...all].sort((a, b) => a - b)[all.length >> 1];

interface Seen {
  shown: number;
  moved: number;
  long: number[];
  gaps: number[];
}

/** Times in ms, of the clock. */
export async function benchSlide(jobPath: string, meshPath: string) {
  const bench = await setUp();
  try {
    const { page } = await bench.open();
    await page.addInitScript(HEAR);
    await page.reload();
    page.setDefaultTimeout(300_000);
    const job = { ...JSON.parse(readFileSync(jobPath, "utf8")), nest: { steps: 5 } };
    job.mesh.file = basename(meshPath);
    await page.getByLabel("Choose files").setInputFiles([
      { name: "job.json", mimeType: "application/json", buffer: Buffer.from(JSON.stringify(job)) },
      { name: job.mesh.file, mimeType: "text/plain", buffer: readFileSync(meshPath) },
    ]);
    await page.getByText(/^Planned, revision/).waitFor({ timeout: 300_000 });
    await turnTo(page, "Seams");
    const grips = page.getByRole("slider");
    await grips.first().waitFor();
    // as long as a hand takes to get there
    await page.waitForTimeout(4000);
    const middle = 2 * Math.floor((await grips.count()) / 4);
    const [a, b] = await Promise.all([middle, middle + 2].map((i) => grips.nth(i).boundingBox()));
    if (a === null || b === null) throw new Error("no grips");
    const [x, y] = [a.x + a.width / 2, a.y + a.height / 2];
    await page.evaluate(WATCH);
    const seen = () => page.evaluate<Seen>("({ ...window.seen })");
    /** What was seen once a picture stood that is newer than a move after `moved`. */
    const drawnAfter = async (moved: number) => {
      const late = setTimeout(() => console.error("nothing is redrawn"), PATIENCE);
      const now = await page.evaluate<Seen>(`window.drawnAfter(${moved})`);
      clearTimeout(late);
      return now;
    };
    await page.mouse.move(x, y);
    await page.mouse.down();
    await drawnAfter(0);
    await page.waitForTimeout(500);
    await page.evaluate("(window.seen.long.length = 0, window.seen.gaps.length = 0)");
    await page.evaluate("window.heard.length = 0");
    const times: number[] = [];
    for (let k = 1; k <= MOVES; k++) {
      const share = STEP * (k < 14 ? k : 26 - k);
      const before = (await seen()).moved;
      await page.mouse.move(x + share * (b.x - a.x), y + share * (b.y - a.y));
      const now = await drawnAfter(before);
      times.push(now.shown - now.moved);
    }
    const during = await seen();
    const heard = await page.evaluate<{ ms: number; asked: number; heard: number }[]>("window.heard");
    const longest = async () => {
      const { long } = await seen();
      await page.evaluate("window.seen.long.length = 0");
      return Math.max(0, ...long);
    };
    const longestTask = await longest();
    const begin = await page.evaluate<number>("performance.now()");
    await page.mouse.up();
    await page
      .getByText(/The whole roof is tied again/)
      .waitFor({ timeout: PATIENCE })
      .catch(async () => {
        throw new Error(`the roof was not tied; the page says: ${await page.locator(".beside").innerText()}`);
      });
    const tie = (await page.evaluate<number>("performance.now()")) - begin;
    await page.waitForTimeout(500);
    const longestTaskTying = await longest();
    await page.getByText(/^Planned, revision/).waitFor({ timeout: 300_000 });
    await page.waitForTimeout(500);
    return {
      redraw: medianOf(times),
      worker: medianOf(heard.map((h) => h.ms)),
      sent: medianOf(heard.map((h) => h.heard - h.asked - h.ms)),
      worst: Math.max(...times),
      longestTask,
      longestTaskTying,
      longestTaskPlanned: await longest(),
      longestFrame: Math.max(...during.gaps),
      medianFrame: medianOf(during.gaps),
      tie,
    };
  } finally {
    await bench.close();
  }
}
