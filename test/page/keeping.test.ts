// Nothing is lost: reload, a worker that breaks, two tabs, a full store, no line, a job of a newer program.
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { type Bench, type Desk, enter, PATIENCE, planned, plannedAnew, setUp, turnTo, watch } from "./bench.ts";
import { SMALL_JOB, smallFiles } from "./smallForm.ts";

let bench: Bench;
beforeAll(async () => {
  bench = await setUp("keeping");
}, PATIENCE);
afterAll(() => bench.close());

async function openSmall(): Promise<Desk & { revision: string }> {
  const desk = await bench.open();
  await desk.page.getByLabel("Choose files").setInputFiles(smallFiles());
  return { ...desk, revision: await planned(desk.page) };
}

const kept = (desk: Desk) => desk.page.getByText(/^kept /).waitFor();

describe("keeping", { timeout: PATIENCE }, () => {
  it("is there again after a reload, on the leaf it was on, with its mesh and its edits", async () => {
    const desk = await openSmall();
    const { page } = desk;
    await turnTo(page, "Rolls");
    await enter(page, "Gap between cuts", "25");
    const revision = await plannedAnew(page, desk.revision);
    await kept(desk);
    await page.waitForTimeout(600);
    await page.reload();
    expect(await planned(page)).toBe(revision);
    await page.getByRole("heading", { name: "Which cloth, and where on it?" }).waitFor();
    expect(await page.getByLabel("Gap between cuts").inputValue()).toBe("25");
    await desk.context.close();
  });

  it("says that the worker broke, and plans again with a new one", async () => {
    const { page, context, revision } = await openSmall();
    await page.workers()[0].evaluate(() => {
      setTimeout(() => {
        throw new Error("out of luck");
      }, 0);
    });
    await page
      .getByRole("alert")
      .getByText(/the computing worker broke down .*out of luck/)
      .waitFor();
    await page.getByRole("button", { name: "Plan again" }).click();
    expect(await planned(page)).toBe(revision);
    await context.close();
  });

  it("notices two tabs, and keeps both their works", async () => {
    const one = await openSmall();
    await kept(one);
    const page = await one.context.newPage();
    watch(page, one);
    await page.goto(bench.url);
    await page.getByRole("button", { name: "Ticket booth", exact: true }).click();
    await planned(page);
    await page.getByText(/open in another tab as well/).waitFor();
    await one.page.getByText(/open in another tab as well/).waitFor();
    await turnTo(one.page, "Papers");
    await enter(one.page, "Drawn by", "first");
    await page.getByText(/just changed in another tab/).waitFor();
    await turnTo(page, "Papers");
    await enter(page, "Drawn by", "second");
    await page.getByText(/goes on as “Ticket booth \(copy\)”/).waitFor();
    for (const [name, by] of [
      ["Ticket booth (copy)", "second"],
      ["Ticket booth", "first"],
    ]) {
      const third = await one.context.newPage();
      await third.goto(bench.url);
      await third.getByRole("button", { name, exact: true }).click();
      await turnTo(third, "Papers");
      expect(await third.getByLabel("Drawn by").inputValue()).toBe(by);
    }
    expect(one.faults).toEqual([]);
    await one.context.close();
  });

  it("says when the store is full, and when there is none", async () => {
    const { page, context } = await openSmall();
    for (const [fault, words] of [
      ["QuotaExceededError", /store is full: this job is not being kept/],
      ["InvalidStateError", /keeps nothing here \(a private window/],
    ] as const) {
      await page.evaluate((name) => {
        IDBObjectStore.prototype.put = () => {
          throw new DOMException("no", name);
        };
      }, fault);
      await turnTo(page, "Papers");
      await enter(page, "Drawn by", fault);
      await page.getByRole("alert").getByText(words).waitFor();
    }
    await page.getByText("not kept yet").waitFor();
    await context.close();
  });

  it("works without a line, down to the papers", async () => {
    const { page, context, faults } = await bench.open();
    await page.evaluate(async () => {
      await navigator.serviceWorker.ready;
      while (navigator.serviceWorker.controller === null) await new Promise((r) => setTimeout(r, 50));
    });
    await context.setOffline(true);
    await page.reload();
    await page.getByLabel("Choose files").setInputFiles(smallFiles());
    await planned(page);
    await turnTo(page, "Papers");
    await page.getByText(/files, revision/).waitFor({ timeout: PATIENCE });
    expect(faults.filter((f) => !f.includes("ERR_INTERNET_DISCONNECTED"))).toEqual([]);
    await context.close();
  });

  it("refuses a job of a newer program by name, asks for a mesh that is missing, and takes it when it comes", async () => {
    const { page, context } = await bench.open();
    const [job, mesh] = smallFiles({ ...SMALL_JOB, version: 99 });
    await page.getByLabel("Choose files").setInputFiles([job, mesh]);
    await page
      .getByRole("alert")
      .getByText(/version 99 of the job file is newer than this program/)
      .waitFor();
    await page.getByLabel("Choose files").setInputFiles([smallFiles()[0]]);
    await page
      .getByRole("alert")
      .getByText(/reads its mesh from booth.obj, which is not here/)
      .waitFor();
    await page.getByRole("button", { name: /open the list of jobs/ }).click();
    await page.getByLabel("Choose files").setInputFiles([mesh]);
    await planned(page);
    await page.getByRole("button", { name: /open the list of jobs/ }).click();
    // the list is read from the store, so it may come a moment after the desk
    await page.getByRole("button", { name: "Ticket booth", exact: true }).waitFor({ timeout: PATIENCE });
    expect(await page.getByRole("button", { name: "Ticket booth", exact: true }).count()).toBe(1);
    await context.close();
  });
});
