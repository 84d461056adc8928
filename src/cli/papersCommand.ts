// seamstay papers FACTS.json --out DIR: the papers of a plan that is already made, from its facts alone.

import { readJson } from "../core/job/readJson.ts";
import { choosePapers } from "../core/papers/choosePapers.ts";
import { readFacts, tellBrokenFacts } from "../core/plan/factsFile.ts";
import { decodeText } from "../core/plan/meshText.ts";
import { holdSignals } from "./holdSignals.ts";
import { makePapers, type Surroundings } from "./makePlan.ts";
import { checkOutputFolder, writeOutputFolder } from "./outputFolder.ts";
import { parseOptions } from "./parseOptions.ts";
import { readBytes } from "./readInput.ts";
import { usageError } from "./terminal.ts";

const LARGEST = 1024 ** 3;

/** The verb. @returns exit status 0, or 1 where the plan holds a stop */
export async function papersCommand(args: string[], around: Surroundings): Promise<number> {
  const { operands, values, flags } = parseOptions("papers", args, {
    operands: ["FACTS"],
    values: ["out", "papers"],
    flags: ["json", "quiet"],
  });
  const [path] = operands;
  const { out } = values;
  if (out === undefined) throw usageError("papers wants --out DIR, the folder the papers are written into");
  const papers = values.papers === undefined ? undefined : choosePapers(values.papers);
  checkOutputFolder(out);
  const given = readFacts(readJson(decodeText(readBytes(path, LARGEST), path), "facts file").value, path);
  const { facts, files } = await draw(path, () => makePapers(given, around, papers));
  const cleared = await holdSignals(() => writeOutputFolder(out, files));
  const stops = facts.findings.filter((f) => f.level === "stop").length;
  const exit = stops > 0 ? 1 : 0;
  const quiet = flags.has("quiet");
  if (!quiet) for (const line of cleared) around.terminal.err(line);
  if (flags.has("json")) {
    const listed = files.map((f) => ({ path: f.path, bytes: f.bytes.length }));
    around.terminal.out(JSON.stringify({ command: "papers", exit, out, job: facts.job, files: listed }));
  } else if (!quiet) {
    around.terminal.out(
      [
        `${facts.job.title}, issue ${facts.job.issue}, revision ${facts.job.revision}: papers from its facts, nothing planned anew`,
        ...(exit === 1 ? ["NOT FOR ISSUE: the plan holds a stop, every paper says so"] : []),
        `Wrote ${files.length} files to ${out}`,
      ].join("\n"),
    );
  }
  return exit;
}

async function draw<T>(path: string, work: () => Promise<T>): Promise<T> {
  try {
    return await work();
  } catch (error) {
    throw tellBrokenFacts(error, path);
  }
}
