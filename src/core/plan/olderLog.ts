// The turns of a site's log as an older page kept them, in a table of their own. Pure.
import { PlanError } from "../problem.ts";
import { readTable } from "../rig/correct/readTable.ts";
import type { SiteLine } from "./siteLog.ts";

const turnColumns = ["time", "by", "id", "step", "travel_mm"] as const;

/** Whether a table holds turns and no reading. */
export function holdsTurns(text: string): boolean {
  const [head = ""] = text.split(/\r?\n|\r/, 1);
  return /\btravel_mm\b/.test(head) && !/\b(force_kN|frequency_Hz|struck)\b/.test(head);
}

/** Turns told, one a line, in mm, positive shortens. @throws PlanError readings-header, readings-row, readings-number, readings-quote */
export function readTurns(text: string): SiteLine[] {
  return readTable(text, turnColumns, "turns").map(({ row, cell, number }) => {
    const [id, step, turned] = [cell("id"), number("step", 0), number("travel_mm", -Infinity)];
    if (id === "" || turned === null)
      throw new PlanError(
        "readings-row",
        `turns, row ${row}: ${id === "" ? "the id" : `travel_mm of ${id}`} is missing; a turn has an adjuster and the mm it was turned by`,
        `row ${row}`,
      );
    const nothing = { force: null, frequency: null, freeLength: null, massPerMetre: null, temperature: null, at: null };
    return { time: cell("time"), by: cell("by"), id, ...nothing, ...(step === null ? {} : { step }), turned };
  });
}
