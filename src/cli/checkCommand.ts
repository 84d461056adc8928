// seamstay check JOB: the plan without a file written.
import { makeFacts, type Surroundings } from "./makePlan.ts";
import { loadCatalogues } from "./packageFiles.ts";
import { parseOptions } from "./parseOptions.ts";
import { readInput } from "./readInput.ts";
import { measurePlan, writeChecks, writeFindings, writeSummary } from "./summary.ts";

/** The verb. @returns exit status 0, or 1 where the plan holds a stop */
export async function checkCommand(args: string[], around: Surroundings): Promise<number> {
  const { operands, flags } = parseOptions("check", args, { operands: ["JOB"], values: [], flags: ["json", "quiet"] });
  const quiet = flags.has("quiet");
  const facts = await makeFacts(readInput(operands[0], loadCatalogues()), around, { quiet });
  const figures = measurePlan(facts);
  const exit = figures.stops > 0 ? 1 : 0;
  if (flags.has("json")) {
    const { findings, checks, job } = facts;
    around.terminal.out(JSON.stringify({ command: "check", exit, job, figures, findings, checks }));
  } else if (!quiet) {
    const parts = [
      writeSummary(facts, figures),
      writeChecks(facts),
      writeFindings(facts.findings, ["stop", "caution", "note"]),
    ];
    around.terminal.out(parts.filter((p) => p !== "").join("\n"));
  }
  return exit;
}
