// Jobs in the browser's own store (IndexedDB). Meshes stand apart, so that an edit does not write them again.
// A counter per job tells when another tab has saved in between.
import { type DBSchema, type IDBPDatabase, openDB } from "idb";
import type { JobFile } from "../../core/job/jobSchema.ts";
import type { Leaf } from "../store/bookStore.ts";
import type { Project, Reading } from "../store/project.ts";

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
}

interface Shelf extends DBSchema {
  jobs: { key: string; value: KeptJob };
  meshes: { key: string; value: { name: string; bytes: Uint8Array<ArrayBuffer> } };
}

let shelf: Promise<IDBPDatabase<Shelf>> | null = null;

function openShelf(): Promise<IDBPDatabase<Shelf>> {
  shelf ??= openDB<Shelf>("seamstay", 1, {
    upgrade: (db) => {
      db.createObjectStore("jobs", { keyPath: "id" });
      db.createObjectStore("meshes");
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

/** A kept job and the count it stands at; null where it is gone. */
export async function loadJob(id: string): Promise<{ project: Project; count: number; leaf: Leaf } | null> {
  const db = await openShelf();
  const kept = await db.get("jobs", id);
  if (kept === undefined) return null;
  const mesh = kept.mesh === null ? undefined : await db.get("meshes", kept.mesh);
  const { job, log, count, leaf } = kept;
  return { project: { id, job, mesh: mesh ?? null, log }, count, leaf };
}

/**
 * Keeps a job if it still stands at `count`.
 * @returns the new count, or null where another tab has saved it since: nothing was written
 */
export async function saveJob(project: Project, leaf: Leaf, count: number, now: string): Promise<number | null> {
  const db = await openShelf();
  const { id, job, log, mesh } = project;
  const tx = db.transaction(["jobs", "meshes"], "readwrite");
  const jobs = tx.objectStore("jobs");
  const kept = await jobs.get(id);
  if ((kept?.count ?? 0) !== count) {
    await tx.done;
    return null;
  }
  const meshes = tx.objectStore("meshes");
  if (mesh !== null && kept === undefined) await meshes.put(mesh, id);
  await jobs.put({
    id,
    title: job.title,
    savedAt: now,
    count: count + 1,
    job,
    log,
    leaf,
    mesh: mesh === null ? null : id,
  });
  await tx.done;
  return count + 1;
}

/** Takes a job out of the store. */
export async function deleteJob(id: string): Promise<void> {
  const db = await openShelf();
  const tx = db.transaction(["jobs", "meshes"], "readwrite");
  await tx.objectStore("jobs").delete(id);
  await tx.objectStore("meshes").delete(id);
  await tx.done;
}
