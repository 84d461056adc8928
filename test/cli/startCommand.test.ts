import { mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { listStarters, loadFonts } from "../../src/cli/packageFiles.ts";
import { readTemplate } from "../job/catalogueFiles.ts";
import { STARTER_FORMS } from "../templates/starterForms.ts";
import { call, makeScratch } from "./fakePlan.ts";

describe("start", () => {
  it("lists the starters, one line each", async () => {
    const { exit, out } = await call(["start"]);
    expect(exit).toBe(0);
    expect(out.trimEnd().split("\n")).toHaveLength(listStarters().length);
    expect(out).toContain("market-hall");
  });

  it("has a generator for every starter of the list", () => {
    expect(STARTER_FORMS.map((f) => f.name)).toEqual(listStarters().map((s) => s.name));
  });

  it.each(listStarters())("copies $name whole into a new folder", async ({ name }) => {
    const folder = join(makeScratch(), "new", "bay");
    const { exit, out } = await call(["start", name, folder]);
    expect(exit).toBe(0);
    expect(out).toContain(`seamstay plan ${join(folder, "job.json")}`);
    expect(readdirSync(folder).sort()).toEqual(["form.obj", "job.json"]);
    expect(JSON.parse(readFileSync(join(folder, "job.json"), "utf8"))).toEqual(readTemplate(`${name}/job.json`));
    expect(readdirSync(join(folder, ".."))).toEqual(["bay"]);
  });

  it("takes an empty folder, refuses any other and touches nothing", async () => {
    const root = makeScratch();
    mkdirSync(join(root, "empty"));
    expect((await call(["start", "market-hall", join(root, "empty")])).exit).toBe(0);
    const again = await call(["start", "market-hall", join(root, "empty")]);
    expect(again).toMatchObject({ exit: 2, out: "" });
    expect(again.err).toContain("(start-taken)");
    writeFileSync(join(root, "file"), "x");
    expect((await call(["start", "market-hall", join(root, "file")])).err).toContain("(start-taken)");
    expect(readFileSync(join(root, "file"), "utf8")).toBe("x");
  });

  it("names the starters there are", async () => {
    const { exit, err } = await call(["start", "palace", "x"]);
    expect(exit).toBe(2);
    expect(err).toContain('there is no starter "palace"; there is market-hall');
  });
});

describe("files of the package", () => {
  it("holds the two faces papers are lettered in", () => {
    const { regular, bold } = loadFonts();
    // TrueType files begin with version 1.0 (0x00010000).
    for (const face of [regular, bold]) expect([...face.subarray(0, 4)]).toEqual([0, 1, 0, 0]);
  });
});
