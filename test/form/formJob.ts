// A job with nothing decided, for the form tests; and how to look at what came back.
import type { MeshParts } from "../../src/core/form/reading/readObj.ts";
import type { FormJob } from "../../src/core/form/runForm.ts";
import type { Finding } from "../../src/core/problem.ts";
import type { MeshSource } from "../../src/core/records/job.ts";

/** The least job; what is given replaces its defaults. */
export function buildJob(own: Partial<FormJob> = {}): FormJob {
  return { prestress: { warp: 2, weft: 2 }, warp: null, settle: false, edges: {}, anchors: [], ...own };
}

/** Mesh parts with unit, axis and outer face said. */
export function placeMesh(parts: MeshParts, own: Partial<MeshSource> = {}): MeshSource {
  return { ...parts, unit: "m", up: "z", outside: "up", ...own };
}

/** Codes of the findings of a level, sorted. */
export function listCodes(findings: readonly Finding[], level?: Finding["level"]): string[] {
  return findings
    .filter((f) => level === undefined || f.level === level)
    .map((f) => f.code)
    .sort();
}
