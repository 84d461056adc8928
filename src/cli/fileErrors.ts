// Errors of the file system in words a person can act on.
import { PlanError } from "../core/problem.ts";

const WORDS: Record<string, [code: string, text: string]> = {
  ENOENT: ["file-missing", "there is no such file or folder; check the name and the folder it is looked for in"],
  EACCES: ["file-forbidden", "access is refused; check who may read or write it"],
  EPERM: ["file-forbidden", "access is refused; check who may read or write it"],
  EROFS: ["file-forbidden", "the disk is read-only; choose another folder"],
  EISDIR: ["file-folder", "this is a folder, a file is wanted; name the file in it"],
  ENOTDIR: ["file-not-folder", "part of this path is a file, a folder is wanted; choose another name"],
  EEXIST: ["file-not-folder", "part of this path is a file, a folder is wanted; choose another name"],
  ENOSPC: ["file-disk-full", "the disk is full; make room or choose another one"],
  EDQUOT: ["file-disk-full", "the disk quota is used up; make room or choose another disk"],
  ENAMETOOLONG: ["file-name-long", "the name is too long for this disk; choose a shorter one"],
  ELOOP: ["file-link-loop", "links lead round in a circle; name the file itself"],
  EXDEV: ["file-mount", "another disk is mounted here; choose a folder inside it"],
  EBUSY: ["file-mount", "this is in use or a disk of its own; choose a folder inside it"],
};

/** Runs something that touches the file at `path`; a failure of the system becomes a PlanError that names it. */
export function withFile<T>(path: string, act: () => T): T {
  try {
    return act();
  } catch (error) {
    const system = (error as NodeJS.ErrnoException).code;
    if (error instanceof PlanError || system === undefined) throw error;
    const [code, text] = WORDS[system] ?? ["file-failed", `the system refuses it (${system}); choose another place`];
    throw new PlanError(code, `${path}: ${text}`, path);
  }
}
