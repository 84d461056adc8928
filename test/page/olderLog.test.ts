// The log of a job zip as an older page saved it, in three tables: read into one log, nothing lost; no browser. The texts are what that
// page's writers made of the log below them, byte for byte (times in UTC without a zone, an apostrophe before what begins like a formula).
import { strToU8, zipSync } from "fflate";
import { describe, expect, it } from "vitest";
import { partSiteLog } from "../../src/core/plan/siteLog.ts";
import { PlanError } from "../../src/core/problem.ts";
import { readReadings } from "../../src/core/rig/correct/readReadings.ts";
import { takeLog } from "../../src/page/actions/site/takeLog.ts";
import { type LoadedFile, loadFiles, readFiles, readLog } from "../../src/page/keep/openFiles.ts";
import { logFiles } from "../../src/page/keep/saveFiles.ts";

const HEAD = "time,by,id,force_kN,frequency_Hz,free_length_m,mass_kg_m,temperature_C,x,y,z";
const READINGS = `${HEAD}\r
2026-03-04T08:00:00,AB,T1,41,,,,12,,,\r
2026-03-04T08:01:00,AB,'-T2,38,,,,12,,,\r
2026-03-04T09:00:00,"AB, CD",T1,44,,,,,,,\r
2026-03-04T09:01:00,,-,,5.5,12,1.9,,,,\r
2026-03-04T09:02:00,,A1,,,,,,1.5,-2,0.25\r
`;
const STRUCK = `${HEAD}\r\n2026-03-04T08:00:30,AB,T1,410,,,,12,,,\r\n`;
const TURNS = `time,by,id,step,travel_mm\r
2026-03-04T08:30:00,,T1,7,4\r
2026-03-04T08:30:00,,'-T2,7,-2.5\r
`;
const JOB = `${JSON.stringify({ format: "seamstay-job", version: 1, title: "Ticket booth" }, null, 2)}\n`;

const table = (name: string, text: string): LoadedFile => ({ name, bytes: Uint8Array.from(strToU8(text)) });
const older = [table("readings.csv", READINGS), table("readings-struck.csv", STRUCK), table("turns.csv", TURNS)];
const forcesIn = (text: string | null) => readReadings(text ?? "").map((r) => r.force);

async function openZip(files: Record<string, string>) {
  const zip = zipSync(Object.fromEntries(Object.entries(files).map(([name, text]) => [name, strToU8(text)])));
  const faults: string[] = [];
  const loaded = await loadFiles([new File([Uint8Array.from(zip)], "Ticket-booth.zip")]);
  return { ...readFiles(loaded, null, (fault) => faults.push(fault.message)), faults };
}

/** Code and words the tables are refused with. */
function refusal(files: readonly LoadedFile[]): string {
  try {
    readLog(files);
  } catch (error) {
    if (error instanceof PlanError) return `${error.code}: ${error.message}`;
  }
  return "";
}

describe("a log saved by an older page", () => {
  it("comes back whole from its zip: turns and struck readings in their places of time", async () => {
    const zipped = { "job.json": JOB, "readings.csv": READINGS, "readings-struck.csv": STRUCK, "turns.csv": TURNS };
    const { log } = await openZip(zipped);
    expect(log.map((r) => [r.time.slice(11), r.by, r.id, r.force ?? r.turned ?? r.at ?? r.frequency])).toEqual([
      ["08:00:00Z", "AB", "T1", 41],
      ["08:00:30Z", "AB", "T1", 410],
      ["08:01:00Z", "AB", "-T2", 38],
      ["08:30:00Z", "", "T1", 4],
      ["08:30:00Z", "", "-T2", -2.5],
      ["09:00:00Z", "AB, CD", "T1", 44],
      ["09:01:00Z", "", "-", 5.5],
      ["09:02:00Z", "", "A1", [1.5, -2, 0.25]],
    ]);
    expect(log.map((r) => r.struck ?? false)).toEqual([false, true, ...Array(6).fill(false)]);
    expect(log.flatMap((r) => r.step ?? [])).toEqual([7, 7]);
    expect(log[6]).toMatchObject({ freeLength: 12, massPerMetre: 1.9 });
  });

  it("a time that tells no zone is the page's own, without seconds or with a blank too (bug: taken for the machine's)", () => {
    const typed = table("readings.csv", "time,id,force_kN\n2026-03-04T08:10,T1,41\n2026-03-04 08:40:00,T1,44\n");
    expect(readLog([typed, older[2]])?.lines.map((r) => [r.time, r.force ?? r.turned])).toEqual([
      ["2026-03-04T08:10Z", 41],
      ["2026-03-04T08:30:00Z", 4],
      ["2026-03-04T08:30:00Z", -2.5],
      ["2026-03-04T08:40:00Z", 44],
    ]);
  });

  it("that cannot be read does not keep its job from being opened, and says why (bug: the whole zip was refused)", async () => {
    const zipped = { "job.json": JOB, "readings.csv": "time,id,force_kN\nnoon,T1,4\n", "turns.csv": TURNS };
    const { job, log, faults } = await openZip(zipped);
    expect([job.title, log]).toEqual(["Ticket booth", []]);
    expect(faults).toEqual([expect.stringMatching(/^readings\.csv: a line of T1 has the time "noon"/)]);
  });

  it("parts at its turns: what was read before them is another state, what was struck counts in neither", async () => {
    const { log } = await openZip({
      "job.json": JOB,
      "readings.csv": READINGS,
      "readings-struck.csv": STRUCK,
      "turns.csv": TURNS,
    });
    const { text, kept } = partSiteLog(log, 7);
    expect(forcesIn(text)).toEqual([44, null, null]);
    expect(kept.map((k) => [forcesIn(k.text), k.travel])).toEqual([[[41, 38], { T1: 4, "-T2": -2.5 }]]);
  });

  it("goes out in today's form and is the same log again", () => {
    const log = readLog(older)?.lines ?? [];
    expect(log).toHaveLength(8);
    const [today, counted] = logFiles(log).map((f) => ({ name: f.path, bytes: f.bytes }));
    expect(readLog([counted, today])).toEqual({ whole: true, lines: log });
    // the whole log counts, however many older tables lie beside it
    expect(readLog([...older, today])).toEqual({ whole: true, lines: log });
  });

  it("any order of the files, and a file there twice, give the same log", () => {
    const wanted = readLog(older);
    expect(readLog([...older].reverse())).toEqual(wanted);
    expect(readLog([...older, { ...older[0], name: "readings (1).csv" }])).toEqual(wanted);
  });

  it("turns alone, and struck readings alone, are what they are", () => {
    expect(readLog([older[2]])?.lines.map((r) => r.turned)).toEqual([4, -2.5]);
    expect(readLog([table("readings.csv", `${HEAD}\r\n`), older[1]])?.lines).toMatchObject([
      { force: 410, struck: true },
    ]);
    expect(readLog([table("turns.csv", "time,by,id,step,travel_mm\r\n")])).toEqual({ whole: false, lines: [] });
  });

  it("taken into an open job its lines stand in time among those that tell their zone, each once", () => {
    const taken = readLog(older);
    const reading = (time: string, force: number) => ({ ...(taken?.lines[0] as object), time, force }) as never;
    const project = { id: "p", job: {} as never, mesh: null, log: [reading("2026-03-04T10:31:00+02:00", 99)] };
    const once = takeLog(project, taken ?? { whole: false, lines: [] });
    expect(once.log.map((r) => r.force ?? r.turned ?? 0)).toEqual([41, 410, 38, 4, -2.5, 99, 44, 0, 0]);
    expect(takeLog(once, taken ?? { whole: false, lines: [] })).toBe(once);
  });

  it("what is wrong is told with the file and the row, and nothing is read of the rest", () => {
    const turns = (row: string) => [
      older[0],
      table("turns.csv", `time,by,id,step,travel_mm\r\n2026-03-04T08:30:00,,T1,7,4\r\n${row}\r\n`),
    ];
    expect(refusal(turns("2026-03-04T08:31:00,,T2,7,much"))).toMatch(
      /^readings-number: turns\.csv: turns, row 3: travel_mm is "much"/,
    );
    expect(refusal(turns("2026-03-04T08:31:00,,T2,7,"))).toMatch(
      /^readings-row: turns\.csv: turns, row 3: travel_mm of T2 is missing/,
    );
    expect(refusal(turns("2026-03-04T08:31:00,,,7,4"))).toMatch(
      /^readings-row: turns\.csv: turns, row 3: the id is missing/,
    );
    expect(refusal(turns("2026-03-04T08:31:00,,T2,-7,4"))).toMatch(/^readings-number: turns\.csv: turns, row 3: step/);
    expect(refusal(turns('2026-03-04T08:31:00,,"T2,7,4'))).toMatch(/^readings-quote: turns\.csv: turns, row 3/);
    expect(refusal([table("turns.csv", "time,by,id,step,travel_mm,mood\r\n")])).toMatch(
      /^readings-header: turns\.csv: turns, row 1/,
    );
    expect(refusal([older[0], table("readings-struck.csv", `${HEAD}\r\n08:00,AB,T1,,,,,,,,\r\n`)])).toMatch(
      /^readings-row: readings-struck\.csv: readings, row 2 \(T1\)/,
    );
    // without a time nobody knows which readings stood before the turn
    expect(refusal(turns(",,T2,7,4"))).toMatch(/^readings-row: turns\.csv: a line of T2 has no time/);
    expect(refusal([table("readings.csv", "time,id,force_kN\nnoon,T1,4\n"), older[2]])).toMatch(
      /^readings-row: readings\.csv: a line of T1 has the time "noon"/,
    );
    const log = (force: number) => `time,by,id,force_kN,step,travel_mm,struck\r\n08:00,,T1,${force},7,,\r\n`;
    expect(refusal([table("site-log.csv", log(4)), table("site-log (1).csv", log(5))])).toMatch(
      /^files-log: site-log\.csv and site-log \(1\)\.csv are each a whole log/,
    );
  });
});
