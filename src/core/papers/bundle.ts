// All papers of a plan in one zip. No clock: every entry carries the job's date, or the first day a zip can hold.
import { type Zippable, zipSync } from "fflate";
import type { PaperFile } from "./paperFile.ts";

/** Entries of a zip hold years from 1980 to 2099. */
const EARLIEST = "1980-01-01";
const DAY = /^(?:19[89]\d|20\d\d)-(?:0[1-9]|1[0-2])-(?:0[1-9]|[12]\d|3[01])$/;
/** Packed already: nothing to gain. */
const PACKED = /\.pdf$/;

/** The bytes of the zip; equal files and date give equal bytes. */
export function writeBundle(files: readonly PaperFile[], date: string): Uint8Array {
  // Read and written in the same zone, so the zone of the machine does not show.
  const mtime = `${DAY.test(date) ? date : EARLIEST}T12:00:00`;
  const entries: Zippable = {};
  for (const f of files) entries[f.path] = [f.bytes, { mtime, level: PACKED.test(f.path) ? 0 : 6 }];
  return zipSync(entries);
}
