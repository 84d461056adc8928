// From bytes and a parsed job to what the plan starts from: the job, its mesh, its revision, what was noted on the way.
// Finds no files: where the mesh lies is the caller's business.
import { readMeshJson } from "../form/reading/readMeshJson.ts";
import { createObjReader, type MeshParts } from "../form/reading/readObj.ts";
import type { Catalogues } from "../job/catalogues.ts";
import { readJob } from "../job/readJob.ts";
import { measureRevision } from "../job/revision.ts";
import { type Finding, PlanError } from "../problem.ts";
import type { Job, MeshSource } from "../records/job.ts";
import { notText } from "./meshText.ts";

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
      ? readMeshFile(loaded?.bytes ?? new Uint8Array(0), loaded?.name ?? "")
      : readMeshJson(read.mesh.inline, "mesh");
  const { unit, up, outside } = read;
  return {
    job: read.job,
    source: { ...parts, unit, up, outside },
    revision: measureRevision(given.value, read.job, loaded?.bytes ?? new Uint8Array(0)),
    findings: [...given.findings, ...read.findings],
  };
}

/** What is wrong in a mesh names its file. */
function readMeshFile(bytes: Uint8Array, name: string): MeshParts {
  try {
    return readObjBytes(bytes, name);
  } catch (error) {
    if (!(error instanceof PlanError) || error.code === "file-text") throw error;
    throw new PlanError(error.code, `${name}: ${error.message}`, error.where, error.facts);
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
