// A PDF looked at and printed on the page: sheet by sheet with the keys, its words as text, and what the browser prints of it.
import { PDFDocument } from "pdf-lib";
import type { Page } from "playwright-core";
import { describe, expect, it } from "vitest";
import { readWords } from "../../src/page/sheets/readWords.ts";
import { benchOfFile, clear, judge, LONG, openPlanned, SOON, turnTo } from "./bench.ts";
import { sailFiles } from "./smallForm.ts";

const bench = benchOfFile();

/**
 * Kept as text: the tool that drives the browser prints by itself, so the page's own print only says that it was asked for; URLs lent and
 * not taken back are held in `lent`.
 */
const HOLD_PRINT = `
  window.print = () => { window.asked = (window.asked ?? 0) + 1; };
  const lent = window.lent = new Set();
  const { createObjectURL, revokeObjectURL } = URL;
  URL.createObjectURL = (of) => { const url = createObjectURL.call(URL, of); lent.add(url); return url; };
  URL.revokeObjectURL = (url) => { lent.delete(url); revokeObjectURL.call(URL, url); };`;

/** The second picture fails, as it does where memory is short. */
const FAIL_PICTURE = `
  const { toBlob } = HTMLCanvasElement.prototype;
  let made = 0;
  HTMLCanvasElement.prototype.toBlob = function (...given) { made++ === 1 ? given[0](null) : toBlob.apply(this, given); };`;

/** What the worker of the first paper says is heard only once `window.release` is called: it opens after the next one. */
const LATE_FIRST = `
  const Own = Worker;
  let waiting = null;
  window.release = () => { const all = waiting; waiting = []; waiting.push = (then) => then(); for (const then of all) then(); };
  window.Worker = class extends Own {
    constructor(url, options) {
      super(url, options);
      if (options.name !== "seamstay-sheets" || waiting !== null) return;
      waiting = [];
      const { addEventListener } = this;
      this.addEventListener = (kind, then, ...more) =>
        addEventListener.call(this, kind, kind === "message" ? (event) => waiting.push(() => then(event)) : then, ...more);
    }
  };`;

/** Whether the page takes Ctrl P for itself, pressed in a field or beside all fields. */
function takesPrint(page: Page, inField: boolean): Promise<boolean> {
  return page.evaluate((inField) => {
    const field = document.createElement("input");
    document.body.append(field);
    const press = new KeyboardEvent("keydown", { key: "p", ctrlKey: true, bubbles: true, cancelable: true });
    (inField ? field : document.body).dispatchEvent(press);
    field.remove();
    return press.defaultPrevented;
  }, inField);
}

/** What a shown PDF takes hold of: its workers, faces in the document, URLs. */
async function held(page: Page): Promise<{ workers: number; faces: number; urls: unknown }> {
  return {
    workers: page.workers().filter((w) => w.url().includes("sheetWorker")).length,
    faces: await page.evaluate(() => document.fonts.size),
    urls: await page.evaluate("window.lent.size"),
  };
}

describe("a PDF on the page", { timeout: LONG }, () => {
  it.each(["light", "dark"] as const)(
    "is read sheet by sheet, with its words, and printed (%s)",
    async (colorScheme) => {
      const viewport = colorScheme === "light" ? { width: 1440, height: 900 } : { width: 820, height: 1180 };
      const desk = await openPlanned(bench, sailFiles(), { colorScheme, viewport });
      const { page } = desk;
      await page.evaluate(HOLD_PRINT);
      await turnTo(page, "Papers");
      const table = page.getByRole("button", { name: "cables.csv", exact: true });
      await table.click();
      await expect.poll(() => held(page), SOON).toMatchObject({ workers: 0, urls: 0 });
      const free = await held(page);
      expect(await takesPrint(page, false)).toBe(false);
      await page.getByRole("button", { name: "cables.pdf", exact: true }).click();
      const place = page.getByRole("group", { name: "Paper cables.pdf" });
      await page.getByText(/^Sheet 1 of \d+$/).waitFor();
      const count = Number((await page.getByText(/^Sheet 1 of \d+$/).innerText()).split(" ").at(-1));
      expect(count).toBeGreaterThan(1);
      await place.locator("summary").click();
      const words = () => place.locator("pre").innerText();
      await expect.poll(words, SOON).toMatch(new RegExp(`Kiosk sail .* 1 of ${count}`));
      // ink on paper: the sheet is drawn, not only opened
      const dark = () =>
        place.locator("canvas").evaluate((c) => {
          const canvas = c as HTMLCanvasElement;
          const { data } = canvas.getContext("2d")?.getImageData(0, 0, canvas.width, canvas.height) ?? { data: [] };
          let n = 0;
          for (let i = 0; i < data.length; i += 4) if (data[i + 3] === 255 && data[i] < 100) n++;
          return n;
        });
      await expect.poll(dark, SOON).toBeGreaterThan(1000);
      await place.press("PageDown");
      await expect.poll(words, SOON).toMatch(new RegExp(`Kiosk sail .* 2 of ${count}`));
      await place.press("Home");
      await page.getByText(`Sheet 1 of ${count}`).waitFor();
      const wide = () => place.locator("canvas").evaluate((c) => c.getBoundingClientRect().width);
      const before = await wide();
      await place.press("+");
      await expect.poll(wide, SOON).toBeGreaterThan(1.2 * before);
      await expect.poll(() => page.evaluate(() => document.documentElement.scrollWidth), SOON).toBe(viewport.width);
      await place.press("0");
      await expect.poll(wide, SOON).toBe(before);
      await expect.poll(() => judge(page), SOON).toEqual([]);
      expect((await held(page)).faces).toBeGreaterThan(free.faces);
      expect(await takesPrint(page, true)).toBe(false);
      await page.keyboard.press("Control+p");
      await expect.poll(() => page.evaluate("window.asked"), SOON).toBe(1);
      const { pages, sizes } = await readSizes(await page.pdf({ preferCSSPageSize: true }));
      expect(pages).toBe(count);
      // ISO 216: A4 is 297 x 210 mm; browsers round a page to whole dots of 1/96 inch
      for (const [w, h] of sizes) {
        expect(Math.abs((w / 72) * 25.4 - 297)).toBeLessThan(0.3);
        expect(Math.abs((h / 72) * 25.4 - 210)).toBeLessThan(0.3);
      }
      await page.evaluate(() => dispatchEvent(new Event("afterprint")));
      await expect.poll(() => page.locator(".printed").count(), SOON).toBe(0);
      // the paper gone, all it took hold of is let go of
      await table.click();
      await expect.poll(() => held(page), SOON).toEqual(free);
      expect(await takesPrint(page, false)).toBe(false);
      await clear(desk);
    },
  );

  it("a paper chosen while another still opens is shown whole, however late that one comes", async () => {
    const desk = await openPlanned(bench, sailFiles());
    const { page } = desk;
    await page.evaluate(HOLD_PRINT);
    await page.evaluate(LATE_FIRST);
    await turnTo(page, "Papers");
    await expect.poll(() => held(page), SOON).toMatchObject({ workers: 1 });
    await page.getByRole("button", { name: "cables.pdf", exact: true }).click();
    await page.getByText(/^Sheet 1 of [2-9]/).waitFor();
    await page.evaluate("window.release()");
    // the late one is put away
    await expect.poll(() => held(page), SOON).toMatchObject({ workers: 1 });
    const place = page.getByRole("group", { name: "Paper cables.pdf" });
    await place.press("PageDown");
    await place.locator("summary").click();
    await expect.poll(() => place.locator("pre").innerText(), SOON).toMatch(/Kiosk sail .* 2 of [2-9]/);
    await place.press("End");
    await expect.poll(() => place.locator("pre").innerText(), SOON).toMatch(/Kiosk sail .* ([2-9]) of \1/);
    await clear(desk);
  });

  it("what cannot be made ready is said, and nothing of it stays", async () => {
    const desk = await openPlanned(bench, sailFiles());
    const { page } = desk;
    await page.evaluate(HOLD_PRINT);
    await page.evaluate(FAIL_PICTURE);
    await turnTo(page, "Papers");
    await page.getByRole("button", { name: "cables.pdf", exact: true }).click();
    await page.getByText(/^Sheet 1 of [2-9]/).waitFor();
    await page.getByRole("button", { name: "Print", exact: true }).click();
    const told = page.getByRole("alert").filter({ hasText: "cables.pdf cannot be shown or printed here" });
    await expect.poll(() => told.innerText(), SOON).toContain("no picture of the sheet");
    await expect.poll(() => page.evaluate("window.lent.size"), SOON).toBe(0);
    expect(await page.evaluate("window.asked")).toBeUndefined();
    await expect.poll(() => takesPrint(page, false), SOON).toBe(false);
    await clear(desk);
  });
});

async function readSizes(bytes: Uint8Array): Promise<{ pages: number; sizes: [number, number][] }> {
  const all = (await PDFDocument.load(bytes)).getPages();
  return { pages: all.length, sizes: all.map((p) => [p.getWidth(), p.getHeight()]) };
}

describe("words of a sheet", () => {
  const at = (text: string, x: number, y: number, height = 10) => ({
    text,
    at: [height, 0, 0, height, x, y],
    width: 5 * text.length,
  });

  it("lines from the top down, each from left to right, columns parted, upright words last", () => {
    const upright = { text: "edge W1", at: [0, 10, -10, 0, 5, 300], width: 35 };
    expect(
      readWords([upright, at("right", 200, 700), at("below", 10, 680), at("left", 10, 701), at(" ", 90, 700)]),
    ).toEqual(["left  right", "below", "edge W1"]);
  });

  it("runs that touch are one word, a small gap is a space", () => {
    expect(readWords([at("Seam", 10, 50), at("stay", 30, 50), at("A", 53, 50)])).toEqual(["Seamstay A"]);
  });
});
