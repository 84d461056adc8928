// seamstay correct JOB --readings FILE.csv: from what the crew read to what it turns. Readings are kept, never overwritten.
import { existsSync, mkdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { type CorrectedPlan, correctPlan } from "../core/plan/correctPlan.ts";
import { PlanError } from "../core/problem.ts";
import { withFile } from "./fileErrors.ts";
import type { Surroundings } from "./makePlan.ts";
import { loadCatalogues } from "./packageFiles.ts";
import { parseOptions } from "./parseOptions.ts";
import { readBytes, readInput } from "./readInput.ts";
import { writeFindings } from "./summary.ts";
import { openProgress, usageError } from "./terminal.ts";

/** Largest file of readings that is read, bytes. */
const largest = 10_000_000;

/** The verb. @returns exit status 0, or 1 where the correction must not be made */
export async function correctCommand(args: string[], around: Surroundings): Promise<number> {
  const { operands, values, flags } = parseOptions("correct", args, {
    operands: ["JOB"],
    values: ["readings", "stage", "out"],
    flags: ["json", "quiet"],
  });
  if (values.readings === undefined) throw usageError("correct wants --readings FILE.csv, what the crew read");
  const percent = readStage(values.stage);
  const bytes = readBytes(values.readings, largest);
  const { job, source, findings: told } = readInput(operands[0], loadCatalogues());
  const progress = openProgress(around.terminal, flags.has("quiet"));
  let corrected: CorrectedPlan;
  try {
    const text = new TextDecoder().decode(bytes);
    corrected = correctPlan(job, source, { text, percent }, { onProgress: progress.show });
  } finally {
    progress.end();
  }
  const { correction } = corrected;
  const findings = [...told.filter((f) => f.level !== "note"), ...corrected.findings];
  const exit = findings.some((f) => f.level === "stop") ? 1 : 0;
  const kept = values.out === undefined ? [] : keep(values.out, bytes, corrected);
  if (flags.has("json")) around.terminal.out(JSON.stringify({ command: "correct", exit, correction, findings, kept }));
  else if (!flags.has("quiet")) {
    const words = [writeCorrection(corrected), writeFindings(findings, ["stop", "caution", "note"])];
    around.terminal.out([...words.filter((w) => w !== ""), ...kept.map((k) => `Wrote ${k}`)].join("\n"));
  }
  return exit;
}

function readStage(words: string | undefined): number | null {
  if (words === undefined) return null;
  const percent = Number(words.replace(/\s*%$/, ""));
  if (!(percent > 0 && percent <= 100)) throw usageError(`--stage ${words}: a stage is named by its per cent, as 60`);
  return percent;
}

/** Readings and correction under the next free number: nothing is overwritten. */
function keep(folder: string, readings: Uint8Array, corrected: CorrectedPlan): string[] {
  withFile(folder, () => mkdirSync(folder, { recursive: true }));
  for (let k = 1; k < 10_000; k++) {
    const name = `readings-${String(k).padStart(3, "0")}`;
    const [csv, json] = [join(folder, `${name}.csv`), join(folder, `${name}.correction.json`)];
    if (existsSync(csv)) {
      // the same readings given again are not kept twice
      if (Buffer.compare(readFileSync(csv), readings) === 0 && existsSync(json)) return [];
      continue;
    }
    withFile(csv, () => writeFileSync(csv, readings, { flag: "wx" }));
    withFile(json, () => writeFileSync(json, `${JSON.stringify(corrected, null, 1)}\n`, { flag: "wx" }));
    return [csv, json];
  }
  throw new PlanError("readings-full", `${folder}: holds 9999 sets of readings; give another folder`, folder);
}

function writeCorrection({ correction }: CorrectedPlan): string {
  const { stage, fitted, moves, forecast } = correction;
  const lines = [`Held against the end of stage ${stage}`, "  adjuster      force as fitted   off the plan"];
  for (const f of fitted)
    lines.push(
      `  ${f.adjuster.padEnd(12)} ${`${f.force.toFixed(1)} kN`.padStart(14)}   ${`${f.off >= 0 ? "+" : ""}${f.off.toFixed(1)} mm`.padStart(9)}, sure to ${f.sure.toFixed(1)} mm`,
    );
  if (moves.length === 0) return [...lines, "Nothing to turn: forces and corners are within their windows"].join("\n");
  lines.push("Turn, one after the other:");
  for (const m of moves) {
    const sixths = Math.round(6 * Math.abs(m.turns));
    const way = m.travel > 0 ? "take in" : "let out";
    lines.push(
      `  ${m.step}. ${m.adjuster} ${way} ${Math.abs(m.travel).toFixed(1)} mm (${Math.floor(sixths / 6)} ${sixths % 6}/6 turns), then reads ${m.expect.toFixed(1)} kN (${m.low.toFixed(1)} to ${m.high.toFixed(1)})`,
    );
  }
  const forces = fitted.map((f) => `${f.adjuster} ${forecast.forces[f.adjuster].toFixed(1)}`);
  return [...lines, `Then: ${forces.join(", ")} kN`].join("\n");
}
