// Doors with a made-up plan behind them, for tests of what the command line does around a plan.
import { mkdtempSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { PlanDoors, Surroundings } from "../../src/cli/makePlan.ts";
import { runCommand } from "../../src/cli/runCommand.ts";
import type { Finding } from "../../src/core/problem.ts";
import type { Facts } from "../../src/core/records/facts.ts";

export const stopFinding: Finding = {
  code: "roll-width",
  level: "stop",
  station: "rolls",
  where: "P3",
  value: 3100,
  limit: 2950,
  text: "panel P3 is 3100 mm wide, the roll 2950 mm",
  remedy: "add a seam",
  basis: "own argument",
};

/** A small plan that keeps what it was called with. */
export function buildDoors(bend: { findings?: Finding[]; files?: string[] } = {}) {
  const calls: Parameters<PlanDoors["runPlan"]>[] = [];
  const doors: PlanDoors = {
    runPlan: (job, source, options, context) => {
      calls.push([job, source, options, context]);
      context.onProgress?.(0.5, "half way");
      const { date, drawnBy, checkedBy, sheet, units } = job.papers;
      const facts: Facts = {
        format: "seamstay-facts",
        version: 1,
        job: {
          title: job.title,
          issue: job.issue,
          revision: options.revision,
          date,
          drawnBy,
          checkedBy,
          sheet,
          units,
          mesh: job.meshName,
        },
        fabrics: { [job.fabric.id]: job.fabric },
        seams: [],
        panels: [],
        rolls: [
          {
            id: "R1",
            fabric: "pes-pvc-2",
            batch: null,
            width: 3000,
            usableWidth: 2950,
            length: 50000,
            used: 10000,
            gap: 10,
            flaws: [],
            placements: [],
            utilisation: 0.8,
            lowerBound: 8000,
          },
          {
            id: "R2",
            fabric: "pes-pvc-2",
            batch: null,
            width: 3000,
            usableWidth: 2950,
            length: 50000,
            used: 5000,
            gap: 10,
            flaws: [],
            placements: [],
            utilisation: 0.5,
            lowerBound: 2000,
          },
        ],
        checks: [{ station: "form", text: "residual", value: 1e-9, limit: 0.01, holds: true }],
        findings: bend.findings ?? [],
      };
      return facts;
    },
    writePapers: async (facts) => ({
      files: (bend.files ?? ["findings.pdf", "rolls/R1.dxf"]).map((path) => ({
        path,
        bytes: new TextEncoder().encode(`${path} of ${facts.job.revision}`),
      })),
      findings: facts.findings,
    }),
  };
  return { doors, calls };
}

/** Runs a command line in this process and keeps what it says. */
export async function call(args: string[], doors: PlanDoors = buildDoors().doors) {
  const said = { out: "", err: "" };
  const around: Surroundings = {
    terminal: {
      out: (text) => {
        said.out += `${text}\n`;
      },
      err: (text) => {
        said.err += `${text}\n`;
      },
      live: false,
    },
    openDoors: async () => doors,
  };
  const exit = await runCommand(args, around);
  return { exit, ...said };
}

export function makeScratch(): string {
  return mkdtempSync(join(tmpdir(), "seamstay-test-"));
}

/** A mesh of one square. */
export const SQUARE = "v 0 0 0\nv 1 0 0\nv 1 1 0\nv 0 1 0\nf 1 2 3 4\n";
