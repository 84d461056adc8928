// How it looks and is reached: axe on every leaf in light and dark, both sizes without sideways scrolling, keys alone.
import type { Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { type Bench, type Desk, enter, judge, PATIENCE, planned, plannedAnew, setUp, turnTo } from "./bench.ts";

const LEAVES = ["Form", "Seams", "Panels", "Rolls", "Rig", "Papers", "Site"];
let bench: Bench;
let desk: Desk;

beforeAll(async () => {
  bench = await setUp("looks");
  desk = await bench.open();
}, PATIENCE);
afterAll(() => bench.close());

const sideways = (page: Page) =>
  page.evaluate(() =>
    Math.max(
      document.documentElement.scrollWidth - innerWidth,
      ...[...document.querySelectorAll("main")].map((m) => m.scrollWidth - m.clientWidth),
    ),
  );

describe("looks of the page", { timeout: 2 * PATIENCE }, () => {
  it("desk: axe finds nothing, and a starter is opened with the keys alone", async () => {
    const { page } = desk;
    expect(await judge(page)).toEqual([]);
    for (let k = 0; k < 12; k++) {
      await page.keyboard.press("Tab");
      if ((await page.evaluate(() => document.activeElement?.textContent)) === "boat shed") break;
    }
    await page.keyboard.press("Enter");
    await planned(page);
  });

  it.each(["light", "dark"] as const)("axe finds nothing on any leaf, %s", async (colorScheme) => {
    const { page } = desk;
    await page.emulateMedia({ colorScheme });
    for (const leaf of LEAVES) {
      await turnTo(page, leaf);
      if (leaf === "Papers") await page.getByText(/files, revision/).waitFor({ timeout: PATIENCE });
      expect(await judge(page), leaf).toEqual([]);
    }
    await turnTo(page, "Panels");
    await page.getByRole("button", { name: "warp stress as patterned" }).click();
    await page.getByText("middle: the wanted 2.00 kN/m").waitFor();
    expect(await judge(page)).toEqual([]);
    await page.getByRole("button", { name: "plain" }).click();
  });

  it.each([
    [1440, 900],
    [820, 1180],
  ])("%i x %i needs no sideways scrolling", async (width, height) => {
    const { page } = desk;
    await page.setViewportSize({ width, height });
    for (const leaf of LEAVES) {
      await turnTo(page, leaf);
      expect(await sideways(page), leaf).toBeLessThanOrEqual(0);
    }
  });

  it("targets of the site leaf are 44 px or more", async () => {
    const { page } = desk;
    await turnTo(page, "Site");
    const small = await page
      .locator("main button:visible, main input:visible, main select:visible")
      .evaluateAll((all) =>
        all
          .map((e) => ({
            name: e.textContent || e.getAttribute("aria-label") || e.id,
            h: e.getBoundingClientRect().height,
          }))
          .filter((e) => e.h < 44),
      );
    expect(small).toEqual([]);
  });

  it("leaves, steps, sheets, undo and planning go by keys", async () => {
    const { page } = desk;
    await page.keyboard.press("5");
    await page.getByRole("heading", { name: "How is it pulled up?" }).waitFor();
    await page.keyboard.press("]");
    await page.getByText("Step 1, stage 10 %").waitFor();
    await page.keyboard.press("]");
    await page.keyboard.press("[");
    await page.getByText("Step 1, stage 10 %").waitFor();
    await page.keyboard.press("?");
    await page.getByRole("dialog", { name: "Keys" }).waitFor();
    expect(await judge(page)).toEqual([]);
    await page.keyboard.press("Escape");
    await page.locator("dialog").waitFor({ state: "detached" });
    await page.keyboard.press("f");
    expect(await judge(page)).toEqual([]);
    await page.keyboard.press("Escape");
    await page.locator("dialog").waitFor({ state: "detached" });
    await page.keyboard.press("1");
    const view = page.getByRole("application");
    await view.focus();
    await page.keyboard.press("ArrowLeft");
    await page.keyboard.press("+");
    await page.keyboard.press("0");
  });

  it("Rig: other stages make other steps; a long plan can be stopped, and what was planned stays", async () => {
    const { page } = desk;
    const before = await planned(page);
    await page.keyboard.press("5");
    await enter(page, "Stages, % of the target", "40 100");
    await page.getByRole("button", { name: "Stop" }).click();
    await page.getByText("Stopped", { exact: true }).waitFor();
    await page.getByText(/4 adjusters in \d+ steps/).waitFor();
    await page.getByRole("button", { name: "Plan again" }).click();
    await plannedAnew(page, before);
    const text = await page.locator(".strip ol").innerText();
    expect(text).toContain("40 %");
    expect(text).not.toContain("85 %");
  });

  it("Site: a reading is held against the window of its step, and corrections come of it", async () => {
    const { page } = desk;
    await turnTo(page, "Site");
    await page.getByRole("button", { name: "on ▸" }).click();
    await page.getByRole("button", { name: "T1", exact: true }).click();
    const words = await page.locator(".window").innerText();
    const high = Number(/to ([\d.]+)/.exec(words)?.[1] ?? Number.NaN);
    await page.getByLabel("Force, kN").fill(String(high + 5));
    await page.getByText(/high by .* stop, ask the engineer/).waitFor();
    await page.getByRole("button", { name: "Write it into the log" }).click();
    await page.getByText("1 reading in the log.").waitFor();
    await page.getByRole("button", { name: /^Work out corrections/ }).click();
    const result = page.getByRole("table", { name: "What the readings say, and the forecast" });
    await result.waitFor({ timeout: PATIENCE });
    expect(await result.getByRole("row").count()).toBe(5);
    expect(await judge(page)).toEqual([]);
    expect(desk.faults).toEqual([]);
  });
});
