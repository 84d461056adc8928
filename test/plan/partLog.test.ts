import { describe, expect, test } from "vitest";
import { type LogLine, partLog, partRounds } from "../../src/core/plan/partLog.ts";

const read = (reading: string, step: number | null = 7): LogLine<string> => ({ step, what: { reading } });
const turn = (adjuster: string, travel: number, step: number | null = 7): LogLine<string> => ({
  step,
  what: { adjuster, travel },
});

describe("a log parted at its turns", () => {
  test("readings before and after turns are two rounds; turns that follow on each other are one", () => {
    const log = [read("a"), read("b"), turn("T1", 4), turn("T2", -2), turn("T1", 1), read("c")];
    expect(partLog(log, 7)).toEqual({ now: ["c"], earlier: [{ readings: ["a", "b"], travel: { T1: 5, T2: -2 } }] });
  });

  test("three rounds, oldest first", () => {
    const log = [read("a"), turn("T1", 1), read("b"), turn("T1", 2), read("c")];
    expect(partLog(log, 7)).toEqual({
      now: ["c"],
      earlier: [
        { readings: ["a"], travel: { T1: 1 } },
        { readings: ["b"], travel: { T1: 2 } },
      ],
    });
  });

  test("a line after another step ends what stands before it; lines without a step belong to the one asked for", () => {
    const log = [read("a", 3), turn("T1", 1, 3), read("b", 7), read("c", null)];
    expect(partLog(log, 7)).toEqual({ now: ["b", "c"], earlier: [] });
    expect(partLog(log, 3)).toEqual({ now: ["c"], earlier: [] });
    expect(partLog([read("a"), turn("T1", 1)], 7).now).toEqual([]);
    expect(partLog([], 7)).toEqual({ now: [], earlier: [] });
  });
});

test("sets kept as files: each row counts in the first set that holds it, a log that grew is sent whole", () => {
  const head = "time,by,id,force_kN\n";
  const [a, b] = ["08:00,AB,T1,41\n", "09:00,AB,T1,42\n"];
  const kept = [{ text: head + a, travel: { T1: 2 } }];
  const { now, earlier } = partRounds(head + a + b, kept);
  expect(now.map((r) => r.force)).toEqual([42]);
  expect(earlier.map((e) => [e.readings.map((r) => r.force), e.travel])).toEqual([[[41], { T1: 2 }]]);
});
