// Files out of the page: single ones, and several as one zip with a fixed stamp, so that equal content is an equal file.
import { writeReadings, writeSiteLog } from "../../core/plan/siteLog.ts";
import type { Project, Reading } from "../store/project.ts";

export interface SavedFile {
  path: string;
  bytes: Uint8Array<ArrayBuffer>;
}

const KINDS: Record<string, string> = {
  pdf: "application/pdf",
  svg: "image/svg+xml",
  csv: "text/csv;charset=utf-8",
  json: "application/json",
  dxf: "image/vnd.dxf",
  zip: "application/zip",
  obj: "model/obj",
};

/** A blob of the file's kind. */
export function blobOf(file: SavedFile): Blob {
  const kind = KINDS[file.path.split(".").at(-1) ?? ""] ?? "application/octet-stream";
  return new Blob([file.bytes], { type: kind });
}

/** Hands one file to the browser's downloads. */
export function saveFile(file: SavedFile): void {
  const link = document.createElement("a");
  link.href = URL.createObjectURL(blobOf(file));
  link.download = file.path.split("/").at(-1) ?? file.path;
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), 60_000);
}

/** Several files as one zip. */
export async function zipFiles(name: string, files: readonly SavedFile[]): Promise<SavedFile> {
  const { zipSync } = await import("fflate");
  // A zip carries local time: the fields of 1980-01-01 as local time give the same bytes everywhere.
  const mtime = new Date(1980, 0, 1);
  const entries = Object.fromEntries(files.map((f) => [f.path, f.bytes]));
  return { path: name, bytes: Uint8Array.from(zipSync(entries, { mtime, level: 6 })) };
}

/** Name of a job as part of a file name. */
export function fileStem(title: string): string {
  const stem = title.replace(/[^\p{L}\p{N}]+/gu, "-").replace(/^-+|-+$/g, "");
  return stem === "" ? "job" : stem.slice(0, 60);
}

/** The job with its mesh and readings, as it can be opened again here or planned on the command line. */
export async function packJob(project: Project): Promise<SavedFile> {
  const { job, mesh, log } = project;
  const beside = mesh === null ? job : { ...job, mesh: { ...job.mesh, file: mesh.name } };
  const text = new TextEncoder().encode(`${JSON.stringify(beside, null, 2)}\n`);
  return await zipFiles(`${fileStem(job.title)}.zip`, [
    { path: "job.json", bytes: text },
    ...(mesh === null ? [] : [{ path: mesh.name, bytes: mesh.bytes }]),
    ...logFiles(log),
  ]);
}

/** The log as files: whole, and beside it what counts of it as the command line reads it. */
export function logFiles(log: readonly Reading[]): SavedFile[] {
  if (log.length === 0) return [];
  const encoder = new TextEncoder();
  return [
    { path: "site-log.csv", bytes: encoder.encode(writeSiteLog(log)) },
    { path: "readings.csv", bytes: encoder.encode(writeReadings(log)) },
  ];
}
