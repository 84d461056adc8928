// The bytes of facts.json, out and in: the same on the command line and on the page.
import { PlanError } from "../problem.ts";
import type { Facts } from "../records/facts.ts";

/**
 * The bytes of facts.json.
 * @throws PlanError facts-not-finite: JSON has no NaN, and a null would pass for "none"
 */
export function writeFactsJson(facts: Facts): Uint8Array<ArrayBuffer> {
  const text = JSON.stringify(facts, (key, value) => {
    if (typeof value === "number" && !Number.isFinite(value)) {
      throw new PlanError(
        "facts-not-finite",
        `the plan holds ${value} under ${JSON.stringify(key)}: a fault of this program; nothing was written`,
        key,
      );
    }
    return value;
  });
  return new TextEncoder().encode(`${text}\n`);
}

/** The version this program writes and reads. */
const VERSION = 1;
const TITLE_BLOCK = ["title", "issue", "revision", "date", "drawnBy", "checkedBy", "mesh"];
const LISTS = ["layouts", "compared", "seams", "panels", "pieces", "rolls", "cables", "sensitivity"];
const RECORDS = ["form", "cloth", "rig", "assembled", "asBuilt", "tensioning"];

const isRecord = (value: unknown): value is Record<string, unknown> =>
  typeof value === "object" && value !== null && !Array.isArray(value);

/** Whether a value read from a file calls itself facts. */
export function isFacts(value: unknown): boolean {
  return isRecord(value) && value.format === "seamstay-facts";
}

/**
 * Facts as they come in from a file, for their papers. Looked at as far as the keys at the top go; what lies deeper is found by
 * who draws it: see tellBrokenFacts.
 * @param name of the file
 * @throws PlanError facts-format: no facts; facts-version-newer; facts-broken: a key is missing or of another kind
 */
export function readFacts(value: unknown, name: string): Facts {
  if (!isRecord(value) || !isFacts(value))
    throw new PlanError(
      "facts-format",
      `${name}: this is no facts file, which says "format": "seamstay-facts"; name the facts.json of a plan`,
      name,
    );
  const { version, job } = value;
  if (typeof version === "number" && version > VERSION)
    throw new PlanError(
      "facts-version-newer",
      `${name}: version ${version} of the facts is newer than this program, which reads up to version ${VERSION}; open it with the Seamstay that wrote it, or a newer one`,
      name,
      { version, limit: VERSION },
    );
  const wrong = [
    ...(version === VERSION ? [] : ["version"]),
    ...(isRecord(job) ? TITLE_BLOCK.filter((k) => typeof job[k] !== "string").map((k) => `job.${k}`) : ["job"]),
    ...["fabrics"].filter((k) => !isRecord(value[k])),
    ...["checks", "findings"].filter((k) => !Array.isArray(value[k])),
    ...LISTS.filter((k) => value[k] !== undefined && !Array.isArray(value[k])),
    ...RECORDS.filter((k) => value[k] !== undefined && !isRecord(value[k])),
  ];
  if (wrong.length > 0)
    throw new PlanError(
      "facts-broken",
      `${name}: ${wrong.join(", ")} ${wrong.length === 1 ? "is" : "are"} missing or not what a plan writes there; plan the job again and take its facts.json`,
      wrong,
    );
  return value as unknown as Facts;
}

/**
 * What is said where papers cannot be drawn from facts that came in from a file: a PlanError tells by itself what it met. Any other error
 * may be the file's or the program's, and what is said blames neither.
 */
export function tellBrokenFacts(error: unknown, name: string): PlanError {
  if (error instanceof PlanError) return error;
  const words = error instanceof Error ? error.message : String(error);
  return new PlanError(
    "facts-broken",
    `${name}: no papers can be drawn from it (${words}): it was changed since a plan wrote it, or this program has a fault; plan the job again and take its facts.json, and where that fails too, report it with the file`,
    name,
  );
}
