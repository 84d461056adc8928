// Licences that must go along with the page: all of them are there, none that may not is let in, and a person can read them.
import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { build } from "vite";
import { afterAll, describe, expect, it } from "vitest";
import { gatherNotices, NOTICES } from "../../src/page/notices.ts";
import { benchOfFile, clear, LONG, SOON } from "./bench.ts";
import { tabTo } from "./keys.ts";

const scratch = mkdtempSync(join(tmpdir(), "seamstay-notices-"));
afterAll(() => rmSync(scratch, { recursive: true, force: true }));

/** Notices by the name of their package. */
function parse(text: string): Map<string, string> {
  const [, ...parts] = text.split(/^={100}$/m);
  return new Map(parts.map((part) => [part.trim().replace(/ \d[\s\S]*/, ""), part.trim().replace(/^.*\n/, "").trim()]));
}

/** Builds a page of one script that uses a package of that record and files. @returns its notices */
async function buildWith(name: string, pack: object, files: Record<string, string>): Promise<Map<string, string>> {
  const root = join(scratch, name);
  const folder = join(root, "node_modules", name);
  mkdirSync(folder, { recursive: true });
  writeFileSync(join(root, "index.html"), '<script type="module" src="/index.js"></script>');
  writeFileSync(join(root, "index.js"), `import { f } from "${name}"; console.log(f());`);
  writeFileSync(join(folder, "package.json"), JSON.stringify({ name, version: "1.0.0", main: "main.js", ...pack }));
  const source = "/* Copyright 1999 Somebody Else */\n// The copyright of none.\nexport const f = () => Math.random();";
  for (const [file, text] of Object.entries({ "main.js": source, ...files })) writeFileSync(join(folder, file), text);
  await build({ configFile: false, root, logLevel: "silent", plugins: [gatherNotices().page] });
  return parse(readFileSync(join(root, "dist", NOTICES), "utf8"));
}

describe("notices of a build", () => {
  it("have the text of the licence and the holders that sources name", async () => {
    const found = await buildWith("free", { license: "MIT" }, { LICENSE: "MIT License\n", NOTICE: "with thanks" });
    expect([...found]).toEqual([["free", "MIT License\n\nwith thanks\n\nCopyright 1999 Somebody Else"]]);
  });

  it.each([
    [
      "strict",
      { license: "GPL-3.0-only" },
      { LICENSE: "GNU" },
      /strict is in the page, but its licence "GPL-3.0-only"/,
    ],
    ["either", { license: "(MIT OR GPL-2.0)" }, { LICENSE: "MIT" }, /either is in the page, but its licence/],
    ["silent", {}, { LICENSE: "MIT" }, /silent is in the page, but its licence "undefined"/],
    ["bare", { license: "MIT" }, {}, /bare is in the page, but it comes without the text of its licence/],
  ])("stop it where a package may not go along: %s", async (name, pack, files, words) => {
    await expect(buildWith(name, pack, files)).rejects.toThrow(words);
  });
});

const bench = benchOfFile();

describe("notices of the page", { timeout: LONG }, () => {
  it("are of every package whose sources the maps of all scripts name, each with a text", async () => {
    const outDir = join(scratch, "mapped");
    const configFile = join(import.meta.dirname, "../../src/page/vite.config.ts");
    await build({ configFile, logLevel: "error", build: { outDir, sourcemap: true, minify: false } });
    const maps = readdirSync(join(outDir, "assets")).filter((n) => n.endsWith(".map"));
    const sources: string[] = maps.flatMap((n) => JSON.parse(readFileSync(join(outDir, "assets", n), "utf8")).sources);
    const wanted = new Set(sources.flatMap((s) => /.*\/node_modules\/((?:@[^/]+\/)?[^/]+)/.exec(s)?.[1] ?? []));
    // the maps are those of the page and of its workers
    for (const name of ["react", "clipper2-js", "pdfjs-dist"]) expect(wanted).toContain(name);
    // faces are no scripts
    wanted.add("dejavu-fonts-ttf");
    const found = parse(readFileSync(join(outDir, NOTICES), "utf8"));
    expect([...found.keys()].sort()).toEqual([...wanted].sort());
    for (const [name, text] of found) expect(text, name).toMatch(/permission|apache license/i);
    // read from the package's own file, as anyone can
    expect(found.get("three")).toContain("2010-2026 three.js authors");
    expect(found.get("clipper2-js")).toContain("Boost Software License");
    expect(found.get("makerjs")).toMatch(/Apache License[\s\S]*Copyright \(c\) Microsoft Corporation/);
    expect(found.get("@pdf-lib/fontkit")).toMatch(/Devon Govett[\s\S]*Copyright 2013 Google/);
    expect(found.get("@pdf-lib/fontkit")).not.toContain("Arjun Barrett");
  });

  it.each(["with a line", "without"])("are read by keyboard from the sheet of keys, %s", async (line) => {
    const desk = await bench.open();
    const { page, context } = desk;
    if (line === "without") {
      await page.waitForFunction(() => navigator.serviceWorker.controller !== null, undefined, SOON);
      await context.setOffline(true);
    }
    await page.keyboard.press("?");
    await tabTo(page, page.getByRole("dialog", { name: "Keys" }).getByRole("link", { name: /their licences$/ }));
    const [opened] = await Promise.all([context.waitForEvent("page"), page.keyboard.press("Enter")]);
    await expect.poll(() => opened.locator("body").innerText(), SOON).toMatch(/^three \d[\d.]* \(MIT\)$/m);
    expect(new URL(opened.url()).pathname).toBe(`/${NOTICES}`);
    await clear(desk);
  });
});
