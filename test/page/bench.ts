// The bench the page is tried on: built here, served by the very server of the command line, opened in Chromium.
import { execFileSync } from "node:child_process";
import { mkdirSync } from "node:fs";
import { join } from "node:path";
import axe from "axe-core";
import { type Browser, type BrowserContext, type BrowserContextOptions, chromium, type Page } from "playwright-core";
import { build } from "vite";
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

/** A plan on a busy machine, ms. */
export const PATIENCE = 60_000;

export interface Bench {
  url: string;
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

/** Builds the page into a folder of this run. */
export async function buildPage(name: string): Promise<string> {
  const outDir = join(import.meta.dirname, "../../out", `test-page-${name}`);
  mkdirSync(outDir, { recursive: true });
  await build({
    configFile: join(import.meta.dirname, "../../src/page/vite.config.ts"),
    logLevel: "error",
    build: { outDir, emptyOutDir: true },
  });
  return outDir;
}

/** Watches a page: what it asks for, what goes wrong in it. */
export function watch(page: Page, desk: Pick<Desk, "requests" | "faults">): void {
  page.on("request", (r) => desk.requests.push(r.url()));
  page.on("pageerror", (e) => desk.faults.push(String(e)));
  page.on("console", (m) => {
    if (m.type() === "error" || /Content Security Policy/i.test(m.text())) desk.faults.push(m.text());
  });
}

/** The bench, with a job handed over where one is given. */
export async function setUp(name: string, opened: OpenedJob | null = null): Promise<Bench> {
  const folder = await buildPage(name);
  const { server, port } = await servePage(folder, 0, opened);
  const browser = await chromium.launch({ executablePath: findChromium(), args: ARGS });
  const url = `http://127.0.0.1:${port}/`;
  return {
    url,
    browser,
    open: async (options = {}) => {
      const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, ...options });
      const page = await context.newPage();
      page.setDefaultTimeout(15_000);
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

/** Opens a leaf. */
export async function turnTo(page: Page, leaf: string): Promise<void> {
  await page.getByRole("navigation", { name: "Leaves" }).getByRole("button", { name: leaf }).click();
}

/** Types into a field by its label and leaves it. */
export async function enter(page: Page, label: string | RegExp, text: string): Promise<void> {
  const field = page.getByLabel(label).and(page.locator("input")).first();
  await field.fill(text);
  await field.press("Enter");
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
