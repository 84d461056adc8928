// The keyboard alone, beside the acts on the job: opening, stopping, looking, sliding a grip, saving papers, the sheets.
import { beforeAll, describe, expect, it } from "vitest";
import { benchOfFile, type Desk, kept, LONG, planned, plannedAnew, SOON } from "./bench.ts";
import { awaitChoosers, givenBy, leaf, pressed, rested, tabTo, typed } from "./keys.ts";
import { SAIL_JOB, sailFiles } from "./smallForm.ts";

const bench = benchOfFile();
let desk: Desk;

beforeAll(async () => {
  desk = await bench.open();
}, LONG);

describe("by keyboard alone", { timeout: LONG }, () => {
  it("a job is opened, stopped and planned again", async () => {
    const { page } = desk;
    awaitChoosers(page);
    // So many steps of search that nesting lasts until it is stopped.
    await givenBy(page.getByLabel("Choose files"), sailFiles({ ...SAIL_JOB, nest: { steps: 1e7 } }))(page);
    await page.getByRole("progressbar", { name: "Planning" }).waitFor();
    await leaf(page, 4);
    await page.keyboard.press(".");
    await page.getByText("Stopped", { exact: true }).waitFor();
    await typed("Steps of search", "1")(page);
    await rested(page);
  });

  it("the end of a seam is slid by its grip, undone and done again", async () => {
    const { page } = desk;
    await leaf(page, 2);
    await pressed("Take these seams in hand")(page);
    await page.getByText("Seams by hand").waitFor();
    await rested(page);
    const revision = await planned(page);
    const grip = page.getByRole("slider").first();
    await grip.waitFor();
    await tabTo(page, grip);
    const was = Number(await grip.getAttribute("aria-valuenow"));
    const metres = async () => Number(await grip.getAttribute("aria-valuenow"));
    await page.keyboard.press("Shift+ArrowRight");
    await expect.poll(metres, SOON).toBeCloseTo(was + 0.1, 2);
    await page.keyboard.press("Enter");
    const slid = await plannedAnew(page, revision);
    await page.keyboard.press("Control+z");
    expect(await plannedAnew(page, slid)).toBe(revision);
    await page.keyboard.press("Control+y");
    expect(await plannedAnew(page, revision)).toBe(slid);
  });

  it("the surface is turned and a field chosen; a panel is looked at alone", async () => {
    const { page } = desk;
    await leaf(page, 1);
    await pressed(/curvature/i)(page);
    await page.locator(".legend").getByText("Curvature (Gauss)").waitFor();
    await tabTo(page, page.getByRole("application"));
    const place = () => page.locator(".name").first().getAttribute("style");
    await expect.poll(place, SOON).toContain("translate");
    const before = await place();
    await page.keyboard.press("ArrowRight");
    await expect.poll(place, SOON).not.toBe(before);
    await leaf(page, 3);
    await pressed(/^Panel P2/)(page);
    await page.locator("g.panel > [aria-pressed=true]").waitFor();
    await page.keyboard.press("Escape");
    await page.locator("g.panel > [aria-pressed=true]").waitFor({ state: "detached" });
  });

  it("rig: the steps are gone through, an adjuster is chosen", async () => {
    const { page } = desk;
    await leaf(page, 5);
    await page.keyboard.press("]");
    await page.getByText(/^Step 1, stage/).waitFor();
    await page.keyboard.press("[");
    await page.getByText("Before the first step").waitFor();
    await pressed(/adjuster/)(page);
    await page.getByRole("heading", { name: /^What an error does to T-C\d/ }).waitFor();
    await page.keyboard.press("Escape");
  });

  it("papers: written, one looked at, all saved", async () => {
    const { page } = desk;
    await leaf(page, 6);
    await page.getByText(/files, revision/).waitFor();
    await pressed(/panels\.csv/)(page);
    await expect.poll(() => page.locator(".preview.list").innerText(), SOON).toContain("P1");
    const [saved] = await Promise.all([page.waitForEvent("download"), pressed(/^Save all papers/)(page)]);
    expect(saved.suggestedFilename()).toMatch(/\.zip$/);
  });

  it("the sheets of keys, findings and jobs open and are put away; the job is kept", async () => {
    const { page } = desk;
    await leaf(page, 6);
    for (const [key, title] of [
      ["?", "Keys"],
      ["f", "Findings"],
      ["j", "Jobs"],
    ]) {
      await page.keyboard.press(key);
      const sheet = page.getByRole("dialog", { name: title });
      await sheet.waitFor();
      await page.keyboard.press("Escape");
      await sheet.waitFor({ state: "detached" });
    }
    await page.keyboard.press("t");
    await page.getByRole("button", { name: "Colours: light" }).waitFor();
    await kept(page);
    expect(desk.faults).toEqual([]);
  });
});
