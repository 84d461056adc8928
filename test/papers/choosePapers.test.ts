import { unzipSync } from "fflate";
import { expect, test } from "vitest";
import { choosePapers, DEFAULT_PAPERS, PAPER_CHOICES } from "../../src/core/papers/choosePapers.ts";
import { writePapers } from "../../src/core/papers/writePapers.ts";
import { fonts } from "./made/madePapers.ts";
import { sampleFacts } from "./made/sampleFacts.ts";
import { withRig } from "./made/sampleRig.ts";

test("words of a list name groups, in one order, each once; all is everything", () => {
  expect(choosePapers(" rig, Roll-Sheets,rig ")).toEqual(["roll-sheets", "rig"]);
  expect(choosePapers("all")).toEqual(Object.keys(PAPER_CHOICES));
  expect(DEFAULT_PAPERS).not.toContain("bundle");
  expect(() => choosePapers("cards")).toThrow(/"cards" names no paper; choose of: all, cut-files/);
  expect(() => choosePapers(" , ")).toThrow(/no paper is named/);
  expect(() => choosePapers("constructor")).toThrow(/names no paper/);
});

test("only what is chosen is written; the bundle holds the same bytes and carries no clock", async () => {
  const facts = withRig(sampleFacts());
  const papers = choosePapers("lists,cut-files,index,bundle");
  const { files } = await writePapers(facts, { fonts, papers });
  const paths = files.map((f) => f.path);
  expect(paths.filter((p) => p.endsWith(".pdf"))).toEqual(["index.pdf"]);
  expect(paths.some((p) => p.includes("dxf2000"))).toBe(false);
  const zip = files.at(-1)!;
  expect(zip.path).toBe("papers.zip");
  const held = unzipSync(zip.bytes);
  expect(Object.keys(held)).toEqual(paths.slice(0, -1));
  for (const f of files.slice(0, -1)) expect(Buffer.compare(held[f.path]!, f.bytes), f.path).toBe(0);
  // Date and time of the first local header (published ZIP layout: time at 10, date at 12): noon of the job's day.
  const view = new DataView(zip.bytes.buffer, zip.bytes.byteOffset);
  const [time, day] = [view.getUint16(10, true), view.getUint16(12, true)];
  expect([time >> 11, day >> 9, (day >> 5) & 15, day & 31]).toEqual([12, 2026 - 1980, 3, 2]);
});
