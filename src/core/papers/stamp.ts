// Whether a paper may leave the office. One rule, read by every writer.
import type { Facts } from "../records/facts.ts";

/** "NOT FOR ISSUE" while the findings hold a stop, else "". */
export function stampOf(facts: Facts): string {
  return facts.findings.some((f) => f.level === "stop") ? "NOT FOR ISSUE" : "";
}

/** Codes of the open stops, each once, in the order they were found. */
export function openStops(facts: Facts): string[] {
  return [...new Set(facts.findings.filter((f) => f.level === "stop").map((f) => f.code))];
}
