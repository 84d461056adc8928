// Every leaf: a decision is changed and its effect seen. One job clamped all round, walked as a person walks it.
import { readFileSync } from "node:fs";
import { beforeAll, describe, expect, it } from "vitest";
import {
  benchOfFile,
  type Desk,
  enter,
  fieldOf,
  focused,
  LONG,
  openPlanned,
  planned,
  plannedAnew,
  SOON,
  shows,
  turnTo,
} from "./bench.ts";
import { smallFiles } from "./smallForm.ts";

const bench = benchOfFile();
let desk: Desk;
let revision = "";

beforeAll(async () => {
  const opened = await openPlanned(bench, smallFiles(), { acceptDownloads: true });
  [desk, revision] = [opened, opened.revision];
}, LONG);

/** The number of a row of figures. */
async function figureOf(what: string): Promise<number> {
  return Number.parseFloat(await desk.page.getByRole("row", { name: what }).first().locator("td").innerText());
}

describe("leaves", { timeout: LONG }, () => {
  it("may share memory among its workers, so that the nest has its threads", async () => {
    await expect.poll(() => desk.page.evaluate(() => crossOriginIsolated), SOON).toBe(true);
  });

  it("Form: prestress is read with a comma, and undo takes it back", async () => {
    const { page } = desk;
    const before = await figureOf("Area");
    await enter(page, "Prestress along the warp", "3,5");
    const next = await plannedAnew(page, revision);
    await shows(page, "Prestress along the warp", "3.5");
    await expect.poll(() => figureOf("Area"), SOON).toBe(before);
    await page.keyboard.press("Escape");
    await page.getByRole("button", { name: "Undo prestress warp" }).click();
    expect(await plannedAnew(page, next)).toBe(revision);
  });

  it("Form: balance and curvature over the surface, with a legend of numbers", async () => {
    const { page } = desk;
    const legend = page.locator(".legend");
    await page.getByRole("button", { name: "curvature" }).click();
    await legend.getByText("Curvature (Gauss)").waitFor();
    // The saddle z = 1.2·(…xy…) of 6 x 4 m is a ruled quadric: K = −(0.1)² / (1 + |grad|²)², in the middle −0.0083 at least.
    const ticks = async () =>
      (await legend.locator(".ticks span").allInnerTexts()).map((t) => Number.parseFloat(t.replace("−", "-")));
    await expect.poll(ticks, SOON).toHaveLength(5);
    const [least] = await ticks();
    expect(least).toBeLessThan(-0.008);
    expect(least).toBeGreaterThan(-0.0105);
    await page.getByRole("button", { name: "out of balance" }).click();
    await legend.getByText("Out of balance").waitFor();
    await page.getByRole("button", { name: "plain" }).click();
    await legend.waitFor({ state: "detached" });
  });

  it("Seams: the number of strips is the number of panels; taken in hand, one is moved, one removed", async () => {
    const { page } = desk;
    await turnTo(page, "Seams");
    await enter(page, "Number of strips", "5");
    revision = await plannedAnew(page, revision);
    await page.getByText(/between 5 panels/).waitFor();
    await expect.poll(() => page.getByRole("table", { name: "Seams" }).getByRole("row").count(), SOON).toBe(5);
    await page.getByRole("button", { name: "Take these seams in hand" }).click();
    revision = await plannedAnew(page, revision);
    await page.getByText(/^4 seams/).waitFor();
    await page.getByText(/5 strips as pairs: as asked/).waitFor();
    const begin = page.getByLabel(/^Begins on/).first();
    const at = Number(await begin.inputValue());
    await begin.fill(String(at + 2));
    await begin.press("Enter");
    revision = await plannedAnew(page, revision);
    await expect.poll(async () => Number(await begin.inputValue()), SOON).toBeCloseTo(at + 2, 6);
    await page.getByRole("button", { name: "Remove" }).first().click();
    await page.getByText(/^3 seams/).waitFor();
    revision = await plannedAnew(page, revision);
  });

  it("Panels: a wider overlap takes more cloth; a cloth of its own is stretched by its own stiffness", async () => {
    const { page } = desk;
    await turnTo(page, "Panels");
    const before = await figureOf("Cloth to cut");
    await enter(page, "Overlap of a seam", "80");
    revision = await plannedAnew(page, revision);
    const wider = async () => (await figureOf("Cloth to cut")) - before;
    // Three seams of about 6 m or 4 m, 20 mm more on either side of each.
    await expect.poll(wider, SOON).toBeGreaterThan(0.04 * 3 * 3.9);
    expect(await wider()).toBeLessThan(0.04 * 3 * 6.3);
    await fieldOf(page, /^Cloth( default)?$/).selectOption({ label: "constants of its own" });
    for (const [label, value] of [
      ["Stiffness along the warp, Ew", "400"],
      ["Stiffness along the weft, Ef", "400"],
      ["Weft strain by unit warp strain, nuWf", "0.2"],
    ])
      await enter(page, label, value);
    revision = await plannedAnew(page, revision);
    // Biaxial stretch at 2 kN/m both ways: (2 − 0.2·2)/400 = 0.4 % as Green strain, √(1 + 2·0.004) − 1 = 0.399 % as engineering strain.
    const warp = page.getByLabel("Compensation warp");
    await expect.poll(() => warp.getAttribute("placeholder"), SOON).toBe("0.399");
  });

  it("Panels: every kind of line that is drawn stands in the key with its look, of all panels and of one alone", async () => {
    const { page } = desk;
    const key = page.getByRole("list", { name: "Lines of the panels" });
    // of the visible lines: class and stroke, as drawn here and as drawn in the key
    const looks = (place: string) =>
      page.locator(place).evaluateAll((all) => {
        const told = all.map((e) => {
          const { stroke, strokeWidth, strokeDasharray } = getComputedStyle(e);
          return `${e.getAttribute("class")} ${stroke} ${strokeWidth} ${strokeDasharray}`;
        });
        return [...new Set(told)].sort();
      });
    const drawn = () => looks("[aria-label='Flat panels'] path:not(.cut, .lit)");
    const explained = () => looks("[aria-label='Lines of the panels'] path:not(.cut)");
    await page.mouse.move(0, 0);
    await key.getByText("cut line", { exact: true }).waitFor();
    await expect.poll(async () => (await explained()).length, SOON).toBeGreaterThanOrEqual(3);
    await expect.poll(drawn, SOON).toEqual(await explained());
    await page.getByRole("table", { name: "Panels" }).getByRole("button", { name: "P2", exact: true }).click();
    await page.mouse.move(0, 0);
    await key.getByText(/^pen: match marks.*warp arrow$/).waitFor();
    await expect.poll(drawn, SOON).toEqual(await explained());
    await page.getByRole("button", { name: "Show all panels" }).click();
    await key.getByText(/^pen:/).waitFor({ state: "detached" });
  });

  it("what is pointed at lights up in table and drawing alike", async () => {
    const { page } = desk;
    await page.getByRole("table", { name: "Panels" }).getByRole("row", { name: /^P2/ }).hover();
    await page.locator("g.panel.lit > [aria-label^='Panel P2']").waitFor();
    await page.locator("g.panel").filter({ hasText: "P3" }).locator("path.cut").hover({ force: true });
    await page.getByRole("table", { name: "Panels" }).locator("tr.lit", { hasText: "P3" }).waitFor();
    // and with the focus in it, for those who have no pointer
    await page.getByRole("table", { name: "Panels" }).getByRole("button", { name: "P1", exact: true }).focus();
    await page.locator("g.panel.lit > [aria-label^='Panel P1']").waitFor();
    await turnTo(page, "Rolls");
    await page.locator("g.placed", { hasText: "P3" }).first().hover({ force: true });
    await page.locator("g.placed.lit", { hasText: "P3" }).first().waitFor();
  });

  it("Rolls: a panel is pinned with the keys or by dragging, lies where it was put, and is let go", async () => {
    const { page } = desk;
    const one = page.locator("svg.roll [role=button][tabindex='0']").first();
    await one.focus();
    const name = (await one.getAttribute("aria-label"))?.split(" ")[0] ?? "";
    await page.keyboard.press("ArrowRight");
    revision = await plannedAnew(page, revision);
    await page.getByText(new RegExp(`^${name} on R1 at`)).waitFor();
    await page.getByRole("button", { name: "Let go" }).click();
    revision = await plannedAnew(page, revision);
    const box = await page.locator("svg.roll g.placed").last().boundingBox();
    if (box === null) throw new Error("nothing lies on the roll");
    await page.mouse.move(box.x + box.width / 2, box.y + box.height / 2);
    await page.mouse.down();
    await page.mouse.move(box.x + box.width / 2 + 60, box.y + box.height / 2, { steps: 4 });
    await page.mouse.up();
    revision = await plannedAnew(page, revision);
    await page.getByRole("button", { name: "Let go" }).waitFor();
  });

  it("Rolls: wider rolls need less length", async () => {
    const { page } = desk;
    const before = await figureOf("Taken off");
    await page.getByRole("button", { name: "Let go" }).click();
    await enter(page, "Width over all", "3000");
    revision = await plannedAnew(page, revision);
    await expect.poll(() => figureOf("Taken off"), SOON).toBeLessThan(before);
  });

  it("Rolls: what lies on no roll is told beside the cloth (bug: a roll too short looked like cloth saved)", async () => {
    const { page } = desk;
    const long = await fieldOf(page, "Length on the roll").inputValue();
    await enter(page, "Length on the roll", "7");
    revision = await plannedAnew(page, revision);
    await page.getByText(/\d+ (piece lies|pieces lie) on no roll: why stands under/).waitFor();
    await page.getByText(/^Last change: .*pieces on no roll 0 → [1-9]/).waitFor();
    await enter(page, "Length on the roll", long);
    revision = await plannedAnew(page, revision);
    await page.getByText(/(piece lies|pieces lie) on no roll/).waitFor({ state: "detached" });
    await page.getByText(/^Last change: .*pieces on no roll [1-9]\d* → 0/).waitFor();
  });

  it("Rig: a form clamped all round says that it has no schedule; its limit is still decided here", async () => {
    const { page } = desk;
    await turnTo(page, "Rig");
    await enter(page, "No part beyond", "40");
    await shows(page, "No part beyond", "40");
    await page.getByText("No adjuster stands on this form").waitFor();
  });

  it("Papers: the title stands in the name of the book and on the papers", async () => {
    const { page } = desk;
    await turnTo(page, "Papers");
    await enter(page, "Title", "Ticket booth, north");
    revision = await plannedAnew(page, revision);
    await page.getByText(/files, revision/).waitFor();
    await page.getByRole("button", { name: "panels.csv", exact: true }).click();
    await expect.poll(() => page.locator(".preview.list").innerText(), SOON).toContain("P1");
    await page.getByRole("button", { name: "Seamstay Ticket booth, north, open the list of jobs" }).waitFor();
  });

  it("Site: a surveyed corner goes into the log; struck, it stays legible and counts no more", async () => {
    const { page } = desk;
    await turnTo(page, "Site");
    await page.getByRole("button", { name: "position" }).click();
    await page.getByRole("group", { name: "Read at" }).getByRole("button").first().click();
    await page.getByRole("button", { name: "Write it into the log" }).click();
    await page.getByRole("alert").getByText("x is missing").waitFor();
    for (const [label, value] of [
      ["x, m", "12 mm"],
      ["y, m", "none"],
      ["z, m", "1.2"],
    ])
      await page.getByLabel(label, { exact: true }).fill(value);
    await page.getByRole("button", { name: "Write it into the log" }).click();
    await page.getByRole("alert").getByText("y: “none” is no length: give it in m").waitFor();
    await page.getByLabel("y, m", { exact: true }).fill("0");
    await page.getByRole("button", { name: "Write it into the log" }).click();
    await page.getByText("1 reading in the log.").waitFor();
    await page.getByRole("button", { name: /^Strike/ }).click();
    await page.getByText("1 reading in the log, 1 of them struck.").waitFor();
    await page.locator("tr.struck", { hasText: "0.012" }).waitFor();
    await page.getByRole("button", { name: /^Count again/ }).click();
    await page.getByText("1 reading in the log.").waitFor();
  });

  it("Site: the log goes out as a file and comes in again as it was edited; readings alone are added to it", async () => {
    const { page } = desk;
    await turnTo(page, "Site");
    const [saved] = await Promise.all([
      page.waitForEvent("download"),
      page.getByRole("button", { name: "Save the log (CSV)" }).click(),
    ]);
    expect(saved.suggestedFilename()).toBe("site-log.csv");
    const text = readFileSync(await saved.path(), "utf8");
    const give = (name: string, content: string) =>
      page
        .getByLabel("Take in a log (CSV)")
        .setInputFiles([{ name, mimeType: "text/csv", buffer: Buffer.from(content) }]);
    const more = `2026-03-04T10:00,"'=A ""B"",\nC",spare,12.5,,,,,,,,3,,yes\r\n`;
    await give("site-log.csv", text.replace("0.012", "0.021") + more);
    await page.getByText("The log is now that of the file: 2 lines, 1 before.").waitFor();
    await page.getByText("2 readings in the log, 1 of them struck.").waitFor();
    await page.getByRole("row", { name: /0\.021/ }).waitFor();
    await page.locator("tr.struck", { hasText: /=A "B",\s+C.*spare.*12\.5 kN/ }).waitFor();
    await page.getByRole("button", { name: "Undo log taken in" }).click();
    await page.getByText("1 reading in the log.").waitFor();
    await page.getByRole("row", { name: /0\.012/ }).waitFor();
    await give("readings.csv", "id;force_kN;time\nspare;12,5;2026-03-04T10:00\n");
    await page.getByText("1 of 1 readings were new and are in the log.").waitFor();
    await page.getByText("2 readings in the log.").waitFor();
    await give("readings.csv", "id,force_kN\nspare,much\n");
    await page
      .getByRole("alert")
      .getByText(/row 2: force_kN is "much"/)
      .waitFor();
    await page.getByRole("alert").getByRole("button", { name: "Close" }).click();
    await page.getByText("2 readings in the log.").waitFor();
  });

  it("a decision that cannot be is said with its place, and undone", async () => {
    const { page } = desk;
    await turnTo(page, "Rolls");
    await enter(page, "Width over all", "20000");
    const fault = page.getByRole("alert");
    await fault.getByText(/rolls\[0\]\.width: 20000 mm is above the most allowed/).waitFor();
    await fault.getByRole("button", { name: "Show me" }).click();
    await focused(page, "rolls[0].width");
    await fault.getByRole("button", { name: "Undo" }).click();
    await planned(page);
  });

  it("findings lead to what they speak of", async () => {
    const { page } = desk;
    await page.keyboard.press("Escape");
    await page.getByRole("button", { name: /notes?$/ }).click();
    await page.getByRole("dialog", { name: "Findings" }).getByRole("button", { name: "papers.sheet" }).click();
    await page.getByRole("heading", { name: "What leaves the office?" }).waitFor();
    await focused(page, "papers.sheet");
    expect(desk.faults).toEqual([]);
  });
});
