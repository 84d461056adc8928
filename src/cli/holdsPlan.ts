// Whether a folder is one of ours: its facts.json begins as a facts file does.
import { closeSync, existsSync, openSync, readSync } from "node:fs";
import { join } from "node:path";
import { withFile } from "./fileErrors.ts";

/** Whether a folder holds a plan. */
export function holdsPlan(folder: string): boolean {
  const path = join(folder, "facts.json");
  if (!existsSync(path)) return false;
  const head = Buffer.alloc(200);
  const file = withFile(path, () => openSync(path, "r"));
  try {
    const length = withFile(path, () => readSync(file, head));
    return /^\s*\{\s*"format"\s*:\s*"seamstay-facts"/.test(head.toString("utf8", 0, length));
  } finally {
    closeSync(file);
  }
}
