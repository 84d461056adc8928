// What a run that was killed leaves beside an output folder: a half-written one (DIR.partial-PID), or the earlier plan set aside
// (DIR.old-PID). Clears it up at the next run into DIR; says what it did. Leaves alone what a living process may be at.
import { existsSync, readdirSync, renameSync, rmSync, statSync } from "node:fs";
import { basename, dirname, join } from "node:path";
import { withFile } from "./fileErrors.ts";
import { holdsPlan } from "./holdsPlan.ts";

/** Names of the two folders a run of this process uses beside the target. */
export function asideNames(target: string): { aside: string; old: string } {
  const beside = (word: string) => join(dirname(target), `${basename(target)}.${word}-${process.pid}`);
  return { aside: beside("partial"), old: beside("old") };
}

/** Whether a process of this machine has the number; this one does not count, it has left nothing yet. */
function isAlive(pid: number): boolean {
  if (pid === process.pid) return false;
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    // Refused means it is there, but another's.
    return (error as NodeJS.ErrnoException).code === "EPERM";
  }
}

interface Leftover {
  path: string;
  kind: "partial" | "old";
  changed: number;
}

function listLeftovers(target: string): Leftover[] {
  const parent = dirname(target);
  if (!existsSync(parent)) return [];
  const start = `${basename(target)}.`;
  return withFile(parent, () => readdirSync(parent, { withFileTypes: true })).flatMap((entry): Leftover[] => {
    if (!entry.isDirectory() || !entry.name.startsWith(start)) return [];
    const found = /^(partial|old)-(\d{1,10})$/.exec(entry.name.slice(start.length));
    if (found === null || isAlive(Number(found[2]))) return [];
    const path = join(parent, entry.name);
    return [{ path, kind: found[1] as Leftover["kind"], changed: statSync(path).mtimeMs }];
  });
}

/**
 * Puts back an earlier plan that a killed run had set aside, and removes what is half-written or was replaced since.
 * @returns one line for each folder: what was done, or why it was left
 */
export function clearLeftovers(target: string): string[] {
  const found = listLeftovers(target).sort((a, b) => b.changed - a.changed);
  return found.map(({ path, kind }) => {
    if (kind === "old" && !holdsPlan(path)) {
      return `${path} has the name of an earlier plan set aside, but holds none: left as it is; remove it if it is not yours`;
    }
    if (kind === "old" && !existsSync(target)) {
      withFile(path, () => renameSync(path, target));
      return `a run that was cut short had set the earlier plan aside: ${basename(path)} is ${basename(target)} again`;
    }
    withFile(path, () => rmSync(path, { recursive: true, force: true }));
    return `removed ${path}, left by a run that was cut short`;
  });
}
