// The log of the site as files and as rounds; no browser.
import { describe, expect, it } from "vitest";
import { addTurns } from "../../src/page/actions/site/addTurns.ts";
import { strikeReading } from "../../src/page/actions/site/strikeReading.ts";
import { partReadings, readReadings, readTurns, writeReadings, writeTurns } from "../../src/page/keep/readings.ts";
import { logFiles } from "../../src/page/keep/saveFiles.ts";
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
const text = (bytes: Uint8Array) => new TextDecoder().decode(bytes);
const moves = [
  { adjuster: "T1", travel: 4 },
  { adjuster: "T2", travel: -2.5 },
];

const before: Project = { id: "p", job: { title: "t" } as Project["job"], mesh: null, log: [reading("08:00", 41, 7)] };
const turned = addTurns(before, { moves, step: 7, time: "08:30" });
const log = [...turned.log, reading("09:00", 44, 7)];

describe("the log of the site", () => {
  it("parts at the turns that were made: what is read after them is another state", () => {
    expect(before.log).toHaveLength(1);
    const { text: now, kept } = partReadings(log, 7);
    expect(readReadings(now ?? "").map((r) => r.force)).toEqual([44]);
    expect(kept.map((k) => [readReadings(k.text).map((r) => r.force), k.travel])).toEqual([
      [[41], { T1: 4, T2: -2.5 }],
    ]);
    expect(partReadings(turned.log, 7)).toMatchObject({ text: null, kept: [{}] });
    expect(partReadings(log, 12)).toEqual({ text: null, kept: [] });
  });

  it("turns that were struck were not made: the readings are one state again", () => {
    const struck = [1, 2].reduce((project, index) => strikeReading(project, { index }), { ...turned, log });
    const { text: now, kept } = partReadings(struck.log, 7);
    expect([readReadings(now ?? "").map((r) => r.force), kept]).toEqual([[41, 44], []]);
  });

  it("readings and turns go out as two files and come back; turns are no readings", () => {
    expect(logFiles(log).map((f) => f.path)).toEqual(["readings.csv", "turns.csv"]);
    expect(readReadings(text(writeReadings(log))).map((r) => r.force)).toEqual([41, 44]);
    const back = readTurns(text(writeTurns(log)));
    expect(back.map((r) => [r.id, r.turned, r.step, r.force])).toEqual([
      ["T1", 4, 7, null],
      ["T2", -2.5, 7, null],
    ]);
    expect(() => readTurns("time,by\n")).toThrow(/the turns begin with "time,by"/);
    expect(() => readTurns("time,by,id,step,travel_mm\n08:30,AB,T1,7,much\n")).toThrow(
      /turns row 2: "much" is no number/,
    );
  });
});
