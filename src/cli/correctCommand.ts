// seamstay correct JOB --readings FILE.csv: from what the crew read to what it turns. Readings are kept, never overwritten.
import { existsSync, mkdirSync, readFileSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { type CorrectedPlan, correctPlan } from "../core/plan/correctPlan.ts";
import type { KeptRound } from "../core/plan/partLog.ts";
import { PlanError } from "../core/problem.ts";
import type { Correction } from "../core/records/rig.ts";
import { withFile } from "./fileErrors.ts";
import type { Surroundings } from "./makePlan.ts";
import { loadCatalogues } from "./packageFiles.ts";
import { parseOptions } from "./parseOptions.ts";
import { readBytes, readInput } from "./readInput.ts";
import { writeFindings } from "./summary.ts";
import { openProgress, usageError } from "./terminal.ts";

/** Largest file of readings that is read, bytes. */
const largest = 10_000_000;

/** Sets of readings that one folder takes. */
const mostSets = 9999;

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
  const { job, source, revision, findings: told } = readInput(operands[0], loadCatalogues());
  // readings are the job's: they are kept beside it unless another folder is named
  const folder = values.out ?? join(dirname(operands[0]), "readings");
  const sets = readKept(folder);
  const rounds = pickRounds(sets, { revision, percent, bytes });
  const progress = openProgress(around.terminal, flags.has("quiet"));
  let corrected: CorrectedPlan;
  try {
    const text = new TextDecoder().decode(bytes);
    corrected = correctPlan(job, source, { text, percent, kept: rounds }, { onProgress: progress.show });
  } finally {
    progress.end();
  }
  const { correction } = corrected;
  const findings = [...told.filter((f) => f.level !== "note"), ...corrected.findings];
  const exit = findings.some((f) => f.level === "stop") ? 1 : 0;
  const kept = keep(folder, sets, bytes, { revision, percent, ...corrected });
  if (flags.has("json")) around.terminal.out(JSON.stringify({ command: "correct", exit, correction, findings, kept }));
  else if (!flags.has("quiet")) {
    const built =
      rounds.length === 0
        ? ""
        : `Built on ${rounds.length} earlier set${rounds.length > 1 ? "s" : ""} of readings and the turns told after ${rounds.length > 1 ? "them" : "it"}`;
    const words = [built, writeCorrection(corrected), writeFindings(findings, ["stop", "caution", "note"])];
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

/** A kept set as it lies on the disk: its readings, and the answer that was given to them. */
interface KeptSet {
  bytes: Uint8Array;
  answer: { revision?: string; percent?: number | null; correction?: Correction } | null;
}

const nameSet = (folder: string, k: number) => {
  const name = join(folder, `readings-${String(k).padStart(3, "0")}`);
  return { csv: `${name}.csv`, json: `${name}.correction.json` };
};

/** Sets kept in a folder, oldest first. */
function readKept(folder: string): KeptSet[] {
  const sets: KeptSet[] = [];
  for (let k = 1; k <= mostSets; k++) {
    const { csv, json } = nameSet(folder, k);
    if (!existsSync(csv)) break;
    let answer: KeptSet["answer"] = null;
    try {
      if (existsSync(json)) answer = JSON.parse(readFileSync(json, "utf8"));
    } catch {
      // an answer that cannot be read is as good as none: its readings stay kept, but nothing is built on them
    }
    sets.push({ bytes: readBytes(csv, largest), answer });
  }
  return sets;
}

/** Sets that these readings build on: of the same plan and stage, without a gap, and not these readings themselves. */
function pickRounds(sets: readonly KeptSet[], about: { revision: string; percent: number | null; bytes: Uint8Array }) {
  const rounds: KeptRound[] = [];
  for (const { bytes, answer } of sets) {
    if (Buffer.compare(bytes, about.bytes) === 0) break;
    const same = answer?.correction && answer.revision === about.revision && answer.percent === about.percent;
    if (!same || !answer?.correction) {
      rounds.length = 0;
      continue;
    }
    const travel: Record<string, number> = {};
    for (const m of answer.correction.moves) travel[m.adjuster] = (travel[m.adjuster] ?? 0) + m.travel;
    rounds.push({ text: new TextDecoder().decode(bytes), travel });
  }
  return rounds;
}

/** Readings and answer under the next free number: nothing is overwritten; the same readings are not kept twice. */
function keep(folder: string, sets: readonly KeptSet[], readings: Uint8Array, answer: object): string[] {
  if (sets.some((s) => s.answer !== null && Buffer.compare(s.bytes, readings) === 0)) return [];
  if (sets.length >= mostSets)
    throw new PlanError("readings-full", `${folder}: holds ${mostSets} sets of readings; give another folder`, folder);
  withFile(folder, () => mkdirSync(folder, { recursive: true }));
  const { csv, json } = nameSet(folder, sets.length + 1);
  withFile(csv, () => writeFileSync(csv, readings, { flag: "wx" }));
  withFile(json, () => writeFileSync(json, `${JSON.stringify(answer, null, 1)}\n`, { flag: "wx" }));
  return [csv, json];
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
