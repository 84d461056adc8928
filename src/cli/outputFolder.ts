// The output folder: written aside and put in place in one move, so that it is never half a plan. Files in it that are
// not of the plan stay. Knows nothing of what the files say.
import {
  cpSync,
  existsSync,
  lstatSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  realpathSync,
  renameSync,
  rmSync,
  writeFileSync,
} from "node:fs";
import { dirname, join, relative, resolve, sep } from "node:path";
import { PlanError } from "../core/problem.ts";
import { withFile } from "./fileErrors.ts";
import { holdsPlan } from "./holdsPlan.ts";
import { asideNames, clearLeftovers } from "./leftovers.ts";

/** A file of the plan; the path is relative to the folder, with "/" between its parts. */
export interface OutputFile {
  path: string;
  bytes: Uint8Array;
}

/** Lists what a plan wrote, so that the next one knows which files are its own. */
export const MANIFEST = "seamstay-files.json";

/**
 * Where the plan will stand, and whether it may: the folder is missing, empty, or holds an earlier plan.
 * @throws PlanError out-not-folder, out-foreign: files, but no plan; out-inside: the folder one stands in
 */
export function checkOutputFolder(folder: string): string {
  const named = resolve(folder);
  if (!withFile(named, () => existsSync(named))) return named;
  const real = withFile(named, () => realpathSync(named));
  if (!lstatSync(real).isDirectory()) {
    throw new PlanError("out-not-folder", `${folder}: this is a file; give the name of a folder for the plan`, folder);
  }
  const names = withFile(real, () => readdirSync(real));
  if (names.length > 0 && !holdsPlan(real)) {
    throw new PlanError(
      "out-foreign",
      `${folder}: the folder holds ${names.length} file${names.length === 1 ? "" : "s"} and no plan of Seamstay; nothing was touched; give a new folder, or empty this one`,
      folder,
      { files: names.length },
    );
  }
  const inside = relative(real, process.cwd());
  if (inside === "" || !(inside === ".." || inside.startsWith(`..${sep}`) || resolve(inside) === inside)) {
    throw new PlanError(
      "out-inside",
      `${folder}: the plan would replace the folder you stand in; step out of it, or give another folder`,
      folder,
    );
  }
  return real;
}

/** Relative paths of everything below a folder; a folder is listed only where it is empty. */
function listFiles(folder: string, below = ""): string[] {
  return readdirSync(join(folder, below), { withFileTypes: true }).flatMap((entry) => {
    const path = below === "" ? entry.name : `${below}/${entry.name}`;
    if (!entry.isDirectory()) return [path];
    const inner = listFiles(folder, path);
    return inner.length === 0 ? [`${path}/`] : inner;
  });
}

/** Files in the folder that no plan wrote. */
function listForeign(folder: string): string[] {
  const own = new Set(["facts.json", MANIFEST]);
  const manifest = join(folder, MANIFEST);
  if (existsSync(manifest)) {
    try {
      const listed: unknown = JSON.parse(readFileSync(manifest, "utf8")).files;
      if (Array.isArray(listed)) for (const path of listed) own.add(String(path));
    } catch {
      // A manifest that cannot be read vouches for no file: all stay.
    }
  }
  return listFiles(folder).filter((path) => !own.has(path));
}

function refuseClash(folder: string, foreign: string[], files: OutputFile[]): void {
  const clash = foreign.find((path) =>
    files.some((f) => f.path === path || f.path.startsWith(`${path}/`) || path.startsWith(`${f.path}/`)),
  );
  if (clash === undefined) return;
  throw new PlanError(
    "out-clash",
    `${join(folder, clash)}: a file of the plan has this name, but no plan wrote this one; nothing was touched; rename or move it`,
    clash,
  );
}

function checkPaths(files: OutputFile[]): void {
  for (const { path } of files) {
    const parts = path.split("/");
    if (parts.every((p) => p !== "" && p !== "." && p !== ".." && !p.includes("\\") && !p.includes("\0"))) continue;
    throw new PlanError("out-path", `${JSON.stringify(path)} is no file name inside the output folder`, path);
  }
}

/** Where the folder stands, or will: through links, so that what is beside the real one is looked at. */
function realFolder(folder: string): string {
  const named = resolve(folder);
  return withFile(named, () => (existsSync(named) ? realpathSync(named) : named));
}

/**
 * Writes all files of a plan as the whole content of the folder, beside files that are not of a plan.
 * Works in one go without a pause in which a signal could be handled: the caller holds signals off meanwhile.
 * @returns what was done about leftovers of runs that were cut short, a line each
 * @throws PlanError as checkOutputFolder; out-clash, out-path, file-…; the folder is then as it was
 */
export function writeOutputFolder(folder: string, files: OutputFile[]): string[] {
  checkPaths(files);
  const cleared = clearLeftovers(realFolder(folder));
  const target = checkOutputFolder(folder);
  const earlier = existsSync(target);
  const foreign = earlier ? withFile(target, () => listForeign(target)) : [];
  refuseClash(folder, foreign, files);
  const { aside, old } = asideNames(target);
  try {
    withFile(folder, () => {
      mkdirSync(dirname(target), { recursive: true });
      mkdirSync(aside);
    });
    const listed = { format: "seamstay-files", version: 1, files: files.map((f) => f.path) };
    const manifest = new TextEncoder().encode(`${JSON.stringify(listed, null, 1)}\n`);
    for (const { path, bytes } of [...files, { path: MANIFEST, bytes: manifest }]) {
      const at = join(aside, path);
      withFile(at, () => {
        mkdirSync(dirname(at), { recursive: true });
        writeFileSync(at, bytes);
      });
    }
    for (const path of foreign) carryOver(target, aside, path);
    if (earlier) withFile(folder, () => renameSync(target, old));
    try {
      withFile(folder, () => renameSync(aside, target));
    } catch (error) {
      if (earlier) renameSync(old, target);
      throw error;
    }
  } catch (error) {
    removeQuietly(aside);
    throw error;
  }
  withFile(old, () => rmSync(old, { recursive: true, force: true }));
  return cleared;
}

/** Clears up after a failure, which is what must be told, whether or not this succeeds. */
function removeQuietly(path: string): void {
  try {
    rmSync(path, { recursive: true, force: true });
  } catch {
    // The failure itself is thrown by the caller.
  }
}

function carryOver(from: string, to: string, path: string): void {
  const target = join(to, path);
  withFile(target, () => {
    if (path.endsWith("/")) mkdirSync(target, { recursive: true });
    else {
      mkdirSync(dirname(target), { recursive: true });
      cpSync(join(from, path), target, { preserveTimestamps: true, verbatimSymlinks: true, errorOnExist: true });
    }
  });
}
