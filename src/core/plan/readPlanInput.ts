// From bytes and a parsed job to what the plan starts from: the job, its mesh, its revision, what was noted on the way.
// Finds no files: where the mesh lies is the caller's business.
import { readMeshJson } from "../form/readMeshJson.ts";
import { createObjReader, type MeshParts } from "../form/readObj.ts";
import type { Catalogues } from "../job/catalogues.ts";
import { readJob } from "../job/readJob.ts";
import { measureRevision } from "../job/revision.ts";
import { type Finding, PlanError } from "../problem.ts";
import type { Job, MeshSource } from "../records/job.ts";

/** What runPlan starts from. */
export interface PlanInput {
  job: Job;
  source: MeshSource;
  revision: string;
  findings: Finding[];
}

/** Decoded at a time, so that a large mesh never is one string. */
const CHUNK = 4 * 1024 * 1024;

/**
 * What the plan starts from.
 * @param given the job as parsed, with the findings of its reading
 * @param loadMesh the mesh file's bytes and the name errors call it by; asked only where the job names a file
 * @throws PlanError file-text: the mesh is not UTF-8; all codes of readJob, readObj, readMeshJson, and of loadMesh
 */
export function readPlanInput(
  given: { value: unknown; findings: Finding[] },
  catalogues: Catalogues,
  loadMesh: (file: string) => { bytes: Uint8Array; name: string },
): PlanInput {
  const read = readJob(given.value, catalogues);
  const loaded = "file" in read.mesh ? loadMesh(read.mesh.file) : null;
  const parts =
    "file" in read.mesh
      ? readObjBytes(loaded?.bytes ?? new Uint8Array(0), loaded?.name ?? "")
      : readMeshJson(read.mesh.inline, "mesh");
  const { unit, up, outside } = read;
  return {
    job: read.job,
    source: { ...parts, unit, up, outside },
    revision: measureRevision(given.value, read.job, loaded?.bytes ?? new Uint8Array(0)),
    findings: [...given.findings, ...read.findings],
  };
}

/** Title of a job that is only a mesh, from the name of its file. */
export function titleOfMesh(file: string): string {
  const title = file
    .replace(/\.obj$/i, "")
    .replace(/[_\s]+/g, " ")
    .trim();
  return title === "" ? "Untitled" : title;
}

/**
 * Text of UTF-8 bytes, a byte order mark kept.
 * @throws PlanError file-text, with the line
 */
export function decodeText(bytes: Uint8Array, name: string): string {
  try {
    return new TextDecoder("utf-8", { fatal: true, ignoreBOM: true }).decode(bytes);
  } catch {
    throw notText(name, bytes);
  }
}

function readObjBytes(bytes: Uint8Array, name: string): MeshParts {
  const reader = createObjReader();
  const decoder = new TextDecoder("utf-8", { fatal: true });
  for (let at = 0; at < bytes.length; at += CHUNK) {
    let text: string;
    try {
      text = decoder.decode(bytes.subarray(at, at + CHUNK), { stream: at + CHUNK < bytes.length });
    } catch {
      throw notText(name, bytes);
    }
    reader.push(text);
  }
  return reader.finish();
}

/** Names the first line that is no UTF-8. */
function notText(name: string, bytes: Uint8Array): PlanError {
  const wide = bytes[0] === 0xff || bytes[0] === 0xfe ? "; it looks like UTF-16" : "";
  let line = 1;
  let start = 0;
  const sound = (end: number) => {
    try {
      new TextDecoder("utf-8", { fatal: true }).decode(bytes.subarray(start, end));
      return true;
    } catch {
      return false;
    }
  };
  for (let end = bytes.indexOf(10); end >= 0 && sound(end); end = bytes.indexOf(10, start)) {
    start = end + 1;
    line++;
  }
  return new PlanError("file-text", `${name}: line ${line} is not UTF-8 text${wide}; save the file as UTF-8`, name, {
    line,
  });
}
