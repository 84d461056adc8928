// The surface is drawn wherever the browser lets it be: in a worker of its own, in the page, or it is said that it cannot be.
import type { Page } from "playwright-core";
import { describe, expect, it } from "vitest";
import { benchOfFile, clear, LONG, openPlanned, SOON } from "./bench.ts";
import { smallFiles } from "./smallForm.ts";

const bench = benchOfFile();

/** Share of the dots of the surface's place that are not of the paper behind it, as a person sees them. */
async function shareDrawn(page: Page): Promise<number> {
  const picture = (await page.locator(".solid canvas").screenshot()).toString("base64");
  return page.evaluate(async (given) => {
    const bytes = Uint8Array.from(atob(given), (c) => c.charCodeAt(0));
    const image = await createImageBitmap(new Blob([bytes], { type: "image/png" }));
    const canvas = new OffscreenCanvas(image.width, image.height);
    const pen = canvas.getContext("2d");
    if (pen === null) throw new Error("no pen");
    pen.drawImage(image, 0, 0);
    const { data } = pen.getImageData(0, 0, image.width, image.height);
    let drawn = 0;
    for (let i = 0; i < data.length; i += 4) if ([0, 1, 2].some((k) => Math.abs(data[i + k] - data[k]) > 6)) drawn++;
    return drawn / (data.length / 4);
  }, picture);
}

/** Of the workers of a page, the one that draws. */
const drawers = (page: Page) => page.workers().filter((w) => w.url().includes("stageWorker")).length;

describe("the surface is drawn", { timeout: LONG }, () => {
  it("in a worker of its own, which stays the same from leaf to leaf", async () => {
    const desk = await openPlanned(bench, smallFiles());
    const { page } = desk;
    await expect.poll(() => shareDrawn(page), SOON).toBeGreaterThan(0.1);
    for (const leaf of ["Seams", "Panels", "Form"]) {
      await page.getByRole("navigation", { name: "Leaves" }).getByRole("button", { name: leaf }).click();
      await page.getByRole("heading", { level: 1 }).waitFor();
    }
    await expect.poll(() => shareDrawn(page), SOON).toBeGreaterThan(0.1);
    expect(drawers(page)).toBe(1);
    await clear(desk);
  });

  it("in the page, where the browser hands no canvas over", async () => {
    const desk = await bench.open();
    const { page } = desk;
    await page.addInitScript(() => {
      Reflect.deleteProperty(HTMLCanvasElement.prototype, "transferControlToOffscreen");
    });
    await page.reload();
    await page.getByLabel("Choose files").setInputFiles(smallFiles());
    await expect.poll(() => shareDrawn(page), SOON).toBeGreaterThan(0.1);
    expect(drawers(page)).toBe(0);
    await clear(desk);
  });

  it("in the page, where the worker breaks down or can draw nothing", async () => {
    const desk = await bench.open();
    const { page } = desk;
    await page.addInitScript(() => {
      const Own = Worker;
      window.Worker = class extends Own {
        constructor(url: string | URL, options?: WorkerOptions) {
          super(String(url).includes("stageWorker") ? new URL("./no-such-worker.js", location.href) : url, options);
        }
      };
    });
    await page.reload();
    await page.getByLabel("Choose files").setInputFiles(smallFiles());
    await expect.poll(() => shareDrawn(page), SOON).toBeGreaterThan(0.1);
    expect(desk.faults.filter((f) => !/404|no-such-worker/.test(f))).toEqual([]);
    await desk.context.close();
  });

  it("nowhere, without WebGL: that is said, and everything else is there", async () => {
    const desk = await bench.open();
    const { page } = desk;
    await page.addInitScript(() => {
      Reflect.deleteProperty(HTMLCanvasElement.prototype, "transferControlToOffscreen");
      HTMLCanvasElement.prototype.getContext = () => null;
    });
    await page.reload();
    await page.getByLabel("Choose files").setInputFiles(smallFiles());
    await page.getByText("This browser draws no WebGL").waitFor();
    await page.getByText(/^Planned, revision/).waitFor();
    await desk.context.close();
  });
});
