// `bench first JOB.json MESH.obj`: from the start of a navigation to the first view, in ms: the desk of a browser that was here before,
// and the leaf a kept job was left at. The service worker holds the page; nothing comes from the server but the word that nothing is open.
import { readFileSync } from "node:fs";
import { basename } from "node:path";
import type { Page } from "playwright-core";
import { kept, PATIENCE, setUp } from "./bench.ts";

const TIMES = 7;

const VIEWS = { desk: ".desk .starters button", leaf: ".leaf .decisions input, .leaf .decisions select" };

/** Before the page starts: when each view first stands and the frame with it has been handed on. */
const WATCH = `(() => {
  window.firstViews = {};
  for (const [name, selector] of Object.entries(${JSON.stringify(VIEWS)})) {
    const look = () => {
      if (document.querySelector(selector) === null) return requestAnimationFrame(look);
      requestAnimationFrame(() => setTimeout(() => { window.firstViews[name] = performance.now(); }));
    };
    requestAnimationFrame(look);
  }
})()`;

/** The value of an expression once there is one: the page's policy lets nothing be waited for by a text run in it. */
async function appears(page: Page, expression: string): Promise<number> {
  const end = Date.now() + PATIENCE;
  while (Date.now() < end) {
    const value = await page.evaluate<number | null>(`(${expression}) ?? null`);
    if (value !== null) return value;
    await page.waitForTimeout(20);
  }
  throw new Error(`${expression} never came`);
}

async function visit(page: Page, view: keyof typeof VIEWS): Promise<{ median: number; worst: number }> {
  const times: number[] = [];
  for (let k = 0; k < TIMES; k++) {
    await page.reload();
    times.push(await appears(page, `window.firstViews.${view}`));
  }
  times.sort((a, b) => a - b);
  return { median: times[times.length >> 1], worst: times[times.length - 1] };
}

/** Times in ms, of the clock. */
export async function benchFirstView(jobPath: string, meshPath: string) {
  const bench = await setUp();
  try {
    const { page } = await bench.open();
    await page.evaluate("navigator.serviceWorker.ready");
    await page.reload();
    await appears(page, "navigator.serviceWorker.controller && 1");
    await page.addInitScript(WATCH);
    const desk = await visit(page, "desk");
    const files = [jobPath, meshPath].map((path) => ({
      name: basename(path),
      mimeType: "text/plain",
      buffer: readFileSync(path),
    }));
    await page.getByLabel("Choose files").setInputFiles(files);
    await kept(page);
    return { desk, leaf: await visit(page, "leaf") };
  } finally {
    await bench.close();
  }
}
