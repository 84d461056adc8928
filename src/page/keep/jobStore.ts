// Jobs in the browser's own store (IndexedDB). Meshes stand apart, so that an edit does not write them again, and so does
// every state that undo and redo lead through. A counter per job tells when another tab has saved in between.
import { type DBSchema, type IDBPDatabase, openDB } from "idb";
import type { JobFile } from "../../core/job/jobSchema.ts";
import { migrateJob } from "../../core/job/jobVersions.ts";
import type { Leaf } from "../store/bookStore.ts";
import type { MeshFile, Reading } from "../store/project.ts";
import { dropWord } from "./lastWord.ts";
import type { Line } from "./timeline.ts";

/** A job as it is kept. */
export interface KeptJob {
  id: string;
  title: string;
  savedAt: string;
  /** Counts every save. */
  count: number;
  job: JobFile;
  log: Reading[];
  leaf: Leaf;
  /** Key of its mesh. */
  mesh: string | null;
  /** Which state of the line the job stands at; missing where no line is kept. */
  at?: number;
}

/** A state of a job, and what was done to come to it. */
interface KeptState {
  job: JobFile;
  log: Reading[];
  words: string;
}

interface Shelf extends DBSchema {
  jobs: { key: string; value: KeptJob };
  meshes: { key: string; value: MeshFile };
  states: { key: [string, number]; value: KeptState };
}

let shelf: Promise<IDBPDatabase<Shelf>> | null = null;

function openShelf(): Promise<IDBPDatabase<Shelf>> {
  shelf ??= openDB<Shelf>("seamstay", 2, {
    upgrade: (db, from) => {
      if (from < 1) {
        db.createObjectStore("jobs", { keyPath: "id" });
        db.createObjectStore("meshes");
      }
      if (from < 2) db.createObjectStore("states");
    },
    blocking: () => {
      void shelf?.then((db) => db.close());
      shelf = null;
    },
  });
  shelf.catch(() => {
    shelf = null;
  });
  return shelf;
}

/** All kept jobs, the latest first. */
export async function listJobs(): Promise<KeptJob[]> {
  const db = await openShelf();
  return (await db.getAll("jobs")).sort((a, b) => b.savedAt.localeCompare(a.savedAt));
}

const statesOf = (id: string, from = 0) => IDBKeyRange.bound([id, from], [id, Number.POSITIVE_INFINITY]);

/**
 * A kept job with its line of states, whether the store has all of them, the count it stands at and when it was kept; null where it is gone.
 * Older versions are migrated.
 * @throws PlanError codes of migrateJob, as job-version-newer
 */
export async function loadJob(
  id: string,
): Promise<{ line: Line; whole: boolean; count: number; leaf: Leaf; savedAt: string } | null> {
  const db = await openShelf();
  const kept = await db.get("jobs", id);
  if (kept === undefined) return null;
  const mesh = (kept.mesh === null ? undefined : await db.get("meshes", kept.mesh)) ?? null;
  const restore = ({ job, log, words }: KeptState) => ({
    project: { id, job: migrateJob(job) as unknown as JobFile, mesh, log },
    words,
  });
  const { job, log, count, leaf, savedAt, at = 0 } = kept;
  const states = (await db.getAll("states", statesOf(id))).map(restore);
  // A job of an older program was kept without its line: it begins here.
  const whole = states.length > at;
  const now = restore({ job, log, words: states[at]?.words ?? "" });
  const line = whole ? { states: states.with(at, now), at } : { states: [now], at: 0 };
  return { line, whole, count, leaf, savedAt };
}

/**
 * Keeps a job and those states of its line that `before`, the line as kept last, has not, if it still stands at `count`.
 * @returns the new count, or null where another tab has saved it since: nothing was written
 */
export async function saveJob(
  line: Line,
  before: Line | null,
  leaf: Leaf,
  count: number,
  now: string,
): Promise<number | null> {
  const { id, job, log, mesh } = line.states[line.at].project;
  const db = await openShelf();
  const tx = db.transaction(["jobs", "meshes", "states"], "readwrite");
  const done = tx.done.catch((error: unknown) => error);
  const kept = await tx.objectStore("jobs").get(id);
  if ((kept?.count ?? 0) !== count) {
    await done;
    return null;
  }
  const states = tx.objectStore("states");
  const writes: Promise<unknown>[] = line.states.flatMap(({ project, words }, i) => {
    if (before?.states[i]?.project === project) return [];
    return [states.put({ job: project.job, log: project.log, words }, [id, i])];
  });
  if ((before?.states.length ?? 0) > line.states.length) writes.push(states.delete(statesOf(id, line.states.length)));
  if (mesh !== null && kept === undefined) writes.push(tx.objectStore("meshes").put(mesh, id));
  const title = job.title;
  const key = mesh === null ? null : id;
  writes.push(
    tx.objectStore("jobs").put({ id, title, savedAt: now, count: count + 1, job, log, leaf, mesh: key, at: line.at }),
  );
  await Promise.all(writes);
  const fault = await done;
  if (fault !== undefined) throw fault;
  return count + 1;
}

/** Takes a job out of the store. */
export async function deleteJob(id: string): Promise<void> {
  dropWord(id);
  const db = await openShelf();
  const tx = db.transaction(["jobs", "meshes", "states"], "readwrite");
  await tx.objectStore("jobs").delete(id);
  await tx.objectStore("meshes").delete(id);
  await tx.objectStore("states").delete(statesOf(id));
  await tx.done;
}
