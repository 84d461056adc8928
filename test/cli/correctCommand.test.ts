import { cpSync, mkdtempSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { basename, dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { expect, test } from "vitest";
import { correctCommand } from "../../src/cli/correctCommand.ts";
import type { Surroundings } from "../../src/cli/makePlan.ts";
import { readingColumns } from "../../src/core/rig/correct/readReadings.ts";

const job = fileURLToPath(new URL("../../templates/boat-shed/job.json", import.meta.url));

function openSite(rows: string[]) {
  const folder = mkdtempSync(join(tmpdir(), "seamstay-"));
  const file = join(folder, "read.csv");
  writeFileSync(file, [readingColumns.join(","), ...rows].join("\n"));
  const said: string[] = [];
  const around: Surroundings = {
    terminal: { out: (text) => said.push(text), err: () => {}, live: false },
    openDoors: () => Promise.reject(new Error("corrections open no doors")),
  };
  return {
    folder,
    file,
    said,
    around,
    run: (...args: string[]) => correctCommand([job, "--readings", file, ...args], around),
  };
}

test("an eighth too much at every corner of the starter's sail: told what to let out; readings kept once, never overwritten", async () => {
  const site = openSite(["T1,47.4", "T2,47.4", "T3,47.4", "T4,47.4"].map((r) => `08:00,AB,${r},,,,,,,`));
  const kept = join(site.folder, "kept");
  expect(await site.run("--out", kept)).toBe(0);
  expect(site.said.join("\n")).toMatch(/T\d let out \d+\.\d mm/);
  expect(readdirSync(kept).sort()).toEqual(["readings-001.correction.json", "readings-001.csv"]);
  expect(readFileSync(join(kept, "readings-001.csv"), "utf8")).toBe(readFileSync(site.file, "utf8"));
  const { correction } = JSON.parse(readFileSync(join(kept, "readings-001.correction.json"), "utf8"));
  for (const id of ["T1", "T2", "T3", "T4"])
    expect(Math.abs(correction.forecast.forces[id] / 42.08 - 1)).toBeLessThan(0.05);
  writeFileSync(site.file, `${readingColumns.join(",")}\n09:00,AB,T1,42.1,,,,,,,\n`);
  expect(await site.run("--out", kept, "--json")).toBe(0);
  expect(readdirSync(kept)).toHaveLength(4);
  const answer = JSON.parse(site.said.at(-1) ?? "");
  expect(answer.command).toBe("correct");
  expect(answer.correction.moves).toEqual([]);
});

test("readings are kept beside the job; the next set builds on them and the turns told, and rows of a log that grows count once", async () => {
  const site = openSite(["T1,47.4", "T2,47.4", "T3,47.4", "T4,47.4"].map((r) => `08:00,AB,${r},,,,,,,`));
  const own = join(site.folder, "shed");
  cpSync(dirname(job), own, { recursive: true });
  const run = (...args: string[]) =>
    correctCommand([join(own, "job.json"), "--readings", site.file, "--json", ...args], site.around);
  expect(await run()).toBe(0);
  const first = JSON.parse(site.said.at(-1) ?? "");
  expect(first.kept.map((k: string) => basename(k))).toEqual(["readings-001.csv", "readings-001.correction.json"]);
  expect(readdirSync(join(own, "readings"))).toHaveLength(2);
  // the log goes on: what is read now are the forces forecast, so nothing is left to turn
  const forecast = ["T1", "T2", "T3", "T4"].map(
    (id) => `10:00,AB,${id},${first.correction.forecast.forces[id].toFixed(2)},,,,,,,`,
  );
  writeFileSync(site.file, `${readFileSync(site.file, "utf8")}\n${forecast.join("\n")}\n`);
  expect(await run()).toBe(0);
  const second = JSON.parse(site.said.at(-1) ?? "");
  expect(second.correction.moves).toEqual([]);
  expect(second.findings.map((f: { code: string }) => f.code)).not.toContain("reading-contradiction");
  for (const f of second.correction.fitted)
    expect(Math.abs(f.force - first.correction.forecast.forces[f.adjuster])).toBeLessThan(0.5);
  expect(readdirSync(join(own, "readings"))).toHaveLength(4);
  // asked again with the same file: the same answer, nothing kept twice
  expect(await run()).toBe(0);
  const again = JSON.parse(site.said.at(-1) ?? "");
  expect(again.correction).toEqual(second.correction);
  expect(again.kept).toEqual([]);
});

test("without readings, with a wrong stage or a wrong row: usage and errors, nothing planned", async () => {
  const site = openSite(["08:00,AB,T1,4,,,,,,,,"]);
  const around = {
    terminal: { out: () => {}, err: () => {}, live: false },
    openDoors: () => Promise.reject(new Error()),
  };
  await expect(correctCommand([job], around)).rejects.toThrow(/--readings/);
  await expect(site.run("--stage", "half")).rejects.toThrow(/half/);
  await expect(site.run()).rejects.toThrow(/row 2/);
});
