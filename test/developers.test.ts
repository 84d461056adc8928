// What DEVELOPERS.md says of the source is true: every path it names exists, and its table of codes is that of the source.
import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { expect, it } from "vitest";
import { scanCodes } from "./scanCodes.ts";

const root = join(import.meta.dirname, "..");
const page = readFileSync(join(root, "DEVELOPERS.md"), "utf8");

function readRows(): string[][] {
  const section = page.split(/^## /m).find((part) => part.startsWith("Codes")) ?? "";
  return [...section.matchAll(/^\| ([a-z].*) \|$/gm)].map((m) => m[1].split(" | ")).filter(([code]) => code !== "code");
}

it("every path named exists", () => {
  const paths = [...new Set(page.match(/(?<![\w/.-])(src|test|templates|\.ci)\/[\w./-]*/g))];
  expect(paths.length).toBeGreaterThan(15);
  const missing = paths.map((path) => path.replace(/\.$/, "")).filter((path) => !existsSync(join(root, path)));
  expect(missing).toEqual([]);
});

it("every code of the source stands in the table, and every code of the table in the source", () => {
  const { codes, files } = scanCodes();
  expect(files).toBeGreaterThan(200);
  expect(codes.size).toBeGreaterThan(150);
  // Seen by each of the ways a code is given: thrown, by a maker, chosen, from a table, by kind.
  for (const code of ["mesh-closed", "obj-number", "seam-stress-left", "file-missing", "job-cable-unknown"])
    expect([...codes.keys()]).toContain(code);
  const listed = readRows().map(([code]) => code);
  const unlisted = [...codes]
    .filter(([code]) => !listed.includes(code))
    .map(([code, from]) => `${code}: ${[...from].join(", ")}`);
  expect(unlisted, "codes without a row in DEVELOPERS.md, Codes").toEqual([]);
  expect(
    listed.filter((code) => !codes.has(code)),
    "rows whose code the source no longer says",
  ).toEqual([]);
});

it("the table is in order, without doubles, its levels known, each code with a meaning", () => {
  const rows = readRows();
  const listed = rows.map(([code]) => code);
  expect(listed).toEqual([...new Set(listed)].sort());
  for (const row of rows) {
    expect(row, row[0]).toHaveLength(4);
    expect(row[1], row[0]).toMatch(/^(error|stop|caution|note)(, (error|stop|caution|note))*$/);
    expect(row[3].length, row[0]).toBeGreaterThan(5);
  }
});
