import { existsSync } from "node:fs";
import { join } from "node:path";
import { expect, it } from "vitest";
import { listStarters } from "../../src/cli/packageFiles.ts";
import { buildDoors, call, makeScratch, stopFinding } from "./fakePlan.ts";

it("plans every starter into ./out and says where to look first", async () => {
  const here = process.cwd();
  const scratch = makeScratch();
  try {
    process.chdir(scratch);
    const { exit, out } = await call(["demo"]);
    expect(exit).toBe(0);
    for (const { name } of listStarters()) {
      expect(out).toContain(`To open     ${join("out", name, "findings.pdf")}`);
      expect(out).toContain(`            ${join("out", name, "rolls/R1.dxf")}  what lies where on the roll`);
      expect(existsSync(join(scratch, "out", name, "facts.json"))).toBe(true);
    }
    // Two rolls of 3 m: 10 m and 5 m used.
    expect(out).toContain("15.00 m of cloth from 2 rolls (pes-pvc-2, 3.00 m wide), 70 % used");
    const stopped = await call(["demo"], buildDoors({ findings: [stopFinding] }).doors);
    expect(stopped.exit).toBe(1);
    expect(stopped.out).toContain("stamped NOT FOR ISSUE");
  } finally {
    process.chdir(here);
  }
});
