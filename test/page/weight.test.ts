// What the browser must load before the first view: scripts named by the page and whatever they import at once, packed.
import { readFileSync } from "node:fs";
import { dirname, join, relative } from "node:path";
import { gzipSync } from "node:zlib";
import { expect, it } from "vitest";
import { buildPage, LONG } from "./bench.ts";

/** Scripts reached from the page without a dynamic import, by their path in the build. */
function findInitial(folder: string): string[] {
  const html = readFileSync(join(folder, "index.html"), "utf8");
  const open = [...html.matchAll(/(?:src|href)="\.\/([^"]+\.js)"/g)].map((m) => m[1]);
  const found = new Set<string>();
  for (let path = open.pop(); path !== undefined; path = open.pop()) {
    if (found.has(path)) continue;
    found.add(path);
    const text = readFileSync(join(folder, path), "utf8");
    for (const [, name] of text.matchAll(/(?:from|import)\s*"(\.[^"]+\.js)"/g))
      open.push(relative(folder, join(folder, dirname(path), name)));
  }
  return [...found];
}

it(
  "the initial script is under 350 kB packed, and the drawing library is not in it",
  async () => {
    const folder = await buildPage();
    const texts = findInitial(folder).map((path) => readFileSync(join(folder, path)));
    expect(texts.length).toBeGreaterThan(0);
    const packed = texts.reduce((sum, text) => sum + gzipSync(text).length, 0);
    // React alone is more than this: the list of scripts was found.
    expect(packed).toBeGreaterThan(40_000);
    expect(packed).toBeLessThan(350_000);
    for (const text of texts) expect(text.includes("WebGLRenderer")).toBe(false);
  },
  LONG,
);
