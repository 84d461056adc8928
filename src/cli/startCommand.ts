// seamstay start TEMPLATE DIR: a starter job copied into a new folder.
import { cpSync, existsSync, mkdirSync, readdirSync, renameSync, rmdirSync, rmSync, statSync } from "node:fs";
import { basename, dirname, join, resolve } from "node:path";
import { PlanError } from "../core/problem.ts";
import { withFile } from "./fileErrors.ts";
import { holdSignals } from "./holdSignals.ts";
import { asideNames, clearLeftovers } from "./leftovers.ts";
import { listStarters, starterFolder } from "./packageFiles.ts";
import { parseOptions } from "./parseOptions.ts";
import { type Terminal, usageError } from "./terminal.ts";

/** A picture of a starter's papers, for those who have not planned it yet: no part of a job. */
const PICTURE = "papers.png";

/** The verb; without arguments it lists the starters. @returns exit status 0 */
export async function startCommand(args: string[], terminal: Terminal): Promise<number> {
  const { operands } = parseOptions("start", args, { operands: ["TEMPLATE?", "DIR?"], values: [], flags: [] });
  const starters = listStarters();
  const [name, folder] = operands;
  if (name === undefined) {
    const width = Math.max(...starters.map((s) => s.name.length));
    terminal.out(starters.map((s) => `  ${s.name.padEnd(width)}  ${s.line}`).join("\n"));
    return 0;
  }
  if (!starters.some((s) => s.name === name)) {
    const names = starters.map((s) => s.name).join(", ");
    throw new PlanError("start-template", `there is no starter ${JSON.stringify(name)}; there is ${names}`, "TEMPLATE");
  }
  if (folder === undefined) throw usageError("start wants DIR, the folder the starter is copied into");
  const target = resolve(folder);
  for (const line of await holdSignals(() => clearLeftovers(target))) terminal.err(line);
  refuseTaken(folder, target);
  await holdSignals(() => copyWhole(starterFolder(name), folder, target));
  const job = join(folder, "job.json");
  terminal.out(`Copied ${name} to ${folder}; next: seamstay plan ${job} --out ${join(folder, "plan")}`);
  return 0;
}

function refuseTaken(folder: string, target: string): void {
  if (!withFile(folder, () => existsSync(target))) return;
  if (withFile(folder, () => statSync(target)).isDirectory() && readdirSync(target).length === 0) return;
  throw new PlanError(
    "start-taken",
    `${folder}: this exists and is not an empty folder; nothing was touched; give a new name`,
    folder,
  );
}

/** Copies aside, then moves into place: the starter is there whole or not at all. */
function copyWhole(source: string, folder: string, target: string): void {
  const { aside } = asideNames(target);
  try {
    withFile(folder, () => {
      mkdirSync(dirname(target), { recursive: true });
      cpSync(source, aside, { recursive: true, errorOnExist: true, filter: (path) => basename(path) !== PICTURE });
      if (existsSync(target)) rmdirSync(target);
      renameSync(aside, target);
    });
  } catch (error) {
    rmSync(aside, { recursive: true, force: true });
    throw error;
  }
}
