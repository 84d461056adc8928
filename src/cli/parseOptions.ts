// Options and operands of one verb, by node:util parseArgs. Says in own words what is wrong with them.
import { parseArgs } from "node:util";
import { usageError } from "./terminal.ts";

/** What a verb takes: operands by name (a trailing "?" may be missing), options with and without a value. */
export interface Synopsis {
  operands: string[];
  values: string[];
  flags: string[];
}

export interface ParsedOptions {
  operands: string[];
  values: Record<string, string | undefined>;
  flags: Set<string>;
}

/**
 * Splits the arguments behind the verb.
 * @throws PlanError usage: an unknown option, one given twice or without its value, too few or too many operands
 */
export function parseOptions(verb: string, args: string[], synopsis: Synopsis): ParsedOptions {
  const { tokens } = parseArgs({
    args,
    strict: false,
    allowPositionals: true,
    tokens: true,
    options: {
      ...Object.fromEntries(synopsis.values.map((name) => [name, { type: "string" as const }])),
      ...Object.fromEntries(synopsis.flags.map((name) => [name, { type: "boolean" as const }])),
    },
  });
  const parsed: ParsedOptions = { operands: [], values: {}, flags: new Set() };
  const seen = new Set<string>();
  for (const token of tokens) {
    if (token.kind === "positional") parsed.operands.push(token.value);
    if (token.kind !== "option") continue;
    const { name, rawName, value } = token;
    if (seen.has(name)) throw usageError(`${rawName} is given twice; leave one out`);
    seen.add(name);
    if (synopsis.values.includes(name)) {
      if (value === undefined || value === "" || (!token.inlineValue && value.startsWith("--"))) {
        throw usageError(`${rawName} wants a value behind it`);
      }
      parsed.values[name] = value;
    } else if (synopsis.flags.includes(name)) {
      if (value !== undefined) throw usageError(`${rawName} takes no value`);
      parsed.flags.add(name);
    } else {
      const known = [...synopsis.values, ...synopsis.flags].map((o) => `--${o}`).join(" ");
      throw usageError(`${verb} knows no option ${rawName}; it has ${known === "" ? "none" : known}`);
    }
  }
  checkOperands(verb, parsed.operands, synopsis.operands);
  return parsed;
}

function checkOperands(verb: string, given: string[], wanted: string[]): void {
  const least = wanted.filter((name) => !name.endsWith("?")).length;
  if (given.length < least) throw usageError(`${verb} wants ${wanted[given.length]}, which is missing`);
  if (given.length > wanted.length) {
    throw usageError(`${verb} takes no ${JSON.stringify(given[wanted.length])}; put names with spaces in quotes`);
  }
  const empty = given.indexOf("");
  if (empty >= 0) throw usageError(`${verb}: ${wanted[empty].replace("?", "")} is empty`);
}
