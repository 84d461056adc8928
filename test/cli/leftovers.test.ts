import { spawnSync } from "node:child_process";
import { mkdirSync, readdirSync, readFileSync, utimesSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { expect, it } from "vitest";
import { clearLeftovers } from "../../src/cli/leftovers.ts";
import { writeOutputFolder } from "../../src/cli/outputFolder.ts";
import { makeScratch } from "./fakePlan.ts";

/** The number of a process that has ended. */
function deadPid(): number {
  return spawnSync(process.execPath, ["-e", ""]).pid;
}

const facts = (mark: string) => `{"format":"seamstay-facts","version":1,"mark":"${mark}"}`;

function make(path: string, files: Record<string, string>): string {
  mkdirSync(path, { recursive: true });
  for (const [name, text] of Object.entries(files)) writeFileSync(join(path, name), text);
  return path;
}

const plan = [{ path: "facts.json", bytes: new TextEncoder().encode(facts("new")) }];

it("clears away what a killed run left half-written or replaced, and says so", () => {
  const root = makeScratch();
  const out = make(join(root, "out"), { "facts.json": facts("whole") });
  const [one, two] = [deadPid(), deadPid()];
  make(`${out}.partial-${one}`, { "facts.json": facts("half") });
  make(`${out}.old-${two}`, { "facts.json": facts("replaced") });
  const told = writeOutputFolder(out, plan);
  expect(told).toHaveLength(2);
  for (const pid of [one, two]) expect(told.join("\n")).toContain(String(pid));
  expect(readdirSync(root)).toEqual(["out"]);
});

it("puts the earlier plan back where a run was killed between its two moves: files that are not of a plan stay", () => {
  const root = makeScratch();
  const out = join(root, "out");
  make(`${out}.old-${deadPid()}`, { "facts.json": facts("earlier"), "remark.txt": "flaw at 3 m" });
  make(`${out}.partial-${deadPid()}`, {});
  expect(writeOutputFolder(out, plan).join("\n")).toContain("is out again");
  expect(readdirSync(root)).toEqual(["out"]);
  expect(readFileSync(join(out, "remark.txt"), "utf8")).toBe("flaw at 3 m");
  expect(readFileSync(join(out, "facts.json"), "utf8")).toBe(facts("new"));
});

it("puts the youngest of several back", () => {
  const root = makeScratch();
  const out = join(root, "out");
  const pids = [deadPid(), deadPid()];
  pids.forEach((pid, i) => {
    const path = make(`${out}.old-${pid}`, { "facts.json": facts(String(i)) });
    utimesSync(path, 1000 + i, 1000 + i);
  });
  clearLeftovers(out);
  expect(readFileSync(join(out, "facts.json"), "utf8")).toBe(facts("1"));
  expect(readdirSync(root)).toEqual(["out"]);
});

it("leaves alone what a living process may be at, what is no plan, and names that only look alike", () => {
  const root = makeScratch();
  const out = make(join(root, "out"), { "facts.json": facts("whole") });
  // The parent of this process lives.
  make(`${out}.partial-${process.ppid}`, {});
  make(`${out}.old-${process.ppid}`, {});
  make(`${out}.old-${deadPid()}`, { "thesis.txt": "x" });
  make(`${out}.partial-lunch`, {});
  make(join(root, "outer.partial-1"), {});
  writeFileSync(`${out}.partial-${deadPid()}`, "a file");
  const before = readdirSync(root);
  const told = clearLeftovers(out);
  expect(told).toHaveLength(1);
  expect(told[0]).toContain("holds none");
  expect(readdirSync(root)).toEqual(before);
});
