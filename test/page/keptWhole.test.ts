// Where keeping is hard: a store that refuses only in the end and has room again, a log of readings, a job whose mesh is gone from the
// store, and tabs of which one leaves the job, or is loaded anew, before it is written.
import type { Page } from "playwright-core";
import { describe, expect, it } from "vitest";
import { benchOfFile, clear, enter, kept, LONG, openPlanned, planned, SOON, shows, turnTo, watch } from "./bench.ts";
import { sailFiles, smallFiles } from "./smallForm.ts";

const bench = benchOfFile();

const FULL = /store is full: this job is not being kept/;

/**
 * The store takes every request and refuses as it writes them to disk: so it tells a full disk (Indexed Database API 3.0, "commit a
 * transaction": its error is a QuotaExceededError then). Gives back what lets it write again.
 */
async function fillStore(page: Page): Promise<() => Promise<void>> {
  await page.evaluate(() => {
    const { put } = IDBObjectStore.prototype;
    const error = Object.getOwnPropertyDescriptor(IDBTransaction.prototype, "error");
    IDBObjectStore.prototype.put = function (...given: Parameters<typeof put>) {
      const request = put.apply(this, given);
      if (this.name === "jobs") request.addEventListener("success", () => this.transaction.abort());
      return request;
    };
    Object.defineProperty(IDBTransaction.prototype, "error", {
      configurable: true,
      get: () => new DOMException("no", "QuotaExceededError"),
    });
    Object.assign(window, {
      empty: () => {
        IDBObjectStore.prototype.put = put;
        Object.defineProperty(IDBTransaction.prototype, "error", error ?? {});
      },
    });
  });
  return () => page.evaluate("window.empty()");
}

/** Opens the list of jobs; a job of this title is in it so often. */
async function isListed(page: Page, title: string, times: number): Promise<void> {
  await page.getByRole("button", { name: /open the list of jobs/ }).click();
  await page
    .getByRole("button", { name: `Delete ${title}`, exact: true })
    .first()
    .waitFor();
  await expect.poll(() => page.getByRole("button", { name: title, exact: true }).count(), SOON).toBe(times);
  await page.keyboard.press("Escape");
}

/** Takes the meshes out of the store, as if the browser had lost them. */
const loseMeshes = (page: Page) =>
  page.evaluate(
    () =>
      new Promise<void>((resolve, reject) => {
        const open = indexedDB.open("seamstay");
        open.onerror = () => reject(open.error);
        open.onsuccess = () => {
          const db = open.result;
          const tx = db.transaction("meshes", "readwrite");
          tx.objectStore("meshes").clear();
          tx.oncomplete = () => {
            db.close();
            resolve();
          };
        };
      }),
  );

describe("kept whole", { timeout: LONG }, () => {
  it("refused as it is written to disk, it is said; once there is room the job is kept again, and whole", async () => {
    const desk = await openPlanned(bench, smallFiles());
    const { page } = desk;
    await kept(page);
    await turnTo(page, "Papers");
    const empty = await fillStore(page);
    await enter(page, "Drawn by", "AB");
    await page.getByRole("alert").getByText(FULL).waitFor();
    await page.getByText("not kept", { exact: true }).waitFor();
    await empty();
    await enter(page, "Drawn by", "CD");
    await kept(page);
    await expect.poll(() => page.getByText(FULL).count(), SOON).toBe(0);
    await page.reload();
    await shows(page, "Drawn by", "CD");
    await page.getByRole("button", { name: "Undo drawn by" }).click();
    await shows(page, "Drawn by", "AB");
    await clear(desk);
  });

  it("the log of readings is there after a reload", async () => {
    const desk = await openPlanned(bench, sailFiles());
    const { page } = desk;
    await turnTo(page, "Site");
    for (const [k, force] of ["20", "21"].entries()) {
      await page.getByRole("button", { name: "T-C1", exact: true }).click();
      await page.getByLabel("Force, kN").fill(force);
      await page.getByRole("button", { name: "Write it into the log" }).click();
      await page.getByText(k === 0 ? "1 reading in the log." : "2 readings in the log.").waitFor();
    }
    await kept(page);
    await page.reload();
    await page.getByText("2 readings in the log.").waitFor();
    const log = page.getByRole("table", { name: "Log, the latest first" });
    await expect.poll(() => log.innerText(), SOON).toMatch(/21[\s\S]*20/);
    await clear(desk);
  });

  it("its mesh gone from the store, it is asked for; with it the job goes on, all undone and done again (bug: was lost)", async () => {
    const desk = await openPlanned(bench, smallFiles());
    const { page, revision } = desk;
    await turnTo(page, "Rolls");
    await enter(page, "Gap between cuts", "25");
    await kept(page);
    await loseMeshes(page);
    await page.reload();
    const waits = page.getByRole("alert").getByText(/reads its mesh from booth\.obj, which is not here/);
    await waits.waitFor();
    await isListed(page, "Ticket booth", 1);
    // where the mesh cannot be kept, the job without it stays (bug: it was deleted)
    await fillStore(page);
    await page.keyboard.press("j");
    await page.getByLabel("Choose files").setInputFiles([smallFiles()[1]]);
    await page.getByRole("alert").getByText(FULL).waitFor();
    await isListed(page, "Ticket booth", 1);
    await page.reload();
    await waits.waitFor();
    await page.keyboard.press("j");
    await page.getByLabel("Choose files").setInputFiles([smallFiles()[1]]);
    await planned(page);
    await isListed(page, "Ticket booth", 1);
    await shows(page, "Gap between cuts", "25");
    await page.reload();
    await shows(page, "Gap between cuts", "25");
    await page.getByRole("button", { name: "Undo gap between cuts" }).click();
    expect(await planned(page)).toBe(revision);
    await clear(desk);
  });
});

describe("two tabs on one job", { timeout: LONG }, () => {
  /** A job in two tabs; the first has changed it, the second has not heard of it. */
  async function openTwice() {
    const desk = await openPlanned(bench, smallFiles());
    const first = desk.page;
    await turnTo(first, "Papers");
    await enter(first, "Checked by", "both");
    await kept(first);
    const second = await desk.context.newPage();
    watch(second, desk);
    await second.goto(bench.url);
    await second.getByRole("button", { name: "Ticket booth", exact: true }).click();
    await planned(second);
    await turnTo(second, "Papers");
    await enter(first, "Drawn by", "first");
    await second.getByText(/just changed in another tab/).waitFor();
    return { desk, first, second };
  }

  it("changed in both and another job opened at once: the later change is a copy in the list", async () => {
    const { desk, second } = await openTwice();
    await second.getByRole("button", { name: /open the list of jobs/ }).click();
    await second.getByRole("button", { name: "bandstand", exact: true }).waitFor();
    // a change and another job in one breath, so that the change is written when its job is no longer on the desk
    await second.evaluate(() => {
      const all = [...document.querySelectorAll("button")];
      all.find((b) => b.getAttribute("aria-label") === "Undo checked by")?.click();
      all.find((b) => b.textContent === "bandstand")?.click();
    });
    await second.getByRole("button", { name: /^Seamstay Bandstand/i }).waitFor();
    await isListed(second, "Ticket booth (copy)", 1);
    await isListed(second, "Ticket booth", 1);
    await clear(desk);
  });

  it("changed in both and loaded anew before it is written: the later change goes on as a copy", async () => {
    const { desk, first, second } = await openTwice();
    await second.getByLabel("Drawn by").first().fill("second");
    await second.evaluate(() => {
      const field = document.activeElement;
      field?.dispatchEvent(new KeyboardEvent("keydown", { key: "Enter", bubbles: true }));
      // what the page wants to write as it goes does not come through
      IDBFactory.prototype.open = () => {
        throw new DOMException("gone", "AbortError");
      };
      IDBDatabase.prototype.transaction = () => {
        throw new DOMException("gone", "AbortError");
      };
      location.reload();
    });
    await second.getByRole("button", { name: /^Seamstay Ticket booth \(copy\)/ }).waitFor();
    await shows(second, "Drawn by", "second");
    await kept(second);
    await second.reload();
    await second.getByRole("button", { name: /^Seamstay Ticket booth \(copy\)/ }).waitFor();
    await first.reload();
    await shows(first, "Drawn by", "first");
    await desk.context.close();
  });
});
