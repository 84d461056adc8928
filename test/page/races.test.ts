// Acts that come faster than the page can follow: nothing of what was done is lost, and nothing old stands where the new should.
import type { Page } from "playwright-core";
import { describe, expect, it } from "vitest";
import {
  benchOfFile,
  clear,
  enter,
  fieldOf,
  kept,
  LONG,
  openPlanned,
  openWith,
  planned,
  plannedAnew,
  SOON,
  shows,
  turnTo,
} from "./bench.ts";
import { SMALL_JOB, smallFiles } from "./smallForm.ts";

const bench = benchOfFile();

const openSmall = (job = SMALL_JOB) => openWith(bench, smallFiles(job));

/** A job whose nesting lasts until it is stopped. */
const ENDLESS = { ...SMALL_JOB, nest: { steps: 1e7 } };

const nesting = (page: Page) => page.locator(".doing").getByText(/nest|roll/i);

describe("rapid acts", { timeout: LONG }, () => {
  it("a panel dragged on the roll in one stroke, down, moved and let go before anything is drawn, is pinned", async () => {
    const desk = await openSmall();
    const { page } = desk;
    const revision = await planned(page);
    await turnTo(page, "Rolls");
    await page.locator("svg.roll g.placed").last().waitFor();
    await page.evaluate(() => {
      const svg = document.querySelector("svg.roll");
      const piece = [...document.querySelectorAll("svg.roll g.placed path")].at(-1);
      if (!svg || !piece) throw new Error("nothing lies on the roll");
      // a pointer that is not a true one cannot be captured
      svg.setPointerCapture = () => {};
      const { left, top, width, height } = piece.getBoundingClientRect();
      const tell = (target: Element, type: string, dx: number) =>
        target.dispatchEvent(
          new PointerEvent(type, {
            bubbles: true,
            clientX: left + width / 2 + dx,
            clientY: top + height / 2,
            button: 0,
          }),
        );
      tell(piece, "pointerdown", 0);
      tell(svg, "pointermove", 40);
      tell(svg, "pointermove", 80);
      tell(svg, "pointerup", 80);
    });
    await page.getByRole("button", { name: "Let go" }).waitFor();
    await plannedAnew(page, revision);
    await clear(desk);
  });

  it("edited again and again while it is planned, the last word is what is planned", async () => {
    const desk = await openSmall(ENDLESS);
    const { page } = desk;
    await turnTo(page, "Rolls");
    await nesting(page).waitFor();
    for (const gap of ["21", "22", "23"]) await enter(page, "Gap between cuts", gap);
    await enter(page, "Steps of search", "1");
    await planned(page);
    await shows(page, "Gap between cuts", "23");
    const between = page.getByRole("row", { name: "Between cuts" }).first();
    await expect.poll(() => between.innerText(), SOON).toContain("23");
    await clear(desk);
  });

  it("stopped right after an edit, it says so and stays stopped; planned again it is the edited job", async () => {
    const desk = await openSmall(ENDLESS);
    const { page } = desk;
    await turnTo(page, "Rolls");
    await nesting(page).waitFor();
    // Edit and stop in one breath, so that the edit's own plan has not begun.
    await fieldOf(page, "Gap between cuts").fill("24");
    await fieldOf(page, "Gap between cuts").evaluate((field) => {
      field.dispatchEvent(new KeyboardEvent("keydown", { key: "Enter", bubbles: true }));
      document.querySelector<HTMLElement>(".state button")?.click();
    });
    await page.getByText("Stopped", { exact: true }).waitFor();
    // longer than the quiet time after which an edit is planned
    await page.waitForTimeout(600);
    await page.getByText("Stopped", { exact: true }).waitFor();
    await enter(page, "Steps of search", "1");
    await planned(page);
    await shows(page, "Gap between cuts", "24");
    await clear(desk);
  });

  it("reloaded while it is planned, right after an edit, the edit is there and planning begins again", async () => {
    const desk = await openSmall(ENDLESS);
    const { page } = desk;
    await turnTo(page, "Rolls");
    await nesting(page).waitFor();
    await kept(page);
    await enter(page, "Gap between cuts", "26");
    await page.reload();
    await shows(page, "Gap between cuts", "26");
    await page.getByRole("progressbar", { name: "Planning" }).waitFor();
    await page.getByRole("button", { name: "Undo gap between cuts" }).waitFor();
    await fieldOf(page, "Steps of search").waitFor();
    await clear(desk);
  });

  it("a leaf turned while the papers are written: they are there when one comes back, of the newest plan", async () => {
    const desk = await openSmall();
    const { page } = desk;
    const first = await planned(page);
    await turnTo(page, "Papers");
    await turnTo(page, "Rolls");
    await enter(page, "Gap between cuts", "27");
    await turnTo(page, "Papers");
    const revision = (await plannedAnew(page, first)).replace("Planned, revision ", "");
    await page.getByText(new RegExp(`files, revision ${revision}`)).waitFor();
    await clear(desk);
  });

  it("another job opened while one is planned: nothing of the former one comes after it", async () => {
    const desk = await openSmall(ENDLESS);
    const { page } = desk;
    await turnTo(page, "Rolls");
    await nesting(page).waitFor();
    await page.getByRole("button", { name: /open the list of jobs/ }).click();
    await page.getByLabel("Choose files").setInputFiles(smallFiles({ ...SMALL_JOB, title: "Second booth" }));
    await planned(page);
    await page.getByRole("button", { name: "Seamstay Second booth, open the list of jobs" }).waitFor();
    await page.getByRole("button", { name: "Undo", exact: true }).and(page.locator(":disabled")).waitFor();
    await clear(desk);
  });

  it("a double click compares layouts, and saves one file (bug: the second press took the layouts away, and saved again)", async () => {
    const desk = await openPlanned(bench, smallFiles());
    const { page } = desk;
    await turnTo(page, "Seams");
    await page.getByRole("button", { name: "Compare layouts" }).and(page.locator(":enabled")).dblclick();
    await page.getByRole("button", { name: "Back to the surface" }).waitFor();
    await page.locator(".cards li").first().waitFor();
    await turnTo(page, "Papers");
    const saved: string[] = [];
    page.on("download", (d) => saved.push(d.suggestedFilename()));
    await page.getByRole("button", { name: "Save the job with its mesh" }).dblclick();
    await expect.poll(() => saved.length, SOON).toBeGreaterThan(0);
    // a second file would come before what is asked for after it
    await page.getByRole("button", { name: "Save index.pdf" }).click();
    await expect.poll(() => saved.at(-1), SOON).toBe("index.pdf");
    expect(saved).toHaveLength(2);
    await clear(desk);
  });

  it("a starter pressed twice, its mesh still on the way, is one job in the list", async () => {
    const desk = await bench.open();
    const { page } = desk;
    let asked = 0;
    await page.route(/\.obj$/, async (route) => {
      asked++;
      await page.waitForTimeout(500);
      await route.continue();
    });
    await page.getByRole("button", { name: /bandstand/i }).dblclick();
    await kept(page);
    expect(asked).toBe(1);
    await page.getByRole("button", { name: "Jobs", exact: true }).click();
    await page.locator("ul.jobs li").first().waitFor();
    expect(await page.locator("ul.jobs li").count()).toBe(1);
    await clear(desk);
  });
});
