// Which papers were chosen last: kept by the browser beside the jobs, since an office wants the same ones from job to job.
import { choosePapers, DEFAULT_PAPERS, type PaperChoice } from "../../core/papers/choosePapers.ts";

const KEY = "seamstay-papers";

/** The choice as it was left; the usual one where there is none, or none that is known. */
export function readChoice(): readonly PaperChoice[] {
  try {
    const kept = localStorage.getItem(KEY);
    return kept === null ? DEFAULT_PAPERS : kept === "" ? [] : choosePapers(kept);
  } catch {
    // a browser that keeps nothing, or words of another version
    return DEFAULT_PAPERS;
  }
}

/** Leaves the choice for the next time. */
export function leaveChoice(choice: readonly PaperChoice[]): void {
  try {
    localStorage.setItem(KEY, choice.join(","));
  } catch {
    // a browser that keeps nothing: chosen for this visit only
  }
}
