// As a newcomer goes: from the first view to a starter planned on wider rolls and its papers saved for printing, with nothing but what
// stands on the page; and the surface of a roof clamped all round, coloured by what it carries.
import { readFileSync } from "node:fs";
import { unzipSync } from "fflate";
import { describe, expect, it } from "vitest";
import { benchOfFile, judge, LONG, planned, plannedAnew, SOON } from "./bench.ts";

const bench = benchOfFile();

describe("a newcomer", { timeout: LONG }, () => {
  it("plans the market hall on wider rolls and has its papers", async () => {
    const { page, context, faults } = await bench.open({ acceptDownloads: true });
    await page.getByText("Begin with a starter").waitFor();
    await page.getByText("market hall", { exact: true }).click();
    const first = await planned(page);
    await page.getByText("Rolls", { exact: true }).click();
    await page.getByText("Which cloth, and where on it?").waitFor();
    const width = page.getByLabel("Width over all").first();
    await width.waitFor();
    const before = Number(await width.inputValue());
    const taken = page.getByRole("row", { name: "Taken off" }).first().locator("td");
    const metres = async () => Number.parseFloat(await taken.innerText());
    const long = await metres();
    await width.fill(String(before + 1000));
    await width.press("Enter");
    const wider = await plannedAnew(page, first);
    await expect.poll(metres, SOON).toBeLessThan(long);
    await page.getByText("Papers", { exact: true }).click();
    await page.getByText(new RegExp(`files, revision ${wider.split(" ").at(-1)}`)).waitFor();
    const [download] = await Promise.all([
      page.waitForEvent("download"),
      page.getByText("Save all papers (zip)").click(),
    ]);
    const papers = unzipSync(readFileSync(await download.path()));
    for (const paper of ["panel-cards.pdf", "roll-sheets.pdf", "findings.pdf"])
      expect(new TextDecoder().decode(papers[paper]?.subarray(0, 5)), paper).toBe("%PDF-");
    const { rolls } = JSON.parse(new TextDecoder().decode(papers["facts.json"]));
    expect(rolls[0].width).toBe(before + 1000);
    await page.getByText("Panels", { exact: true }).click();
    await page.getByText("warp stress as patterned").click();
    await page.getByText("middle: the wanted").waitFor();
    expect(await judge(page)).toEqual([]);
    expect(faults).toEqual([]);
    await context.close();
  });
});
