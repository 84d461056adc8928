// From files dropped onto the page to the papers of the command line, byte for byte; the same job planned on both sides.
import { createHash } from "node:crypto";
import { existsSync, mkdtempSync, readFileSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { unzipSync } from "fflate";
import type { Page } from "playwright-core";
import { describe, expect, it } from "vitest";
import { loadCatalogues, loadFonts } from "../../src/cli/packageFiles.ts";
import { readInput } from "../../src/cli/readInput.ts";
import { writePapers } from "../../src/core/papers/writePapers.ts";
import { runPlan } from "../../src/core/plan/runPlan.ts";
import type { Facts } from "../../src/core/records/facts.ts";
import { benchOfFile, LONG, planned, turnTo } from "./bench.ts";
import { SAIL_JOB, sailFiles } from "./smallForm.ts";

const bench = benchOfFile();

const ROOT = join(import.meta.dirname, "../..");
const hash = (bytes: Uint8Array) => createHash("sha256").update(bytes).digest("hex");

/** Lets go of files over the page. */
async function drop(page: Page, files: readonly { name: string; text: string }[]): Promise<void> {
  const transfer = await page.evaluateHandle((given) => {
    const data = new DataTransfer();
    for (const { name, text } of given) data.items.add(new File([text], name));
    return data;
  }, files);
  await page.dispatchEvent("body", "drop", { dataTransfer: transfer });
  await planned(page);
}

/** The files of the bundle the page hands to the downloads. */
async function saveBundle(page: Page): Promise<Record<string, Uint8Array>> {
  await turnTo(page, "Papers");
  await page.getByText(/files, revision/).waitFor();
  const save = page.getByRole("button", { name: "Save all papers (zip)" });
  const [download] = await Promise.all([page.waitForEvent("download"), save.click()]);
  return unzipSync(readFileSync(await download.path()));
}

/** The papers the command line writes from the facts in a bundle are the bundle. */
async function expectOwnPapers(zip: Record<string, Uint8Array>): Promise<Facts> {
  const facts = JSON.parse(new TextDecoder().decode(zip["facts.json"])) as Facts;
  const own = await writePapers(facts, { fonts: loadFonts() });
  expect(Object.keys(zip).sort()).toEqual(["facts.json", ...own.files.map((f) => f.path)].sort());
  for (const { path, bytes } of own.files) expect(`${path} ${hash(zip[path])}`).toBe(`${path} ${hash(bytes)}`);
  return facts;
}

describe("papers of the page", { timeout: LONG }, () => {
  it("come from a dropped sail, equal those of the command line, and no request leaves the origin", async () => {
    const { page, context, requests, faults } = await bench.open({ acceptDownloads: true });
    // The sail of the shared meshes; where they do not lie beside the project, that of the boat shed.
    const shared = join(ROOT, "../shared/meshes/sail4_cables.obj");
    const mesh = existsSync(shared) ? shared : join(ROOT, "templates/boat-shed/form.obj");
    const job = { ...SAIL_JOB, title: "Sail", mesh: { file: "sail4_cables.obj" }, rig: { stages: [1] } };
    const { settle: _, edges: __, seams: ___, ...least } = job;
    await drop(page, [
      { name: "sail4_cables.obj", text: readFileSync(mesh, "utf8") },
      { name: "job.json", text: JSON.stringify(least) },
    ]);
    const zip = await saveBundle(page);
    const facts = await expectOwnPapers(zip);
    expect(Object.keys(zip)).toEqual(
      expect.arrayContaining([expect.stringMatching(/^rolls\/.+\.dxf$/), "panel-cards.pdf", "tensioning-schedule.pdf"]),
    );
    expect(facts.rig?.adjusters).toHaveLength(4);
    expect(requests.every((url) => url.startsWith(bench.url) || url.startsWith(`blob:${bench.url}`))).toBe(true);
    expect(requests.length).toBeGreaterThan(5);
    expect(faults).toEqual([]);
    await context.close();
  });

  it("a job planned here and there has the same revision, layout (0.001 mm) and forces (0.001 kN)", async () => {
    const { page, context } = await bench.open({ acceptDownloads: true });
    const files = sailFiles().map((f) => ({ name: f.name, text: f.buffer.toString("utf8") }));
    await drop(page, files);
    const zip = await saveBundle(page);
    await context.close();
    const folder = mkdtempSync(join(tmpdir(), "seamstay-page-"));
    for (const { name, text } of files) writeFileSync(join(folder, name), text);
    const input = readInput(join(folder, "job.json"), loadCatalogues());
    const here = runPlan(input.job, input.source, { revision: input.revision }, {});
    expectSame(JSON.parse(new TextDecoder().decode(zip["facts.json"])) as Facts, here);
  });
});

/** design.md: engines differ in the last bit, so layouts within 0.001 mm and forces within 0.001 kN. */
function expectSame(there: Facts, here: Facts): void {
  expect(there.job.revision).toBe(here.job.revision);
  const near = (a: readonly (readonly number[])[], b: readonly (readonly number[])[]) => {
    expect(a).toHaveLength(b.length);
    expect(Math.max(...a.map((p, k) => Math.hypot(...p.map((x, i) => x - b[k][i]))))).toBeLessThan(0.001);
  };
  expect(there.panels?.map((p) => p.id)).toEqual(here.panels?.map((p) => p.id));
  for (const [i, p] of (here.panels ?? []).entries()) {
    near(p.flat, there.panels![i].flat);
    near(p.cut, there.panels![i].cut);
  }
  for (const [i, roll] of (here.rolls ?? []).entries()) {
    const placed = there.rolls![i].placements;
    expect(placed.map((p) => [p.panel, p.rotation])).toEqual(roll.placements.map((p) => [p.panel, p.rotation]));
    near(
      roll.placements.map((p) => [p.x, p.y]),
      placed.map((p) => [p.x, p.y]),
    );
  }
  const forcesOf = (f: Facts): Record<string, number> =>
    Object.fromEntries([
      ...f.form!.reactions.flatMap((r) => r.force.map((kN, k) => [`reaction ${r.anchor} ${k}`, kN])),
      ...f.cables!.map((c) => [`cable ${c.id}`, c.force]),
      ...Object.entries(f.asBuilt!.forces).map(([id, kN]) => [`as built ${id}`, kN]),
      ...f.tensioning!.stages.flatMap((s) => s.moves.map((m) => [`step ${m.step} ${m.adjuster}`, m.expect])),
      ...f.tensioning!.stages.flatMap((s) => Object.entries(s.forces).map(([id, kN]) => [`end ${s.name} ${id}`, kN])),
    ]);
  const [a, b] = [forcesOf(there), forcesOf(here)];
  expect(Object.keys(a)).toEqual(Object.keys(b));
  expect(Object.keys(a).length).toBeGreaterThan(30);
  for (const [id, kN] of Object.entries(b)) expect(Math.abs(a[id] - kN), id).toBeLessThan(0.001);
}
