// Long work stopped: at every station of a plan, in the very moment one ends, papers, corrections, twice in one breath. What stood before
// stands, what was decided is kept, and the next plan is whole. Stop is pressed in the page itself, as soon as its words show the station:
// however quick a station is, it is caught.
import type { Page } from "playwright-core";
import { beforeAll, describe, expect, it } from "vitest";
import {
  benchOfFile,
  clear,
  type Desk,
  enter,
  judge,
  kept,
  LONG,
  openPlanned,
  openWith,
  planned,
  plannedAnew,
  SOON,
  shows,
  stopAt,
  turnTo,
} from "./bench.ts";
import { SMALL_JOB, sailFiles, smallFiles } from "./smallForm.ts";

const bench = benchOfFile();

/** A job whose nesting lasts until it is stopped. */
const ENDLESS = { ...SMALL_JOB, nest: { steps: 1e7 } };

const stopped = (page: Page) => page.getByText("Stopped", { exact: true });
const stop = (page: Page) => page.locator(".state").getByRole("button", { name: "Stop", exact: true });
const older = (page: Page) => page.getByText("This is still the plan before the last change.");

/** Nothing is said to go on any more. */
async function isStill(page: Page): Promise<void> {
  await stopped(page).waitFor();
  await expect.poll(() => page.getByRole("progressbar").count(), SOON).toBe(0);
  await expect.poll(() => page.locator("main").getAttribute("aria-busy"), SOON).toBe("false");
}

/** Before the page starts: presses Stop in the moment one message of a worker comes in, before the page hears it. */
const STOP_ON = `(() => {
  const Own = Worker;
  window.Worker = class extends Own {
    constructor(...given) {
      super(...given);
      this.addEventListener("message", ({ data }) => {
        if (window.stopOn !== [data.kind, data.station].join(" ").trim()) return;
        window.stopOn = null;
        document.querySelector(".state button").click();
      });
    }
  };
})()`;

describe("stopped while it is planned", { timeout: LONG }, () => {
  let desk: Desk;
  let revision: string;
  beforeAll(async () => {
    desk = await bench.open();
    await desk.page.addInitScript(STOP_ON);
    await desk.page.reload();
    await desk.page.getByLabel("Choose files").setInputFiles(sailFiles());
    revision = await planned(desk.page);
    await turnTo(desk.page, "Rolls");
  }, LONG);

  /** Changes the gap, and undoes it once that plan is stopped: what stood before is planned as before. */
  async function changeAndStop(gap: string, press: () => Promise<unknown>): Promise<void> {
    const { page, faults } = desk;
    await press();
    await enter(page, "Gap between cuts", gap);
    await isStill(page);
    await turnTo(page, "Rig");
    // what is seen is of the plan before, and says so
    await page.getByText(/^4 adjusters in/).waitFor();
    await older(page).waitFor();
    await turnTo(page, "Rolls");
    await shows(page, "Gap between cuts", gap);
    await kept(page);
    await isStill(page);
    await page.getByRole("button", { name: "Undo gap between cuts" }).click();
    expect(await planned(page)).toBe(revision);
    await expect.poll(() => older(page).count(), SOON).toBe(0);
    expect(faults).toEqual([]);
  }

  it.each([
    ["the job is read", "^reading the job", "21"],
    ["Form", "^Form$", "22"],
    ["Seams", "^Seams$", "23"],
    ["Panels", "^Panels$", "24"],
    ["Rolls", "^Rolls$", "25"],
    ["Rig", "^Rig: finished state", "26"],
  ])("at the station %s", async (_, words, gap) => {
    await changeAndStop(gap, () => stopAt(desk.page, words));
  });

  it.each([
    ["read", "31"],
    ["soFar form", "32"],
    ["soFar panels", "33"],
    ["soFar rolls", "34"],
    ["planned", "35"],
  ])("in the moment that %s comes in", async (message, gap) => {
    await changeAndStop(gap, () => desk.page.evaluate((m) => Object.assign(window, { stopOn: m }), message));
  });

  it("done again it is the changed job, and Stop after the end changes nothing", async () => {
    const { page } = desk;
    await page.getByRole("button", { name: "Redo gap between cuts" }).click();
    const second = await plannedAnew(page, revision);
    await page.keyboard.press(".");
    expect(await planned(page)).toBe(second);
    const between = page.getByRole("row", { name: "Between cuts" }).first();
    await expect.poll(() => between.innerText(), SOON).toContain("35");
  });

  it("corrections: the button is there again, and they are worked out when asked anew", async () => {
    const { page, faults } = desk;
    await turnTo(page, "Site");
    await page.getByRole("button", { name: "T-C1", exact: true }).click();
    await page.getByLabel("Force, kN").fill("20");
    await page.getByRole("button", { name: "Write it into the log" }).click();
    const before = await planned(page);
    const ask = page.getByRole("button", { name: /^Work out corrections/ });
    await stopAt(page, "^Working out what to turn", ".corrections [role=status]");
    await ask.click();
    await page.getByRole("alert").getByText("Stopped. The plan stands as it was.").waitFor();
    await expect.poll(() => page.getByText("Working out what to turn").count(), SOON).toBe(0);
    expect(await planned(page)).toBe(before);
    await ask.click();
    await page.getByRole("table", { name: "What the readings say, and the forecast" }).waitFor();
    await expect.poll(() => page.getByRole("alert").count(), SOON).toBe(0);
    expect(faults).toEqual([]);
  });

  it("papers: none stand half written, and they are written when asked anew", async () => {
    const { page, faults } = desk;
    const before = await planned(page);
    await stopAt(page, "being written", ".stage");
    await turnTo(page, "Papers");
    await page.getByRole("alert").getByText("Stopped. The plan stands as it was.").waitFor();
    await page.getByText("No papers yet.").waitFor();
    expect(await planned(page)).toBe(before);
    await page.getByRole("button", { name: "Write the papers" }).click();
    await page.getByText(/files, revision/).waitFor();
    expect(faults).toEqual([]);
  });
});

describe("stopped while layouts are compared", { timeout: LONG }, () => {
  it("what was worked out stays, no other is begun; gone on with, by the button and the key", async () => {
    const desk = await openPlanned(bench, smallFiles());
    const { page, revision } = desk;
    await turnTo(page, "Seams");
    const compare = page.getByRole("button", { name: "Compare layouts" });
    const takes = page.getByRole("list", { name: "Layouts side by side" }).getByRole("button", { name: /^Take / });
    const goOn = page.getByRole("button", { name: "Go on", exact: true });
    const isStopped = async (n: number) => {
      await page.getByText(new RegExp(`^Stopped: ${n} of [3-6] layouts are worked out`)).waitFor();
      await expect.poll(() => takes.count(), SOON).toBe(n);
      await expect.poll(() => page.getByRole("progressbar").count(), SOON).toBe(0);
      await expect.poll(() => page.getByText("Being worked out").count(), SOON).toBe(0);
    };
    await stopAt(page, "^Layout 2 of", ".weighing");
    await compare.click();
    await isStopped(1);
    expect(await judge(page)).toEqual([]);
    // the focus stays where Stop was pressed: the same place goes on
    await goOn.focus();
    await page.evaluate(() => {
      const watch = new MutationObserver(() => {
        if (!document.querySelector(".weighing")?.textContent?.startsWith("Layout 3 of")) return;
        watch.disconnect();
        document.body.dispatchEvent(new KeyboardEvent("keydown", { key: ".", bubbles: true }));
      });
      watch.observe(document.body, { subtree: true, childList: true, characterData: true });
    });
    await page.keyboard.press("Enter");
    await isStopped(2);
    await goOn.click();
    await page.getByText(/^All [3-6] layouts are worked out/).waitFor();
    expect(await planned(page)).toBe(revision);
    await page.getByRole("button", { name: "Back to the surface" }).click();
    await compare.waitFor();
    await clear(desk);
  });
});

describe("stopped, and then", { timeout: LONG }, () => {
  it("pressed twice, or the key held down: it stays stopped (bug: the second press planned again)", async () => {
    const desk = await openWith(bench, smallFiles(ENDLESS));
    const { page } = desk;
    await stop(page).dblclick();
    await isStill(page);
    await page.getByRole("button", { name: "Plan again" }).click();
    await stop(page).focus();
    await page.keyboard.down("Enter");
    await page.keyboard.down("Enter");
    await isStill(page);
    await page.keyboard.up("Enter");
    await isStill(page);
    // the next press is meant
    await page.keyboard.press("Enter");
    await page.getByRole("progressbar", { name: "Planning" }).waitFor();
    await page.keyboard.press(".");
    await page.keyboard.press(".");
    await isStill(page);
    await clear(desk);
  });

  it("before anything was planned, loaded anew: the job is there and is planned by itself", async () => {
    const desk = await bench.open();
    const { page } = desk;
    await stopAt(page, "^reading the job");
    await page.getByLabel("Choose files").setInputFiles(smallFiles());
    await isStill(page);
    await page.getByText("The plan was stopped. Plan again to see it here.").waitFor();
    await kept(page);
    await page.reload();
    await planned(page);
    await clear(desk);
  });

  it("changed at once: the change is planned, and undo and redo lead through what was stopped", async () => {
    const desk = await openPlanned(bench, smallFiles());
    const { page, revision } = desk;
    await turnTo(page, "Rolls");
    await stopAt(page, "^Rolls");
    await enter(page, "Gap between cuts", "25");
    await isStill(page);
    await enter(page, "Gap between cuts", "30");
    const third = await plannedAnew(page, revision);
    const undo = page.getByRole("button", { name: "Undo gap between cuts" });
    await undo.click();
    await shows(page, "Gap between cuts", "25");
    await undo.click();
    await page.getByRole("button", { name: "Undo", exact: true }).and(page.locator(":disabled")).waitFor();
    expect(await plannedAnew(page, third)).toBe(revision);
    await kept(page);
    await page.reload();
    await page.getByRole("button", { name: "Redo gap between cuts" }).click();
    await page.getByRole("button", { name: "Redo gap between cuts" }).click();
    await shows(page, "Gap between cuts", "30");
    expect(await plannedAnew(page, revision)).toBe(third);
    await clear(desk);
  });
});
