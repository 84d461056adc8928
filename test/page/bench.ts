// The bench the page is tried on: built here, served by the very server of the command line, opened in Chromium.
// Whatever is read after an act is polled: on a busy machine the page may answer a moment later.
import { execFileSync } from "node:child_process";
import { createHash } from "node:crypto";
import { existsSync, mkdirSync, readdirSync, readFileSync, renameSync, rmSync } from "node:fs";
import { join } from "node:path";
import axe from "axe-core";
import {
  type Browser,
  type BrowserContext,
  type BrowserContextOptions,
  chromium,
  type Locator,
  type Page,
} from "playwright-core";
import { build } from "vite";
import { afterAll, beforeAll, expect } from "vitest";
import { type OpenedJob, servePage } from "../../src/cli/pageServer.ts";

const ARGS = [
  "--no-sandbox",
  "--disable-gpu",
  "--use-angle=swiftshader",
  "--enable-unsafe-swiftshader",
  "--disable-background-networking",
  "--disable-component-update",
  "--disable-sync",
  "--no-first-run",
];

/** What one wait may take on a busy machine, ms; nothing is ever waited for that long where all is well. */
export const PATIENCE = 120_000;

/** How a poll waits. */
export const SOON = { timeout: PATIENCE };

/** What a whole test may take. */
export const LONG = 4 * PATIENCE;

export interface Bench {
  url: string;
  /** The built page. */
  folder: string;
  browser: Browser;
  /** A page of a context of its own, on the desk; every request, error and refusal of the policy is written down. */
  open: (options?: BrowserContextOptions) => Promise<Desk>;
  close: () => Promise<void>;
}

export interface Desk {
  page: Page;
  context: BrowserContext;
  requests: string[];
  faults: string[];
}

function findChromium(): string {
  return execFileSync("bash", ["-c", `command -v "\${SEAMSTAY_CHROMIUM:-chromium}"`], { encoding: "utf8" }).trim();
}

const ROOT = join(import.meta.dirname, "../..");

/** Hash of everything the page is built from. */
function hashSources(): string {
  const hash = createHash("sha256");
  for (const top of ["src/page", "src/core", "templates"]) {
    const entries = readdirSync(join(ROOT, top), { recursive: true, withFileTypes: true }).filter((e) => e.isFile());
    for (const path of entries.map((e) => join(e.parentPath, e.name)).sort())
      hash.update(path.slice(ROOT.length)).update("\0").update(readFileSync(path));
  }
  hash.update(readFileSync(join(ROOT, "package-lock.json")));
  return hash.digest("hex").slice(0, 16);
}

/** Builds the page, once for all test files that want the same sources. @returns its folder */
export async function buildPage(): Promise<string> {
  const out = join(ROOT, "out");
  const done = join(out, `page-${hashSources()}`);
  if (existsSync(done)) return done;
  mkdirSync(out, { recursive: true });
  // never that of these sources: another worker may have built it since, and be at work on it
  for (const old of readdirSync(out).filter((n) => n.startsWith("page-") && !n.endsWith(".part")))
    if (join(out, old) !== done) rmSync(join(out, old), { recursive: true, force: true });
  const part = `${done}-${process.pid}.part`;
  // as people get it: where this says "test" the view library is built with checks that take seconds over a large roof
  process.env.NODE_ENV = "production";
  await build({
    configFile: join(ROOT, "src/page/vite.config.ts"),
    logLevel: "error",
    build: { outDir: part, emptyOutDir: true },
  });
  try {
    renameSync(part, done);
  } catch {
    // another test file was quicker
    rmSync(part, { recursive: true, force: true });
  }
  return done;
}

/** Watches a page: what it asks for, what goes wrong in it. */
export function watch(page: Page, desk: Pick<Desk, "requests" | "faults">): void {
  page.on("request", (r) => desk.requests.push(r.url()));
  page.on("pageerror", (e) => desk.faults.push(String(e)));
  page.on("console", (m) => {
    if (m.type() === "error" || /Content Security Policy/i.test(m.text())) desk.faults.push(m.text());
  });
}

/** The bench, with a job handed over where one is given; `args`: what else Chromium is started with. */
export async function setUp(opened: OpenedJob | null = null, args: readonly string[] = []): Promise<Bench> {
  const folder = await buildPage();
  const { server, port } = await servePage(folder, 0, opened);
  const browser = await chromium.launch({ executablePath: findChromium(), args: [...ARGS, ...args] });
  const url = `http://127.0.0.1:${port}/`;
  return {
    url,
    folder,
    browser,
    open: async (options = {}) => {
      const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, ...options });
      const page = await context.newPage();
      page.setDefaultTimeout(PATIENCE);
      const desk: Desk = { page, context, requests: [], faults: [] };
      watch(page, desk);
      await page.goto(url);
      await page.getByRole("heading", { level: 1 }).waitFor();
      return desk;
    },
    close: async () => {
      await browser.close();
      server.closeAllConnections();
      server.close();
    },
  };
}

/** The bench of a test file: set up before its tests, put away after them. */
export function benchOfFile(): Omit<Bench, "close"> {
  let bench: Bench | null = null;
  const there = (): Bench => {
    if (bench === null) throw new Error("the bench is there in tests and hooks only");
    return bench;
  };
  beforeAll(async () => {
    bench = await setUp();
  }, LONG);
  afterAll(() => bench?.close());
  return {
    get url() {
      return there().url;
    },
    get folder() {
      return there().folder;
    },
    get browser() {
      return there().browser;
    },
    open: (options) => there().open(options),
  };
}

/** Files as a person chooses them. */
export type GivenFiles = { name: string; mimeType: string; buffer: Buffer }[];

/** A desk of its own with these files opened on it. */
export async function openWith(
  bench: Pick<Bench, "open">,
  files: GivenFiles,
  options?: BrowserContextOptions,
): Promise<Desk> {
  const desk = await bench.open(options);
  await desk.page.getByLabel("Choose files").setInputFiles(files);
  return desk;
}

/** The same, once it is planned. */
export async function openPlanned(
  bench: Pick<Bench, "open">,
  files: GivenFiles,
  options?: BrowserContextOptions,
): Promise<Desk & { revision: string }> {
  const desk = await openWith(bench, files, options);
  return { ...desk, revision: await planned(desk.page) };
}

/** Nothing went wrong on a desk; it is put away. */
export async function clear({ context, faults }: Desk): Promise<void> {
  expect(faults).toEqual([]);
  await context.close();
}

/** Waits until what is on the desk is planned. */
export async function planned(page: Page): Promise<string> {
  const state = page.getByText(/^Planned, revision/);
  await state.waitFor({ timeout: PATIENCE });
  return (await state.textContent()) ?? "";
}

/** Waits until another plan than `before` stands. */
export async function plannedAnew(page: Page, before: string): Promise<string> {
  await page.waitForFunction(
    (old) => {
      const text = [...document.querySelectorAll(".state span")].map((s) => s.textContent ?? "");
      return text.some((t) => t.startsWith("Planned, revision") && t !== old);
    },
    before,
    { timeout: PATIENCE },
  );
  return planned(page);
}

/**
 * From now on the page presses Stop itself, once, as soon as what goes on is told in these words: within the same task, so that no
 * station is too quick to be caught.
 * @param place of the words; the button stands in it or beside it
 */
export async function stopAt(page: Page, words: string, place = ".state .doing"): Promise<void> {
  await page.evaluate(
    ([words, place]) => {
      const watch = new MutationObserver(() => {
        const told = document.querySelector(place);
        if (told === null || !new RegExp(words).test((told as HTMLElement).innerText)) return;
        const near = told.querySelector("button") === null ? told.parentElement : told;
        const press = [...(near?.querySelectorAll("button") ?? [])].find((b) => b.textContent?.startsWith("Stop"));
        if (press === undefined) return;
        watch.disconnect();
        press.click();
      });
      watch.observe(document.body, { subtree: true, childList: true, characterData: true });
    },
    [words, place],
  );
}

/** Opens a leaf. */
export async function turnTo(page: Page, leaf: string): Promise<void> {
  await page.getByRole("navigation", { name: "Leaves" }).getByRole("button", { name: leaf }).click();
}

/** Types into a field by its label and leaves it. */
export async function enter(page: Page, label: string | RegExp, text: string): Promise<void> {
  const field = fieldOf(page, label);
  await field.fill(text);
  await field.press("Enter");
}

/** Types a place into its three fields. */
export async function enterPlace(page: Page, label: string, place: readonly [string, string, string]): Promise<void> {
  for (const [k, axis] of ["x", "y", "z"].entries()) await page.getByLabel(`${label}, ${axis}`).fill(place[k]);
  await page.getByLabel(`${label}, z`).press("Enter");
}

/** The first entry of a label. */
export function fieldOf(page: Page, label: string | RegExp): Locator {
  return page.getByLabel(label).and(page.locator("input, select")).first();
}

/** Waits until a field shows a text. */
export async function shows(page: Page, label: string | RegExp, text: string): Promise<void> {
  const field = fieldOf(page, label);
  const end = Date.now() + PATIENCE;
  while ((await field.inputValue()) !== text) {
    if (Date.now() > end) throw new Error(`${label} shows ${await field.inputValue()}, not ${text}`);
    await page.waitForTimeout(50);
  }
}

/** Waits until the focus is in the place of a decision; it goes there after the leaf is drawn. */
export async function focused(page: Page, path: string): Promise<void> {
  await page.waitForFunction(
    (wanted) => document.activeElement?.closest("[data-path]")?.getAttribute("data-path") === wanted,
    path,
    { timeout: PATIENCE },
  );
}

/** Violations axe finds, one line each. */
export async function judge(page: Page): Promise<string[]> {
  await page.evaluate(axe.source);
  const found = await page.evaluate(async () => {
    const { violations } = await (globalThis as unknown as { axe: typeof import("axe-core") }).axe.run();
    return violations.flatMap((v) => v.nodes.map((n) => `${v.id}: ${n.target.join(" ")}: ${n.failureSummary ?? ""}`));
  });
  return found;
}

/** Waits until everything on the desk is kept. */
export async function kept(page: Page): Promise<void> {
  await page
    .getByText(/^kept \d/)
    .first()
    .waitFor();
}
