// What a job takes where it says nothing, each with what it stands on. All of it common practice unless the catalogue says
// otherwise; all of it listed in the findings of every plan that takes it.
import type { Finding } from "../problem.ts";
import type { ValueStatus } from "../records/fabric.ts";

/** Values taken where the job gives none. mm, kN/m. */
export const JOB_DEFAULTS = {
  issue: "A",
  unit: "m",
  up: "z",
  outside: "up",
  prestress: 2.0,
  seam: 40,
  seamOn: "both",
  pocket: 100,
  pocketStrip: false,
  cover: 0,
  doubleCloth: false,
  clamp: 0,
  hem: 40,
  gap: 10,
  steps: 200,
  seed: 1,
  turn: true,
  proof: { mean: 0.05, rms: 0.25, moved: null, force: 0.1, slack: 0.02 },
  sheet: "A4",
  units: "metric",
} as const;

/** Collects a note for each default taken. */
export interface DefaultLedger {
  findings: Finding[];
}

/** The value given, or the default, noted. `words` says what is taken, with its unit. */
export function takeDefault<T>(
  ledger: DefaultLedger,
  given: T | undefined,
  fallback: T,
  path: string,
  words: string,
): T {
  if (given !== undefined) return given;
  noteDefault(
    ledger,
    path,
    typeof fallback === "number" ? fallback : fallback === null ? null : String(fallback),
    words,
  );
  return fallback;
}

/** A note that the job leaves something to a default. */
export function noteDefault(
  ledger: DefaultLedger,
  path: string,
  value: string | number | null,
  words: string,
  status: ValueStatus = "common practice",
): void {
  ledger.findings.push({
    code: "job-default",
    level: "note",
    station: "job",
    where: path,
    value,
    limit: null,
    text: `${path} is not given: ${words} (${status})`,
    remedy: `write ${path} in the job to decide it`,
    basis: status,
  });
}
