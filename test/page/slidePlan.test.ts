// A seam's end slid and the plan: which of the two goes first, what becomes of a plan under way, and the worker that redraws broken.
import type { Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { type Bench, type Desk, LONG, planned, plannedAnew, SOON, setUp, turnTo } from "./bench.ts";
import { SMALL_JOB, smallFiles } from "./smallForm.ts";

let bench: Bench;
beforeAll(async () => {
  bench = await setUp();
}, LONG);
afterAll(() => bench?.close());

/** Before the page starts: the kinds of what it asks its workers and is answered, in order. */
const NOTE = `(() => {
  window.said = [];
  const Own = Worker;
  window.Worker = class extends Own {
    constructor(...given) {
      super(...given);
      this.addEventListener("message", ({ data }) => window.said.push(data.kind));
    }
    postMessage(data, ...more) {
      window.said.push(data.kind);
      super.postMessage(data, ...more);
    }
  };
})()`;

const said = (page: Page) => page.evaluate<string[]>("window.said");
const grips = (page: Page) => page.getByRole("slider");
const doing = (page: Page) => page.locator(".doing");

/** The small form in four strips, of a roll wide enough for slid ones too, with its seams in view and their ends ready to be slid. */
async function openSeams(nest: { steps: number }): Promise<Desk> {
  const desk = await bench.open();
  const { page } = desk;
  await page.addInitScript(NOTE);
  await page.reload();
  const rolls = [{ ...SMALL_JOB.rolls[0], width: 2500 }];
  const job = { ...SMALL_JOB, rolls, nest, seams: { count: 4 } };
  await page.getByLabel("Choose files").setInputFiles(smallFiles(job));
  await turnTo(page, "Seams");
  await grips(page).nth(5).waitFor();
  return desk;
}

/** Takes an end with the mouse and slides it towards the next seam's, without letting go. */
async function slide(page: Page): Promise<void> {
  const boxes = await Promise.all([2, 4].map((i) => grips(page).nth(i).boundingBox()));
  const [[x, y], [u, v]] = boxes.map((b) => [(b?.x ?? 0) + (b?.width ?? 0) / 2, (b?.y ?? 0) + (b?.height ?? 0) / 2]);
  const was = await grips(page).nth(2).getAttribute("aria-valuenow");
  await page.mouse.move(x, y);
  await page.mouse.down();
  await page.mouse.move(x + 0.2 * (u - x), y + 0.2 * (v - y), { steps: 3 });
  await page.waitForFunction(
    (old) => document.querySelectorAll("[role=slider]")[2]?.getAttribute("aria-valuenow") !== old,
    was,
  );
}

/** Waits until the plan has come to the rolls. */
const nesting = (page: Page) =>
  doing(page)
    .getByText(/nest|roll/i)
    .waitFor();

/** Slides an end while the rolls are nested; the plan waits for it. */
async function slideWhilePlanned(page: Page): Promise<void> {
  await nesting(page);
  await slide(page);
  await doing(page).getByText("waiting for the seam in hand").waitFor();
}

describe("a seam's end and the plan", { timeout: LONG }, () => {
  it("let go, the roof is tied first and planned then", async () => {
    const { page, context, faults } = await openSeams({ steps: 1 });
    const revision = await planned(page);
    await slide(page);
    await page.evaluate("window.said.length = 0");
    await page.mouse.up();
    await page.getByText(/The whole roof is tied again, 4 panels/).waitFor();
    await plannedAnew(page, revision);
    const order = (await said(page)).filter((k) => ["tie", "tied", "plan", "planned"].includes(k));
    expect(order).toEqual(["tie", "tied", "plan", "planned"]);
    // what was said of the tied roof does not go with its plan
    await page.getByText(/The whole roof is tied again, 4 panels/).waitFor();
    expect(faults).toEqual([]);
    await context.close();
  });

  it("slid while the rest is planned, that plan waits; put back it begins again, let go the new one does", async () => {
    const { page, context, faults } = await openSeams({ steps: 1e7 });
    await slideWhilePlanned(page);
    await page.keyboard.press("Escape");
    await page.mouse.up();
    await nesting(page);
    await grips(page).nth(5).waitFor();
    await slideWhilePlanned(page);
    await page.mouse.up();
    await page.getByRole("button", { name: /^Undo end of S/ }).waitFor();
    await nesting(page);
    await page.getByRole("button", { name: "Stop" }).click();
    await page.getByText("Stopped", { exact: true }).waitFor();
    expect(faults).toEqual([]);
    await context.close();
  });

  it("stopped with a seam in hand, nothing is planned until it is let go", async () => {
    const { page, context, faults } = await openSeams({ steps: 1e7 });
    await slideWhilePlanned(page);
    await page.keyboard.press(".");
    await page.getByText("Stopped", { exact: true }).waitFor();
    await page.keyboard.press("Escape");
    await page.mouse.up();
    // longer than the quiet time after which an edit is planned
    await page.waitForTimeout(600);
    await page.getByText("Stopped", { exact: true }).waitFor();
    await slide(page);
    await page.mouse.up();
    await nesting(page);
    expect(faults).toEqual([]);
    await context.close();
  });

  it("another leaf turned to with a seam in hand: it lies where it was slid to", async () => {
    const { page, context, faults } = await openSeams({ steps: 1 });
    const revision = await planned(page);
    await slide(page);
    await page.keyboard.press("3");
    await page.getByRole("button", { name: /^Undo end of S/ }).waitFor();
    await page.mouse.up();
    await plannedAnew(page, revision);
    expect(faults).toEqual([]);
    await context.close();
  });

  it("the worker that redraws broken: it is said, and seams can be slid again after the next plan", async () => {
    const { page, context } = await openSeams({ steps: 1 });
    const revision = await planned(page);
    await page
      .workers()
      .find((w) => w.url().includes("dragWorker"))
      ?.evaluate(() => {
        setTimeout(() => {
          throw new Error("out of luck");
        }, 0);
      });
    await page
      .getByRole("alert")
      .getByText(/Sliding seams broke down/)
      .waitFor();
    await expect.poll(() => grips(page).count(), SOON).toBe(0);
    await page.keyboard.press("p");
    await grips(page).nth(5).waitFor();
    expect(await planned(page)).toBe(revision);
    await slide(page);
    await page.mouse.up();
    await plannedAnew(page, revision);
    await context.close();
  });
});
