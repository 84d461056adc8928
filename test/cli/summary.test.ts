import { describe, expect, it } from "vitest";
import { writeFindings, writeUrgent } from "../../src/cli/summary.ts";
import type { Finding } from "../../src/core/problem.ts";
import { stopFinding } from "./fakePlan.ts";

const caution = (where: string | string[], code = "pocket-curve"): Finding => ({
  ...stopFinding,
  level: "caution",
  code,
  where,
  text: `flap at ${where}`,
  remedy: "slit it",
});

describe("findings on a terminal", () => {
  it("tells one of a kind in full and where the others are, the gravest first", () => {
    const many = ["P1", "P2", "P3", "P4"].map((p) => caution([p, "north"]));
    const lines = writeUrgent([...many, stopFinding]).split("\n");
    expect(lines[0]).toContain("STOP    P3: panel P3");
    expect(lines[2]).toContain("CAUTION P1, north: flap");
    expect(lines[4]).toBe("          and 3 more of this kind: P2/north, P3/north, P4/north");
    expect(lines).toHaveLength(5);
  });

  it("tells two of a kind both in full", () => {
    expect(writeUrgent([caution("P1"), caution("P2")]).split("\n")).toHaveLength(4);
  });

  it("lists every one where all are asked for, notes without advice", () => {
    const all = writeFindings([{ ...caution("P1"), level: "note" }, caution("P2"), caution("P3")], ["caution", "note"]);
    expect(all.split("\n")).toHaveLength(5);
    expect(all.split("\n")[4]).toBe("  NOTE    P1: flap at P1 (pocket-curve)");
  });
});
