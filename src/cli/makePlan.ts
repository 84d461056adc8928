// From what was read to facts and papers, with progress shown. Writes no files.
import type { PaperChoice } from "../core/papers/choosePapers.ts";
import { capNest } from "../core/plan/capNest.ts";
import { writeFactsJson } from "../core/plan/factsFile.ts";
import type { PlanInput } from "../core/plan/readPlanInput.ts";
import type { Finding, Station, StationContext } from "../core/problem.ts";
import type { Facts } from "../core/records/facts.ts";
import type { Job, MeshSource } from "../core/records/job.ts";
import { openNestThreads } from "./nestThreads.ts";
import type { OutputFile } from "./outputFolder.ts";
import { loadFonts } from "./packageFiles.ts";
import { openProgress, type Terminal } from "./terminal.ts";

/** The two doors of core that the verbs go through; tests put their own in. */
export interface PlanDoors {
  runPlan: (
    job: Job,
    source: MeshSource,
    options: { until?: Station; revision: string; onStation?: (station: Station) => void },
    context: StationContext,
  ) => Facts;
  writePapers: (
    facts: Facts,
    options: { fonts: { regular: Uint8Array; bold: Uint8Array }; papers?: readonly PaperChoice[] },
  ) => Promise<{ files: OutputFile[]; findings: Finding[] }>;
}

/** How the verbs reach the world: doors are opened only by those that plan, because opening takes time. */
export interface Surroundings {
  terminal: Terminal;
  openDoors: () => Promise<PlanDoors>;
}

/** The facts of a plan, with the findings of reading in front. */
export async function makeFacts(
  input: PlanInput,
  around: Surroundings,
  options: { until?: Station; quiet: boolean },
): Promise<Facts> {
  const doors = await around.openDoors();
  const progress = openProgress(around.terminal, options.quiet);
  const threads = openNestThreads();
  try {
    const { until } = options;
    const { onStation, cancelled, elapsed } = capNest(input.job.nest.seconds, () => performance.now());
    const { workShares } = threads;
    const settings = { revision: input.revision, onStation, ...(until === undefined ? {} : { until }) };
    const facts = doors.runPlan(input.job, input.source, settings, {
      onProgress: progress.show,
      cancelled,
      elapsed,
      workShares,
    });
    return { ...facts, findings: [...input.findings, ...facts.findings] };
  } finally {
    threads.close();
    progress.end();
  }
}

/** facts.json and the papers drawn from it, all but arcs and the zip where none are named; the facts with what the papers add to their findings. */
export async function makePapers(
  given: Facts,
  around: Surroundings,
  papers?: readonly PaperChoice[],
): Promise<{ facts: Facts; files: OutputFile[] }> {
  const doors = await around.openDoors();
  const { files, findings } = await doors.writePapers(given, { fonts: loadFonts(), ...(papers ? { papers } : {}) });
  const facts = { ...given, findings };
  return { facts, files: [{ path: "facts.json", bytes: writeFactsJson(facts) }, ...files] };
}
