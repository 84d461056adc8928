// Every leaf: a decision is changed and its effect seen. One job, walked as a person walks it.
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { type Bench, type Desk, enter, focused, PATIENCE, planned, plannedAnew, setUp, turnTo } from "./bench.ts";
import { smallFiles } from "./smallForm.ts";

let bench: Bench;
let desk: Desk;
let revision = "";

beforeAll(async () => {
  bench = await setUp("leaves");
  desk = await bench.open();
  await desk.page.getByLabel("Choose files").setInputFiles(smallFiles());
  revision = await planned(desk.page);
}, PATIENCE);
afterAll(() => bench.close());

/** The number of a row of figures. */
async function figureOf(what: string): Promise<string> {
  return (await desk.page.getByRole("row", { name: what }).first().locator("td").innerText()).trim();
}

describe("leaves", { timeout: PATIENCE }, () => {
  it("Form: prestress pulls harder on the corners, and undo takes it back", async () => {
    const { page } = desk;
    const before = await figureOf("Area");
    await enter(page, "Prestress along the warp", "3,5");
    const next = await plannedAnew(page, revision);
    expect(await page.getByLabel("Prestress along the warp").inputValue()).toBe("3.5");
    expect(await figureOf("Area")).toBe(before);
    await page.keyboard.press("Escape");
    await page.getByRole("button", { name: "Undo prestress warp" }).click();
    expect(await plannedAnew(page, next)).toBe(revision);
  });

  it("Seams: the number of strips is the number of panels", async () => {
    const { page } = desk;
    await turnTo(page, "Seams");
    await enter(page, "Number of strips", "5");
    revision = await plannedAnew(page, revision);
    await page.getByText(/between 5 panels/).waitFor();
    expect(await page.getByRole("table", { name: "Seams" }).getByRole("row").count()).toBe(5);
  });

  it("Seams: taken in hand, one is moved, one removed", async () => {
    const { page } = desk;
    await page.getByRole("button", { name: "Take these seams in hand" }).click();
    revision = await plannedAnew(page, revision);
    await page.getByText(/^4 seams/).waitFor();
    const begin = page.getByLabel(/^Begins on/).first();
    const at = Number(await begin.inputValue());
    await begin.fill(String(at + 2));
    await begin.press("Enter");
    revision = await plannedAnew(page, revision);
    expect(Number(await begin.inputValue())).toBeCloseTo(at + 2, 6);
    await page.getByRole("button", { name: "Remove" }).first().click();
    await page.getByText(/^3 seams/).waitFor({ timeout: PATIENCE });
    revision = await planned(page);
  });

  it("Panels: a wider overlap takes more cloth", async () => {
    const { page } = desk;
    await turnTo(page, "Panels");
    const before = Number(await figureOf("Cloth to cut").then((t) => t.split(" ")[0]));
    await enter(page, "Overlap of a seam", "80");
    revision = await plannedAnew(page, revision);
    const after = Number(await figureOf("Cloth to cut").then((t) => t.split(" ")[0]));
    // Three seams of about 6 m or 4 m, 20 mm more on either side of each.
    expect(after - before).toBeGreaterThan(0.04 * 3 * 3.9);
    expect(after - before).toBeLessThan(0.04 * 3 * 6.3);
  });

  it("Panels: what is pointed at in the table lights up in the drawing", async () => {
    const { page } = desk;
    await page.getByRole("table", { name: "Panels" }).getByRole("row", { name: /^P2/ }).hover();
    await page.locator("g.panel.lit").waitFor();
    expect(await page.locator("g.panel.lit").getAttribute("aria-label")).toMatch(/^Panel P2/);
  });

  it("Rolls: a panel is pinned with the keys, and lies where it was put", async () => {
    const { page } = desk;
    await turnTo(page, "Rolls");
    const one = page.locator("svg.roll [role=button][tabindex='0']").first();
    await one.focus();
    const name = (await one.getAttribute("aria-label"))?.split(" ")[0] ?? "";
    await page.keyboard.press("ArrowRight");
    revision = await plannedAnew(page, revision);
    await page.getByText(new RegExp(`^${name} on R1 at`)).waitFor();
    await page.getByRole("button", { name: "Let go" }).click();
    revision = await plannedAnew(page, revision);
  });

  it("Rolls: a panel is dragged, and stays pinned", async () => {
    const { page } = desk;
    const box = await page.locator("svg.roll g.placed").last().boundingBox();
    if (box === null) throw new Error("nothing lies on the roll");
    await page.mouse.move(box.x + box.width / 2, box.y + box.height / 2);
    await page.mouse.down();
    await page.mouse.move(box.x + box.width / 2 + 60, box.y + box.height / 2, { steps: 4 });
    await page.mouse.up();
    revision = await plannedAnew(page, revision);
    await page.getByRole("button", { name: "Let go" }).waitFor();
    await page.getByRole("button", { name: "Let go" }).click();
    revision = await plannedAnew(page, revision);
  });

  it("Rolls: wider rolls need less length", async () => {
    const { page } = desk;
    const before = Number((await figureOf("Taken off")).split(" ")[0]);
    await enter(page, "Width over all", "3000");
    revision = await plannedAnew(page, revision);
    expect(Number((await figureOf("Taken off")).split(" ")[0])).toBeLessThan(before);
  });

  it("Rig: a form clamped all round says that it has no schedule; its limit is still decided here", async () => {
    const { page } = desk;
    await turnTo(page, "Rig");
    await enter(page, "No part beyond", "40");
    revision = await plannedAnew(page, revision);
    expect(await page.getByLabel("No part beyond").inputValue()).toBe("40");
    await page.getByText("No adjuster stands on this form").waitFor();
  });

  it("Papers: the title stands in the name of the book and on the papers", async () => {
    const { page } = desk;
    await turnTo(page, "Papers");
    await enter(page, "Title", "Ticket booth, north");
    revision = await plannedAnew(page, revision);
    await page.getByText(/files, revision/).waitFor({ timeout: PATIENCE });
    await page.getByRole("button", { name: "panels.csv", exact: true }).click();
    expect(await page.locator("pre.preview").innerText()).toContain("P1");
    expect(await page.getByRole("button", { name: /open the list of jobs/ }).innerText()).toContain(
      "Ticket booth, north",
    );
  });

  it("Site: a surveyed corner goes into the log, and can be struck", async () => {
    const { page } = desk;
    await turnTo(page, "Site");
    await page.getByRole("button", { name: "position" }).click();
    await page.getByRole("group", { name: "Read at" }).getByRole("button").first().click();
    await page.getByRole("button", { name: "Write it into the log" }).click();
    await page.getByRole("alert").getByText("x is missing").waitFor();
    for (const [label, value] of [
      ["x, m", "0.012"],
      ["y, m", "0"],
      ["z, m", "1.2"],
    ])
      await page.getByLabel(label, { exact: true }).fill(value);
    await page.getByRole("button", { name: "Write it into the log" }).click();
    await page.getByText("1 reading in the log.").waitFor();
    await page.getByRole("button", { name: /^Strike/ }).click();
    await page.getByText("No readings yet.", { exact: true }).first().waitFor();
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
  });

  it("nothing went wrong on the way", () => {
    expect(desk.faults).toEqual([]);
  });
});
