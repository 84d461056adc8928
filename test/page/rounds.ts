// Rounds through a whole job on the real page, and what is held after them: memory, and whatever can be counted.
import { readFileSync } from "node:fs";
import { unzipSync } from "fflate";
import type { CDPSession, Page } from "playwright-core";
import { type Desk, enter, fieldOf, type GivenFiles, PATIENCE, planned, plannedAnew, turnTo } from "./bench.ts";

/**
 * Before the page starts: counts what is made and not given back. Kept as text since the bench reads this file without a browser's types.
 * What the browser would collect by itself some time counts too: it is held until it is given back.
 */
export const COUNT = `(() => {
  const counts = { buffers: 0, textures: 0, programs: 0, shaders: 0, arrays: 0, canvases: 0, workers: 0, urls: 0 };
  window.counts = counts;
  const made = new WeakMap();
  const pair = (owner, make, giveBack, name) => {
    const [own, back] = [owner[make], owner[giveBack]];
    owner[make] = function (...given) {
      const thing = own.apply(this, given);
      if (thing !== null) {
        made.set(thing, name);
        counts[name]++;
      }
      return thing;
    };
    owner[giveBack] = function (thing, ...more) {
      if (thing && made.delete(thing)) counts[name]--;
      return back.call(this, thing, ...more);
    };
  };
  // drawn in the page, where it can be counted: what draws is the same in its worker
  Reflect.deleteProperty(HTMLCanvasElement.prototype, "transferControlToOffscreen");
  const gl = WebGL2RenderingContext.prototype;
  pair(gl, "createBuffer", "deleteBuffer", "buffers");
  pair(gl, "createTexture", "deleteTexture", "textures");
  pair(gl, "createProgram", "deleteProgram", "programs");
  pair(gl, "createShader", "deleteShader", "shaders");
  pair(gl, "createVertexArray", "deleteVertexArray", "arrays");
  const context = HTMLCanvasElement.prototype.getContext;
  const seen = new WeakSet();
  HTMLCanvasElement.prototype.getContext = function (kind, ...more) {
    if (/^webgl/.test(kind) && !seen.has(this)) {
      seen.add(this);
      counts.canvases++;
    }
    return context.call(this, kind, ...more);
  };
  const Own = Worker;
  window.Worker = class extends Own {
    #ended = false;
    constructor(...given) {
      super(...given);
      counts.workers++;
      this.addEventListener("error", () => this.#end());
    }
    #end() {
      if (!this.#ended) counts.workers--;
      this.#ended = true;
    }
    terminate() {
      this.#end();
      super.terminate();
    }
  };
  const urls = new Set();
  const { createObjectURL, revokeObjectURL } = URL;
  URL.createObjectURL = (thing) => {
    const url = createObjectURL.call(URL, thing);
    counts.urls = urls.add(url).size;
    return url;
  };
  URL.revokeObjectURL = (url) => {
    urls.delete(url);
    counts.urls = urls.size;
    revokeObjectURL.call(URL, url);
  };
})()`;

/** What the page holds and does not give back by itself. */
export interface Counts {
  buffers: number;
  textures: number;
  programs: number;
  shaders: number;
  arrays: number;
  canvases: number;
  workers: number;
  urls: number;
  listeners: number;
  documents: number;
  nodes: number;
}

/** Counts after a collection of what nobody holds any more. */
export async function countHeld(page: Page, cdp: CDPSession): Promise<Counts> {
  await cdp.send("HeapProfiler.collectGarbage");
  const { jsEventListeners: listeners, documents, nodes } = await cdp.send("Memory.getDOMCounters");
  return {
    ...(await page.evaluate<Omit<Counts, "listeners" | "documents" | "nodes">>("window.counts")),
    listeners,
    documents,
    nodes,
  };
}

/** Puts a sheet on the page and away again. */
async function openSheet(page: Page, key: string, name: string): Promise<void> {
  await page.keyboard.press(key);
  const sheet = page.getByRole("dialog", { name });
  await sheet.waitFor();
  await page.keyboard.press("Escape");
  await sheet.waitFor({ state: "detached" });
}

/** Changes the project, waits for its plan, takes the change back and waits for the plan before. */
async function thereAndBack(page: Page, change: () => Promise<void>): Promise<void> {
  const before = await planned(page);
  await change();
  const other = await plannedAnew(page, before);
  await page.locator("main h1").focus();
  await page.keyboard.press("Control+z");
  await plannedAnew(page, other);
}

/** The leaf Form: its pictures one after the other, the surface turned, and a decision there and back. */
async function walkForm(page: Page): Promise<void> {
  await turnTo(page, "Form");
  const surface = page.getByRole("application");
  await surface.waitFor();
  for (const name of ["curvature", "out of balance", "plain"]) {
    await page.getByRole("button", { name, exact: true }).click();
    await surface.press("ArrowLeft");
  }
  const decision = "Prestress along the warp";
  const now = Number((await fieldOf(page, decision).inputValue()).replace(",", "."));
  await thereAndBack(page, () => enter(page, decision, String(now + 0.1)));
}

/** The leaf Seams: the end of the seam in the middle slid with the keys, there and back. */
async function walkSeams(page: Page): Promise<void> {
  await turnTo(page, "Seams");
  const grips = page.getByRole("slider");
  await grips.first().waitFor();
  await thereAndBack(page, async () => {
    const grip = grips.nth(2 * Math.floor((await grips.count()) / 4));
    for (let i = 0; i < 3; i++) await grip.press("ArrowRight");
    await grip.press("Enter");
  });
}

/** The leaf Papers: written, and a paper of each kind looked at. */
async function walkPapers(page: Page): Promise<void> {
  await turnTo(page, "Papers");
  await page.getByText(/files, revision/).waitFor();
  for (const [name, kind] of [
    [/^panels\/.*\.svg$/, "Drawing"],
    [/^rolls\/.*\.svg$/, "Drawing"],
    [/\.csv$/, "List"],
  ] as const) {
    await page.getByRole("button", { name }).first().click();
    await page.getByRole("group", { name: new RegExp(`^${kind} `) }).waitFor();
  }
}

/** Saves the papers of the plan on the desk. @returns the text of its facts.json */
export async function saveFacts(page: Page): Promise<string> {
  await turnTo(page, "Papers");
  await page.getByText(/files, revision/).waitFor();
  const [download] = await Promise.all([
    page.waitForEvent("download"),
    page.getByRole("button", { name: "Save all papers (zip)" }).click(),
  ]);
  return new TextDecoder().decode(unzipSync(readFileSync(await download.path()))["facts.json"]);
}

/**
 * Papers of facts alone, on their sheet over the book. The file is dropped: chosen in the list of jobs, its field is held by the very tool
 * that chooses it, and all of the sheet it stood on with it.
 */
async function openFacts(page: Page, facts: string): Promise<void> {
  await page.evaluate(`(() => {
    const dataTransfer = new DataTransfer();
    dataTransfer.items.add(new File([${JSON.stringify(facts)}], "facts.json"));
    document.body.dispatchEvent(new DragEvent("drop", { dataTransfer, bubbles: true, cancelable: true }));
  })()`);
  const sheet = page.getByRole("dialog", { name: /^Papers of / });
  await sheet.getByRole("button", { name: "Save all papers (zip)" }).waitFor();
  await page.keyboard.press("Escape");
  await sheet.waitFor({ state: "detached" });
}

/**
 * One round through a job that is planned: all leaves, papers, sheets, the job opened again from the list of jobs, and back to the surface.
 * @param facts text of a facts.json that is opened beside it
 */
export async function walkRound(page: Page, facts: string): Promise<void> {
  await walkForm(page);
  await walkSeams(page);
  for (const leaf of ["Panels", "Rolls", "Rig", "Site"]) {
    await turnTo(page, leaf);
    await page.locator("main h1").waitFor();
    await page.waitForTimeout(200);
  }
  await walkPapers(page);
  await openFacts(page, facts);
  await openSheet(page, "?", "Keys");
  await openSheet(page, "f", "Findings");
  await page.keyboard.press("j");
  const jobs = page.getByRole("dialog", { name: "Jobs" });
  await jobs.locator(".jobs button.open").first().click();
  await jobs.waitFor({ state: "detached" });
  await planned(page);
  await turnTo(page, "Form");
  await page.getByRole("application").waitFor();
}

/** Puts the counters in place, opens a job with its mesh and plans it. */
export async function startRounds({ page, context }: Desk, files: GivenFiles): Promise<CDPSession> {
  await page.addInitScript(COUNT);
  await page.reload();
  await page.getByLabel("Choose files").setInputFiles(files);
  await page.getByText(/^Planned, revision/).waitFor({ timeout: 3 * PATIENCE });
  return context.newCDPSession(page);
}
