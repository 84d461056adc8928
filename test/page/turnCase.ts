// `bench turn JOB.json MESH.obj`: the surface turned with the mouse on the real page in Chromium, which draws with software here: pictures
// a second while it is turned, the time from one to the next, whether all of it was drawn, and the longest time the page was blocked.
// The plan is stopped as soon as the surface stands, so that it is the turning that is timed.
import { readFileSync } from "node:fs";
import { basename } from "node:path";
import { PATIENCE, setUp } from "./bench.ts";

/** How long it is turned, and what lies between two moves of the mouse, ms. */
const TURNING = 6000;
const EVERY = 16;

/** Before the page starts: when the worker that draws says that it drew, and whether it drew less than all. */
const HEAR = `(() => {
  window.drawn = [];
  const Own = Worker;
  window.Worker = class extends Own {
    constructor(...given) {
      super(...given);
      this.addEventListener("message", ({ data }) => {
        if (data.kind === "drawn") window.drawn.push({ at: performance.now(), less: data.less });
      });
    }
  };
  window.blocked = [];
  new PerformanceObserver((list) => { for (const e of list.getEntries()) window.blocked.push(e.duration); }).observe({ entryTypes: ["longtask"] });
})()`;

interface Drawn {
  at: number;
  less: boolean;
}

/** Times in ms, of the clock. */
export async function benchTurn(jobPath: string, meshPath: string) {
  const bench = await setUp();
  try {
    const { page } = await bench.open();
    await page.addInitScript(HEAR);
    await page.reload();
    page.setDefaultTimeout(5 * PATIENCE);
    await page.getByLabel("Choose files").setInputFiles(
      [jobPath, meshPath].map((path) => ({
        name: basename(path),
        mimeType: "text/plain",
        buffer: readFileSync(path),
      })),
    );
    const canvas = page.locator("canvas");
    await canvas.and(page.locator("[data-detail=all]")).waitFor();
    const stop = page.locator(".state").getByRole("button", { name: "Stop", exact: true });
    const ended = page.getByText(/^(Stopped$|Planned, revision)/);
    await stop.or(ended).first().waitFor();
    if (!(await ended.isVisible())) await stop.click();
    await ended.waitFor();
    await page.waitForTimeout(3000);
    const box = await canvas.boundingBox();
    if (box === null) throw new Error("no canvas");
    const [x, y] = [box.x + box.width / 2, box.y + box.height / 2];
    await page.mouse.move(x, y);
    await page.mouse.down();
    await page.evaluate("(window.drawn.length = window.blocked.length = 0)");
    const begin = Date.now();
    for (let k = 0; Date.now() - begin < TURNING; k++) {
      await page.mouse.move(x + 200 * Math.sin(k / 40), y + 60 * Math.sin(k / 25));
      await page.waitForTimeout(EVERY);
    }
    const turned = await page.evaluate<Drawn[]>("window.drawn.slice()");
    const end = await page.evaluate<number>("performance.now()");
    await page.mouse.up();
    await canvas.and(page.locator("[data-detail=all]")).waitFor();
    const all = await page.evaluate<number>("performance.now()");
    const blocked = await page.evaluate<number[]>("window.blocked");
    const steps = turned.slice(1).map((d, i) => d.at - turned[i].at);
    steps.sort((a, b) => a - b);
    return {
      picturesASecond: (1000 * steps.length) / (turned[turned.length - 1].at - turned[0].at),
      medianStep: steps[steps.length >> 1],
      worstStep: steps[steps.length - 1],
      shareLess: turned.filter((d) => d.less).length / turned.length,
      allAfter: all - end,
      longestTask: Math.max(0, ...blocked),
    };
  } finally {
    await bench.close();
  }
}
