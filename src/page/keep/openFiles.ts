// From files dropped or chosen to a project: a job with its mesh, a mesh alone, or a zip that holds both.
import type { JobFile } from "../../core/job/jobSchema.ts";
import { migrateJob } from "../../core/job/jobVersions.ts";
import { leastJob } from "../../core/job/leastJob.ts";
import { readJson } from "../../core/job/readJson.ts";
import { isFacts, readFacts } from "../../core/plan/factsFile.ts";
import { decodeText, titleOfMesh } from "../../core/plan/meshText.ts";
import type { SiteLine } from "../../core/plan/siteLog.ts";
import { PlanError } from "../../core/problem.ts";
import type { Facts } from "../../core/records/facts.ts";
import type { MeshFile, Project } from "../store/project.ts";
import { newId } from "./keepBook.ts";
import { readLogFiles } from "./logTables.ts";

/** A file with its bytes in hand. */
export interface LoadedFile {
  name: string;
  bytes: Uint8Array<ArrayBuffer>;
}

async function unzip(name: string, bytes: Uint8Array): Promise<Record<string, Uint8Array>> {
  const { unzipSync } = await import("fflate");
  try {
    return unzipSync(bytes);
  } catch (error) {
    throw new PlanError(
      "files-zip",
      `${name}: the zip is damaged or cut short (${error instanceof Error ? error.message : String(error)}); fetch or save it anew, or open what is in it by itself`,
      name,
    );
  }
}

/** Bytes of chosen files; a zip is opened. @throws PlanError files-zip */
export async function loadFiles(files: readonly File[]): Promise<LoadedFile[]> {
  const loaded: LoadedFile[] = [];
  for (const file of files) {
    const bytes = new Uint8Array(await file.arrayBuffer());
    if (/\.zip$/i.test(file.name)) {
      for (const [path, inner] of Object.entries(await unzip(file.name, bytes))) {
        if (!path.endsWith("/")) loaded.push({ name: path.split("/").at(-1) ?? path, bytes: Uint8Array.from(inner) });
      }
    } else loaded.push({ name: file.name, bytes });
  }
  return loaded;
}

/**
 * The project the files make. Dropped beside an open job, a mesh it waits for completes it.
 * @param onLogFault told why the log beside a job cannot be read: the job is whole without it, and opened
 * @throws PlanError files-none, files-facts, files-log; codes of readJson and migrateJob
 */
export function readFiles(
  files: readonly LoadedFile[],
  open: Project | null,
  onLogFault: (fault: PlanError) => void,
): Project {
  const meshes = files.filter((f) => /\.obj$/i.test(f.name));
  const job = findJob(files);
  if (job !== undefined) {
    const { value } = readJson(decodeText(job.bytes, job.name), job.name);
    if (isFacts(value))
      throw new PlanError(
        "files-facts",
        `${job.name} is what came out of a plan; what goes into one is the job. Open the zip that “Save the job with its mesh” gave, or the job with its mesh`,
        job.name,
      );
    const given = bringUpToDate(value, job.name);
    const wanted = baseName(given.mesh?.file);
    const mesh = meshes.find((m) => m.name === wanted) ?? meshes[0] ?? null;
    return { id: newId(), job: given, mesh, log: readLogBeside(files, onLogFault) };
  }
  const [mesh] = meshes;
  if (mesh === undefined) {
    const names = files.map((f) => f.name).join(", ");
    if (files.length > 0 && files.every((f) => /\.csv$/i.test(f.name)))
      throw new PlanError(
        "files-log",
        `${names}: readings belong to a job; open the job first, then take them in on its leaf Site`,
        names,
      );
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

/**
 * Facts among files that hold neither job nor mesh, to be opened for their papers; null where there are none.
 * @throws PlanError codes of readJson and readFacts
 */
export function readLooseFacts(files: readonly LoadedFile[]): { name: string; facts: Facts } | null {
  const found = findJob(files);
  if (found === undefined || isJob(found) || files.some((f) => /\.obj$/i.test(f.name))) return null;
  const { value } = readJson(decodeText(found.bytes, found.name), found.name);
  return isFacts(value) ? { name: found.name, facts: readFacts(value, found.name) } : null;
}

/** The least job for a mesh. */
export function projectOfMesh(mesh: MeshFile): Project {
  return { id: newId(), job: leastJob(mesh.name, titleOfMesh(mesh.name)) as JobFile, mesh, log: [] };
}

/** The job as one of the present version; what is wrong names the file. @throws PlanError codes of migrateJob */
function bringUpToDate(value: unknown, name: string): JobFile {
  try {
    return migrateJob(value) as unknown as JobFile;
  } catch (error) {
    if (!(error instanceof PlanError)) throw error;
    throw new PlanError(error.code, `${name}: ${error.message}`, error.where, error.facts);
  }
}

function baseName(path: string | undefined): string | undefined {
  return path?.split(/[/\\]/).at(-1);
}

/** The job of the files, or else the JSON file that may be something else; the list of what a plan wrote is neither. */
function findJob(files: readonly LoadedFile[]): LoadedFile | undefined {
  const jobs = files.filter((f) => /\.json$/i.test(f.name));
  return jobs.find((f) => isJob(f)) ?? jobs.find((f) => /facts/i.test(f.name)) ?? jobs[0];
}

function isJob(file: LoadedFile): boolean {
  return new TextDecoder().decode(file.bytes.subarray(0, 400)).includes("seamstay-job");
}

function readLogBeside(files: readonly LoadedFile[], onLogFault: (fault: PlanError) => void): SiteLine[] {
  try {
    return readLog(files)?.lines ?? [];
  } catch (error) {
    if (!(error instanceof PlanError)) throw error;
    onLogFault(error);
    return [];
  }
}

/** Tables whose names say that they are of a site's log. */
export function findLogTables(files: readonly LoadedFile[]): LoadedFile[] {
  return files.filter((f) => /(readings|turns|log)[^/]*\.csv$/i.test(f.name));
}

/**
 * The log among the files, by their names; files that are all tables are taken for one whatever their names. Null where there is none.
 * @throws PlanError codes of readLogFiles
 */
export function readLog(files: readonly LoadedFile[]): ReturnType<typeof readLogFiles> {
  const named = findLogTables(files);
  const logs = named.length === 0 && files.every((f) => /\.csv$/i.test(f.name)) ? files : named;
  return readLogFiles(logs.map((f) => ({ name: f.name, text: decodeText(f.bytes, f.name) })));
}
