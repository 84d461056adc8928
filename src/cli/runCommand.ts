// From the arguments to the verb, and from whatever goes wrong to one block of text and an exit status.
import { PlanError } from "../core/problem.ts";
import { checkCommand } from "./checkCommand.ts";
import { correctCommand } from "./correctCommand.ts";
import { demoCommand } from "./demoCommand.ts";
import type { Surroundings } from "./makePlan.ts";
import { openCommand } from "./openCommand.ts";
import { papersCommand } from "./papersCommand.ts";
import { parseOptions } from "./parseOptions.ts";
import { planCommand } from "./planCommand.ts";
import { startCommand } from "./startCommand.ts";
import { usageError, writeError } from "./terminal.ts";
import { VERBS, writeHelp } from "./usage.ts";

/** Runs one command line. @returns exit status: 0 done, 1 the plan holds a stop, 2 bad input or usage, 3 a fault of the program */
export async function runCommand(args: string[], around: Surroundings): Promise<number> {
  const [verb, ...rest] = args;
  try {
    return await dispatch(verb, rest, around);
  } catch (error) {
    const known = error instanceof PlanError;
    const exit = known ? 2 : 3;
    if (rest.includes("--json")) {
      const record = known
        ? { code: error.code, message: error.message, where: error.where, facts: error.facts }
        : { code: "fault", message: String(error), where: [], facts: {} };
      around.terminal.out(JSON.stringify({ command: verb, exit, error: record }));
    }
    if (known) {
      around.terminal.err(writeError(verb ?? "", error));
      if (error.code === "usage") around.terminal.err(hint(verb));
    } else {
      around.terminal.err(
        `seamstay: a fault of the program, not of the job; nothing was written. Please report it with the job:\n${error instanceof Error ? error.stack : String(error)}`,
      );
    }
    return exit;
  }
}

function hint(verb: string | undefined): string {
  if (verb === undefined) return `\n${writeHelp()}`;
  const found = VERBS.find((v) => v.verb === verb);
  return found === undefined
    ? "  try: seamstay help"
    : `  usage: seamstay ${found.call}\n  more:  seamstay help ${found.verb}`;
}

async function dispatch(verb: string | undefined, rest: string[], around: Surroundings): Promise<number> {
  if (rest.includes("--help") || rest.includes("-h")) return helpCommand(verb === undefined ? [] : [verb], around);
  switch (verb) {
    case "plan":
      return await planCommand(rest, around);
    case "check":
      return await checkCommand(rest, around);
    case "correct":
      return await correctCommand(rest, around);
    case "papers":
      return await papersCommand(rest, around);
    case "start":
      return await startCommand(rest, around.terminal);
    case "open":
      return await openCommand(rest, around.terminal);
    case "demo":
      return await demoCommand(rest, around);
    case "help":
    case "--help":
    case "-h":
      return helpCommand(rest, around);
    case undefined:
      throw usageError("no verb is given");
    default:
      throw usageError(`there is no verb ${JSON.stringify(verb)}; there is ${VERBS.map((v) => v.verb).join(", ")}`);
  }
}

function helpCommand(args: string[], around: Surroundings): number {
  const { operands } = parseOptions("help", args, { operands: ["VERB?"], values: [], flags: [] });
  const [verb] = operands;
  if (verb !== undefined && !VERBS.some((v) => v.verb === verb)) {
    throw usageError(`there is no verb ${JSON.stringify(verb)}; there is ${VERBS.map((v) => v.verb).join(", ")}`);
  }
  around.terminal.out(writeHelp(verb));
  return 0;
}
