import { expect, test } from "vitest";
import { likeFindings } from "../../../src/core/papers/tables/likeFindings.ts";
import type { Finding } from "../../../src/core/problem.ts";
import { crowded } from "../made/crowdedFacts.ts";

const slack = (id: string, value: number, more: Partial<Finding> = {}): Finding => ({
  code: "panel-stress",
  level: "caution",
  station: "panels",
  where: id,
  value,
  limit: 0.3,
  text: `panel ${id}: warp stress off by ${value} kN/m; 0.3 kN/m is usual`,
  remedy: `make ${id} narrower`,
  basis: "common practice",
  ...more,
});

test("alike but for place and number: one group, the farthest from its limit in front, none lost, order kept", () => {
  const list = [slack("P1", 0.4), slack("P2", 0.9), slack("P10", 0.35)];
  const other = [slack("P3", 0.5, { level: "stop" }), slack("P4", 0.5, { text: "something else of P4" })];
  const groups = likeFindings([list[0]!, other[0]!, list[1]!, other[1]!, list[2]!]);
  expect(groups.map((g) => g.all)).toEqual([list, [other[0]], [other[1]]]);
  expect(groups[0]!.worst).toBe(list[1]);
  expect(groups[2]!.worst).toBe(other[1]);
});

test("no finding is lost or doubled", () => {
  const { findings } = crowded();
  const all = likeFindings(findings).flatMap((g) => g.all);
  expect(all).toHaveLength(findings.length);
  expect(new Set(all)).toEqual(new Set(findings));
});
