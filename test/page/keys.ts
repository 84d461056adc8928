// A hand on the keys alone: whatever is wanted is reached with Tab or a key of the page, and worked with the keys that work it.
import type { Locator, Page } from "playwright-core";
import { type GivenFiles, SOON } from "./bench.ts";

/** Leaves by their number, each with its question. */
const QUESTIONS = [
  "Is this surface in balance, and at which forces?",
  "Where do the seams run?",
  "What is cut, and what stress will it take?",
  "Which cloth, and where on it?",
  "How is it pulled up?",
  "What leaves the office?",
  "What does the roof say?",
];

/** How many Tabs lead from the focus to the nearest goal, by the order of the page, negative: back; runs in the page. */
function countTabs(goals: (Element | null)[]): number {
  const now = document.activeElement;
  if (goals.some((g) => g === now || g?.contains(now))) return 0;
  const all = [
    ...(document.querySelector("dialog[open]") ?? document).querySelectorAll<HTMLElement | SVGElement>(
      "a[href], button:not(:disabled), input:not(:disabled), select:not(:disabled), summary, [tabindex='0']",
    ),
  ].filter((e) => e.tabIndex >= 0 && e.checkVisibility());
  const from = all.indexOf(now as HTMLElement);
  const ways = all.flatMap((e, i) => (goals.some((g) => g === e || g?.contains(e)) ? [i - from] : []));
  // from nowhere, and to what no Tab is known to reach, one after the other
  return from < 0 || ways.length === 0 ? 1 : ways.sort((a, b) => Math.abs(a) - Math.abs(b))[0];
}

/** Goes on with Tab, or back with Shift, until the focus is in a goal; a page where no Tab leads there fails. */
export async function tabTo(page: Page, goal: Locator): Promise<void> {
  await goal.first().waitFor();
  for (let pressed = 0; pressed < 1200; ) {
    const away = await goal.evaluateAll(countTabs);
    if (away === 0) return;
    for (let i = 0; i < Math.abs(away); i++) await page.keyboard.press(away > 0 ? "Tab" : "Shift+Tab");
    pressed += Math.abs(away);
  }
  throw new Error(`no Tab leads to ${goal}`);
}

/** What the keys do at a control; each goes there by Tab first. */
export type Keyed = (page: Page) => Promise<void>;

const field = (page: Page, label: string | RegExp) => page.getByLabel(label).and(page.locator("input, select")).first();

/** A text typed into a field; Enter hands it on. */
export const typed =
  (label: string | RegExp, text: string): Keyed =>
  async (page) => {
    await tabTo(page, field(page, label));
    await page.keyboard.press("Control+a");
    await page.keyboard.type(text);
    await page.keyboard.press("Enter");
  };

/** A place typed into its three fields. */
export const placed =
  (label: string, place: readonly [string, string, string]): Keyed =>
  async (page) => {
    for (const [k, axis] of ["x", "y"].entries()) {
      await tabTo(page, field(page, `${label}, ${axis}`));
      await page.keyboard.press("Control+a");
      await page.keyboard.type(place[k]);
    }
    await typed(`${label}, z`, place[2])(page);
  };

/** Keys pressed in a field of choices, or on a switch. */
export const keyed =
  (label: string | RegExp, ...keys: string[]): Keyed =>
  async (page) => {
    await tabTo(page, field(page, label));
    for (const key of keys) await page.keyboard.press(key);
  };

/** A button pressed. */
export const pressed =
  (name: string | RegExp, key: "Enter" | "Space" = "Enter"): Keyed =>
  async (page) => {
    await tabTo(page, page.getByRole("button", { name, exact: typeof name === "string" }).first());
    await page.keyboard.press(key);
  };

/** Details unfolded. */
export const unfolded =
  (words: string | RegExp): Keyed =>
  async (page) => {
    await tabTo(page, page.locator("summary", { hasText: words }).first());
    await page.keyboard.press("Enter");
  };

/** From now on files are asked of the test: to begin with it as Enter is pressed may be too late, and the browser asks on its own. */
export function awaitChoosers(page: Page): void {
  page.on("filechooser", () => undefined);
}

/** Files of a person, asked for by a control. */
export const givenBy =
  (control: Locator, files: GivenFiles): Keyed =>
  async (page) => {
    await tabTo(page, control);
    const [chooser] = await Promise.all([page.waitForEvent("filechooser"), page.keyboard.press("Enter")]);
    await chooser.setFiles(files);
  };

/** Waits until the plan of the last change stands: a moment after a change that of the one before still does. */
export const rested: Keyed = async (page) => {
  await page.waitForFunction(
    () => {
      const says = (place: string, words: string) =>
        [...document.querySelectorAll(place)].some((e) => e.textContent?.includes(words));
      return says(".state span", "Planned, revision") && !says(".answer", "still the plan before");
    },
    undefined,
    SOON,
  );
};

/** Several after one another. */
export const inTurn =
  (...all: Keyed[]): Keyed =>
  async (page) => {
    for (const one of all) await one(page);
  };

/** Leaves whatever field has the focus, and opens a leaf by its number. */
export async function leaf(page: Page, number: number): Promise<void> {
  await page.keyboard.press("Escape");
  await page.keyboard.press(String(number));
  await page.getByRole("heading", { name: QUESTIONS[number - 1] }).waitFor();
}
