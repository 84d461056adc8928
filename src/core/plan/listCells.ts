// A list that the papers hold, cell by cell, for who shows it.
import { splitTable } from "../rig/correct/readTable.ts";

/** Rows of cells as text, the header first. @throws PlanError readings-quote */
export function listCells(bytes: Uint8Array, name: string): string[][] {
  return splitTable(new TextDecoder().decode(bytes), ",", name).map((r) => r.cells);
}
