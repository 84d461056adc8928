// Whether a paper may leave the office. One rule, read by every writer: an open stop stamps all papers; those of the rig are
// stamped too while anything they stand on is a default (facts.md). The findings sheets, which say what is open, carry none.
import type { Facts } from "../../records/facts.ts";

/** What kind of paper asks: cut files and cards, papers of the rig, or the findings. */
export type PaperKind = "cloth" | "rig" | "findings";

/** "NOT FOR ISSUE" where a paper of this kind may not be built from, else "". */
export function stampOf(facts: Facts, kind: PaperKind = "cloth"): string {
  return holdReason(facts, kind) === "" ? "" : "NOT FOR ISSUE";
}

/** Codes of the open stops, each once, in the order they were found. */
export function openStops(facts: Facts): string[] {
  return [...new Set(facts.findings.filter((f) => f.level === "stop").map((f) => f.code))];
}

/** Why a paper of this kind is stamped, in a few words, or "". */
export function holdReason(facts: Facts, kind: PaperKind): string {
  if (kind === "findings") return "";
  const stops = openStops(facts);
  if (stops.length > 0) return `open stop: ${stops.join(", ")}`;
  if (kind === "rig" && facts.tensioning?.issuable !== true) return "stands on defaults the job must give";
  return "";
}
