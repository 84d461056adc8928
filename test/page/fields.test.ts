// Decisions that were once only in the job file: each is made in place, with its unit, and its effect seen.
import type { Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import {
  type Bench,
  type Desk,
  enter,
  fieldOf,
  focused,
  LONG,
  planned,
  plannedAnew,
  SOON,
  setUp,
  shows,
  turnTo,
} from "./bench.ts";
import { sailFiles, smallFiles } from "./smallForm.ts";

let bench: Bench;
beforeAll(async () => {
  bench = await setUp();
}, LONG);
afterAll(() => bench?.close());

async function openWith(files: ReturnType<typeof smallFiles>): Promise<Desk & { revision: string }> {
  const desk = await bench.open();
  await desk.page.getByLabel("Choose files").setInputFiles(files);
  return { ...desk, revision: await planned(desk.page) };
}

/** Codes of all findings of the plan on the desk. */
async function codes(page: Page): Promise<string[]> {
  await page.keyboard.press("Escape");
  await page.getByRole("button", { name: /notes?$/ }).click();
  const sheet = page.getByRole("dialog", { name: "Findings" });
  const all = await sheet.locator(".basis").allInnerTexts();
  await page.keyboard.press("Escape");
  await sheet.waitFor({ state: "detached" });
  return all.map((t) => t.split(" ")[0]);
}

/** Left edges of what lies on the first roll, on the screen. */
const lefts = async (page: Page) =>
  (
    await page.locator("svg.roll g.placed path").evaluateAll((all) => all.map((g) => g.getBoundingClientRect().left))
  ).sort((a, b) => a - b);

describe("decisions in place", { timeout: LONG }, () => {
  it("a flaw on a roll is kept clear, and removed again", async () => {
    const { page, context, faults, revision } = await openWith(smallFiles());
    await turnTo(page, "Rolls");
    const row = page.getByRole("row", { name: "Taken off" }).first().locator("td");
    const taken = async () => Number.parseFloat(await row.innerText());
    const before = await taken();
    await page.getByRole("button", { name: "Mark a flaw on R1" }).click();
    await enter(page, "Flaw 1 of R1 is long", "900");
    await enter(page, "Flaw 1 of R1 is wide", "1400");
    const flawed = await plannedAnew(page, revision);
    await expect.poll(taken, SOON).toBeGreaterThan(before + 0.8);
    expect((await lefts(page)).length).toBeGreaterThan(0);
    await fieldOf(page, "Flaw 1 of R1 is measured from").selectOption("end");
    await plannedAnew(page, flawed);
    await expect.poll(taken, SOON).toBeLessThan(before + 0.1);
    await page.getByRole("button", { name: "Remove flaw 1" }).click();
    await page.getByLabel("Flaw 1 of R1 is long").waitFor({ state: "detached" });
    await expect.poll(async () => planned(page), SOON).toBe(revision);
    expect(faults).toEqual([]);
    await context.close();
  });

  it("the form is asked for its prestress, laps count twice, a clamped edge is surveyed", async () => {
    const { page, context, faults, revision } = await openWith(smallFiles());
    await fieldOf(page, "Prestress is taken").selectOption("balance");
    const asked = await plannedAnew(page, revision);
    await expect.poll(() => codes(page), SOON).toContainEqual(expect.stringMatching(/^cloth-stress-(balance|open)$/));
    await page.getByRole("button", { name: "Undo where prestress is taken from" }).click();
    expect(await plannedAnew(page, asked)).toBe(revision);
    await turnTo(page, "Seams");
    await page.getByLabel("Laps count as two layers of cloth").check();
    const doubled = await plannedAnew(page, revision);
    await expect.poll(() => codes(page), SOON).toContain("seam-double");
    await turnTo(page, "Site");
    await page.getByText("Survey (0)").click();
    await fieldOf(page, "It lies at").selectOption("edge south");
    await page.getByLabel("Along the edge, % of its length").fill("50");
    for (const [axis, value] of [
      ["x", "3"],
      ["y", "-0.02"],
      ["z", "0.6"],
    ])
      await page.getByLabel(`Where south really is, ${axis}`).fill(value);
    await page.getByLabel("Where south really is, z").press("Enter");
    await page.getByText("Survey (1)").waitFor();
    const surveyed = await plannedAnew(page, doubled);
    await expect.poll(() => codes(page), SOON).toContain("survey-clamped");
    await page.getByLabel("The cloth is cut already").check();
    await plannedAnew(page, surveyed);
    await expect.poll(() => codes(page), SOON).toContain("survey-stress");
    await page.getByRole("button", { name: /^Remove the survey of south/ }).click();
    await page.getByText("Survey (0)").waitFor();
    expect(faults).toEqual([]);
    await context.close();
  });

  it("limits of the roof as built, capacities, end fittings, a surveyed pin; what cannot be together is said", async () => {
    const { page, context, faults, revision } = await openWith(sailFiles());
    await fieldOf(page, "Prestress is taken").selectOption("balance");
    const alert = page.getByRole("alert");
    await alert.getByText(/take one of the two out of the job/).waitFor();
    await alert.getByRole("button", { name: "Show me" }).click();
    await focused(page, "prestress.from");
    await alert.getByRole("button", { name: "Undo" }).click();
    expect(await planned(page)).toBe(revision);
    await page.getByText("How the cable is made").first().click();
    await enter(page, "First end fitting takes off", "120");
    let now = await plannedAnew(page, revision);
    await turnTo(page, "Rig");
    await page.getByText("Limits of the roof as built").click();
    await enter(page, "Mean stress as built may be off by", "0.0001");
    now = await plannedAnew(page, now);
    await expect.poll(() => codes(page), SOON).toContain("built-mean");
    await enter(page, /^Anchor of .*C1 carries/, "10");
    now = await plannedAnew(page, now);
    await turnTo(page, "Site");
    await page.getByText("Survey (0)").click();
    await fieldOf(page, "It lies at").selectOption("anchor C1");
    for (const [axis, value] of [
      ["x", "-0.75"],
      ["y", "-0.65"],
      ["z", "2.9"],
    ])
      await page.getByLabel(`Where C1 really is, ${axis}`).fill(value);
    await page.getByLabel("Where C1 really is, z").press("Enter");
    now = await plannedAnew(page, now);
    await expect.poll(() => codes(page), SOON).toContainEqual(expect.stringMatching(/^survey-(pin|anchor)$/));
    await turnTo(page, "Papers");
    await enter(page, "Takes the place of issue", "0");
    await shows(page, "Takes the place of issue", "0");
    await plannedAnew(page, now);
    await page.getByText(/files, revision/).waitFor();
    expect(faults).toEqual([]);
    await context.close();
  });
});
