// Every act by the keyboard alone: no pointer is used, whatever is wanted is reached with Tab, the arrow keys, or a key of the sheet.
import type { Locator, Page } from "playwright-core";
import { beforeAll, describe, expect, it } from "vitest";
import { benchOfFile, type Desk, kept, LONG, planned, plannedAnew, SOON } from "./bench.ts";
import { SAIL_JOB, sailFiles } from "./smallForm.ts";

const bench = benchOfFile();
let desk: Desk;
let revision = "";

beforeAll(async () => {
  desk = await bench.open();
}, LONG);

const isFocused = (goal: Locator) =>
  goal.evaluateAll((all) => all.some((e) => e === document.activeElement || e.contains(document.activeElement)));

/** Goes on with Tab until the focus is in a goal; a page whose goal no Tab reaches fails here. */
async function tabTo(page: Page, goal: Locator): Promise<void> {
  await goal.first().waitFor();
  for (let i = 0; i < 600; i++) {
    if (await isFocused(goal)) return;
    await page.keyboard.press("Tab");
  }
  throw new Error(`no Tab leads to ${goal}`);
}

/** Types into a field that Tab leads to. */
async function type(page: Page, label: string | RegExp, text: string): Promise<void> {
  await tabTo(page, page.getByLabel(label).first());
  await page.keyboard.press("Control+a");
  await page.keyboard.type(text);
  await page.keyboard.press("Enter");
}

/** Presses a button that Tab leads to. */
async function press(page: Page, name: string | RegExp, key: "Enter" | "Space" = "Enter"): Promise<void> {
  await tabTo(page, page.getByRole("button", { name }).first());
  await page.keyboard.press(key);
}

/** Leaves a field, so that the keys of the sheet are heard, and opens a leaf by its number. */
async function leaf(page: Page, number: number, question: string): Promise<void> {
  if (await isFocused(page.locator("input, select"))) await page.keyboard.press("Tab");
  while (await isFocused(page.locator("input, select"))) await page.keyboard.press("Tab");
  await page.keyboard.press(String(number));
  await page.getByRole("heading", { name: question }).waitFor();
}

describe("by keyboard alone", { timeout: LONG }, () => {
  it("a job is opened, stopped and planned again", async () => {
    const { page } = desk;
    const [chooser] = await Promise.all([
      page.waitForEvent("filechooser"),
      tabTo(page, page.getByLabel("Choose files")).then(() => page.keyboard.press("Enter")),
    ]);
    // So many steps of search that nesting lasts until it is stopped.
    await chooser.setFiles(sailFiles({ ...SAIL_JOB, nest: { steps: 1e7 } }));
    await page.getByRole("progressbar", { name: "Planning" }).waitFor();
    await page.keyboard.press("Escape");
    await leaf(page, 4, "Which cloth, and where on it?");
    await page.keyboard.press(".");
    await page.getByText("Stopped", { exact: true }).waitFor();
    await type(page, "Steps of search", "1");
    revision = await planned(page);
  });

  it("seams: taken in hand, one added, evened, one removed, an end slid, undone and done again", async () => {
    const { page } = desk;
    await leaf(page, 2, "Where do the seams run?");
    await press(page, "Take these seams in hand");
    await page.getByText("Seams by hand").waitFor();
    await press(page, "Add one after");
    await page.getByText(/between 4 panels/).waitFor();
    await press(page, "Even them out", "Space");
    await expect.poll(() => page.getByRole("button", { name: "Undo seams evened" }).count(), SOON).toBe(1);
    await press(page, "Remove");
    await page.getByText(/between 3 panels/).waitFor();
    revision = await planned(page);
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
    revision = slid;
  });

  it("the surface is turned and a field chosen; a panel is looked at alone", async () => {
    const { page } = desk;
    await leaf(page, 1, "Is this surface in balance, and at which forces?");
    await press(page, "curvature");
    await page.locator(".legend").getByText("Curvature (Gauss)").waitFor();
    await tabTo(page, page.getByRole("application"));
    const place = () => page.locator(".name").first().getAttribute("style");
    await expect.poll(place, SOON).toContain("translate");
    const before = await place();
    await page.keyboard.press("ArrowRight");
    await expect.poll(place, SOON).not.toBe(before);
    await leaf(page, 3, "What is cut, and what stress will it take?");
    await press(page, /^Panel P2/);
    await page.locator("g.panel[aria-pressed=true]").waitFor();
    await page.keyboard.press("Escape");
    await page.locator("g.panel[aria-pressed=true]").waitFor({ state: "detached" });
  });

  it("a decision in a field, a choice, a switch", async () => {
    const { page } = desk;
    await leaf(page, 3, "What is cut, and what stress will it take?");
    await type(page, "Overlap of a seam", "60");
    revision = await plannedAnew(page, revision);
    await tabTo(page, page.getByLabel("Overlap lies on"));
    await page.keyboard.press("ArrowDown");
    revision = await plannedAnew(page, revision);
    await tabTo(page, page.getByLabel("Pockets are strips of their own"));
    await page.keyboard.press("Space");
    revision = await plannedAnew(page, revision);
  });

  it("rolls: a panel is pinned and let go", async () => {
    const { page } = desk;
    await leaf(page, 4, "Which cloth, and where on it?");
    await tabTo(page, page.locator("svg.roll [role=button]"));
    await page.keyboard.press("ArrowRight");
    revision = await plannedAnew(page, revision);
    await press(page, "Let go");
    revision = await plannedAnew(page, revision);
  });

  it("rig: the steps are gone through, an adjuster is chosen", async () => {
    const { page } = desk;
    await leaf(page, 5, "How is it pulled up?");
    await page.keyboard.press("]");
    await page.getByText(/^Step 1, stage/).waitFor();
    await page.keyboard.press("[");
    await page.getByText("Before the first step").waitFor();
    await press(page, /adjuster/);
    await page.getByRole("heading", { name: /^What an error does to T-C\d/ }).waitFor();
    await page.keyboard.press("Escape");
  });

  it("papers: written, one looked at, all saved", async () => {
    const { page } = desk;
    await leaf(page, 6, "What leaves the office?");
    await page.getByText(/files, revision/).waitFor();
    await press(page, "panels.csv");
    await expect.poll(() => page.locator(".preview.list").innerText(), SOON).toContain("P1");
    const [saved] = await Promise.all([page.waitForEvent("download"), press(page, "Save all papers (zip)")]);
    expect(saved.suggestedFilename()).toMatch(/\.zip$/);
  });

  it("site: a reading is written down, struck, and corrections are worked out", async () => {
    const { page } = desk;
    await leaf(page, 7, "What does the roof say?");
    await press(page, "T-C1");
    await type(page, "Force, kN", "12");
    await press(page, "Write it into the log");
    await page.getByText("1 reading in the log.").waitFor();
    await press(page, /^Strike/);
    await page.getByText("1 reading in the log, 1 of them struck.").waitFor();
    await press(page, /^Count again/);
    await page.getByText("1 reading in the log.").waitFor();
    await press(page, /^Work out corrections/);
    await page.getByRole("table", { name: "What the readings say, and the forecast" }).waitFor();
  });

  it("the sheets of keys, findings and jobs open and are put away; the job is kept", async () => {
    const { page } = desk;
    await leaf(page, 6, "What leaves the office?");
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
