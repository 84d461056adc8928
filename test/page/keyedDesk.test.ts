// The desk and the papers by the keyboard alone: a starter, papers chosen and saved one by one, facts opened for their papers, a job
// deleted for good.
import { readFileSync } from "node:fs";
import { unzipSync } from "fflate";
import type { Download, Locator, Page } from "playwright-core";
import { describe, expect, it } from "vitest";
import { PAPER_CHOICES } from "../../src/core/papers/choosePapers.ts";
import { benchOfFile, clear, kept, LONG, SOON } from "./bench.ts";
import { awaitChoosers, givenBy, keyed, leaf, pressed, rested, tabTo, unfolded } from "./keys.ts";

const bench = benchOfFile();

/** What a button saves. */
async function saved(page: Page, button: Locator): Promise<Download> {
  await expect.poll(() => button.isEnabled(), SOON).toBe(true);
  await tabTo(page, button);
  const [download] = await Promise.all([page.waitForEvent("download"), page.keyboard.press("Enter")]);
  return download;
}

describe("the desk and the papers by keyboard alone", { timeout: LONG }, () => {
  it("from a starter to its papers, to those of its facts alone, to its end", async () => {
    const desk = await bench.open({ acceptDownloads: true });
    const { page } = desk;
    awaitChoosers(page);
    await pressed("boat shed")(page);
    await page.getByRole("navigation", { name: "Leaves" }).waitFor();
    await rested(page);
    await kept(page);

    await leaf(page, 6);
    await page.getByRole("button", { name: "panel-cards.pdf", exact: true }).waitFor();
    await unfolded("Papers to write")(page);
    await keyed(PAPER_CHOICES["panel-cards"], "Space")(page);
    await page.getByRole("button", { name: "panel-cards.pdf", exact: true }).waitFor({ state: "detached" });
    const facts = await saved(page, page.getByRole("button", { name: "Save facts.json", exact: true }));
    expect(facts.suggestedFilename()).toMatch(/facts\.json$/);

    await page.keyboard.press("Escape");
    await page.keyboard.press("j");
    await page.getByRole("dialog", { name: "Jobs" }).waitFor();
    const bytes = { name: "facts.json", mimeType: "application/json", buffer: readFileSync(await facts.path()) };
    await givenBy(page.getByLabel("Choose files"), [bytes])(page);
    const sheet = page.getByRole("dialog", { name: /^Papers of / });
    await sheet.waitFor();
    const papers = await saved(page, sheet.getByRole("button", { name: "Save all papers (zip)" }));
    const zip = unzipSync(readFileSync(await papers.path()));
    expect(Object.keys(zip)).toContain("index.pdf");
    expect(Object.keys(zip)).not.toContain("panel-cards.pdf");
    await page.keyboard.press("Escape");
    await sheet.waitFor({ state: "detached" });

    await page.keyboard.press("j");
    await pressed(/^Delete /)(page);
    await pressed(/^Delete for good: /)(page);
    await page.getByText(/^None yet\./).waitFor();
    await clear(desk);
  });
});
