// seamstay plan JOB --out DIR
import { choosePapers, type PaperChoice } from "../core/papers/choosePapers.ts";
import type { Station } from "../core/problem.ts";
import type { Facts } from "../core/records/facts.ts";
import { holdSignals } from "./holdSignals.ts";
import { makeFacts, makePapers, type Surroundings } from "./makePlan.ts";
import { checkOutputFolder, type OutputFile, writeOutputFolder } from "./outputFolder.ts";
import { loadCatalogues } from "./packageFiles.ts";
import { parseOptions } from "./parseOptions.ts";
import { readInput } from "./readInput.ts";
import { measurePlan, writeSummary, writeUrgent } from "./summary.ts";
import { usageError } from "./terminal.ts";
import { UNTIL } from "./usage.ts";

/** Facts and the files written for them. */
export interface WrittenPlan {
  facts: Facts;
  files: OutputFile[];
}

/** Plans one job into a folder; the folder is looked at before the work begins. */
export async function planInto(
  jobPath: string,
  folder: string,
  around: Surroundings,
  options: { until?: Station; papers?: readonly PaperChoice[]; quiet: boolean },
): Promise<WrittenPlan> {
  checkOutputFolder(folder);
  const planned = await makeFacts(readInput(jobPath, loadCatalogues()), around, options);
  const { facts, files } = await makePapers(planned, around, options.papers);
  const cleared = await holdSignals(() => writeOutputFolder(folder, files));
  if (!options.quiet) for (const line of cleared) around.terminal.err(line);
  return { facts, files };
}

/** The verb. @returns exit status 0, or 1 where the plan holds a stop */
export async function planCommand(args: string[], around: Surroundings): Promise<number> {
  const { operands, values, flags } = parseOptions("plan", args, {
    operands: ["JOB"],
    values: ["out", "until", "papers"],
    flags: ["json", "quiet"],
  });
  const { out, until } = values;
  if (out === undefined) throw usageError("plan wants --out DIR, the folder the plan is written into");
  if (until !== undefined && !(UNTIL as readonly string[]).includes(until)) {
    throw usageError(`--until ${until}: no such station; it is one of ${UNTIL.join(", ")}`);
  }
  // Looked at before the plan begins: a word misspelt is told at once.
  const papers = values.papers === undefined ? {} : { papers: choosePapers(values.papers) };
  const json = flags.has("json");
  const quiet = flags.has("quiet");
  const station = until === undefined ? {} : { until: until as Station };
  const { facts, files } = await planInto(operands[0], out, around, { ...station, ...papers, quiet });
  const figures = measurePlan(facts);
  const exit = figures.stops > 0 ? 1 : 0;
  if (json) {
    const listed = files.map((f) => ({ path: f.path, bytes: f.bytes.length }));
    const { findings, checks, job } = facts;
    around.terminal.out(JSON.stringify({ command: "plan", exit, out, job, figures, findings, checks, files: listed }));
  } else if (!quiet) {
    const urgent = writeUrgent(facts.findings);
    around.terminal.out(
      [
        writeSummary(facts, figures),
        ...(urgent === "" ? [] : [urgent]),
        ...(exit === 1 ? ["NOT FOR ISSUE: the plan holds a stop, every paper says so"] : []),
        `Wrote ${files.length} files to ${out}`,
      ].join("\n"),
    );
  }
  return exit;
}
