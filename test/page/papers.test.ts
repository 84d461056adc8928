// From files dropped onto the page to the papers of the command line, byte for byte.
import { createHash } from "node:crypto";
import { mkdtempSync, readFileSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { unzipSync } from "fflate";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { loadCatalogues, loadFonts } from "../../src/cli/packageFiles.ts";
import { readInput } from "../../src/cli/readInput.ts";
import { writePapers } from "../../src/core/papers/writePapers.ts";
import { runPlan } from "../../src/core/plan/runPlan.ts";
import type { Facts } from "../../src/core/records/facts.ts";
import { type Bench, PATIENCE, planned, setUp, turnTo } from "./bench.ts";
import { SMALL_JOB, smallFiles, smallForm } from "./smallForm.ts";

let bench: Bench;
beforeAll(async () => {
  bench = await setUp("papers");
}, PATIENCE);
afterAll(() => bench.close());

const hash = (bytes: Uint8Array) => createHash("sha256").update(bytes).digest("hex");

describe("papers of the page", () => {
  it(
    "come from dropped files, equal those of the command line, and no request leaves the origin",
    async () => {
      const { page, context, requests, faults } = await bench.open({ acceptDownloads: true });
      const files = smallFiles().map((f) => ({ name: f.name, text: f.buffer.toString("utf8") }));
      const transfer = await page.evaluateHandle((given) => {
        const data = new DataTransfer();
        for (const { name, text } of given) data.items.add(new File([text], name));
        return data;
      }, files);
      await page.dispatchEvent("body", "drop", { dataTransfer: transfer });
      await planned(page);
      await turnTo(page, "Papers");
      const save = page.getByRole("button", { name: "Save all papers (zip)" });
      await page.getByText(/files, revision/).waitFor({ timeout: PATIENCE });
      const [download] = await Promise.all([page.waitForEvent("download"), save.click()]);
      const zip = unzipSync(readFileSync(await download.path()));
      const names = Object.keys(zip).sort();
      expect(names).toContain("rolls/R1.dxf");
      expect(names).toContain("panel-cards.pdf");

      const facts = JSON.parse(new TextDecoder().decode(zip["facts.json"])) as Facts;
      const own = await writePapers(facts, { fonts: loadFonts() });
      expect(names).toEqual(["facts.json", ...own.files.map((f) => f.path)].sort());
      for (const { path, bytes } of own.files) expect(`${path} ${hash(zip[path])}`).toBe(`${path} ${hash(bytes)}`);

      checkSamePlan(facts);
      expect(requests.every((url) => url.startsWith(bench.url) || url.startsWith(`blob:${bench.url}`))).toBe(true);
      expect(requests.length).toBeGreaterThan(5);
      expect(faults).toEqual([]);
      await context.close();
    },
    PATIENCE,
  );
});

/** The same job planned here: same revision, same layout within 0.001 mm (design.md: engines differ in the last bit). */
function checkSamePlan(facts: Facts): void {
  const folder = mkdtempSync(join(tmpdir(), "seamstay-page-"));
  writeFileSync(join(folder, "booth.obj"), smallForm());
  writeFileSync(join(folder, "job.json"), JSON.stringify(SMALL_JOB));
  const input = readInput(join(folder, "job.json"), loadCatalogues());
  const here = runPlan(input.job, input.source, { revision: input.revision }, {});
  expect(facts.job.revision).toBe(here.job.revision);
  expect(facts.panels?.length).toBe(here.panels?.length);
  for (const [i, p] of (here.panels ?? []).entries()) {
    const off = p.flat.map(([x, y], k) => Math.hypot(x - facts.panels![i].flat[k][0], y - facts.panels![i].flat[k][1]));
    expect(Math.max(...off)).toBeLessThan(0.001);
  }
  for (const [i, roll] of (here.rolls ?? []).entries()) {
    const there = facts.rolls![i];
    for (const [k, p] of roll.placements.entries()) {
      expect(there.placements[k].panel).toBe(p.panel);
      expect(Math.hypot(p.x - there.placements[k].x, p.y - there.placements[k].y)).toBeLessThan(0.001);
    }
  }
}
