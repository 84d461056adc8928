// Which papers are written is chosen on the page, and a facts.json alone gives its papers: either way those of the command line, byte
// for byte; what is on the desk stays as it is.
import { readFileSync } from "node:fs";
import { unzipSync } from "fflate";
import type { Page } from "playwright-core";
import { describe, expect, it } from "vitest";
import { loadCatalogues, loadFonts } from "../../src/cli/packageFiles.ts";
import { PAPER_CHOICES, type PaperChoice } from "../../src/core/papers/choosePapers.ts";
import { writePapers } from "../../src/core/papers/writePapers.ts";
import { writeFactsJson } from "../../src/core/plan/factsFile.ts";
import { readPlanInput } from "../../src/core/plan/readPlanInput.ts";
import { runPlan } from "../../src/core/plan/runPlan.ts";
import { benchOfFile, clear, LONG, openPlanned, planned, SOON, turnTo } from "./bench.ts";
import { SAIL_JOB, smallFiles, smallSail } from "./smallForm.ts";

const bench = benchOfFile();

/** Bytes of the facts.json the command line writes for a sail, whose name the sheets have no letters for. */
async function planSail(): Promise<Uint8Array> {
  const given = { value: { ...SAIL_JOB, title: "Sail 漢" }, findings: [] };
  const mesh = () => ({ bytes: new TextEncoder().encode(smallSail()), name: "sail.obj" });
  const input = readPlanInput(given, loadCatalogues(), mesh);
  const facts = runPlan(input.job, input.source, { revision: input.revision }, {});
  const { findings } = await writePapers(facts, { fonts: loadFonts() });
  return writeFactsJson({ ...facts, findings });
}

/** What the command line writes of these facts. */
async function write(facts: Uint8Array, papers?: PaperChoice[]): Promise<Record<string, string>> {
  const given = JSON.parse(new TextDecoder().decode(facts));
  const { files, findings } = await writePapers(given, { fonts: loadFonts(), ...(papers ? { papers } : {}) });
  const all = [{ path: "facts.json", bytes: writeFactsJson({ ...given, findings }) as Uint8Array }, ...files];
  return Object.fromEntries(all.map((f) => [f.path, Buffer.from(f.bytes).toString("latin1")]));
}

/** The files of the bundle the page hands to the downloads, once its papers are written. */
async function saveBundle(page: Page): Promise<Record<string, string>> {
  const save = page.getByRole("button", { name: "Save all papers (zip)" });
  await expect.poll(() => save.isEnabled(), SOON).toBe(true);
  const [download] = await Promise.all([page.waitForEvent("download"), save.click()]);
  const zip = unzipSync(readFileSync(await download.path()));
  return Object.fromEntries(Object.entries(zip).map(([path, bytes]) => [path, Buffer.from(bytes).toString("latin1")]));
}

const choose = (page: Page, choice: PaperChoice, on: boolean) =>
  page.getByRole("checkbox", { name: PAPER_CHOICES[choice] }).setChecked(on);

async function openFacts(page: Page, bytes: Uint8Array): Promise<void> {
  await page.keyboard.press("j");
  const file = { name: "facts.json", mimeType: "application/json", buffer: Buffer.from(bytes) };
  await page.getByLabel("Choose files").setInputFiles([file]);
}

describe("papers chosen, and papers of facts alone", { timeout: LONG }, () => {
  it("facts.json opened beside a job: its papers are the command line's, the job stays", async () => {
    const desk = await openPlanned(bench, smallFiles(), { acceptDownloads: true });
    const { page, revision } = desk;
    const facts = await planSail();
    await openFacts(page, facts);
    const sheet = page.getByRole("dialog", { name: "Papers of Sail 漢" });
    await sheet.getByText(/No decision can be changed here/).waitFor();
    const wanted = await write(facts);
    expect(wanted["facts.json"]).toBe(Buffer.from(facts).toString("latin1"));
    expect(await saveBundle(page)).toEqual(wanted);
    await choose(page, "panel-cards", false);
    await choose(page, "arcs", true);
    const chosen = ["cut-files", "dxf2000", "arcs", "roll-sheets", "lists", "rig", "findings", "index"] as const;
    const less = await write(facts, [...chosen]);
    expect(Object.keys(less)).toEqual(expect.arrayContaining([expect.stringMatching(/^rolls\/arcs\/.+\.dxf$/)]));
    expect(Object.keys(less)).not.toContain("panel-cards.pdf");
    await sheet.getByRole("button", { name: "index.pdf", exact: true }).waitFor();
    expect(await saveBundle(page)).toEqual(less);
    // a broken one is said on the sheet with its name
    const broken = JSON.parse(new TextDecoder().decode(facts));
    for (const p of broken.panels) p.cut = 1;
    await page.keyboard.press("Escape");
    await openFacts(page, new TextEncoder().encode(JSON.stringify(broken)));
    await sheet
      .getByRole("alert")
      .getByText(/^facts\.json: no papers can be drawn from it/)
      .waitFor();
    await page.keyboard.press("Escape");
    expect(await planned(page)).toBe(revision);
    await page.getByRole("button", { name: "Seamstay Ticket booth, open the list of jobs" }).waitFor();
    await clear(desk);
  });

  it("the choice on the leaf is what is written, and is there again after a reload; a list is shown as a table", async () => {
    const desk = await openPlanned(bench, smallFiles(), { acceptDownloads: true });
    const { page } = desk;
    await turnTo(page, "Papers");
    const kinds = page.getByText(/^Papers to write: \d of 9 kinds$/);
    await kinds.click();
    for (const c of ["cut-files", "dxf2000", "roll-sheets", "panel-cards", "rig", "findings"] as const)
      await choose(page, c, false);
    await expect.poll(() => kinds.innerText(), SOON).toBe("Papers to write: 2 of 9 kinds");
    await page.getByText(/^\d files, revision/).waitFor();
    const zip = await saveBundle(page);
    const facts = Buffer.from(zip["facts.json"], "latin1");
    expect(zip).toEqual(await write(facts, ["lists", "index"]));
    await page.getByRole("button", { name: "panels.csv", exact: true }).click();
    const table = page.getByRole("table", { name: "panels.csv" });
    await table.getByRole("cell", { name: "P1", exact: true }).waitFor();
    expect(await table.getByRole("columnheader").count()).toBe(zip["panels.csv"].split("\r\n")[0].split(",").length);
    await page.reload();
    await page.getByText(/^\d files, revision/).waitFor();
    await kinds.click();
    await expect.poll(() => page.getByRole("checkbox", { name: PAPER_CHOICES.rig }).isChecked(), SOON).toBe(false);
    await clear(desk);
  });

  it("papers stopped while they are written: the plan stands, and they are written when asked for again", async () => {
    // the faces are held back, so that writing lasts; the offline copy would hand them over
    const desk = await openPlanned(bench, smallFiles(), { serviceWorkers: "block" });
    const { page, revision } = desk;
    let hold = true;
    await page.route(/\.ttf$/, (route) => (hold ? undefined : route.continue()));
    await turnTo(page, "Papers");
    await page.getByRole("button", { name: "Stop writing" }).dblclick();
    await page.getByRole("alert").getByText("Stopped. The plan stands as it was.").waitFor();
    expect(await planned(page)).toBe(revision);
    hold = false;
    await page.getByRole("button", { name: "Write the papers" }).click();
    await page.getByText(/files, revision/).waitFor();
    await clear(desk);
  });
});
