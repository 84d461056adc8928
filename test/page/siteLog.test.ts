// The log of the site as files and as rounds: out, edited as people and table programs edit, and in again; no browser.
// Source of the format: RFC 4180 (CRLF, quotes doubled, line breaks inside quotes).
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { partSiteLog, readSiteLog, writeReadings, writeSiteLog } from "../../src/core/plan/siteLog.ts";
import { PlanError } from "../../src/core/problem.ts";
import { readReadings } from "../../src/core/rig/correct/readReadings.ts";
import { addTurns } from "../../src/page/actions/site/addTurns.ts";
import { strikeReading } from "../../src/page/actions/site/strikeReading.ts";
import { takeLog } from "../../src/page/actions/site/takeLog.ts";
import { logFiles } from "../../src/page/keep/saveFiles.ts";
import { showTime, writeTime } from "../../src/page/parts/clock.ts";
import type { Project, Reading } from "../../src/page/store/project.ts";

const none = { frequency: null, freeLength: null, massPerMetre: null, temperature: null, at: null };
const reading = (time: string, force: number, step: number): Reading => ({
  time,
  by: "AB",
  id: "T1",
  force,
  ...none,
  step,
});
const moves = [
  { adjuster: "T1", travel: 4 },
  { adjuster: "T2", travel: -2.5 },
];

const before: Project = { id: "p", job: { title: "t" } as Project["job"], mesh: null, log: [reading("08:00", 41, 7)] };
const turned = addTurns(before, { moves, step: 7, time: "08:30" });
const log = [...turned.log, reading("09:00", 44, 7)];
const forcesIn = (text: string) => readReadings(text).map((r) => r.force);

/** The code a text is refused with, and the words. */
function refusal(text: string): [string, string] {
  try {
    readSiteLog(text);
  } catch (error) {
    if (error instanceof PlanError) return [error.code, error.message];
  }
  return ["", ""];
}

describe("the log of the site", () => {
  it("parts at the turns that were made: what is read after them is another state", () => {
    expect(before.log).toHaveLength(1);
    const { text: now, kept } = partSiteLog(log, 7);
    expect(forcesIn(now ?? "")).toEqual([44]);
    expect(kept.map((k) => [forcesIn(k.text), k.travel])).toEqual([[[41], { T1: 4, T2: -2.5 }]]);
    expect(partSiteLog(turned.log, 7)).toMatchObject({ text: null, kept: [{}] });
    expect(partSiteLog(log, 12)).toEqual({ text: null, kept: [] });
  });

  it("turns that were struck were not made: the readings are one state again", () => {
    const struck = [1, 2].reduce((project, index) => strikeReading(project, { index }), { ...turned, log });
    const { text: now, kept } = partSiteLog(struck.log, 7);
    expect([forcesIn(now ?? ""), kept]).toEqual([[41, 44], []]);
  });

  it("goes out whole, and beside it what counts; comes back as it was", () => {
    expect(logFiles(log).map((f) => f.path)).toEqual(["site-log.csv", "readings.csv"]);
    expect(logFiles([])).toEqual([]);
    expect(forcesIn(writeReadings(log))).toEqual([41, 44]);
    expect(readSiteLog(writeSiteLog(log))).toEqual({ whole: true, lines: log });
    const struck = strikeReading({ ...turned, log }, { index: 1 });
    expect(readSiteLog(writeSiteLog(struck.log)).lines).toEqual(struck.log);
    // steps are not in the readings of the contract: the lines are not told to be of one
    expect(readSiteLog(writeReadings(log))).toEqual({
      whole: false,
      lines: [log[0], log[3]].map(({ step: _, ...r }) => r),
    });
  });

  it("any text and number in it comes back as it was, through quotes, line breaks, formulas and apostrophes", () => {
    const hostile = fc.constantFrom(
      'a"b',
      "=1+1",
      "'t Hooft",
      "'=x",
      "a,b",
      "a;b",
      "a\r\nb",
      "-T1",
      "@x",
      "ß, 漢",
      '""',
      "'",
    );
    // blanks round a cell are no part of it
    const words = fc.oneof(hostile, fc.string({ unit: "binary" })).map((s) => s.trim());
    const number = fc.double({ noNaN: true, noDefaultInfinity: true }).map((n) => (n === 0 ? 0 : n));
    const size = number.map(Math.abs);
    const id = words.filter((s) => s !== "");
    const who = { time: words, by: words, id };
    const temperature = fc.option(fc.double({ min: -60, max: 80, noNaN: true }).map((n) => (n === 0 ? 0 : n)));
    const marks = { step: fc.nat(), struck: fc.constant(true as const) };
    const nothing = Object.fromEntries(
      ["force", "frequency", "freeLength", "massPerMetre", "temperature", "at"].map((k) => [k, fc.constant(null)]),
    );
    const optional = { requiredKeys: ["time", "by", "id", ...Object.keys(nothing)] as never[] };
    const line = fc.oneof(
      fc.record({ ...who, ...nothing, force: size, temperature, ...marks }, optional),
      fc.record({ ...who, ...nothing, at: fc.tuple(number, number, number), ...marks }, optional),
      fc.record(
        { ...who, ...nothing, turned: number, ...marks },
        {
          requiredKeys: [...optional.requiredKeys, "turned" as never],
        },
      ),
    );
    fc.assert(
      fc.property(fc.array(line, { maxLength: 8 }), (lines) => {
        expect(readSiteLog(writeSiteLog(lines as unknown as Reading[]))).toEqual({ whole: true, lines });
      }),
      { numRuns: 400 },
    );
  });

  it("an adjuster whose name begins like a formula is still known when its readings are worked with", () => {
    const text = writeReadings([{ ...reading("08:00", 40, 7), id: "-T1" }]);
    expect(text).toContain("'-T1");
    expect(readReadings(text)[0].id).toBe("-T1");
  });

  it("as a table program leaves it: semicolons, commas in numbers, columns moved about, a mark of the bytes' order", () => {
    const text =
      "\uFEFFid;struck;force_kN;travel_mm;time;by;temperature_C\r\nT1;;41,5;;08:00;;-3,5\r\nT2;yes;;-2,5;;CD;\r\n\r\n";
    const { whole, lines } = readSiteLog(text);
    expect(whole).toBe(true);
    expect(lines).toEqual([
      { time: "08:00", by: "", id: "T1", force: 41.5, ...none, temperature: -3.5 },
      { time: "", by: "CD", id: "T2", force: null, ...none, turned: -2.5, struck: true },
    ]);
  });

  it("what is wrong is told with its row as a table program numbers it, past line breaks in quotes", () => {
    const head = "time,by,id,force_kN,step,travel_mm,struck";
    expect(refusal(`${head}\n08:00,"A\nB",T1,41,7,,\n08:30,AB,T1,much,7,,\n`)).toEqual([
      "readings-number",
      expect.stringMatching(/^site log, row 4: force_kN is "much"/),
    ]);
    expect(refusal(`${head}\n08:00,AB,T1,41,7,,perhaps\n`)).toEqual([
      "readings-row",
      expect.stringMatching(/row 2: struck/),
    ]);
    expect(refusal(`${head}\n08:00,"AB,T1,41,7,,\n`)).toEqual([
      "readings-quote",
      expect.stringMatching(/row 2: a quote/),
    ]);
    expect(refusal(`${head},mood\n`)).toEqual(["readings-header", expect.stringMatching(/no column "mood"/)]);
    expect(refusal(`${head}\n08:00,AB,,41,7,,\n`)).toEqual([
      "readings-row",
      expect.stringMatching(/the id is missing/),
    ]);
    expect(refusal("hello")).toEqual(["readings-header", expect.stringMatching(/row 1/)]);
  });

  it("a whole log taken in is the log; readings alone are added to it in time, each once", () => {
    const at = (time: string, force: number) => reading(`2026-03-04T${time}:00+01:00`, force, 7);
    const project = { ...before, log: [at("08:00", 41), at("09:00", 44)] };
    const whole = [at("10:00", 50)];
    expect(takeLog(project, { whole: true, lines: whole }).log).toEqual(whole);
    const { step: _, ...known } = at("08:00", 41);
    const { step: __, ...fresh } = at("08:30", 42);
    const taken = takeLog(project, { whole: false, lines: [known, fresh] });
    expect(taken.log.map((r) => r.force)).toEqual([41, 42, 44]);
    expect(takeLog(taken, { whole: false, lines: [known, fresh] })).toBe(taken);
    // without a time that can be told they follow on
    expect(takeLog(before, { whole: false, lines: [fresh] }).log.map((r) => r.force)).toEqual([41, 42]);
  });

  it("time is that of the clock on the wall", () => {
    const now = new Date(2026, 2, 4, 5, 6, 7);
    expect(writeTime(now)).toMatch(/^2026-03-04T05:06:07[+-]\d\d:\d\d$/);
    expect(Date.parse(writeTime(now))).toBe(now.getTime());
    expect(showTime(writeTime(now))).toBe("2026-03-04 05:06");
    expect(showTime(now.toISOString())).toBe("2026-03-04 05:06");
    expect(showTime("08:00")).toBe("08:00");
  });
});
