// A job file or a mesh from disk to what the plan starts from. The mesh file is looked for beside the job file.
import { readFileSync, statSync } from "node:fs";
import { basename, dirname, resolve } from "node:path";
import type { Catalogues } from "../core/job/catalogues.ts";
import { leastJob } from "../core/job/leastJob.ts";
import { readJson } from "../core/job/readJson.ts";
import { decodeText, titleOfMesh } from "../core/plan/meshText.ts";
import { type PlanInput, readPlanInput } from "../core/plan/readPlanInput.ts";
import { type Finding, PlanError } from "../core/problem.ts";
import { withFile } from "./fileErrors.ts";

const MB = 1024 * 1024;
const LARGEST_JOB = 256 * MB;
const LARGEST_MESH = 1024 * MB;

/**
 * Reads JOB or FORM.obj.
 * @throws PlanError file-… of the file system; file-size; mesh-kind; all codes of readJson and readPlanInput
 */
export function readInput(path: string, catalogues: Catalogues): PlanInput {
  return readPlanInput(readGiven(path), catalogues, (file) => {
    const name = resolve(dirname(path), file);
    return { bytes: readBytes(name, LARGEST_MESH), name };
  });
}

/** The job as it stands in the file, or the least one for a mesh. */
export function readGiven(path: string): { value: unknown; findings: Finding[] } {
  if (/\.obj$/i.test(path)) {
    return { value: leastJob(basename(path), titleOfMesh(basename(path))), findings: [] };
  }
  if (/\.(stl|ply|off|dxf|3dm|gltf|glb|3mf)$/i.test(path)) {
    throw new PlanError(
      "mesh-kind",
      `${path}: meshes are read as OBJ; export the form as OBJ with its named lines`,
      path,
    );
  }
  return readJson(decodeText(readBytes(path, LARGEST_JOB), path));
}

/** The bytes of a file. @throws PlanError file-…: missing, refused, a folder; file-size */
export function readBytes(path: string, largest: number): Uint8Array {
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
