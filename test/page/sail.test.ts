// A sail with adjusters: how the page looks and is reached (axe, sizes, targets), results as they come, edits of the rig, the roof.
import type { Page } from "playwright-core";
import { beforeAll, describe, expect, it } from "vitest";
import {
  benchOfFile,
  type Desk,
  enter,
  enterPlace,
  fieldOf,
  judge,
  LONG,
  planned,
  plannedAnew,
  SOON,
  shows,
  turnTo,
} from "./bench.ts";
import { SAIL_JOB, sailFiles } from "./smallForm.ts";

const LEAVES = ["Form", "Seams", "Panels", "Rolls", "Rig", "Papers", "Site"];
const bench = benchOfFile();
let desk: Desk;

beforeAll(async () => {
  desk = await bench.open();
}, LONG);

const sideways = (page: Page) =>
  page.evaluate(() =>
    Math.max(
      document.documentElement.scrollWidth - innerWidth,
      ...[...document.querySelectorAll("main")].map((m) => m.scrollWidth - m.clientWidth),
    ),
  );

describe("a sail in the page", { timeout: LONG }, () => {
  it("shows each station as it is done while the next one runs; stopped, what is there stays", async () => {
    const { page } = desk;
    expect(await judge(page)).toEqual([]);
    // So many steps of search that nesting surely lasts until it is stopped.
    await page.getByLabel("Choose files").setInputFiles(sailFiles({ ...SAIL_JOB, nest: { steps: 1e7 } }));
    await page.getByText(/m² on 4 edges/).waitFor();
    await turnTo(page, "Panels");
    await page.getByText(/^3 panels, /).waitFor();
    await page.getByRole("progressbar", { name: "Planning" }).waitFor();
    await turnTo(page, "Rolls");
    await page.getByText("The rolls will stand here as soon as").waitFor();
    await page.getByRole("button", { name: "Stop" }).click();
    await page.getByText("Stopped", { exact: true }).waitFor();
    await turnTo(page, "Panels");
    await page.getByText(/^3 panels, /).waitFor();
    await turnTo(page, "Rolls");
    await enter(page, "Steps of search", "1");
    await planned(page);
    await page.getByText(/m of cloth from 1 roll/).waitFor();
  });

  it("says from what width of roll one strip fewer would do", async () => {
    const { page } = desk;
    for (const leaf of ["Seams", "Panels", "Rolls"]) {
      await turnTo(page, leaf);
      await page
        .getByText(/^Wider cloth: 2 strips in place of 3 would be about [\d.]+ m wide .* rolls of about [\d.]+ m on\./)
        .waitFor();
    }
  });

  it.each([
    ["light", 1440, 900],
    ["dark", 1440, 900],
    ["light", 820, 1180],
    ["dark", 820, 1180],
  ] as const)(
    "axe finds nothing on any leaf, %s, %i x %i, and nothing needs sideways scrolling",
    async (colorScheme, width, height) => {
      const { page } = desk;
      await page.emulateMedia({ colorScheme });
      await page.setViewportSize({ width, height });
      for (const leaf of LEAVES) {
        await turnTo(page, leaf);
        if (leaf === "Papers") await page.getByText(/files, revision/).waitFor();
        expect(await judge(page), leaf).toEqual([]);
        await expect.poll(() => sideways(page), { ...SOON, message: leaf }).toBeLessThanOrEqual(0);
      }
    },
  );

  it("stress as patterned and as built over the surface, with a legend about the wanted stress", async () => {
    const { page } = desk;
    for (const [leaf, field] of [
      ["Panels", "warp stress as patterned"],
      ["Rig", "weft stress as built"],
    ]) {
      await turnTo(page, leaf);
      await page.getByRole("button", { name: field }).click();
      await page.getByText("middle: the wanted 2.00 kN/m").waitFor();
      expect(await judge(page), leaf).toEqual([]);
      await page.getByRole("button", { name: "plain" }).click();
    }
  });

  it("targets of the site leaf are 44 px or more, either way", async () => {
    const { page } = desk;
    await turnTo(page, "Site");
    await page.locator("main details").evaluateAll((all) => {
      for (const d of all) d.setAttribute("open", "");
    });
    const small = await page
      .locator(
        "main button:visible, main input:not([type=file]):visible, main .filepick span:visible, main select:visible, main summary:visible",
      )
      .evaluateAll((all) =>
        all
          .map((e) => {
            const { width, height } = e.getBoundingClientRect();
            return { name: e.textContent || e.getAttribute("aria-label") || e.id, width, height };
          })
          .filter((e) => e.height < 44 || e.width < 44),
      );
    expect(small).toEqual([]);
  });

  it("Rig: what an error does stands as bars, and as kN of the adjuster that is chosen", async () => {
    const { page } = desk;
    await turnTo(page, "Rig");
    const bars = page.getByRole("region", { name: "Sensitivity" });
    await bars
      .getByText(/^Cable \w+ [\d.]+ mm too long$/)
      .first()
      .waitFor();
    // Shares are listed from the worst down.
    const shares = async () =>
      (await bars.locator("li .number").allInnerTexts()).map((t) => Math.abs(Number.parseFloat(t.replace("−", "-"))));
    const listed = await shares();
    expect(listed.length).toBeGreaterThan(4);
    expect(listed).toEqual([...listed].sort((a, b) => b - a));
    await page.getByRole("group", { name: "Plan of the adjusters" }).getByRole("button").first().press("Enter");
    await bars.getByRole("heading", { name: "What an error does to T-C1" }).waitFor();
    await expect.poll(() => bars.locator("li .number").first().innerText(), SOON).toMatch(/kN$/);
    await page.keyboard.press("Escape");
  });

  it("what is pointed at in the plan of the rig lights up in figures and chart, and the other way round", async () => {
    const { page } = desk;
    await turnTo(page, "Rig");
    const plan = page.getByRole("group", { name: "Plan of the adjusters" });
    await plan.getByRole("button", { name: /^T-C2/ }).locator("circle").hover({ force: true });
    await page.locator("tr.lit", { hasText: "T-C2 target" }).waitFor();
    await page.locator(".chart .trace.lit").waitFor();
    await page.getByRole("row", { name: /^T-C3 target/ }).hover();
    await plan.locator(".adjuster.lit", { hasText: "T-C3" }).waitFor();
    await plan.locator(".adjuster.lit", { hasText: "T-C2" }).waitFor({ state: "detached" });
    await page.mouse.move(0, 0);
  });

  it("cables, far pins and turnbuckles are edited in place, and what stands on them follows", async () => {
    const { page } = desk;
    let revision = await planned(page);
    await turnTo(page, "Form");
    await page.locator("details", { hasText: "Edges (4)" }).evaluate((d) => d.setAttribute("open", ""));
    await fieldOf(page, /^Cable( default)?$/).selectOption({ label: "figures of its own" });
    await enter(page, "EA of the cable", "9000");
    await enter(page, "Breaking force of the cable", "150");
    await page.locator("summary", { hasText: "Anchors (4)" }).click();
    await enterPlace(page, "Far pin of C1", ["-0.8", "-0.7", "3"]);
    revision = await plannedAnew(page, revision);
    await turnTo(page, "Rig");
    await page
      .getByText(/% of its breaking force/)
      .first()
      .waitFor();
    await fieldOf(page, "Turnbuckle of T-C1").selectOption({ label: "figures of its own" });
    await enter(page, "Capacity of T-C1", "90");
    revision = await plannedAnew(page, revision);
    await page
      .getByRole("row", { name: /T-C1 target/ })
      .getByText("capacity 90 kN")
      .waitFor();
    await page.getByRole("button", { name: "Remove T-C4" }).click();
    revision = await plannedAnew(page, revision);
    await page.getByText(/^3 adjusters in/).waitFor();
    await page.getByLabel("One more adjuster").selectOption("C4");
    await plannedAnew(page, revision);
    await page.getByText(/^4 adjusters in/).waitFor();
    expect(desk.faults).toEqual([]);
  });

  it("Rig: other stages make other steps; a step is looked at in plan, words and chart", async () => {
    const { page } = desk;
    const before = await planned(page);
    await enter(page, "Stages, % of the target", "40 100");
    await plannedAnew(page, before);
    const strip = page.locator(".strip ol");
    await expect.poll(() => strip.innerText(), SOON).toContain("40 %");
    expect(await strip.innerText()).not.toContain("50 %");
    await page.getByRole("button", { name: "Step on ▸" }).click();
    await page.getByText("Step 1, stage 40 %").waitFor();
    // each adjuster once in the key, whose lines are those of the chart
    const key = page.locator(".dashkey li");
    await expect.poll(() => key.locator("span").allInnerTexts(), SOON).toHaveLength(4);
    expect(await page.locator("svg.chart .trace").count()).toBe(await key.count());
  });

  it("Site: a reading is held against the window of its step, and corrections come of it", async () => {
    const { page } = desk;
    await turnTo(page, "Site");
    await page.getByRole("button", { name: "T-C1", exact: true }).click();
    const words = page.locator(".window");
    await words.getByText(/window [\d.]+ to [\d.]+/).waitFor();
    const high = Number(/to ([\d.]+)/.exec(await words.innerText())?.[1] ?? Number.NaN);
    await page.getByLabel("Force, kN").fill(String(high + 5));
    await page.getByText(/high by .* stop, ask the engineer/).waitFor();
    await page.getByRole("button", { name: "Write it into the log" }).click();
    await page.getByText("1 reading in the log.").waitFor();
    // written down it is still seen to be out
    const log = page.getByRole("table", { name: "Log, the latest first" });
    await log.getByText(/^after step 1: high by 5\.\d kN: stop, ask the engineer$/).waitFor();
    await page.getByRole("button", { name: /^Work out corrections/ }).click();
    const result = page.getByRole("table", { name: "What the readings say, and the forecast" });
    await result.waitFor();
    await expect.poll(() => result.getByRole("row").count(), SOON).toBe(5);
    expect(await judge(page)).toEqual([]);
    await page.emulateMedia({ colorScheme: "light" });
    expect(await judge(page)).toEqual([]);
    expect(desk.faults).toEqual([]);
  });

  it("Site: where everything is read, each force is held against its window, moved in that step or not", async () => {
    const { page } = desk;
    await turnTo(page, "Site");
    const on = page.getByRole("button", { name: "on ▸" });
    const steps = page.getByRole("group", { name: "Step of the schedule" }).locator("output");
    const last = () => on.isDisabled();
    while (!(await last())) {
      const before = await steps.innerText();
      await on.click();
      await expect.poll(() => steps.innerText(), SOON).not.toBe(before);
    }
    for (const id of ["T-C1", "T-C2", "T-C3", "T-C4"]) {
      await page.getByRole("button", { name: id, exact: true }).click();
      await page.locator(".window", { hasText: /^Expected [\d.]+ kN, window [\d.]+ to [\d.]+/ }).waitFor();
      await page.getByLabel("Force, kN").fill("300");
      await page.locator(".window .off", { hasText: /stop/ }).waitFor();
      await page.getByLabel("Force, kN").fill("");
    }
    const first = page.getByRole("button", { name: "◂ back" });
    while (!(await steps.innerText()).startsWith("1 of")) {
      const before = await steps.innerText();
      await first.click();
      await expect.poll(() => steps.innerText(), SOON).not.toBe(before);
    }
  });

  it("Site: turns made are written into the log, and what is read after them is the next round", async () => {
    const { page } = desk;
    await turnTo(page, "Site");
    await page.getByRole("button", { name: "These turns were made: write them into the log" }).click();
    await page.getByText("The turns are in the log. Read all adjusters again").waitFor();
    const log = page.getByRole("table", { name: "Log, the latest first" });
    await log
      .getByText(/^turned: (taken in|let out) [\d.]+ mm$/)
      .first()
      .waitFor();
    await page.getByText("1 reading in the log.").waitFor();
    await page.getByLabel("Force, kN").fill("20");
    await page.getByRole("button", { name: "Write it into the log" }).click();
    await page.getByText("2 readings in the log.").waitFor();
    await page.getByRole("button", { name: /^Work out corrections.*, with the round before$/ }).waitFor();
    expect(await judge(page)).toEqual([]);
  });

  it("keeps what the cloth was settled to through a change of the title", async () => {
    const { page } = desk;
    await turnTo(page, "Papers");
    const before = await planned(page);
    await enter(page, "Title", "Kiosk sail, south");
    await plannedAnew(page, before);
    await shows(page, "Title", "Kiosk sail, south");
    await page.getByText(/Schedule, cables and hardware are NOT FOR ISSUE: they stand on defaults/).waitFor();
  });
});
