import { existsSync, mkdirSync, readdirSync, readFileSync, symlinkSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { MANIFEST, writeOutputFolder } from "../../src/cli/outputFolder.ts";
import { PlanError } from "../../src/core/problem.ts";
import { makeScratch } from "./fakePlan.ts";

const facts = '{"format":"seamstay-facts","version":1}';
const file = (path: string, text: string) => ({ path, bytes: new TextEncoder().encode(text) });
const plan = [file("facts.json", facts), file("rolls/R1.dxf", "one"), file("findings.pdf", "f")];

function failure(act: () => void): PlanError {
  try {
    act();
  } catch (error) {
    if (error instanceof PlanError) return error;
    throw error;
  }
  throw new Error("accepted");
}

const list = (folder: string) => readdirSync(folder, { recursive: true, encoding: "utf8" }).sort();
const read = (folder: string, name: string) => readFileSync(join(folder, name), "utf8");

describe("output folder", () => {
  it("is made with its parents, and nothing is left beside it", () => {
    const root = makeScratch();
    const out = join(root, "a", "b");
    writeOutputFolder(out, plan);
    expect(list(out)).toEqual(["facts.json", "findings.pdf", "rolls", "rolls/R1.dxf", MANIFEST].sort());
    expect(readdirSync(join(root, "a"))).toEqual(["b"]);
  });

  it("takes an empty folder", () => {
    const out = makeScratch();
    writeOutputFolder(out, plan);
    expect(read(out, "rolls/R1.dxf")).toBe("one");
  });

  it("replaces an earlier plan: files of the old one go, files that are not of a plan stay with their dates", () => {
    const out = join(makeScratch(), "out");
    writeOutputFolder(out, plan);
    mkdirSync(join(out, "photos", "none yet"), { recursive: true });
    writeFileSync(join(out, "photos", "roof.jpg"), "jpg");
    writeFileSync(join(out, "rolls", "remark.txt"), "flaw at 3 m");
    writeOutputFolder(out, [file("facts.json", `${facts} `), file("rolls/R2.dxf", "two")]);
    expect(list(out)).toEqual(
      [
        "facts.json",
        MANIFEST,
        "photos",
        "photos/none yet",
        "photos/roof.jpg",
        "rolls",
        "rolls/R2.dxf",
        "rolls/remark.txt",
      ].sort(),
    );
    expect(read(out, "photos/roof.jpg")).toBe("jpg");
    expect(read(out, "facts.json")).toBe(`${facts} `);
  });

  it("keeps every file of a folder that has facts but no list of ours", () => {
    const out = makeScratch();
    writeFileSync(join(out, "facts.json"), facts);
    writeFileSync(join(out, "other.txt"), "x");
    writeOutputFolder(out, plan);
    expect(read(out, "other.txt")).toBe("x");
  });

  it.each<[string, (out: string) => void]>([
    ["files and no plan", (out) => writeFileSync(join(out, "thesis.txt"), "x")],
    ["a facts.json of another kind", (out) => writeFileSync(join(out, "facts.json"), '{"format":"facts of life"}')],
    ["a hidden file", (out) => writeFileSync(join(out, ".keep"), "")],
  ])("refuses a folder with %s, and touches nothing", (_, fill) => {
    const out = makeScratch();
    fill(out);
    const before = list(out);
    const error = failure(() => writeOutputFolder(out, plan));
    expect(error.code).toBe("out-foreign");
    expect(error.message).toContain("nothing was touched");
    expect(list(out)).toEqual(before);
  });

  it("refuses a file, a file above it, the folder one stands in and one above that", () => {
    const root = makeScratch();
    writeFileSync(join(root, "file"), "x");
    expect(failure(() => writeOutputFolder(join(root, "file"), plan)).code).toBe("out-not-folder");
    expect(failure(() => writeOutputFolder(join(root, "file", "below"), plan)).code).toBe("file-not-folder");
    const here = process.cwd();
    const out = join(root, "out");
    writeOutputFolder(out, plan);
    try {
      process.chdir(join(out, "rolls"));
      expect(failure(() => writeOutputFolder(out, plan)).code).toBe("out-inside");
      process.chdir(out);
      expect(failure(() => writeOutputFolder(".", plan)).code).toBe("out-inside");
      writeOutputFolder(join(out, "inner"), plan);
    } finally {
      process.chdir(here);
    }
  });

  it.each<[string, string]>([
    ["findings.pdf", "mine"],
    ["rolls", "a file where the plan wants a folder"],
  ])("refuses to overwrite %s that no plan wrote", (name) => {
    const out = makeScratch();
    writeFileSync(join(out, "facts.json"), facts);
    writeFileSync(join(out, name), "mine");
    const before = list(out);
    expect(failure(() => writeOutputFolder(out, plan)).code).toBe("out-clash");
    expect(list(out)).toEqual(before);
    expect(read(out, name)).toBe("mine");
  });

  it("leaves the earlier plan whole where the new one cannot be written", () => {
    const root = makeScratch();
    const out = join(root, "out");
    writeOutputFolder(out, plan);
    // Two files of one plan that exclude each other: the second cannot be made.
    const broken = [file("facts.json", facts), file("a", "x"), file("a/b", "y")];
    expect(failure(() => writeOutputFolder(out, broken)).code).toMatch(/^file-/);
    expect(read(out, "rolls/R1.dxf")).toBe("one");
    expect(readdirSync(root)).toEqual(["out"]);
  });

  it.each(["../x", "/x", "a//b", "", "a/./b", "a\\b", "a\0"])("refuses the file name %j", (path) => {
    const out = join(makeScratch(), "out");
    expect(failure(() => writeOutputFolder(out, [file(path, "x")])).code).toBe("out-path");
    expect(existsSync(out)).toBe(false);
  });

  it("follows a link to the folder and leaves the link in place", () => {
    const root = makeScratch();
    mkdirSync(join(root, "disk"));
    symlinkSync(join(root, "disk"), join(root, "link"));
    writeOutputFolder(join(root, "link"), plan);
    expect(read(join(root, "disk"), "rolls/R1.dxf")).toBe("one");
  });
});
