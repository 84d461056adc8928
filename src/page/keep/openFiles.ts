// From files dropped or chosen to a project: a job with its mesh, a mesh alone, or a zip that holds both.

import type { JobFile } from "../../core/job/jobSchema.ts";
import { migrateJob } from "../../core/job/jobVersions.ts";
import { leastJob } from "../../core/job/leastJob.ts";
import { readJson } from "../../core/job/readJson.ts";
import { decodeText, titleOfMesh } from "../../core/plan/meshText.ts";
import { PlanError } from "../../core/problem.ts";
import type { MeshFile, Project, Reading } from "../store/project.ts";
import { newId } from "./keepBook.ts";
import { readReadings, readTurns } from "./readings.ts";

/** A file with its bytes in hand. */
export interface LoadedFile {
  name: string;
  bytes: Uint8Array<ArrayBuffer>;
}

/** Bytes of chosen files; a zip is opened. */
export async function loadFiles(files: readonly File[]): Promise<LoadedFile[]> {
  const loaded: LoadedFile[] = [];
  for (const file of files) {
    const bytes = new Uint8Array(await file.arrayBuffer());
    if (/\.zip$/i.test(file.name)) {
      const { unzipSync } = await import("fflate");
      for (const [path, inner] of Object.entries(unzipSync(bytes))) {
        if (!path.endsWith("/")) loaded.push({ name: path.split("/").at(-1) ?? path, bytes: Uint8Array.from(inner) });
      }
    } else loaded.push({ name: file.name, bytes });
  }
  return loaded;
}

/**
 * The project the files make. Dropped beside an open job, a mesh it waits for completes it.
 * @throws PlanError files-none, mesh-kind; codes of readJson and migrateJob
 */
export function readFiles(files: readonly LoadedFile[], open: Project | null): Project {
  const meshes = files.filter((f) => /\.obj$/i.test(f.name));
  const jobs = files.filter((f) => /\.json$/i.test(f.name));
  const job = jobs.find((f) => isJob(f)) ?? jobs[0];
  if (job !== undefined) {
    const { value } = readJson(decodeText(job.bytes, job.name));
    const given = migrateJob(value) as unknown as JobFile;
    const wanted = baseName(given.mesh?.file);
    const mesh = meshes.find((m) => m.name === wanted) ?? meshes[0] ?? null;
    return { id: newId(), job: given, mesh, log: readLog(files) };
  }
  const [mesh] = meshes;
  if (mesh === undefined) {
    const names = files.map((f) => f.name).join(", ");
    throw new PlanError(
      "files-none",
      `${names || "nothing"}: a mesh is read as OBJ, a job as JSON, both together as zip; export the form as OBJ with its named lines`,
      names,
    );
  }
  const missing = open !== null && open.mesh === null && open.job.mesh?.file !== undefined;
  if (missing) return { ...open, id: newId(), mesh };
  return projectOfMesh(mesh);
}

/** The least job for a mesh. */
export function projectOfMesh(mesh: MeshFile): Project {
  return { id: newId(), job: leastJob(mesh.name, titleOfMesh(mesh.name)) as JobFile, mesh, log: [] };
}

function baseName(path: string | undefined): string | undefined {
  return path?.split(/[/\\]/).at(-1);
}

function isJob(file: LoadedFile): boolean {
  return new TextDecoder().decode(file.bytes.subarray(0, 400)).includes("seamstay-job");
}

/** The readings that count, those that were struck, and the turns, in the order they were taken. */
function readLog(files: readonly LoadedFile[]): Reading[] {
  const csvs = files.filter((f) => /readings.*\.csv$/i.test(f.name));
  const log = csvs.flatMap((csv) => {
    const struck = /struck\.csv$/i.test(csv.name);
    return readReadings(decodeText(csv.bytes, csv.name)).map((r) => (struck ? { ...r, struck: true as const } : r));
  });
  const turns = files.filter((f) => /turns\.csv$/i.test(f.name));
  log.push(...turns.flatMap((csv) => readTurns(decodeText(csv.bytes, csv.name))));
  return log.sort((a, b) => (a.time < b.time ? -1 : a.time > b.time ? 1 : 0));
}
