// What a hand on the keys and an eye in the sun need: every control reached and seen with its focus, no violation with whatever can be
// open, texts of the drawings and figures at the roof against their grounds, the focus never lost.
import type { Locator, Page } from "playwright-core";
import { beforeAll, describe, expect, it } from "vitest";
import { benchOfFile, type Desk, judge, kept, LONG, openPlanned, planned, SOON, turnTo } from "./bench.ts";
import { sailFiles } from "./smallForm.ts";

const LEAVES = ["Form", "Seams", "Panels", "Rolls", "Rig", "Papers", "Site"];
const SCHEMES = ["light", "dark"] as const;
const bench = benchOfFile();
let desk: Desk;

beforeAll(async () => {
  desk = await openPlanned(bench, sailFiles());
}, LONG);

/** Opens a leaf, and everything on it that can be opened. */
async function openAll(page: Page, leaf: string): Promise<void> {
  await turnTo(page, leaf);
  if (leaf === "Papers") await page.getByText(/files, revision/).waitFor();
  if (leaf === "Seams") await page.getByRole("slider").first().waitFor();
  const shut = page.locator("main details:not([open]) > summary");
  await expect
    .poll(async () => {
      if ((await shut.count()) > 0) await shut.first().click();
      return shut.count();
    }, SOON)
    .toBe(0);
}

/** Controls in view that Tab must reach, each with a name to find it by; `marks` counts them through. */
const markControls = (page: Page) =>
  page.evaluate(() => {
    const all = [
      ...document.querySelectorAll<HTMLElement | SVGElement>(
        "button:not(:disabled), input:not(:disabled), select:not(:disabled), summary, [tabindex='0']",
      ),
    ].filter((e) => e.checkVisibility() && e.tabIndex >= 0);
    Object.assign(window, { controls: all, reached: new Set<Element>(), blind: [] as string[] });
    return all.length;
  });

/** Notes each control that gets the focus, and whether it shows it: an outline, or a heavy line in a drawing. */
const watchFocus = (page: Page) =>
  page.evaluate(() => {
    const w = window as unknown as { reached: Set<Element>; blind: string[]; watched?: true };
    if (w.watched) return;
    w.watched = true;
    addEventListener("focusin", ({ target }) => {
      if (!(target instanceof Element)) return;
      w.reached.add(target);
      const lines = [target, ...target.querySelectorAll("path, circle"), target.parentElement?.querySelector("span")];
      const seen = lines.some((e) => {
        if (e == null) return false;
        const { outlineStyle, outlineWidth, strokeWidth } = getComputedStyle(e);
        if (e instanceof SVGElement && e !== target) return Number.parseFloat(strokeWidth) >= 4;
        return outlineStyle !== "none" && Number.parseFloat(outlineWidth) >= 2;
      });
      if (!seen) w.blind.push(target.outerHTML.slice(0, 120));
    });
  });

/** Contrasts below `least` among texts of a place, each against the ground it stands on. Runs in the page. */
const lowContrast = (page: Page, selector: string, least: number) =>
  page.evaluate(
    ({ selector, least }) => {
      const canvas = document.createElement("canvas").getContext("2d", { willReadFrequently: true });
      if (canvas === null) throw new Error("no canvas");
      const rgb = (colour: string) => {
        canvas.clearRect(0, 0, 1, 1);
        canvas.fillStyle = colour;
        canvas.fillRect(0, 0, 1, 1);
        return [...canvas.getImageData(0, 0, 1, 1).data];
      };
      // relative luminance and contrast: WCAG 2.2, definitions
      const luminance = (colour: string) => {
        const [r, g, b] = rgb(colour).map((v) => {
          const c = v / 255;
          return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
        });
        return 0.2126 * r + 0.7152 * g + 0.0722 * b;
      };
      const ground = (e: Element): string => {
        const piece = e.closest("g.panel, g.placed")?.querySelector("path");
        if (piece) return getComputedStyle(piece).fill;
        for (let p: Element | null = e; p !== null; p = p.parentElement) {
          const colour = getComputedStyle(p).backgroundColor;
          if (rgb(colour)[3] > 0) return colour;
        }
        return "white";
      };
      const texts = [...document.querySelectorAll(selector)].filter((e) => e.checkVisibility());
      const low = texts.flatMap((e) => {
        const own = getComputedStyle(e);
        const [a, b] = [luminance(e instanceof SVGElement ? own.fill : own.color), luminance(ground(e))];
        const contrast = (Math.max(a, b) + 0.05) / (Math.min(a, b) + 0.05);
        return contrast < least ? [`${(e.textContent ?? "").slice(0, 40)}: ${contrast.toFixed(2)}`] : [];
      });
      return { texts: texts.length, low: [...new Set(low)] };
    },
    { selector, least },
  );

const hasFocus = (one: Locator) =>
  expect.poll(() => one.evaluate((e) => e === document.activeElement), SOON).toBe(true);

describe("within reach", { timeout: LONG }, () => {
  it.each(LEAVES)("Tab leads to every control of %s, and each shows its focus", async (leaf) => {
    const { page } = desk;
    await openAll(page, leaf);
    // set by a script the focus is not shown; it is when the keys bring it back here
    await page.getByRole("button", { name: /open the list of jobs$/ }).focus();
    const controls = await markControls(page);
    await watchFocus(page);
    for (let i = 0; i < controls + 10; i++) await page.keyboard.press("Tab");
    const { missed, blind } = await page.evaluate(() => {
      const w = window as unknown as { controls: Element[]; reached: Set<Element>; blind: string[] };
      const left = w.controls.filter((e) => e.isConnected && !w.reached.has(e));
      return { missed: left.map((e) => e.outerHTML.slice(0, 120)), blind: [...new Set(w.blind)] };
    });
    expect({ missed, blind }).toEqual({ missed: [], blind: [] });
    expect(controls).toBeGreaterThan(12);
  });

  it.each(SCHEMES)(
    "axe finds nothing with everything open: leaves, sheets, the question before deleting, layouts side by side, %s",
    async (colorScheme) => {
      const { page } = desk;
      await page.emulateMedia({ colorScheme });
      for (const leaf of LEAVES) {
        await openAll(page, leaf);
        expect(await judge(page), leaf).toEqual([]);
      }
      await page.keyboard.press("Escape");
      for (const [key, title] of [
        ["?", "Keys"],
        ["f", "Findings"],
        ["j", "Jobs"],
      ]) {
        await page.locator("h1").focus();
        await page.keyboard.press(key);
        const sheet = page.getByRole("dialog", { name: title });
        await sheet.waitFor();
        if (title === "Jobs") {
          await sheet
            .getByRole("button", { name: /^Delete / })
            .first()
            .click();
          await sheet.getByRole("button", { name: "Keep it" }).waitFor();
        }
        expect(await judge(page), title).toEqual([]);
        await page.keyboard.press("Escape");
        await sheet.waitFor({ state: "detached" });
      }
      await turnTo(page, "Seams");
      await page.getByRole("button", { name: "Compare layouts" }).click();
      await page
        .getByRole("button", { name: /^Take / })
        .first()
        .waitFor();
      expect(await judge(page)).toEqual([]);
      await page.getByRole("button", { name: "Back to the surface" }).click();
    },
  );

  it.each(SCHEMES)("texts of drawings reach 4.5 to 1 on what they stand on, lit or not, %s", async (colorScheme) => {
    const { page } = desk;
    await page.emulateMedia({ colorScheme });
    for (const [leaf, texts] of [
      ["Panels", ".sheet text"],
      ["Rolls", ".sheet text, .rollkey li"],
      ["Rig", ".sheet text, .chart text, .dashkey li"],
      ["Form", ".names .name"],
    ]) {
      await turnTo(page, leaf);
      await page.locator(texts).first().waitFor();
      await expect.poll(() => lowContrast(page, texts, 4.5), { ...SOON, message: leaf }).toMatchObject({ low: [] });
      await expect.poll(async () => (await lowContrast(page, texts, 4.5)).texts, SOON).toBeGreaterThan(2);
    }
    await turnTo(page, "Panels");
    await page.getByRole("button", { name: /^Panel P2/ }).press("Enter");
    await page.locator(".side-name").first().waitFor();
    await expect.poll(() => lowContrast(page, ".sheet text", 4.5), SOON).toMatchObject({ low: [] });
    // a panel on its own is a picture no leaf opens with
    await expect.poll(() => judge(page), SOON).toEqual([]);
    await page.keyboard.press("Escape");
  });

  it.each(SCHEMES)("at the roof figures, units and words reach 7 to 1, %s", async (colorScheme) => {
    const { page } = desk;
    await page.emulateMedia({ colorScheme });
    await turnTo(page, "Site");
    await page.getByRole("button", { name: "on ▸" }).click();
    await page.getByRole("button", { name: "T-C1", exact: true }).click();
    await page.getByLabel("Force, kN").fill("300");
    await page.locator(".window .off").waitFor();
    const figures =
      ".leaf-site :is(h1, .answer, input, output, .unit, .window, .window strong, label, .who, legend, td)";
    await expect.poll(() => lowContrast(page, figures, 7), SOON).toMatchObject({ low: [] });
    await expect.poll(async () => (await lowContrast(page, figures, 7)).texts, SOON).toBeGreaterThan(12);
    await page.getByLabel("Force, kN").fill("");
  });

  it("the focus comes back from a sheet, stays in the question before deleting, and is not lost with what was removed", async () => {
    const { page } = desk;
    await kept(page);
    for (const [name, title] of [
      [/^Keys$/, "Keys"],
      [/notes?$/, "Findings"],
      [/open the list of jobs$/, "Jobs"],
    ] as const) {
      const button = page.getByRole("button", { name });
      await button.press("Enter");
      const sheet = page.getByRole("dialog", { name: title });
      await sheet.waitFor();
      if (title === "Jobs") {
        await sheet.getByRole("button", { name: /^Delete / }).press("Enter");
        await hasFocus(sheet.getByRole("button", { name: "Keep it" }));
        await page.keyboard.press("Enter");
        await hasFocus(sheet.getByRole("button", { name: /^Delete / }));
      }
      await page.keyboard.press("Escape");
      await sheet.waitFor({ state: "detached" });
      await hasFocus(button);
    }
    await turnTo(page, "Rolls");
    await page.getByRole("button", { name: "Add a roll" }).press("Enter");
    const remove = page.getByRole("button", { name: "Remove roll" });
    await remove.first().waitFor();
    // the small sail lists none of its own: the one that was added
    await expect.poll(() => remove.count(), SOON).toBe(1);
    await remove.last().press("Enter");
    await expect.poll(() => remove.count(), SOON).toBe(0);
    await expect
      .poll(
        () =>
          page.evaluate(
            () => document.activeElement?.closest(".margin") !== null && document.activeElement !== document.body,
          ),
        SOON,
      )
      .toBe(true);
    await planned(page);
    expect(desk.faults).toEqual([]);
  });
});
