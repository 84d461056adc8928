// A seam's end slid along its edge: with the mouse, a finger and the keys; its panels redrawn, the roof tied again, undone.
import type { Page } from "playwright-core";
import { beforeAll, describe, expect, it } from "vitest";
import {
  benchOfFile,
  type Desk,
  enter,
  judge,
  LONG,
  openPlanned,
  PATIENCE,
  planned,
  plannedAnew,
  SOON,
  turnTo,
} from "./bench.ts";
import { smallFiles } from "./smallForm.ts";

const bench = benchOfFile();
let desk: Desk;
let revision = "";

beforeAll(async () => {
  desk = await openPlanned(bench, smallFiles(), { hasTouch: true });
  await turnTo(desk.page, "Seams");
  await enter(desk.page, "Number of strips", "4");
  await desk.page.getByText(/between 4 panels/).waitFor({ timeout: PATIENCE });
  revision = await planned(desk.page);
}, LONG);

const grips = (page: Page) => page.getByRole("slider");
const beside = (page: Page) => page.getByRole("complementary", { name: "Panels of the seam" });
const metres = async (page: Page, i: number) => Number(await grips(page).nth(i).getAttribute("aria-valuenow"));

/** Cut areas of the drawn panels tell one shape from another. */
const shapes = (page: Page) =>
  beside(page)
    .locator("path.cut")
    .evaluateAll((all) => all.map((p) => p.getAttribute("d") ?? ""));

/** Waits until the panels beside the surface are two, and others than before. */
async function redrawn(page: Page, before: readonly string[]): Promise<string[]> {
  let now = await shapes(page);
  const end = Date.now() + PATIENCE;
  while ((now.length !== 2 || now.join() === before.join()) && Date.now() < end) {
    await page.waitForTimeout(30);
    now = await shapes(page);
  }
  expect(now.length).toBe(2);
  expect(now.join()).not.toBe(before.join());
  return now;
}

/** Middle of a grip on the screen. */
async function middleOf(page: Page, i: number): Promise<[number, number]> {
  const box = await grips(page).nth(i).boundingBox();
  if (box === null) throw new Error(`grip ${i} is not there`);
  return [box.x + box.width / 2, box.y + box.height / 2];
}

/** The place a grip would have that much farther along its edge, by its two neighbours on the screen. */
async function aside(page: Page, i: number, share: number): Promise<[number, number]> {
  const [x, y] = await middleOf(page, i);
  const [u, v] = await middleOf(page, i + 2);
  return [x + share * (u - x), y + share * (v - y)];
}

describe("a seam's end", { timeout: LONG }, () => {
  it("two grips for each seam, each on an edge", async () => {
    const { page } = desk;
    await grips(page).nth(5).waitFor();
    await expect.poll(() => grips(page).count(), SOON).toBe(6);
    for (let i = 0; i < 6; i++)
      expect(await grips(page).nth(i).getAttribute("aria-label")).toMatch(/^S\d, end on (south|north|east|west)$/);
  });

  it("slid with the mouse: its panels follow, the roof is tied again, undo takes it back", async () => {
    const { page } = desk;
    const was = await metres(page, 2);
    const others = await Promise.all([0, 1, 3, 4, 5].map((i) => metres(page, i)));
    const to = await aside(page, 2, 0.25);
    await page.mouse.move(...(await middleOf(page, 2)));
    await page.mouse.down();
    const first = await redrawn(page, []);
    await page.mouse.move(...to, { steps: 5 });
    await redrawn(page, first);
    await expect.poll(async () => Math.abs((await metres(page, 2)) - was), SOON).toBeGreaterThan(0.1);
    await page.mouse.up();
    await page.getByText(/The whole roof is tied again/).waitFor();
    const tied = await metres(page, 2);
    const next = await plannedAnew(page, revision);
    await expect.poll(async () => Math.abs((await metres(page, 2)) - tied), SOON).toBeLessThan(0.002);
    const now = await Promise.all([0, 1, 3, 4, 5].map((i) => metres(page, i)));
    now.forEach((m, i) => {
      expect(Math.abs(m - others[i])).toBeLessThan(0.002);
    });
    await page.getByRole("button", { name: /^Undo end of S/ }).click();
    expect(await plannedAnew(page, next)).toBe(revision);
    await page.waitForFunction(
      (m) => document.querySelectorAll("[role=slider]")[2]?.getAttribute("aria-valuenow") === m,
      String(was),
    );
  });

  it("slid with a finger", async () => {
    const { page, context } = desk;
    const was = await metres(page, 2);
    const cdp = await context.newCDPSession(page);
    const touch = (type: "touchStart" | "touchMove" | "touchEnd", at?: [number, number]) =>
      cdp.send("Input.dispatchTouchEvent", { type, touchPoints: at ? [{ x: at[0], y: at[1] }] : [] });
    const [x, y] = await middleOf(page, 2);
    const to = await aside(page, 2, 0.2);
    await touch("touchStart", [x, y]);
    for (const s of [0.3, 0.6, 1]) await touch("touchMove", [x + s * (to[0] - x), y + s * (to[1] - y)]);
    await redrawn(page, []);
    await touch("touchEnd");
    const next = await plannedAnew(page, revision);
    await expect.poll(async () => Math.abs((await metres(page, 2)) - was), SOON).toBeGreaterThan(0.1);
    await page.keyboard.press("Control+z");
    await plannedAnew(page, next);
  });

  it("slid with the keys by 10 and 100 mm; Escape puts it back, Enter lets go", async () => {
    const { page } = desk;
    await grips(page).nth(5).waitFor();
    const was = await metres(page, 4);
    await grips(page).nth(4).focus();
    await page.keyboard.press("ArrowRight");
    await expect.poll(() => metres(page, 4), SOON).toBeCloseTo(was + 0.01, 3);
    await page.keyboard.press("Escape");
    await expect.poll(() => metres(page, 4), SOON).toBeCloseTo(was, 3);
    await page.keyboard.press("Shift+ArrowLeft");
    await page.keyboard.press("ArrowLeft");
    await page.keyboard.press("Enter");
    await page.getByText(/The whole roof is tied again/).waitFor();
    await plannedAnew(page, revision);
    await expect.poll(() => metres(page, 4), SOON).toBeCloseTo(was - 0.11, 2);
    // the same grip is at hand for the next step: it did not go while the roof was tied
    await page.waitForFunction(() => document.querySelectorAll("[role=slider]")[4] === document.activeElement);
    await page.getByText("Seams by hand").waitFor();
  });

  it("an end that cannot lie there says why, and stays where it last could", async () => {
    const { page } = desk;
    const before = await planned(page);
    const was = await metres(page, 2);
    const over = await aside(page, 2, 1.5);
    await page.mouse.move(...(await middleOf(page, 2)));
    await page.mouse.down();
    await redrawn(page, []);
    await page.mouse.move(...over);
    await beside(page)
      .getByText(/would cross another seam/)
      .waitFor();
    await page.mouse.up();
    await beside(page)
      .getByText(/Slide a seam's end/)
      .waitFor();
    await expect.poll(() => metres(page, 2), SOON).toBeCloseTo(was, 3);
    expect(await planned(page)).toBe(before);
  });

  it("layouts side by side: each with figures and a drawing, one is taken and says why", async () => {
    const { page } = desk;
    const before = await planned(page);
    await page.getByRole("button", { name: "Compare layouts" }).click();
    const cards = page.getByRole("list", { name: "Layouts side by side" }).getByRole("listitem");
    await page.getByText(/^All \d layouts are worked out/).waitFor();
    await expect.poll(() => cards.count(), SOON).toBeGreaterThan(2);
    await cards.first().getByText("As it stands").waitFor();
    const other = cards.filter({ has: page.getByRole("button", { name: /^Take \d strips/ }) }).first();
    const wanted = Number(/(\d+) strips/.exec(await other.innerText())?.[1]);
    await expect.poll(() => other.locator("path.weld").count(), SOON).toBe(wanted - 1);
    expect(await judge(page)).toEqual([]);
    await other.getByRole("button").click();
    await plannedAnew(page, before);
    await page.getByText(new RegExp(`between ${wanted} panels`)).waitFor();
    await expect
      .poll(() => page.getByLabel("Why this layout").inputValue(), SOON)
      .toMatch(/compared: .* panels, .* m of seam/);
    await page.getByText(/Taken because: /).waitFor();
    await enter(page, "Number of strips", String(wanted + 1));
    await page.getByText(new RegExp(`between ${wanted + 1} panels`)).waitFor({ timeout: PATIENCE });
    await expect.poll(() => page.getByLabel("Why this layout").count(), SOON).toBe(0);
  });

  it("nothing went wrong on the way", () => {
    expect(desk.faults).toEqual([]);
  });
});
