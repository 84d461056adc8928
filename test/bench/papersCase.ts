// Bench case "papers N": every paper of a roof of N panels with names of sixty letters, cold, as the command line writes them.
import type { FontFiles } from "../../src/core/papers/pdf/layout/book.ts";
import { writePapers } from "../../src/core/papers/writePapers.ts";
import { manyPanels } from "../papers/made/manyPanels.ts";

/** Wall and processor seconds, greatest memory of the process in MB, files and bytes. */
export async function benchPapers(count: number, fonts: FontFiles) {
  const facts = manyPanels(count);
  const start = performance.now();
  const before = process.cpuUsage();
  const { files } = await writePapers(facts, { fonts });
  const used = process.cpuUsage(before);
  return {
    panels: facts.panels?.length ?? 0,
    seconds: (performance.now() - start) / 1000,
    processorSeconds: (used.user + used.system) / 1e6,
    greatestMB: process.resourceUsage().maxRSS / 1024,
    files: files.length,
    bytes: files.reduce((sum, f) => sum + f.bytes.length, 0),
  };
}
