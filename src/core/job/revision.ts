// The revision that stands on every paper: a short hash of the job and all it reads. Same job, same letters, on every machine.
import type { Job } from "../records/job.ts";
import { measureSha256 } from "./sha256.ts";

/**
 * JSON with sorted keys and no spaces: equal for equal values, however they were written down.
 * @throws nothing; what JSON cannot say (undefined, functions) is left out as JSON.stringify leaves it out
 */
export function writeCanonicalJson(value: unknown): string {
  return JSON.stringify(value, (_key, v) =>
    v !== null && typeof v === "object" && !Array.isArray(v) && !ArrayBuffer.isView(v)
      ? Object.fromEntries(
          Object.keys(v)
            .sort()
            .map((key) => [key, v[key]]),
        )
      : v,
  );
}

/**
 * Eight hexadecimal digits, upper case, of the job as given, the job as resolved (defaults and catalogue values in it)
 * and the bytes of the mesh file (empty for an inline mesh, which stands in the job).
 * @source own: the first 32 bits of SHA-256 (FIPS 180-4) over the three, each behind its length
 */
export function measureRevision(given: unknown, job: Job, mesh: Uint8Array): string {
  const encoder = new TextEncoder();
  const parts = [encoder.encode(writeCanonicalJson(given)), encoder.encode(writeCanonicalJson(job)), mesh];
  const heads = parts.map((part) => encoder.encode(`${part.length}\n`));
  const bytes = new Uint8Array(parts.reduce((sum, part, i) => sum + part.length + heads[i].length, 0));
  let at = 0;
  parts.forEach((part, i) => {
    bytes.set(heads[i], at);
    bytes.set(part, at + heads[i].length);
    at += heads[i].length + part.length;
  });
  return measureSha256(bytes).slice(0, 8).toUpperCase();
}
