// A job file or a mesh from disk to what the plan starts from: the job, its mesh, its revision, what was noted on the way.
import { readFileSync, statSync } from "node:fs";
import { basename, dirname, resolve } from "node:path";
import { readMeshJson } from "../core/form/readMeshJson.ts";
import { createObjReader, type MeshParts } from "../core/form/readObj.ts";
import type { Catalogues } from "../core/job/catalogues.ts";
import { leastJob, readJob } from "../core/job/readJob.ts";
import { readJson } from "../core/job/readJson.ts";
import { measureRevision } from "../core/job/revision.ts";
import { type Finding, PlanError } from "../core/problem.ts";
import type { Job, MeshSource } from "../core/records/job.ts";
import { withFile } from "./fileErrors.ts";

/** What runPlan starts from. */
export interface PlanInput {
  job: Job;
  source: MeshSource;
  revision: string;
  findings: Finding[];
}

const MB = 1024 * 1024;
const LARGEST_JOB = 256 * MB;
const LARGEST_MESH = 1024 * MB;
/** Decoded at a time, so that a large mesh never is one string. */
const CHUNK = 4 * MB;

/**
 * Reads JOB or FORM.obj. The mesh file is looked for beside the job file.
 * @throws PlanError file-… of the file system; file-size; file-text: not UTF-8; mesh-kind; all codes of readJson, readJob, readObj
 */
export function readInput(path: string, catalogues: Catalogues): PlanInput {
  if (/\.obj$/i.test(path)) {
    const title = basename(path)
      .replace(/\.obj$/i, "")
      .replace(/[_\s]+/g, " ")
      .trim();
    return finishInput(leastJob(basename(path), title === "" ? "Untitled" : title), [], path, catalogues);
  }
  if (/\.(stl|ply|off|dxf|3dm|gltf|glb|3mf)$/i.test(path)) {
    throw new PlanError(
      "mesh-kind",
      `${path}: meshes are read as OBJ; export the form as OBJ with its named lines`,
      path,
    );
  }
  const text = readText(path, LARGEST_JOB);
  const { value, findings } = readJson(text);
  return finishInput(value, findings, path, catalogues);
}

function finishInput(given: unknown, noted: Finding[], path: string, catalogues: Catalogues): PlanInput {
  const read = readJob(given, catalogues);
  const meshPath = "file" in read.mesh ? resolve(dirname(path), read.mesh.file) : null;
  const bytes = meshPath === null ? new Uint8Array(0) : readBytes(meshPath, LARGEST_MESH);
  const parts = "file" in read.mesh ? readObjBytes(bytes, meshPath ?? path) : readMeshJson(read.mesh.inline, "mesh");
  const { unit, up, outside } = read;
  return {
    job: read.job,
    source: { ...parts, unit, up, outside },
    revision: measureRevision(given, read.job, bytes),
    findings: [...noted, ...read.findings],
  };
}

function readBytes(path: string, largest: number): Uint8Array {
  const stat = withFile(path, () => statSync(path));
  if (stat.isDirectory()) {
    throw new PlanError("file-folder", `${path}: this is a folder; name the file in it, such as job.json`, path);
  }
  if (stat.size > largest) {
    const size = (stat.size / MB).toFixed(0);
    throw new PlanError(
      "file-size",
      `${path}: ${size} MB is more than the ${largest / MB} MB that are read; coarsen the mesh or move it into a file of its own`,
      path,
      { bytes: stat.size, limit: largest },
    );
  }
  return withFile(path, () => readFileSync(path));
}

function readText(path: string, largest: number): string {
  const bytes = readBytes(path, largest);
  try {
    return new TextDecoder("utf-8", { fatal: true, ignoreBOM: true }).decode(bytes);
  } catch {
    throw notText(path, bytes);
  }
}

function readObjBytes(bytes: Uint8Array, path: string): MeshParts {
  const reader = createObjReader();
  const decoder = new TextDecoder("utf-8", { fatal: true });
  for (let at = 0; at < bytes.length; at += CHUNK) {
    let text: string;
    try {
      text = decoder.decode(bytes.subarray(at, at + CHUNK), { stream: at + CHUNK < bytes.length });
    } catch {
      throw notText(path, bytes);
    }
    reader.push(text);
  }
  return reader.finish();
}

/** Names the first line that is no UTF-8. */
function notText(path: string, bytes: Uint8Array): PlanError {
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
  return new PlanError("file-text", `${path}: line ${line} is not UTF-8 text${wide}; save the file as UTF-8`, path, {
    line,
  });
}
