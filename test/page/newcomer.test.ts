// As a newcomer goes: from the first view to a starter planned on wider rolls, its papers looked at, printed and saved, and the job found
// again, with nothing but what stands on the page; and the surface of a roof clamped all round, coloured by what it carries.
import { readFileSync } from "node:fs";
import { unzipSync } from "fflate";
import { PDFDocument } from "pdf-lib";
import type { Locator, Page } from "playwright-core";
import { describe, expect, it } from "vitest";
import type { Facts } from "../../src/core/records/facts.ts";
import { missing, wordsOf } from "../papers/made/madePapers.ts";
import { benchOfFile, judge, kept, LONG, planned, plannedAnew, SOON, turnTo } from "./bench.ts";

const bench = benchOfFile();

const press = (page: Page, name: string | RegExp) => page.getByRole("button", { name, exact: true }).click();

/** What the first line of words that begins so says. */
const line = (page: Page, begin: RegExp) => page.getByText(begin).first();

/** Number in words, once they stand. @param at a group of digits */
async function numberIn(words: Locator, at: RegExp): Promise<number> {
  await words.waitFor();
  return Number.parseFloat(at.exec((await words.innerText()).replaceAll("\u00a0", " "))?.[1] ?? "NaN");
}

const width = (page: Page) => page.getByRole("textbox", { name: "Width over all" });

/** What a row of the figures says, without what it is held against. */
const told = (page: Page, row: string) =>
  expect.poll(() => page.getByRole("row", { name: row }).first().locator("td").innerText(), SOON);

/** Files in the zip a button saves. */
async function saved(page: Page, button: string): Promise<{ path: string; files: Record<string, Uint8Array> }> {
  const save = page.getByRole("button", { name: button });
  await expect.poll(() => save.isEnabled(), SOON).toBe(true);
  const [download] = await Promise.all([page.waitForEvent("download"), save.click()]);
  const path = await download.path();
  return { path, files: unzipSync(readFileSync(path)) };
}

/** The words the page gives under a sheet. */
async function readSheet(page: Page, paper: string, sheet: number): Promise<Locator> {
  await press(page, paper);
  const place = page.getByRole("group", { name: `Paper ${paper}` });
  for (let n = 1; n < sheet; n++) await press(page, "Next sheet ›");
  await place.getByText(`Words of sheet ${sheet}`).click();
  return place.locator("pre");
}

describe("a newcomer", { timeout: LONG }, () => {
  it("plans the market hall on wider rolls, prints its papers, saves them, and finds the job again", async () => {
    const { page, context, faults } = await bench.open({ acceptDownloads: true });
    // the tool that drives the browser prints by itself: the page's own print only says that it was asked for
    await context.addInitScript("window.print = () => { window.asked = (window.asked ?? 0) + 1; }");
    await page.reload();

    await page.getByRole("heading", { name: "Begin with a starter" }).waitFor();
    await press(page, "market hall");
    const first = await planned(page);

    await turnTo(page, "Seams");
    const wider = line(page, /^Wider cloth: /);
    const strips = await numberIn(wider, /in place of (\d+)/);
    const least = await numberIn(wider, /rolls of about ([\d.]+) m/);
    const hundreds = Math.ceil(least * 10 + 0.3) * 100;
    await press(page, "Set the rolls’ width");
    await page.getByText("Which cloth, and where on it?").waitFor();
    await expect.poll(() => width(page).evaluate((field) => field === document.activeElement), SOON).toBe(true);
    const before = Number(await width(page).inputValue());
    expect(hundreds).toBeGreaterThan(before);
    await told(page, "Width").toBe(`${before}\u00a0mm`);
    // over what stands there, as it is found
    await page.keyboard.type("wide");
    await page.keyboard.press("Enter");
    await page.getByRole("alert").filter({ hasText: "“wide” is no length: give it in mm" }).waitFor();
    // more than can be: the field is far below the reason, and the head leads to it
    await width(page).fill("250000");
    await width(page).press("Enter");
    await press(page, "Failed: why?");
    const reason = page.getByRole("alert").filter({ hasText: "Not planned." });
    const inSight = () =>
      reason.evaluate((e) => e.contains(document.elementFromPoint(innerWidth / 2, e.getBoundingClientRect().top + 9)));
    await expect.poll(inSight, SOON).toBe(true);
    // as the sentence gives it
    await width(page).fill(`${hundreds / 1000} m`);
    await width(page).press("Enter");

    const anew = await plannedAnew(page, first);
    const revision = anew.split(" ").at(-1) ?? "";
    await told(page, "Width").toBe(`${hundreds}\u00a0mm`);
    const change = line(page, /^Last change: /);
    await expect
      .poll(() => change.innerText(), SOON)
      .toMatch(new RegExp(`panels ${strips} → ${strips - 1}, weld .* taken off the rolls .* cloth .* offcut`));
    const metres = {
      was: await numberIn(change, /rolls ([\d.]+) →/),
      is: await numberIn(change, /rolls .*? → ([\d.]+)/),
    };
    expect(metres.is).toBeLessThan(metres.was);
    await turnTo(page, "Panels");
    await page.getByText(new RegExp(`^${strips - 1} panels, `)).waitFor();

    await turnTo(page, "Papers");
    await page.getByText(new RegExp(`files, revision ${revision}`)).waitFor();
    // what can be printed lies on top
    await page.getByRole("group", { name: "Paper index.pdf" }).waitFor();
    const rollSheet = await readSheet(page, "roll-sheets.pdf", 1);
    await expect.poll(() => rollSheet.innerText(), SOON).toContain(revision);
    await expect.poll(() => rollSheet.innerText(), SOON).toMatch(new RegExp(`\\b${hundreds}\\b`));
    await press(page, "Print");
    await expect.poll(() => page.evaluate("window.asked"), SOON).toBe(1);
    const printed = await PDFDocument.load(await page.pdf({ preferCSSPageSize: true }));
    const { files } = await saved(page, "Save all papers (zip)");
    expect(printed.getPageCount()).toBe((await PDFDocument.load(files["roll-sheets.pdf"])).getPageCount());

    const facts = JSON.parse(new TextDecoder().decode(files["facts.json"])) as Facts;
    expect(facts.job.revision).toBe(revision);
    expect(facts.rolls?.map((r) => r.width)).toEqual([hundreds]);
    expect(facts.panels).toHaveLength(strips - 1);
    expect((facts.rolls?.[0].used ?? Number.NaN) / 1000).toBeCloseTo(metres.is, 2);
    for (const paper of ["index.pdf", "panel-cards.pdf", "roll-sheets.pdf", "findings.pdf"]) {
      expect(new TextDecoder().decode(files[paper]?.subarray(0, 5)), paper).toBe("%PDF-");
      if (missing.length > 0) continue;
      const words = wordsOf(files[paper]).words.map((w) => w.text);
      expect(words, paper).toContain(revision);
      if (paper === "roll-sheets.pdf") expect(words).toContain(String(hundreds));
      if (paper === "roll-sheets.pdf") expect(words).not.toContain(String(before));
    }

    const job = await saved(page, "Save the job with its mesh");
    await kept(page);
    await page.evaluate(() => dispatchEvent(new Event("afterprint")));
    await page.close();
    // by the list of jobs on the same machine, and by the file on another
    const again = await context.newPage();
    await again.goto(bench.url);
    await press(again, "Market hall, east canopy");
    const other = await bench.open();
    await other.page
      .getByLabel("Choose files")
      .setInputFiles([{ name: "job.zip", mimeType: "application/zip", buffer: readFileSync(job.path) }]);
    for (const found of [again, other.page]) {
      await expect.poll(() => planned(found), SOON).toBe(anew);
      await turnTo(found, "Rolls");
      await expect.poll(() => width(found).inputValue(), SOON).toBe(String(hundreds));
    }
    expect([...faults, ...other.faults]).toEqual([]);
    await other.context.close();
    await context.close();
  });

  it("sees what the cloth of a roof clamped all round carries", async () => {
    const { page, context, faults } = await bench.open();
    await press(page, "market hall");
    await planned(page);
    await turnTo(page, "Panels");
    await press(page, "warp stress as patterned");
    await page.getByText("middle: the wanted").waitFor();
    await expect.poll(() => judge(page), SOON).toEqual([]);
    expect(faults).toEqual([]);
    await context.close();
  });
});
