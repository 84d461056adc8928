import { expect, test } from "vitest";
import { likeChecks } from "../../../src/core/papers/tables/likeChecks.ts";
import type { Check } from "../../../src/core/problem.ts";

const check = (text: string, value: number, limit = 1, holds = true): Check => ({
  station: "panels",
  text,
  value,
  limit,
  holds,
});
const things = { panels: ["P1", "P10", "P2", "net"], rolls: ["R1"] };

test("alike checks of several panels are one row with the worst in front; those that fail stay apart; order kept", () => {
  const list = [
    check("seams whose two sides do not list the same points", 0, 0),
    check("panel P1: the cut line lies at its allowance, mm off", 0.1),
    check("panel P1: net and cut outlines are simple", 1),
    check("panel P10: the cut line lies at its allowance, mm off", 0.7),
    check("panel P2: the cut line lies at its allowance, mm off", 3, 1, false),
    check("panel net: net and cut outlines are simple", 1),
    check("roll R1: the cut line lies at its allowance, mm off", 0.2),
  ];
  const groups = likeChecks(list, things);
  expect(groups.map((g) => [g.kind, g.names, g.text])).toEqual([
    ["", [], list[0]!.text],
    ["panel", ["P1", "P10"], "the cut line lies at its allowance, mm off"],
    ["panel", ["P1", "net"], "net and cut outlines are simple"],
    ["", [], list[4]!.text],
    ["", [], list[6]!.text],
  ]);
  expect(groups[1]!.worst).toBe(list[3]);
  expect(groups[1]!.worstName).toBe("P10");
});

test("the worst of those that fail is the farthest from its limit; checks of other limits and doubled words stay apart", () => {
  const failed = [5, 9, 7].map((v, i) => check(`panel ${things.panels[i]}: off`, v, 1, false));
  expect(likeChecks(failed, things).map((g) => [g.worst.value, g.worstName])).toEqual([[9, "P10"]]);
  const limits = [check("panel P1: off", 1, 1), check("panel P2: off", 1, 2)];
  expect(likeChecks(limits, things)).toHaveLength(2);
  const twice = [check("the same words", 1), check("the same words", 2), check("the same words", 3)];
  expect(likeChecks(twice, things).map((g) => g.worst)).toEqual(twice);
});
