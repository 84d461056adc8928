// Nothing is lost: reload, undo after it, a worker that breaks, two tabs, a full store, a private window, no line, jobs of
// older and newer programs, an update.
import { cpSync, mkdtempSync, readFileSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { Page } from "playwright-core";
import { describe, expect, it } from "vitest";
import { servePage } from "../../src/cli/pageServer.ts";
import {
  benchOfFile,
  enter,
  judge,
  kept,
  LONG,
  openPlanned,
  PATIENCE,
  planned,
  plannedAnew,
  SOON,
  shows,
  turnTo,
  watch,
} from "./bench.ts";
import { SMALL_JOB, smallFiles, smallForm } from "./smallForm.ts";

const bench = benchOfFile();

const openSmall = () => openPlanned(bench, smallFiles());

/** Puts jobs into the store of the browser as a program of store version 1 kept them. */
async function keepAsBefore(page: Page, jobs: Record<string, object>): Promise<void> {
  await page.evaluate(
    ({ jobs, mesh }) =>
      new Promise<void>((resolve, reject) => {
        const open = indexedDB.open("seamstay", 1);
        open.onupgradeneeded = () => {
          open.result.createObjectStore("jobs", { keyPath: "id" });
          open.result.createObjectStore("meshes");
        };
        open.onerror = () => reject(open.error);
        open.onsuccess = () => {
          const db = open.result;
          const tx = db.transaction(["jobs", "meshes"], "readwrite");
          for (const [id, job] of Object.entries(jobs)) {
            const kept = { id, savedAt: "2026-01-02T03:04:05Z", count: 3, log: [], leaf: "rolls", mesh: id };
            tx.objectStore("jobs").put({ ...kept, title: `Kept as ${id}`, job });
            tx.objectStore("meshes").put({ name: "booth.obj", bytes: new TextEncoder().encode(mesh) }, id);
          }
          tx.oncomplete = () => {
            db.close();
            resolve();
          };
        };
      }),
    { jobs, mesh: smallForm() },
  );
}

describe("keeping", { timeout: LONG }, () => {
  it("is there again after a reload, on the leaf it was on, with its mesh and edits, undone and done again", async () => {
    const { page, context, revision: first } = await openSmall();
    await turnTo(page, "Rolls");
    await enter(page, "Gap between cuts", "25");
    const second = await plannedAnew(page, first);
    await enter(page, "Gap between cuts", "30");
    await plannedAnew(page, second);
    await page.getByRole("button", { name: "Undo gap between cuts" }).click();
    await plannedAnew(page, "");
    await shows(page, "Gap between cuts", "25");
    await kept(page);
    await turnTo(page, "Panels");
    await page.reload();
    await page.getByRole("heading", { name: "What is cut, and what stress will it take?" }).waitFor();
    expect(await planned(page)).toBe(second);
    await turnTo(page, "Rolls");
    await shows(page, "Gap between cuts", "25");
    await page.getByRole("button", { name: "Redo gap between cuts" }).click();
    await shows(page, "Gap between cuts", "30");
    await page.getByRole("button", { name: "Undo gap between cuts" }).click();
    await page.getByRole("button", { name: "Undo gap between cuts" }).click();
    await page.getByRole("button", { name: "Undo", exact: true }).and(page.locator(":disabled")).waitFor();
    await kept(page);
    await page.reload();
    expect(await planned(page)).toBe(first);
    await page.getByRole("button", { name: "Redo gap between cuts" }).click();
    await shows(page, "Gap between cuts", "25");
    await context.close();
  });

  it("keeps what was taken back at once, before it was kept, to be done again", async () => {
    const { page, context } = await openSmall();
    await turnTo(page, "Rolls");
    await kept(page);
    await enter(page, "Gap between cuts", "30");
    await page.getByRole("button", { name: "Undo gap between cuts" }).press("Enter");
    await kept(page);
    await page.reload();
    await page.getByRole("button", { name: "Redo gap between cuts" }).click();
    await shows(page, "Gap between cuts", "30");
    await context.close();
  });

  it("says that the worker broke, and plans again with a new one", async () => {
    const { page, context, revision } = await openSmall();
    const planner = () => page.workers().find((w) => w.url().includes("planWorker"));
    await expect.poll(planner, SOON).toBeDefined();
    await planner()?.evaluate(() => {
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
    await kept(one.page);
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
    await kept(page);
    await kept(one.page);
    for (const [name, by] of [
      ["Ticket booth (copy)", "second"],
      ["Ticket booth", "first"],
    ]) {
      const third = await one.context.newPage();
      await third.goto(bench.url);
      await third.getByRole("button", { name, exact: true }).click();
      await turnTo(third, "Papers");
      await shows(third, "Drawn by", by);
      await third.close();
    }
    expect(one.faults).toEqual([]);
    await one.context.close();
  });

  it("says when the store is full, and when there is none", async () => {
    const { page, context } = await openSmall();
    await turnTo(page, "Papers");
    for (const [fault, words] of [
      ["QuotaExceededError", /store is full: this job is not being kept/],
      ["InvalidStateError", /keeps nothing here \(a private window/],
    ] as const) {
      await page.evaluate((name) => {
        IDBObjectStore.prototype.put = () => {
          throw new DOMException("no", name);
        };
      }, fault);
      await enter(page, "Drawn by", fault);
      await page.getByRole("alert").getByText(words).waitFor();
      expect(await judge(page)).toEqual([]);
      // bug: under a notice the book was taller than the window, and the page scrolled beside its own scrollers
      await expect
        .poll(() => page.evaluate(() => document.documentElement.scrollHeight - innerHeight), SOON)
        .toBeLessThanOrEqual(0);
    }
    await page.getByText("not kept", { exact: true }).waitFor();
    await context.close();
  });

  it("works where a private window lets nothing be kept, and says so", async () => {
    const { page, context, faults } = await bench.open();
    await page.addInitScript(() => {
      const refuse = () => {
        throw new DOMException("refused", "SecurityError");
      };
      IDBFactory.prototype.open = refuse;
      Object.defineProperty(window, "sessionStorage", { get: refuse });
    });
    await page.reload();
    await page.getByText(/keeps nothing here \(a private window/).waitFor();
    await page.getByLabel("Choose files").setInputFiles(smallFiles());
    await planned(page);
    await page
      .getByRole("alert")
      .getByText(/keeps nothing here \(a private window/)
      .waitFor();
    await page.getByText("not kept", { exact: true }).waitFor();
    expect(faults).toEqual([]);
    await context.close();
  });

  it("works without a line, down to the papers", async () => {
    const { page, context, faults } = await bench.open();
    await page.evaluate(() => navigator.serviceWorker.ready);
    await page.waitForFunction(() => navigator.serviceWorker.controller !== null, undefined, SOON);
    await context.setOffline(true);
    await page.reload();
    await page.getByLabel("Choose files").setInputFiles(smallFiles());
    await planned(page);
    await turnTo(page, "Papers");
    await page.getByText(/files, revision/).waitFor();
    expect(faults.filter((f) => !f.includes("ERR_INTERNET_DISCONNECTED"))).toEqual([]);
    await context.close();
  });

  it("takes an update over when it is asked to, keeps the job, and leaves nothing of the old version behind", async () => {
    const next = mkdtempSync(join(tmpdir(), "seamstay-next-"));
    cpSync(bench.folder, next, { recursive: true });
    const script = readFileSync(join(next, "service-worker.js"), "utf8");
    writeFileSync(join(next, "service-worker.js"), script.replace(/const VERSION = "\w+"/, 'const VERSION = "next"'));
    let served = await servePage(bench.folder, 0, null);
    const { page, context, faults } = await bench.open();
    try {
      await page.goto(`http://127.0.0.1:${served.port}/`);
      await page.getByLabel("Choose files").setInputFiles(smallFiles());
      const revision = await planned(page);
      await kept(page);
      await page.waitForFunction(() => navigator.serviceWorker.controller !== null, undefined, SOON);
      const names = () => page.evaluate(async () => (await caches.keys()).sort());
      const before = await names();
      expect(before).toHaveLength(1);
      served.server.closeAllConnections();
      await new Promise((done) => served.server.close(done));
      served = await servePage(next, served.port, null);
      await page.evaluate(async () => void (await (await navigator.serviceWorker.ready).update()));
      const news = page.getByText("A newer Seamstay is ready.");
      await news.waitFor();
      // The old version goes on until the user says so.
      expect(await names()).toContain(before[0]);
      await page.getByRole("button", { name: "Take it over" }).click();
      await news.waitFor({ state: "detached" });
      expect(await planned(page)).toBe(revision);
      await expect.poll(names, SOON).toEqual(["seamstay-next"]);
      expect(faults).toEqual([]);
    } finally {
      await context.close();
      served.server.closeAllConnections();
      served.server.close();
    }
  });

  it("opens what an older program kept, and says what a newer one kept", async () => {
    const context = await bench.browser.newContext();
    const page = await context.newPage();
    page.setDefaultTimeout(PATIENCE);
    // A place of the same origin that does not open the store itself.
    await page.goto(`${bench.url}nothing`);
    await keepAsBefore(page, { old: SMALL_JOB, new: { ...SMALL_JOB, version: 99 } });
    await page.goto(bench.url);
    await page.getByRole("button", { name: "Kept as new", exact: true }).click();
    await page
      .getByRole("alert")
      .getByText(/version 99 of the job file is newer than this program/)
      .waitFor();
    await page.getByRole("button", { name: "Kept as old", exact: true }).click();
    await planned(page);
    await page.getByRole("heading", { name: "Which cloth, and where on it?" }).waitFor();
    await enter(page, "Gap between cuts", "25");
    await kept(page);
    await page.reload();
    await shows(page, "Gap between cuts", "25");
    await page.getByRole("button", { name: "Undo gap between cuts" }).waitFor();
    await page.goto(`${bench.url}nothing`);
    await page.evaluate(
      () =>
        new Promise<void>((resolve) => {
          const open = indexedDB.open("seamstay", 99);
          open.onsuccess = () => {
            open.result.close();
            resolve();
          };
        }),
    );
    await page.goto(bench.url);
    await page
      .getByText(/A newer Seamstay has kept jobs in this browser/)
      .first()
      .waitFor();
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
    await kept(page);
    await page.getByRole("button", { name: /open the list of jobs/ }).click();
    const listed = page.getByRole("button", { name: "Ticket booth", exact: true });
    await expect.poll(() => listed.count(), SOON).toBe(1);
    await context.close();
  });
});
